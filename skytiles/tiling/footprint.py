"""The patch of sky under one frame: a polygon of great circles, a circle, or several of these."""

import math
from dataclasses import dataclass
from typing import Any, Literal

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skytiles.errors import FootprintError
from skytiles.sphere.angles import ras_decs_deg, separations_deg, unit_vectors
from skytiles.sphere.solid_angle import cap_area_deg2, polygon_area_deg2
from skytiles.tiling.outline_shape import fan_triangles, narrowest_width_deg

Floats = NDArray[np.float64]

# A frame is at most this wide; beyond, a flat frame has no meaning on the sphere.
LARGEST_SIDE_DEG = 150.0
_SMALLEST_SIDE_DEG = 1e-5
_MOST_CORNERS = 64
# With more corners than this an outline has points along its sides.
_MOST_TRUE_CORNERS = 8
# Sine of angles that count as none: of a side without length, or of a corner beyond a side.
_STRAIGHT = 1e-12


@dataclass(frozen=True, eq=False)
class Footprint:
    """Polygon: corners (v, 3), counter-clockwise (inside on the left). Circle: no corners.

    `pieces` are convex or circles and together the footprint exactly: the pictures of a mosaic, or
    the triangles of an outline that is not convex. Empty for what is convex or a circle itself.
    """

    shape: Literal["polygon", "circle", "mosaic"]
    centre_ra_deg: float
    centre_dec_deg: float
    corners: Floats
    diameter_deg: float = 0.0
    pieces: tuple["Footprint", ...] = ()

    @property
    def centre(self) -> Floats:
        """Unit vector of the centre (3,)."""
        return unit_vectors(self.centre_ra_deg, self.centre_dec_deg)

    @property
    def corners_deg(self) -> Floats:
        """Right ascensions and declinations of the corners (v, 2); none for a circle."""
        return np.stack(ras_decs_deg(self.corners.reshape(-1, 3)), axis=-1)

    @property
    def area_deg2(self) -> float:
        """Area on the sphere, square degrees; where parts of a mosaic overlap it counts twice."""
        if self.pieces:
            return sum(piece.area_deg2 for piece in self.pieces)
        if self.shape == "circle":
            return float(cap_area_deg2(self.diameter_deg / 2.0))
        return polygon_area_deg2(self.corners)

    @property
    def smallest_side_deg(self) -> float:
        """Shortest side of a polygon, diameter of a circle, degrees.

        Of a mosaic, or of an outline with points along its sides, the narrowest width of the whole.
        """
        if self.shape == "circle":
            return self.diameter_deg
        if self.pieces or len(self.corners) > _MOST_TRUE_CORNERS:
            return narrowest_width_deg(self.corners, self.centre)
        ras, decs = ras_decs_deg(self.corners)
        return float(separations_deg(ras, decs, np.roll(ras, -1), np.roll(decs, -1)).min())

    def to_json(self) -> dict[str, Any]:
        """The shape as stored with a frame."""
        if self.shape == "circle":
            return {
                "shape": "circle",
                "ra_deg": self.centre_ra_deg,
                "dec_deg": self.centre_dec_deg,
                "diameter_deg": self.diameter_deg,
            }
        if self.shape == "mosaic":
            return {
                "shape": "mosaic",
                "ra_deg": self.centre_ra_deg,
                "dec_deg": self.centre_dec_deg,
                "parts": [part.to_json() for part in self.pieces],
            }
        return {"shape": "polygon", "corners_deg": self.corners_deg.tolist()}


def rectangle_footprint(
    *,
    ra_deg: float,
    dec_deg: float,
    width_deg: float,
    height_deg: float,
    rotation_deg: float = 0.0,
) -> Footprint:
    """Frame of a camera: bounded by four great circles.

    Parameters
    ----------
    ra_deg, dec_deg : float    centre, degrees
    width_deg, height_deg : float    full angles across the middle, degrees, up to 150
    rotation_deg : float    position angle of the frame's height, from north through east

    Returns
    -------
    Footprint    FootprintError for what cannot stand on the sky

    Source: gnomonic projection (Calabretta & Greisen 2002, A&A 395, 1077, section 5.1.3).
    """
    refuse_bad_position(ra_deg, dec_deg)
    _refuse_bad_angle("width_deg", width_deg)
    _refuse_bad_angle("height_deg", height_deg)
    _refuse_bad_number("rotation_deg", rotation_deg)
    corners = rectangle_corners(
        [ra_deg], [dec_deg], width_deg=width_deg, height_deg=height_deg, rotation_deg=rotation_deg
    )
    return Footprint("polygon", ra_deg % 360.0, dec_deg, corners[0])


