"""The true value of plans and the true optimum of small problems, from first principles.

Uses only the numbers that state a problem (who may take what, with which detection), nothing of
the search: every plan is listed and its value is a product over its frames.
"""

import itertools

import numpy as np

SAME_LOOK_D = 1.0 / 24.0


def options_of(problem):
    """All (observer, block, place, slot, tile) on offer."""
    return [
        (number, b, place, slot, int(block.tiles[place]))
        for number, observer in enumerate(problem.observers)
        for b, block in enumerate(observer.blocks)
        for place, slot in np.argwhere(block.rows > 0).tolist()
    ]


def detection_of(problem, option):
    number, b, place, slot, _ = option
    block = problem.observers[number].blocks[b]
    return block.detections[block.rows[place, slot]]


def value_of(problem, options):
    """Expected searched of a plan: sum over pixels and scenarios of w (1 - prod (1 - share d))."""
    missed = np.ones_like(problem.remaining)
    for option in options:
        tile = option[4]
        span = slice(problem.tiles.indptr[tile], problem.tiles.indptr[tile + 1])
        pixels, shares = problem.tiles.indices[span], problem.tiles.fractions[span]
        for pixel, share in zip(pixels, shares, strict=True):
            missed[pixel] *= 1.0 - share * detection_of(problem, option)
    return problem.searched_held + float(np.sum(problem.remaining * (1.0 - missed)))


def nights_of(problem, number):
    """Every choice of one observer: at most one option a start, tiles left, looks kept apart."""
    observer = problem.observers[number]
    mine = [option for option in options_of(problem) if option[0] == number]
    n_left = observer.blocks[0].n_tiles_left if observer.blocks else 0
    nights = []
    for n_taken in range(min(n_left, len(observer.starts_mjd)) + 1):
        nights += [
            night
            for night in itertools.combinations(mine, n_taken)
            if len({option[3] for option in night}) == n_taken and _are_apart(observer, night)
        ]
    return nights


def _are_apart(observer, night):
    return all(
        one[4] != other[4]
        or abs(observer.starts_mjd[one[3]] - observer.starts_mjd[other[3]]) >= SAME_LOOK_D
        for one, other in itertools.combinations(night, 2)
    )


def optimum(problem):
    """Largest value of any plan, by listing all."""
    nights = [nights_of(problem, number) for number in range(len(problem.observers))]
    return max(
        value_of(problem, list(itertools.chain(*plan))) for plan in itertools.product(*nights)
    )
