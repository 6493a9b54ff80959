"""How near a moving instrument comes to a direction that it must not meet."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from skytiles.sphere.angles import unit_vectors

Floats = npt.NDArray[np.float64]
Direction = tuple[float, float]

_STEP_DEG = 0.5
# Halfway between two samples the path is at most this much nearer.
_SAMPLING_DEG = _STEP_DEG / 2.0
# Closer than this to opposite, a great circle may run anywhere.
_OPPOSITE_DEG = 179.0


def closest_approach_deg(start: Direction, end: Direction, other: Direction) -> float:
    """Smallest separation from another direction on any usual path between two directions.

    A mount turns both axes at once, or one after the other, or follows the great circle; which one
    is not known, so the nearest of all counts. Each axis takes its shorter way.

    Parameters
    ----------
    start, end, other : (longitude, latitude)    degrees, all in the system of the mount's axes:
        right ascension and declination, or azimuth and altitude

    Returns
    -------
    float    degrees; never larger than the truth, smaller by at most 0.5

    Source: geometry.
    """
    points = np.concatenate([_great_circle(start, end), *_axis_paths(start, end)])
    if _separations_deg(unit(start)[None], unit(end))[0] > _OPPOSITE_DEG:
        return 0.0
    return max(0.0, float(np.min(_separations_deg(points, unit(other)))) - _SAMPLING_DEG)


def unit(direction: Direction) -> Floats:
    """One direction as a unit vector.

    Parameters
    ----------
    direction : (longitude, latitude)    degrees

    Returns
    -------
    (3,) float
    """
    return unit_vectors(direction[0], direction[1])


def _great_circle(start: Direction, end: Direction) -> Floats:
    first, last = unit(start), unit(end)
    n_points = int(_separations_deg(first[None], last)[0] / _STEP_DEG) + 2
    # The chord is walked in steps of equal angle as seen from its ends.
    angle = np.radians(_separations_deg(first[None], last)[0])
    shares = np.linspace(0.0, 1.0, n_points)[:, None]
    points = np.sin((1.0 - shares) * angle) * first + np.sin(shares * angle) * last
    norms = np.linalg.norm(points, axis=-1, keepdims=True)
    return np.asarray(points / norms) if angle > 0.0 else first[None]


def _axis_paths(start: Direction, end: Direction) -> list[Floats]:
    turn_deg = (end[0] - start[0] + 180.0) % 360.0 - 180.0
    climb_deg = end[1] - start[1]
    length_deg = max(abs(turn_deg), abs(climb_deg))
    steps_deg = np.linspace(0.0, length_deg, int(length_deg / _STEP_DEG) + 2)
    turns = np.sign(turn_deg) * np.minimum(steps_deg, abs(turn_deg))
    climbs = np.sign(climb_deg) * np.minimum(steps_deg, abs(climb_deg))
    return [
        unit_vectors(start[0] + turns, start[1] + climbs),
        unit_vectors(start[0] + turns, start[1] + 0.0 * climbs),
        unit_vectors(start[0] + turn_deg + 0.0 * turns, start[1] + climbs),
        unit_vectors(start[0] + 0.0 * turns, start[1] + climbs),
        unit_vectors(start[0] + turns, end[1] + 0.0 * climbs),
    ]


def _separations_deg(points: Floats, other: Floats) -> Floats:
    crosses = np.linalg.norm(np.cross(points, other), axis=-1)
    return np.asarray(np.degrees(np.arctan2(crosses, points @ other)))
