"""Lazy greedy makes the choices of plain greedy with fewer evaluations."""

import numpy as np
import pytest

from skytiles.planner.greedy import SMALLEST_GAIN, run_greedy
from skytiles.planner.search_state import Choice
from tests.skytiles.planner.small_problems import random_problem, search_of


def plain_greedy(state):
    """Every option looked at in every step; ties to the earlier observer, instrument, tile."""
    entries = [
        (number, b, place)
        for number, observer in enumerate(state.problem.observers)
        for b, block in enumerate(observer.blocks)
        for place in range(len(block.tiles))
    ]
    while True:
        best = None
        for entry in entries:
            gain, slot = state.best_start(*entry)
            if gain > SMALLEST_GAIN and (best is None or gain > best.gain):
                best = Choice(*entry, slot, gain)
        if best is None:
            return
        state.take(best)


def as_tuples(state):
    return [(c.observer, c.block, c.place, c.slot, c.gain) for c in state.choices]


@pytest.mark.parametrize("seed", range(40))
def test_lazy_equals_plain(seed):
    # Minoux 1978 (LNCIS 7, 234).
    rng = np.random.default_rng(seed)
    problem = random_problem(rng, n_pixels=30, n_tiles=12, n_observers=5, n_starts=4)
    lazy, plain = search_of(problem), search_of(problem)
    run_greedy(lazy)
    plain_greedy(plain)
    assert as_tuples(lazy) == as_tuples(plain)
    assert lazy.n_evaluations <= plain.n_evaluations


def test_ties_go_to_the_earlier_observer_and_tile():
    rng = np.random.default_rng(0)
    problem = random_problem(rng, n_scenarios=1)
    flat = np.full_like(problem.remaining, 1.0 / len(problem.remaining))
    problem.remaining[:] = flat
    lazy, plain = search_of(problem), search_of(problem)
    run_greedy(lazy)
    plain_greedy(plain)
    assert as_tuples(lazy) == as_tuples(plain)
