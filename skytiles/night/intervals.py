"""Stretches of time in which something holds."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
import numpy.typing as npt

Floats = npt.NDArray[np.float64]
Interval = tuple[float, float]

MINUTE_D = 1.0 / 1440.0
_HALVINGS = 20


def intervals_below_zero(
    heights: Callable[[Floats], Floats],
    *,
    start_mjd: float,
    end_mjd: float,
    step_d: float = 10.0 * MINUTE_D,
) -> list[Interval]:
    """When a smooth function of time is below zero.

    Parameters
    ----------
    heights : function of (t,) MJD giving (t,) float
    start_mjd, end_mjd : float    MJD; the search keeps inside
    step_d : float                days; two crossings within one step are missed

    Returns
    -------
    list of (start, end)    MJD, in order, ends good to 0.001 s
    """
    n_steps = max(2, int(np.ceil((end_mjd - start_mjd) / step_d)) + 1)
    times = np.linspace(start_mjd, end_mjd, n_steps)
    is_below = heights(times) < 0.0
    turns = np.flatnonzero(is_below[1:] != is_below[:-1])
    edges = _crossings(heights, times[turns], times[turns + 1])
    bounds = [start_mjd] if is_below[0] else []
    bounds += [float(edge) for edge in edges]
    bounds += [end_mjd] if is_below[-1] else []
    return list(zip(bounds[::2], bounds[1::2], strict=True))


def common_intervals(first: list[Interval], second: list[Interval]) -> list[Interval]:
    """When both hold.

    Parameters
    ----------
    first, second : list of (start, end)    MJD, each in order

    Returns
    -------
    list of (start, end)    MJD, in order
    """
    overlaps = [(max(a, c), min(b, d)) for a, b in first for c, d in second]
    return sorted((start, end) for start, end in overlaps if start < end)


def _crossings(heights: Callable[[Floats], Floats], lows: Floats, highs: Floats) -> Floats:
    """Bisect all brackets at once."""
    if lows.size == 0:
        return lows
    low_is_below = heights(lows) < 0.0
    for _ in range(_HALVINGS):
        middles = (lows + highs) / 2.0
        is_before = (heights(middles) < 0.0) == low_is_below
        lows, highs = np.where(is_before, middles, lows), np.where(is_before, highs, middles)
    return np.asarray((lows + highs) / 2.0)
