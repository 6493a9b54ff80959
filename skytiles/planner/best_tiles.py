"""The best tile now for one observer: the planner's own gain, without a plan."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from skytiles.errors import PlannerError
from skytiles.planner import reasons
from skytiles.planner.greedy import SMALLEST_GAIN
from skytiles.planner.option_gains import option_gains
from skytiles.planner.plan_problem import ObserverOptions, OptionBlock, PlanProblem
from skytiles.planner.plan_result import TileNow
from skytiles.planner.search_state import SearchState
from skytiles.planner.tile_sums import TileSums

Floats = npt.NDArray[np.float64]

# A start is worth waiting for when none of the earlier ones gives this share of its gain.
WORTH_WAITING = 0.1


def best_tiles_now(
    problem: PlanProblem,
    observer_key: int,
    n: int = 4,
    *,
    instrument_key: int | None = None,
) -> tuple[list[TileNow], str]:
    """Tiles that one observer should take next.

    Parameters
    ----------
    problem : PlanProblem          built with `plan_for` this observer: then it takes milliseconds
    observer_key : int
    n : int                        how many at most
    instrument_key : int or None   only with this instrument; None: with any

    Returns
    -------
    list of TileNow, str    best first, all at the first start worth having; "" or why none

    Raises
    ------
    PlannerError    when the observer is not part of the problem
    """
    number = _number_of(problem, observer_key)
    observer = problem.observers[number]
    if observer.reason:
        return [], observer.reason
    state = SearchState(problem, TileSums(problem.tiles, len(problem.remaining)))
    found: list[TileNow] = []
    for position, block in enumerate(observer.blocks):
        if instrument_key in {None, block.instrument_key}:
            gains = state.open_gains(number, position)
            found += _tiles_at_first_start(problem, observer, block, gains)
    if not found:
        return [], _why_none(state, number)
    found.sort(key=lambda tile: (-tile.gain, tile.start_mjd, tile.tile_key))
    return found[:n], ""


def _number_of(problem: PlanProblem, observer_key: int) -> int:
    for number, observer in enumerate(problem.observers):
        if observer.key == observer_key:
            return number
    raise PlannerError(
        f"observer {observer_key}", "one of the problem's", "build the problem for this observer"
    )


def _tiles_at_first_start(
    problem: PlanProblem, observer: ObserverOptions, block: OptionBlock, gains: Floats
) -> list[TileNow]:
    """Every tile with a gain at the first start slot that is worth having."""
    by_start = gains.max(axis=0, initial=0.0)
    if by_start.max(initial=0.0) <= SMALLEST_GAIN:
        return []
    slot = int(np.argmax(by_start >= WORTH_WAITING * by_start.max()))
    left = float(problem.remaining.sum())
    return [
        TileNow(
            tile_key=int(problem.tiles.keys[block.tiles[place]]),
            gain=float(gains[place, slot]),
            start_mjd=float(observer.starts_mjd[slot]),
            end_mjd=float(observer.ends_mjd[slot]),
            reason=_reason(block, observer, int(place), slot, float(gains[place, slot]) / left),
            instrument_key=block.instrument_key,
            altitude_deg=float(block.altitudes_deg[place, slot]),
            limit_mag=float(block.limits_mag[place, slot]),
        )
        for place in np.flatnonzero(gains[:, slot] > SMALLEST_GAIN)
    ]


def _reason(
    block: OptionBlock, observer: ObserverOptions, place: int, slot: int, share: float
) -> str:
    """Why this tile: what it may find, how high it is, how deep it goes, how long it lasts."""
    percent = f"{100.0 * share:.2g}"
    altitude_deg = block.altitudes_deg[place, slot]
    text = f"finds {percent} % of what is left, {altitude_deg:.0f} degrees up, "
    text += f"limit about {block.limits_mag[place, slot]:.1f}"
    minutes = _minutes_left(block, observer, place, slot)
    if minutes is None:
        return text
    return f"{text}, {minutes:.0f} min left to start" if minutes else f"{text}, last start"


def _minutes_left(
    block: OptionBlock, observer: ObserverOptions, place: int, slot: int
) -> float | None:
    """Minutes from a start to the last one in a row; None when it lasts to the end."""
    closed = np.flatnonzero(block.rows[place, slot:] == 0)
    if len(closed) == 0:
        return None
    last = slot + int(closed[0]) - 1
    return float(observer.starts_mjd[last] - observer.starts_mjd[slot]) * 1440.0


def _why_none(state: SearchState, number: int) -> str:
    tile_sums = state.tile_sums()
    blocks = state.problem.observers[number].blocks
    most = max(float(option_gains(block, tile_sums).max(initial=0.0)) for block in blocks)
    return reasons.TAKEN if most > SMALLEST_GAIN else reasons.NOTHING_LEFT
