"""Outlines that are not convex, and how narrow an outline is."""

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]

# Triangles thinner than this have no inside.
_FLAT = 1e-18
_DIRECTIONS = np.deg2rad(np.arange(0.0, 180.0, 1.0))


def fan_triangles(corners: Floats) -> Floats | None:
    """Triangles from the middle of an outline to each of its sides.

    Parameters
    ----------
    corners : (v, 3) float    unit vectors in order, either winding

    Returns
    -------
    (v, 3, 3) float or None    corners of v triangles, counter-clockwise; together they are the
    outline's inside exactly. None when some side cannot be seen from the middle, or from afar

    Source: definition of a star-shaped polygon.
    """
    middle = corners.sum(axis=0)
    length = np.linalg.norm(middle)
    if len(corners) < 3 or length < 1e-3:
        return None
    middle = middle / length
    following = np.roll(corners, -1, axis=0)
    volumes = np.cross(corners, following) @ middle
    if (volumes < 0.0).all():
        corners, following = corners[::-1], np.roll(corners[::-1], -1, axis=0)
        volumes = np.cross(corners, following) @ middle
    turns = np.arctan2(
        volumes, (corners * following).sum(1) - (corners @ middle) * (following @ middle)
    )
    goes_round_once = abs(float(turns.sum()) - 2.0 * np.pi) < 1e-6
    if not (volumes > _FLAT).all() or not (corners @ middle > 0.0).all() or not goes_round_once:
        return None
    middles = np.broadcast_to(middle, corners.shape)
    return np.stack([middles, corners, following], axis=1)


def narrowest_width_deg(corners: Floats, centre: Floats) -> float:
    """Smallest distance between two parallel lines that hold an outline between them.

    Parameters
    ----------
    corners : (v, 3) float    unit vectors within a quarter turn of the centre
    centre : (3,) float       unit vector

    Returns
    -------
    float    degrees, the full angle at the centre; tried in steps of a degree, good to 1 %

    Source: definition, on the plane that touches the sphere at the centre.
    """
    aside = np.cross(centre, np.eye(3)[np.argmin(np.abs(centre))])
    aside /= np.linalg.norm(aside)
    axes = np.stack([aside, np.cross(centre, aside)], axis=1)
    points = (corners @ axes) / (corners @ centre)[:, None]
    along = points @ np.stack([np.cos(_DIRECTIONS), np.sin(_DIRECTIONS)])
    return float(np.degrees(2.0 * np.arctan(np.ptp(along, axis=0).min() / 2.0)))
