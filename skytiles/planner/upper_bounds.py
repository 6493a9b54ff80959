"""What no plan of the stated problem can exceed."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from skytiles.planner.best_night import night_options
from skytiles.planner.option_gains import option_gains
from skytiles.planner.plan_problem import OptionBlock, PlanProblem
from skytiles.planner.search_state import Choice, SearchState
from skytiles.planner.tile_sums import TileSums

Floats = npt.NDArray[np.float64]
Ints = npt.NDArray[np.int64]

# Keeps -ln(1 - d) finite for a look that cannot miss; the bound is raised by as much.
_LARGEST_DETECTION = 1.0 - 1e-9
_SAFETY = 1e-9
# Near the kink of the minimum any mixture of its two branches bounds it; the best of these is used.
_SOFTNESSES = (0.0, 0.01, 0.03)
# The first averaging step goes one tenth of the way: larger ones forget the greedy plan.
_FIRST_SHARE = 10.0


def data_dependent_bound(state: SearchState) -> float:
    """Bound from the plan that a search has made: its value and the best gains on top of it.

    Parameters
    ----------
    state : SearchState    after the search

    Returns
    -------
    float    expected searched that no plan of the problem exceeds

    Source: Leskovec et al. 2007 (KDD), section 3.2, for at most one option in each observer's
    start slot and so many tiles per observer.
    """
    problem = state.problem
    found = float(problem.remaining.sum() - state.remaining.sum())
    tile_sums = state.tile_sums()
    most = sum(
        night_options(observer).most(
            _stacked([option_gains(b, tile_sums) for b in observer.blocks])
        )
        for observer in problem.observers
    )
    return problem.searched_held + found + most + _safety(problem)


def concave_bound(state: SearchState, *, n_steps: int, good_enough: float = 0.0) -> float:
    """Bound from a concave function that equals the plan's value at every plan.

    Per pixel and scenario the chance to find is at most min(sum d x, 1 - exp(-sum l x)) with
    l = -ln(1 - d), concave in the shares x of the options and exact for whole ones. A linear
    function that touches it at any x bounds it everywhere, and its maximum over the start slots
    is one partial sort per observer. Averaging steps from the greedy plan improve the bound.

    Parameters
    ----------
    state : SearchState    after the search
    n_steps : int          averaging steps after the bound at the greedy plan itself
    good_enough : float    stop when the bound is at most this

    Returns
    -------
    float    expected searched that no plan of the problem exceeds

    Source: ours, after Frank & Wolfe 1956 (Naval Res. Logist. Quart. 3, 95) for the steps.
    """
    relaxation = _Relaxation(state.problem, state.sums)
    point = relaxation.point_of(state.choices)
    softness, best, worths = 0.0, np.inf, []
    for candidate in _SOFTNESSES:
        bound, reached = relaxation.bound_at(point, softness=candidate)
        if bound < best:
            softness, best, worths = candidate, bound, reached
    for step in range(n_steps):
        if best <= good_enough:
            break
        goal = relaxation.point_of(relaxation.good_choices(worths))
        point = point.towards(goal, share=1.0 / (step + _FIRST_SHARE))
        bound, worths = relaxation.bound_at(point, softness=softness)
        best = min(best, bound)
    return state.problem.searched_held + best + _safety(state.problem)


@dataclass(frozen=True, eq=False)
class _Point:
    """Sums over the options, each with its share: of d and of l, by pixel and scenario."""

    sum_d: Floats
    sum_l: Floats

    def towards(self, other: _Point, *, share: float) -> _Point:
        return _Point(
            self.sum_d + share * (other.sum_d - self.sum_d),
            self.sum_l + share * (other.sum_l - self.sum_l),
        )


class _Relaxation:
    def __init__(self, problem: PlanProblem, sums: TileSums) -> None:
        self._problem = problem
        self._sums = sums
        self._nights = [night_options(who) for who in problem.observers]
        self._logs = [[_logs(block) for block in who.blocks] for who in problem.observers]

    def point_of(self, choices: list[Choice]) -> _Point:
        """Sums of a whole plan."""
        sum_d = np.zeros_like(self._problem.remaining)
        sum_l = np.zeros_like(self._problem.remaining)
        tiles = self._problem.tiles
        for choice in choices:
            block = self._problem.observers[choice.observer].blocks[choice.block]
            tile = int(block.tiles[choice.place])
            row = block.rows[choice.place, choice.slot]
            pixels, shares = tiles.pixels_of(tile), tiles.fractions_of(tile)[:, None]
            sum_d[pixels] += shares * block.detections[row]
            # -ln(1 - share d) <= share l: convex in the share, so the bound holds.
            sum_l[pixels] += shares * self._logs[choice.observer][choice.block][row]
        return _Point(sum_d, sum_l)

    def bound_at(self, point: _Point, *, softness: float) -> tuple[float, list[Floats]]:
        """Maximum of the linear function that touches at a point; its worth for all options."""
        missed = np.exp(-point.sum_l)
        linear = _share_of_linear_branch(1.0 - missed - point.sum_d, softness)
        weights = self._problem.remaining
        curved = weights - weights * linear
        slopes_l = curved * missed
        constant = float(np.sum(curved * (1.0 - missed)) - np.sum(slopes_l * point.sum_l))
        worths = self._worths(self._sums.sums(weights * linear), self._sums.sums(slopes_l))
        pairs = zip(self._nights, worths, strict=True)
        return constant + sum(night.most(worth) for night, worth in pairs), worths

    def good_choices(self, worths: list[Floats]) -> list[Choice]:
        """A plan that is good for the linear function: where the next step goes."""
        return [
            Choice(number, *where, gain=0.0)
            for number, (night, worth) in enumerate(zip(self._nights, worths, strict=True))
            for where in night.good_choices(worth)
        ]

    def _worths(self, sums_d: Floats, sums_l: Floats) -> list[Floats]:
        return [
            _stacked(
                [
                    option_gains(block, sums_d) + option_gains(block, sums_l, logs)
                    for block, logs in zip(observer.blocks, self._logs[number], strict=True)
                ]
            )
            for number, observer in enumerate(self._problem.observers)
        ]


def _stacked(gains: list[Floats]) -> Floats:
    return np.concatenate(gains) if gains else np.empty((0, 0))


def _safety(problem: PlanProblem) -> float:
    return _SAFETY * max(1.0, float(problem.remaining.sum()))


def _share_of_linear_branch(lead: Floats, softness: float) -> Floats:
    """0..1: 1 where the linear branch is the lower one by far, 0 where the other is."""
    if softness == 0.0:
        return (lead >= 0.0).astype(np.float64)
    return 1.0 / (1.0 + np.exp(np.clip(-lead / softness, -50.0, 50.0)))


def _logs(block: OptionBlock) -> Floats:
    return -np.log1p(-np.minimum(block.detections, _LARGEST_DETECTION))
