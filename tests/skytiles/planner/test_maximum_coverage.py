"""The planner on textbook instances of maximum coverage (fixtures/authority)."""

import json
import math
from pathlib import Path

import numpy as np
import pytest

from skytiles.planner.greedy import run_greedy
from skytiles.planner.make_plan import make_plan
from skytiles.planner.upper_bounds import concave_bound, data_dependent_bound
from tests.skytiles.planner.plain_optimum import optimum, value_of
from tests.skytiles.planner.small_problems import (
    observer_of,
    problem_of,
    search_of,
    tiles_from_sets,
)

FIXTURE = Path(__file__).parents[3] / "fixtures" / "authority" / "maximum_coverage.json"
ROWS = {row["id"]: row for row in json.loads(FIXTURE.read_text())["rows"]}


def choose_k(row, k):
    """One observer with k starts who may take any set: a cardinality constraint."""
    tiles = tiles_from_sets(row["sets"])
    taker = observer_of(1, range(len(row["sets"])), 1.0, n_starts=k)
    return problem_of(row["weights"], tiles, [taker])


def greedy_state(problem):
    state = search_of(problem)
    run_greedy(state)
    return state


def value(state):
    return float(state.problem.remaining.sum() - state.remaining.sum())


def sets_of(state):
    blocks = state.problem.observers[0].blocks
    return [int(blocks[0].tiles[choice.place]) for choice in state.choices]


def test_greedy_is_tight_for_two_sets():
    # Nemhauser, Wolsey & Fisher 1978, Math. Programming 14, 265: greedy 6, optimum 8, bound 8.
    row = ROWS["tight_k2"]
    problem = choose_k(row, row["k"])
    state = greedy_state(problem)
    assert sets_of(state) == [0, 1]
    assert value(state) == row["greedy"]
    assert optimum(problem) == row["optimum"]
    assert data_dependent_bound(state) == pytest.approx(row["online_bound"], abs=1e-6)


def test_greedy_is_tight_for_three_sets():
    # Nemhauser, Wolsey & Fisher 1978: three columns of 27, rows of 9, 6, 4 of each; 57 of 81.
    row = ROWS["tight_k3"]
    length, columns = row["column_length"], row["columns"]
    starts = np.concatenate([[0], np.cumsum(row["rows_take"])])
    rows = [
        [length * column + i for column in range(columns) for i in range(*starts[n : n + 2])]
        for n in range(len(row["rows_take"]))
    ]
    whole = [list(range(length * column, length * (column + 1))) for column in range(columns)]
    stated = {"sets": rows + whole, "weights": np.ones(length * columns)}
    problem = choose_k(stated, row["k"])
    state = greedy_state(problem)
    assert sets_of(state) == [0, 1, 2]
    assert value(state) == row["greedy"]
    assert value(state) / row["optimum"] == pytest.approx(1.0 - (2.0 / 3.0) ** 3, abs=1e-12)
    assert data_dependent_bound(state) >= row["optimum"]
    assert concave_bound(state, n_steps=3) >= row["optimum"]


@pytest.mark.parametrize("k", [1, 2, 3])
def test_ten_pixels_six_sets(k):
    row = ROWS["explicit"]
    state = greedy_state(choose_k(row, k))
    assert sets_of(state) == row["greedy_sets"][k - 1]
    assert value(state) == pytest.approx(row["greedy"][k - 1], abs=1e-9)
    # Leskovec et al. 2007 (KDD), section 3.2.
    assert data_dependent_bound(state) == pytest.approx(row["online_bound"][k - 1], abs=1e-6)


def test_partition_of_the_six_sets_among_three_observers():
    row = ROWS["explicit"]
    parts = row["partition"]["observers"]
    takers = [observer_of(n, part, 1.0, n_starts=1) for n, part in enumerate(parts)]
    problem = problem_of(row["weights"], tiles_from_sets(row["sets"]), takers)
    result = make_plan(problem)
    assert result.searched_expected == pytest.approx(row["partition"]["greedy"], abs=1e-9)
    assert optimum(problem) == pytest.approx(row["partition"]["optimum"], abs=1e-9)
    assert result.searched_bound >= row["partition"]["optimum"]


def test_greedy_is_tight_under_a_partition():
    # Fisher, Nemhauser & Wolsey 1978, Math. Programming Study 8, 73: 1.01 of 2.
    row = ROWS["matroid_half"]
    takers = [observer_of(n, part, 1.0, n_starts=1) for n, part in enumerate(row["observers"])]
    problem = problem_of(row["weights"], tiles_from_sets(row["sets"]), takers)
    result = make_plan(problem)
    assert result.searched_expected == pytest.approx(row["greedy"], abs=1e-9)
    assert optimum(problem) == pytest.approx(row["optimum"], abs=1e-9)
    assert result.searched_bound >= row["optimum"]


def test_smallest_everyday_failure_of_greedy():
    row = ROWS["subopt"]
    problem = choose_k(row, row["k"])
    state = greedy_state(problem)
    assert value(state) == row["greedy"]
    assert optimum(problem) == row["optimum"]
    assert min(data_dependent_bound(state), concave_bound(state, n_steps=3)) >= row["optimum"]


@pytest.mark.parametrize("place", range(5))
def test_independent_repeat_visits(place):
    row = ROWS["repeat"]
    visits = row["visits"][place]
    takers = [
        observer_of(10 * tile + n, [tile], row["detection"], n_starts=1)
        for tile, count in enumerate(visits)
        for n in range(count)
    ]
    problem = problem_of(row["probabilities"], tiles_from_sets([[0], [1], [2]]), takers)
    assert make_plan(problem).searched_expected == pytest.approx(row["values"][place], abs=1e-12)


@pytest.mark.parametrize("seed", range(25))
def test_greedy_keeps_its_guarantee_under_a_cardinality_constraint(seed):
    # 1 - (1 - 1/k)^k >= 1 - 1/e: Nemhauser, Wolsey & Fisher 1978.
    rng = np.random.default_rng(seed)
    k = int(rng.integers(1, 4))
    sets = [rng.choice(10, size=int(rng.integers(1, 5)), replace=False) for _ in range(6)]
    problem = choose_k({"sets": sets, "weights": rng.dirichlet(np.ones(10))}, k)
    best = optimum(problem)
    assert 1.0 - (1.0 - 1.0 / k) ** k >= ROWS["bound_1e"]["value"]
    assert ROWS["bound_1e"]["value"] == pytest.approx(1.0 - 1.0 / math.e, abs=1e-9)
    assert value(greedy_state(problem)) >= (1.0 - (1.0 - 1.0 / k) ** k) * best - 1e-12


def test_value_of_the_plan_is_the_value_of_its_frames():
    row = ROWS["explicit"]
    problem = choose_k(row, 3)
    state = greedy_state(problem)
    options = [
        (c.observer, c.block, c.place, c.slot, int(problem.observers[0].blocks[0].tiles[c.place]))
        for c in state.choices
    ]
    assert value(state) == pytest.approx(value_of(problem, options), abs=1e-12)
