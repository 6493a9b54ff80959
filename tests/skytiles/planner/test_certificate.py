"""The certificate never claims more than is true: against exact optima of small problems."""

import numpy as np
import pytest
from scipy.optimize import Bounds, LinearConstraint, milp
from scipy.sparse import lil_matrix

from skytiles.planner.greedy import run_greedy
from skytiles.planner.make_plan import make_plan
from skytiles.planner.search_state import Choice
from skytiles.planner.upper_bounds import concave_bound, data_dependent_bound
from tests.skytiles.planner.plain_optimum import optimum, options_of, value_of
from tests.skytiles.planner.small_problems import (
    observer_of,
    problem_of,
    random_problem,
    search_of,
    tiles_from_sets,
)


def assert_bounds_hold(problem, best):
    state = search_of(problem)
    run_greedy(state)
    value = problem.searched_held + float(problem.remaining.sum() - state.remaining.sum())
    assert value <= best + 1e-9
    assert data_dependent_bound(state) >= best - 1e-12
    for n_steps in (0, 1, 10, 40):
        assert concave_bound(state, n_steps=n_steps) >= best - 1e-12
    result = make_plan(problem)
    assert result.certificate <= value / best + 1e-9
    assert result.certificate <= 1.0
    assert result.searched_expected == pytest.approx(value, abs=1e-12)


@pytest.mark.parametrize("seed", range(60))
def test_bounds_hold_on_small_problems_solved_by_listing_all_plans(seed):
    rng = np.random.default_rng(seed)
    problem = random_problem(rng, n_observers=2, n_starts=2)
    assert_bounds_hold(problem, optimum(problem))


@pytest.mark.slow
@pytest.mark.parametrize("seed", range(100, 130))
def test_bounds_hold_with_more_starts(seed):
    rng = np.random.default_rng(seed)
    problem = random_problem(rng, n_observers=2, n_tiles=4, n_starts=3, n_scenarios=3)
    assert_bounds_hold(problem, optimum(problem))


def coverage_problem(rng):
    """Perfect detection: then the best plan is a maximum coverage problem, solved exactly."""
    n_pixels, n_tiles = 60, 20
    sets = [
        (int(rng.integers(n_pixels)) + np.arange(int(rng.integers(3, 12)))) % n_pixels
        for _ in range(n_tiles)
    ]
    observers = [
        observer_of(
            key,
            np.sort(rng.choice(n_tiles, size=8, replace=False)),
            1.0,
            n_starts=3,
            n_tiles_left=int(rng.integers(1, 4)),
        )
        for key in range(1, 5)
    ]
    return problem_of(rng.dirichlet(np.ones(n_pixels)), tiles_from_sets(sets), observers)


def solved_by_milp(problem):
    """scipy.optimize.milp (HiGHS) on: max w y, y_i <= sum of x over i, one x per start."""
    options = options_of(problem)
    n_pixels = len(problem.remaining)
    n = len(options)
    groups = {}
    for column, (number, _, _, slot, tile) in enumerate(options):
        groups.setdefault(("start", number, slot), []).append(column)
        groups.setdefault(("tiles", number), []).append(column)
        # Starts a few minutes apart: a second visit would join the first look.
        groups.setdefault(("look", number, tile), []).append(column)
    covers = lil_matrix((n_pixels, n + n_pixels))
    for column, option in enumerate(options):
        for pixel in problem.tiles.pixels_of(option[4]):
            covers[pixel, column] = -1.0
    for pixel in range(n_pixels):
        covers[pixel, n + pixel] = 1.0
    limits = lil_matrix((len(groups), n + n_pixels))
    most = []
    for row, (name, columns) in enumerate(groups.items()):
        limits[row, columns] = 1.0
        left = problem.observers[name[1]].n_tiles_left
        most.append(left if name[0] == "tiles" else 1)
    answer = milp(
        -np.concatenate([np.zeros(n), problem.remaining[:, 0]]),
        integrality=np.concatenate([np.ones(n), np.zeros(n_pixels)]),
        bounds=Bounds(0.0, 1.0),
        constraints=[
            LinearConstraint(covers.tocsr(), -np.inf, 0.0),
            LinearConstraint(limits.tocsr(), -np.inf, most),
        ],
        options={"mip_rel_gap": 0.0},
    )
    assert answer.success
    return -answer.fun


@pytest.mark.parametrize("seed", range(20))
def test_bounds_hold_on_coverage_problems_solved_by_milp(seed):
    problem = coverage_problem(np.random.default_rng(seed))
    assert_bounds_hold(problem, solved_by_milp(problem))


def test_greedy_is_near_the_solver_on_average():
    ratios = []
    for seed in range(20):
        problem = coverage_problem(np.random.default_rng(seed))
        ratios.append(make_plan(problem).searched_expected / solved_by_milp(problem))
    assert min(ratios) > 0.8
    assert np.mean(ratios) > 0.95


@pytest.mark.parametrize("seed", range(10))
def test_concave_function_equals_the_value_at_whole_plans(seed):
    """At the plan itself the linear function touches: bound >= value, and no choice gains less."""
    problem = random_problem(np.random.default_rng(seed))
    state = search_of(problem)
    run_greedy(state)
    options = [(c.observer, c.block, c.place, c.slot, tile_of(problem, c)) for c in state.choices]
    value = float(problem.remaining.sum() - state.remaining.sum())
    assert value == pytest.approx(value_of(problem, options), abs=1e-12)
    assert concave_bound(state, n_steps=0) >= value


def tile_of(problem, choice: Choice):
    return int(problem.observers[choice.observer].blocks[choice.block].tiles[choice.place])
