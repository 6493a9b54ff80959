"""Convex polygons and circles on the sphere as intersections of caps n . v >= c."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]
Bools = NDArray[np.bool_]

# Shapes this near to a quarter turn from their middle are treated as reaching round a pole.
_NARROW = 1e-9


@dataclass(frozen=True, eq=False)
class CapSet:
    """Shapes, each the intersection of the same number of caps n . v >= c.

    normals (m, v, 3) of any length, thresholds (m, v), the lowest and highest z of each shape
    (m,), a longitude in its middle (m,), and whether it stays within 90 degrees of that (m,).
    """

    normals: Floats
    thresholds: Floats
    lowest_zs: Floats
    highest_zs: Floats
    longitudes_rad: Floats
    is_narrow: Bools

    @classmethod
    def of_polygons(cls, corners: Floats) -> "CapSet":
        """Convex polygons from corners (m, v, 3), counter-clockwise; repeated corners allowed."""
        following = np.roll(corners, -1, axis=1)
        normals = _cross(corners, following)
        lengths = np.sqrt((normals * normals).sum(axis=2))
        # A repeated corner makes a side without length, which bounds nothing.
        thresholds = np.where(lengths > 0.0, 0.0, -1.0)
        lowest, highest = _polygon_z_ranges(corners, following, normals, lengths)
        middles = corners.sum(axis=1)
        longitudes = np.arctan2(middles[:, 1], middles[:, 0])
        forwards = (
            corners[..., 0] * np.cos(longitudes)[:, None]
            + corners[..., 1] * np.sin(longitudes)[:, None]
        )
        is_narrow = forwards.min(axis=1) > _NARROW
        return cls(normals, thresholds, lowest, highest, longitudes, is_narrow)

    @classmethod
    def of_circles(cls, centres: Floats, radii_rad: Floats) -> "CapSet":
        """Circles from centres (m, 3) and angular radii (m,)."""
        colatitudes = np.arctan2(np.hypot(centres[:, 0], centres[:, 1]), centres[:, 2])
        first, last = colatitudes - radii_rad, colatitudes + radii_rad
        return cls(
            normals=centres[:, None, :],
            thresholds=np.cos(radii_rad)[:, None],
            lowest_zs=np.cos(np.minimum(last, np.pi)),
            highest_zs=np.cos(np.maximum(first, 0.0)),
            longitudes_rad=np.arctan2(centres[:, 1], centres[:, 0]),
            is_narrow=(first > _NARROW) & (last < np.pi - _NARROW),
        )

    def part(self, chosen: slice) -> "CapSet":
        """Some of the shapes."""
        return CapSet(
            self.normals[chosen],
            self.thresholds[chosen],
            self.lowest_zs[chosen],
            self.highest_zs[chosen],
            self.longitudes_rad[chosen],
            self.is_narrow[chosen],
        )


def _cross(a: Floats, b: Floats) -> Floats:
    """Vector products; numpy's own takes three times as long."""
    ax, ay, az = a[..., 0], a[..., 1], a[..., 2]
    bx, by, bz = b[..., 0], b[..., 1], b[..., 2]
    return np.stack([ay * bz - az * by, az * bx - ax * bz, ax * by - ay * bx], axis=-1)


def _polygon_z_ranges(
    corners: Floats, following: Floats, normals: Floats, lengths: Floats
) -> tuple[Floats, Floats]:
    """Lowest and highest z of polygons: at a corner, on a side, or at a pole inside."""
    nx, ny, nz = normals[..., 0], normals[..., 1], normals[..., 2]
    # Whether a side rises at its start and at its end: the z of normal x corner.
    rises_first = nx * corners[..., 1] - ny * corners[..., 0]
    rises_last = nx * following[..., 1] - ny * following[..., 0]
    tops = np.hypot(nx, ny) / np.where(lengths > 0.0, lengths, 1.0)
    zs = corners[..., 2]
    highest = np.where((rises_first > 0.0) & (rises_last < 0.0), tops, zs).max(axis=1)
    lowest = np.where((rises_first < 0.0) & (rises_last > 0.0), -tops, zs).min(axis=1)
    return (
        np.where((nz <= 0.0).all(axis=1), -1.0, np.minimum(lowest, zs.min(axis=1))),
        np.where((nz >= 0.0).all(axis=1), 1.0, np.maximum(highest, zs.max(axis=1))),
    )
