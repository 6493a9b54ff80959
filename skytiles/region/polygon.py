"""Polygons of great circles on the sky, of any simple shape, as cells."""

from collections.abc import Sequence
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from skytiles.errors import AlertError
from skytiles.region.moc import Moc, moc_from_cells
from skytiles.sphere.angles import unit_vectors
from skytiles.sphere.healpix_door import n_pixels, pixel_side_deg, pixel_vectors

Ints = NDArray[np.int64]
Floats = NDArray[np.float64]
Bools = NDArray[np.bool_]

MOST_CORNERS = 500
_FIRST_ORDER, _FINEST_ORDER = 3, 20
# The edge is followed in at most about this many cells.
_CELLS_ALONG_EDGE = 3000.0
# Sides shorter than this, or longer than 180 degrees less it, have no direction (radians).
_NO_SIDE_RAD = 1e-9
_CHUNK = 4_000_000
# Half the sky, within what counting the pixels of an order can tell.
_COUNT_ORDER, _HALF_SLACK = 5, 6e-3


def polygon_moc(corners_deg: Sequence[tuple[float, float]]) -> Moc:
    """The inside of a polygon: the side that is smaller than a hemisphere.

    Parameters
    ----------
    corners_deg : (v, 2) float    right ascension and declination, once around, either direction

    Returns
    -------
    Moc    cells whose centre is inside; AlertError for what is no simple polygon

    Source: a point is inside when the arc from it to a point outside crosses the edge an odd
    number of times (Jordan's curve theorem on the sphere).
    """
    ras, decs = np.asarray(corners_deg, dtype=np.float64).reshape(-1, 2).T
    corners = unit_vectors(ras, decs)
    _refuse_bad_shapes(corners)
    shape = _Shape(_one_way_round(corners))
    finest = _finest_order(shape)
    pixels = np.arange(n_pixels(_FIRST_ORDER), dtype=np.int64)
    leaves: list[tuple[int, Ints]] = []
    for order in range(_FIRST_ORDER, finest + 1):
        vectors = pixel_vectors(order, pixels)
        is_split = np.zeros(len(pixels), dtype=np.bool_)
        if order < finest:
            # A pixel reaches at most 1.1 sides from its centre (order 3 and up).
            is_split = shape.distances_rad(vectors) <= np.deg2rad(1.1 * pixel_side_deg(order))
        leaf = np.flatnonzero(~is_split)
        leaves.append((order, pixels[leaf[shape.is_inside(vectors[leaf])]]))
        pixels = (4 * pixels[is_split][:, None] + np.arange(4)).reshape(-1)
    orders = np.concatenate([np.full(len(leaf), order) for order, leaf in leaves])
    return moc_from_cells(finest, orders, np.concatenate([leaf for _, leaf in leaves]))


def _one_way_round(corners: Floats) -> Floats:
    """The corners in one sequence, whichever way they were listed: centres on an edge agree."""
    begun = np.roll(corners, -int(np.lexsort(corners.T)[0]), axis=0)
    is_forward = tuple(begun[1]) < tuple(begun[-1])
    return begun if is_forward else np.roll(begun[::-1], 1, axis=0)


