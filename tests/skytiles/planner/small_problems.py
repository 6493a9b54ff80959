"""Small planning problems stated by hand: sets, weights, and who may take which."""

import numpy as np

from skytiles.planner.plan_problem import ObserverOptions, OptionBlock, PlanProblem
from skytiles.planner.search_state import SearchState
from skytiles.planner.tile_sums import TileSums
from skytiles.planner.tiles_to_plan import make_planner_tiles


def tiles_from_sets(sets, *, fractions=None):
    """One tile per set of pixels, all in one place of the sky: slewing never matters."""
    fractions = fractions or [np.ones(len(members)) for members in sets]
    zeros, ones = np.zeros(len(sets)), np.ones(len(sets))
    return make_planner_tiles(
        np.arange(len(sets)),
        list(zip(sets, fractions, strict=True)),
        ras_deg=zeros,
        decs_deg=zeros,
        widths_deg=ones,
        heights_deg=ones,
        seats=np.full(len(sets), 1000),
    )


def observer_of(key, tiles, detections, *, n_starts, n_tiles_left=None, hours_apart=0.1):
    """An observer who may take some tiles at any start; `detections` (k, t, n) or a scalar.

    Starts 0.1 h apart are one look, so that each tile is worth taking once; 2 h apart are not.
    """
    tiles = np.array(tiles, dtype=np.int64)
    shape = (len(tiles), n_starts)
    chances = np.asarray(detections, dtype=float)
    if chances.ndim < 3:
        chances = np.broadcast_to(chances, (*shape, 1))
    n_scenarios = chances.shape[-1]
    starts = 60000.0 + np.arange(n_starts) * hours_apart / 24.0
    block = OptionBlock(
        instrument_key=key,
        tiles=tiles,
        detections=np.concatenate([np.zeros((1, n_scenarios)), chances.reshape(-1, n_scenarios)]),
        rows=1 + np.arange(len(tiles) * n_starts).reshape(shape),
        ready_mjds=starts + 0.001,
        slew_deg_per_s=1.0,
        n_tiles_left=n_starts if n_tiles_left is None else n_tiles_left,
        limits_mag=np.zeros(shape),
        altitudes_deg=np.zeros(shape),
    )
    return ObserverOptions(key, starts, starts + 0.002, (block,))


def problem_of(weights, tiles, observers):
    """Weights (p,) or (p, n) of what remains to be found."""
    remaining = np.asarray(weights, dtype=float)
    if remaining.ndim == 1:
        remaining = remaining[:, None]
    return PlanProblem(
        remaining=remaining,
        tiles=tiles,
        observers=tuple(observers),
        searched_now=0.0,
        searched_held=0.0,
    )


def search_of(problem):
    return SearchState(problem, TileSums(problem.tiles, len(problem.remaining)))


def random_problem(rng, *, n_pixels=12, n_tiles=6, n_observers=3, n_starts=2, n_scenarios=2):
    """Overlapping tiles, detections below one that change with the start."""
    weights = rng.dirichlet(np.ones(n_pixels * n_scenarios)).reshape(n_pixels, n_scenarios)
    sets, fractions = [], []
    for _ in range(n_tiles):
        members = rng.choice(n_pixels, size=int(rng.integers(2, 6)), replace=False)
        sets.append(members)
        fractions.append(rng.choice([1.0, 0.6], size=len(members), p=[0.8, 0.2]))
    observers = []
    for key in range(1, n_observers + 1):
        tiles = np.sort(rng.choice(n_tiles, size=int(rng.integers(2, n_tiles)), replace=False))
        chances = rng.uniform(0.0, 0.95, (len(tiles), n_starts, n_scenarios))
        observers.append(
            observer_of(
                key,
                tiles,
                chances,
                n_starts=n_starts,
                n_tiles_left=int(rng.integers(1, n_starts + 1)),
                hours_apart=float(rng.choice([0.1, 2.0])),
            )
        )
    return problem_of(weights, tiles_from_sets(sets, fractions=fractions), observers)