def rectangle_corners(
    ras_deg: ArrayLike,
    decs_deg: ArrayLike,
    *,
    width_deg: float,
    height_deg: float,
    rotation_deg: float = 0.0,
) -> Floats:
    """Corners of many frames of one size, counter-clockwise as seen from outside the sphere.

    Parameters
    ----------
    ras_deg, decs_deg : (k,) float    centres, degrees
    width_deg, height_deg : float    full angles across the middle, degrees
    rotation_deg : float    position angle of the height, from north through east

    Returns
    -------
    (k, 4, 3) float    unit vectors; inside is on the left of each side

    Source: gnomonic projection (Calabretta & Greisen 2002, A&A 395, 1077, section 5.1.3).
    """
    ras, decs, turn = np.deg2rad(ras_deg), np.deg2rad(decs_deg), math.radians(rotation_deg)
    zeros = np.zeros_like(ras)
    centres = unit_vectors(ras_deg, decs_deg)
    easts = np.stack([-np.sin(ras), np.cos(ras), zeros], axis=-1)
    norths = np.stack(
        [-np.sin(decs) * np.cos(ras), -np.sin(decs) * np.sin(ras), np.cos(decs)], axis=-1
    )
    half_width = math.tan(math.radians(width_deg) / 2.0)
    half_height = math.tan(math.radians(height_deg) / 2.0)
    ups = half_height * (math.cos(turn) * norths + math.sin(turn) * easts)
    lefts = half_width * (math.cos(turn) * easts - math.sin(turn) * norths)
    corners = np.stack(
        [
            centres - lefts - ups,
            centres + lefts - ups,
            centres + lefts + ups,
            centres - lefts + ups,
        ],
        axis=-2,
    )
    return np.asarray(corners / np.linalg.norm(corners, axis=-1, keepdims=True))


def circle_footprint(*, ra_deg: float, dec_deg: float, diameter_deg: float) -> Footprint:
    """Field of an eyepiece or of binoculars.

    Parameters
    ----------
    ra_deg, dec_deg : float    centre, degrees
    diameter_deg : float    degrees, up to 150

    Returns
    -------
    Footprint    FootprintError for what cannot stand on the sky

    Source: definition.
    """
    refuse_bad_position(ra_deg, dec_deg)
    _refuse_bad_angle("diameter_deg", diameter_deg)
    no_corners = np.zeros((0, 3))
    return Footprint("circle", ra_deg % 360.0, dec_deg, no_corners, diameter_deg=diameter_deg)


def polygon_footprint(corners_deg: ArrayLike) -> Footprint:
    """Frame given by its corners.

    Parameters
    ----------
    corners_deg : (v, 2) float    right ascension and declination of 3 to 64 corners in order,
        either winding; the side smaller than a hemisphere is meant

    Returns
    -------
    Footprint    FootprintError when it is not convex or has no area

    Source: definition.
    """
    return vector_footprint(corner_vectors(corners_deg))


def corner_vectors(corners_deg: ArrayLike) -> Floats:
    """Unit vectors of corners given in degrees.

    Parameters
    ----------
    corners_deg : (v, 2) float    right ascension and declination of 3 to 64 corners

    Returns
    -------
    (v, 3) float    FootprintError for anything else

    Source: definition.
    """
    corners = np.asarray(corners_deg, dtype=np.float64)
    if corners.ndim != 2 or corners.shape[1] != 2 or not 3 <= len(corners) <= _MOST_CORNERS:
        raise FootprintError(
            given=f"corners of shape {corners.shape}",
            allowed=f"3 to {_MOST_CORNERS} pairs of right ascension and declination",
            advice="give the corners in order, in degrees",
        )
    for ra, dec in corners:
        refuse_bad_position(float(ra), float(dec))
    return unit_vectors(corners[:, 0], corners[:, 1])


