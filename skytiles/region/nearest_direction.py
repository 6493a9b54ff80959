"""The direction that fits a set of linear measurements best."""

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]

# Parts smaller than this share of the largest are rounding errors.
_NOTHING = 1e-10
_N_HALVINGS = 200


def nearest_direction(slopes: Floats, targets: Floats) -> Floats:
    """The unit vector n for which |slopes n - targets| is smallest on the whole sphere.

    Parameters
    ----------
    slopes : (m, 3) float    any unit
    targets : (m,) float    the same unit

    Returns
    -------
    (3,) float    no unit; one of them where several are equally good (a ring, two mirror spots)

    Source: least squares on a sphere by the secular equation: Golub & Van Loan, Matrix
    Computations, 4th ed., sec. 6.2.1 (from memory).
    """
    values, axes = np.linalg.eigh(slopes.T @ slopes)
    steps = values - values[0]
    pulls = axes.T @ (slopes.T @ targets)
    pulls = np.where(np.abs(pulls) > _NOTHING * np.abs(pulls).max(), pulls, 0.0)
    parts = _parts(steps, pulls, _shift(steps, pulls))
    # What is free (a ring, a mirror) takes up what is missing to length one.
    missing = 1.0 - float(np.sum(parts[1:] ** 2))
    parts[0] = np.copysign(np.sqrt(max(missing, 0.0)), pulls[0])
    direction = axes @ parts
    return np.asarray(direction / np.linalg.norm(direction))


def _parts(steps: Floats, pulls: Floats, shift: float) -> Floats:
    """Components of the stationary direction for one value of the multiplier."""
    below = steps + shift
    is_free = (pulls == 0.0) | (below <= 0.0)
    return np.where(is_free, 0.0, pulls / np.where(is_free, 1.0, below))


def _shift(steps: Floats, pulls: Floats) -> float:
    """The multiplier that makes the direction a unit vector, or 0 where none does."""
    low, high = float(np.abs(pulls[0])), float(np.linalg.norm(pulls))
    for _ in range(_N_HALVINGS):
        middle = 0.5 * (low + high)
        is_long = float(np.sum(_parts(steps, pulls, middle) ** 2)) > 1.0
        low, high = (middle, high) if is_long else (low, middle)
    return high
