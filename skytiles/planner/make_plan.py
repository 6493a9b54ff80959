"""From a stated problem to a plan with its certificate."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from skytiles.planner import reasons
from skytiles.planner.greedy import SMALLEST_GAIN, run_greedy
from skytiles.planner.option_gains import option_gains
from skytiles.planner.plan_problem import ObserverOptions, PlanProblem
from skytiles.planner.plan_result import Assignment, PlanResult, Unassigned
from skytiles.planner.search_state import Choice, SearchState
from skytiles.planner.tile_sums import TileSums
from skytiles.planner.upper_bounds import concave_bound, data_dependent_bound

Floats = npt.NDArray[np.float64]

# Averaging steps of the bound at most; each costs about as much as building the problem.
N_BOUND_STEPS = 12
# A certificate this good needs no better bound.
GOOD_CERTIFICATE = 0.95


def make_plan(problem: PlanProblem, *, n_bound_steps: int = N_BOUND_STEPS) -> PlanResult:
    """Offers for everybody who can help, and how far that is from the best possible.

    Parameters
    ----------
    problem : PlanProblem
    n_bound_steps : int    averaging steps spent on the upper bound

    Returns
    -------
    PlanResult    assignments by observer and start; the same problem gives the same plan

    Source: DEVELOPERS.md, planner; lazy greedy after Minoux 1978.
    """
    state = SearchState(problem, TileSums(problem.tiles, len(problem.remaining)))
    run_greedy(state)
    expected = problem.searched_held + float(problem.remaining.sum() - state.remaining.sum())
    bound = max(_bound(state, expected, n_bound_steps), expected)
    return PlanResult(
        assignments=tuple(sorted(_assignments(state), key=_by_observer_and_start)),
        searched_expected=expected,
        searched_bound=bound,
        certificate=expected / bound if bound > 0.0 else 1.0,
        unassigned=tuple(_unassigned(state)),
        searched_now=problem.searched_now,
        n_options=problem.n_options,
        n_evaluations=state.n_evaluations,
    )


def _bound(state: SearchState, expected: float, n_steps: int) -> float:
    if state.problem.n_options == 0:
        # Nothing is on offer: the empty plan is the best there is.
        return expected
    bound = min(data_dependent_bound(state), _everything(state.problem))
    if expected >= GOOD_CERTIFICATE * bound:
        return bound
    good_enough = expected / GOOD_CERTIFICATE - state.problem.searched_held
    return min(bound, concave_bound(state, n_steps=n_steps, good_enough=good_enough))


def _everything(problem: PlanProblem) -> float:
    """All that a plan could find were every look perfect."""
    return problem.searched_held + float(problem.remaining.sum())


def _assignments(state: SearchState) -> list[Assignment]:
    return [_assignment(state.problem, choice) for choice in state.choices]


def _assignment(problem: PlanProblem, choice: Choice) -> Assignment:
    observer = problem.observers[choice.observer]
    block = observer.blocks[choice.block]
    return Assignment(
        observer_key=observer.key,
        instrument_key=block.instrument_key,
        tile_key=int(problem.tiles.keys[block.tiles[choice.place]]),
        start_mjd=float(observer.starts_mjd[choice.slot]),
        end_mjd=float(observer.ends_mjd[choice.slot]),
        gain=choice.gain,
    )


def _by_observer_and_start(assignment: Assignment) -> tuple[int, float, int]:
    return assignment.observer_key, assignment.start_mjd, assignment.tile_key


def _unassigned(state: SearchState) -> list[Unassigned]:
    served = {choice.observer for choice in state.choices}
    tile_sums = state.tile_sums()
    return [
        Unassigned(observer.key, observer.reason or _why_nothing(observer, tile_sums))
        for number, observer in enumerate(state.problem.observers)
        if number not in served
    ]


def _why_nothing(observer: ObserverOptions, tile_sums: Floats) -> str:
    gains = [option_gains(block, tile_sums).max(initial=0.0) for block in observer.blocks]
    return reasons.TAKEN if max(gains, default=0.0) > SMALLEST_GAIN else reasons.NOTHING_LEFT