def vector_footprint(vectors: Floats) -> Footprint:
    """Frame given by unit vectors of its corners.

    Parameters
    ----------
    vectors : (v, 3) float    no unit, in order, either winding

    Returns
    -------
    Footprint    FootprintError when it is not convex or has no area

    Source: definition.
    """
    corners = _counter_clockwise(_without_repeats(vectors))
    middle = corners.sum(axis=0)
    ra, dec = ras_decs_deg(middle)
    return Footprint("polygon", float(ra), float(dec), corners)


def outline_footprint(vectors: Floats) -> Footprint:
    """Frame given by points along its outline, which may bend inwards.

    Parameters
    ----------
    vectors : (v, 3) float    unit vectors in order, either winding

    Returns
    -------
    Footprint    FootprintError unless every side can be seen from the middle

    Source: definition; what is not convex is the union of the triangles from its middle.
    """
    points = _without_repeats(vectors)
    if len(points) >= 3 and any(_is_convex(winding) for winding in (points, points[::-1])):
        return vector_footprint(points)
    triangles = fan_triangles(points)
    if triangles is None:
        return vector_footprint(points)
    ra, dec = ras_decs_deg(triangles[0, 0])
    pieces = tuple(vector_footprint(triangle) for triangle in triangles)
    corners = np.ascontiguousarray(triangles[:, 1])
    return Footprint("polygon", float(ra), float(dec), corners, pieces=pieces)


def _without_repeats(vectors: Floats) -> Floats:
    """Corners without those that repeat the one before."""
    steps = np.linalg.norm(vectors - np.roll(vectors, 1, axis=0), axis=1)
    return np.asarray(vectors[steps > _STRAIGHT])


def _counter_clockwise(corners: Floats) -> Floats:
    """Corners with the inside on the left; refuses what is not convex."""
    if len(corners) >= 3:
        for candidate in (corners, corners[::-1]):
            if _is_convex(candidate):
                return np.ascontiguousarray(candidate)
    raise FootprintError(
        given=f"{len(corners)} corners that do not bound a convex patch of sky",
        allowed="corners in order round the frame, smaller than a hemisphere",
        advice="give the corners in order, and cut a frame with a notch into two",
    )


def _is_convex(corners: Floats) -> bool:
    normals = np.cross(corners, np.roll(corners, -1, axis=0))
    lengths = np.linalg.norm(normals, axis=1, keepdims=True)
    if (lengths < _STRAIGHT).any():
        return False
    heights = (normals / lengths) @ corners.T
    # A side's own two corners lie on it: only the others can be on its wrong side.
    others = ~(np.eye(len(corners), dtype=bool) | np.roll(np.eye(len(corners), dtype=bool), 1, 1))
    return bool((heights[others] >= -_STRAIGHT).all() and (heights.max() > _STRAIGHT))


def refuse_bad_position(ra_deg: float, dec_deg: float) -> None:
    """Refuse what is no direction.

    Parameters
    ----------
    ra_deg, dec_deg : float    degrees; right ascensions from -360 to 720 are understood

    Raises
    ------
    FootprintError    for anything else
    """
    if not (math.isfinite(ra_deg) and -360.0 <= ra_deg <= 720.0 and -90.0 <= dec_deg <= 90.0):
        raise FootprintError(
            given=f"right ascension {ra_deg}, declination {dec_deg}",
            allowed="right ascension 0 to 360, declination -90 to 90 degrees",
            advice="check the position; hours must be turned into degrees (times 15)",
        )


def _refuse_bad_angle(name: str, angle_deg: float) -> None:
    if not _SMALLEST_SIDE_DEG <= angle_deg <= LARGEST_SIDE_DEG:
        raise FootprintError(
            given=f"{name} = {angle_deg}",
            allowed=f"{_SMALLEST_SIDE_DEG} to {LARGEST_SIDE_DEG:g} degrees",
            advice="check the field of view; it is in degrees",
        )


def _refuse_bad_number(name: str, value: float) -> None:
    if not math.isfinite(value):
        raise FootprintError(f"{name} = {value}", "a finite angle in degrees", f"correct {name}")