class _Shape:
    """A closed line of great-circle arcs, and which side of it is the smaller one."""

    def __init__(self, corners: Floats) -> None:
        self.begins = corners
        self.ends = np.roll(corners, -1, axis=0)
        self.normals = np.cross(self.begins, self.ends)
        lengths = np.linalg.norm(self.normals, axis=1)
        self.lengths_rad = np.arctan2(lengths, np.einsum("ij,ij->i", self.begins, self.ends))
        # Any point on neither the edge nor a side's great circle; 12 digits make it so.
        self.probe = np.array([0.182347651289, -0.533918276401, 0.825630917754])
        self.probe /= np.linalg.norm(self.probe)
        self.is_probe_inside = self._probe_is_inside()

    def _probe_is_inside(self) -> bool:
        """The side of the probe is inside when it is the smaller part of the sky."""
        is_same = ~self._is_across(pixel_vectors(_COUNT_ORDER, np.arange(n_pixels(_COUNT_ORDER))))
        share = float(is_same.mean())
        if abs(share - 0.5) < _HALF_SLACK:
            raise _shape_error("its polygon holds half the sky, so that no side is the smaller one")
        return share < 0.5

    def is_inside(self, vectors: Floats) -> Bools:
        """Whether points are inside."""
        return np.asarray(self._is_across(vectors) != self.is_probe_inside)

    def _is_across(self, vectors: Floats) -> Bools:
        """Whether the arcs from the probe to points cross the edge an odd number of times."""
        parts = [
            self._n_crossings(vectors[a:b]) % 2 == 1
            for a, b in pairwise(_chunks(len(vectors), len(self.begins)))
        ]
        return np.concatenate(parts) if parts else np.zeros(0, dtype=np.bool_)

    def _n_crossings(self, vectors: Floats) -> Ints:
        """Two arcs cross when each one's ends lie on both sides of the other, on one half."""
        side_of_points = vectors @ self.normals.T > 0.0
        side_of_probe = self.normals @ self.probe > 0.0
        planes = np.cross(vectors, self.probe)
        side_of_begins = planes @ self.begins.T > 0.0
        side_of_ends = planes @ self.ends.T > 0.0
        is_crossed = (
            (side_of_points != side_of_probe)
            & (side_of_begins != side_of_ends)
            & (side_of_points == side_of_ends)
        )
        return np.asarray(is_crossed.sum(axis=1), dtype=np.int64)

    def distances_rad(self, vectors: Floats) -> Floats:
        """Distances of points from the edge."""
        parts = [
            self._distances_rad(vectors[a:b])
            for a, b in pairwise(_chunks(len(vectors), len(self.begins)))
        ]
        return np.concatenate(parts) if parts else np.zeros(0)

    def _distances_rad(self, vectors: Floats) -> Floats:
        normals = self.normals / np.linalg.norm(self.normals, axis=1)[:, None]
        # Beside the arc: the distance from its great circle; else that of the nearer end.
        along_begin = vectors @ np.cross(normals, self.begins).T
        along_end = vectors @ np.cross(self.ends, normals).T
        is_beside = (along_begin >= 0.0) & (along_end >= 0.0)
        across = np.arcsin(np.clip(np.abs(vectors @ normals.T), 0.0, 1.0))
        begins = 2.0 * np.arcsin(np.clip(_chords(vectors, self.begins) / 2.0, 0.0, 1.0))
        to_ends = np.minimum(begins, np.roll(begins, -1, axis=1))
        return np.asarray(np.where(is_beside, across, to_ends).min(axis=1))


def _chords(vectors: Floats, others: Floats) -> Floats:
    squares = np.maximum(2.0 - 2.0 * vectors @ others.T, 0.0)
    return np.asarray(np.sqrt(squares))


def _chunks(n_points: int, n_sides: int) -> list[int]:
    step = max(1, _CHUNK // n_sides)
    return [*range(0, n_points, step), n_points]


def _finest_order(shape: _Shape) -> int:
    """The finest order in which the edge takes no more than so many cells."""
    perimeter_deg = float(np.rad2deg(shape.lengths_rad.sum()))
    order = _FIRST_ORDER
    while order < _FINEST_ORDER and perimeter_deg / pixel_side_deg(order + 1) < _CELLS_ALONG_EDGE:
        order += 1
    return order


def _refuse_bad_shapes(corners: Floats) -> None:
    if not 3 <= len(corners) <= MOST_CORNERS:
        raise _shape_error(f"its polygon has {len(corners)} corners")
    ends = np.roll(corners, -1, axis=0)
    sines = np.linalg.norm(np.cross(corners, ends), axis=1)
    if (sines < _NO_SIDE_RAD).any():
        raise _shape_error("two neighbouring corners of its polygon are the same or opposite")
    if _crosses_itself(corners, ends):
        raise _shape_error("the sides of its polygon cross each other")


def _crosses_itself(begins: Floats, ends: Floats) -> bool:
    normals = np.cross(begins, ends)
    begin_side, end_side = normals @ begins.T, normals @ ends.T
    # [i, j]: where the ends of side j lie of side i; neighbours touch and do not count.
    is_parted = begin_side * end_side < 0.0
    is_same_half = (end_side > 0.0) == (begin_side.T > 0.0)
    is_crossed = is_parted & is_parted.T & is_same_half
    n = len(begins)
    gap = (np.arange(n)[:, None] - np.arange(n)[None, :]) % n
    return bool((is_crossed & (gap > 1) & (gap < n - 1)).any())


def _shape_error(given: str) -> AlertError:
    return AlertError(
        given=given,
        allowed=f"3 to {MOST_CORNERS} different corners, once around an area of under half the sky",
        advice="list the corners in sequence along the edge, or give the area as a MOC",
    )
