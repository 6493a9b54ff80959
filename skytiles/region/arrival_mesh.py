"""Where the mesh must be finer for arrival times: rings and spots of any width."""

import numpy as np
from numpy.typing import NDArray

from skytiles.region.arrival_times import ArrivalTimesConstraint
from skytiles.sphere.healpix_door import pixel_side_deg, pixel_vectors

Ints = NDArray[np.int64]
Floats = NDArray[np.float64]
Bools = NDArray[np.bool_]

FINEST_ORDER = 24
# Followed until the likelihood has fallen by exp(-15), 3e-7 of its height.
_FOLLOWED_EXCESS = 30.0
# Cells of a third of the width where most of the probability is (excess below 9), two thirds
# further out: sums over a Gaussian in steps of one sigma are exact to 1e-8, so the mass is kept
# even where a long thin ring allows no more than one cell a width.
_CELLS_PER_WIDTH, _CELLS_PER_WIDTH_OUTSIDE, _FEWEST_CELLS_PER_WIDTH = 3.0, 1.5, 1.0
_CORE_EXCESS = 9.0
_MANY_CELLS = 400_000


def arrival_needs_split(times: ArrivalTimesConstraint, order: int, pixels: Ints) -> Bools:
    """Which pixels are too coarse to follow the likelihood of arrival times.

    Parameters
    ----------
    times : ArrivalTimesConstraint    the constraint
    order : int    order of the pixels
    pixels : (n,) int    NESTED

    Returns
    -------
    (n,) bool    True where a pixel must be split

    Source: our own; the width is that of the likelihood's second derivative along the sphere.
    """
    side = np.deg2rad(pixel_side_deg(order))
    # A pixel reaches at most 1.1 sides from its centre (order 3 and up).
    reach = 1.1 * side
    if order >= FINEST_ORDER:
        return np.zeros(len(pixels), dtype=np.bool_)
    vectors = pixel_vectors(order, pixels)
    least, curvatures = _least_excess_and_curvatures(times, vectors, reach)
    in_widths = side * np.sqrt(curvatures)
    is_near = least <= _FOLLOWED_EXCESS
    wanted = np.where(least <= _CORE_EXCESS, _CELLS_PER_WIDTH, _CELLS_PER_WIDTH_OUTSIDE)
    is_coarse = is_near & (in_widths > 1.0 / wanted)
    if 4 * np.count_nonzero(is_coarse) <= _MANY_CELLS:
        return np.asarray(is_coarse)
    return np.asarray(is_near & (in_widths > 1.0 / _FEWEST_CELLS_PER_WIDTH))


def _least_excess_and_curvatures(
    times: ArrivalTimesConstraint, vectors: Floats, reach: float
) -> tuple[Floats, Floats]:
    """A lower bound of the excess within `reach` of each direction, and an upper one of curvature.

    The misfit u = A n - b changes along the sphere by at most |A_t| r + |A| r^2 / 2 over r radians,
    A_t being the part of A across n; half of chi squared curves by |A_t|^2 - u.(A n).
    """
    slopes = times.slopes
    gram = slopes.T @ slopes
    full = float(np.sqrt(np.linalg.eigvalsh(gram)[-1]))
    across = _largest_across(gram, vectors)
    misfits = vectors @ slopes.T - times.targets
    sizes = np.linalg.norm(misfits, axis=1)
    least_sizes = np.maximum(sizes - (across + 0.5 * full * reach) * reach, 0.0)
    best = float(np.linalg.norm(times.best_misfit))
    least = (least_sizes - best) * (least_sizes + best)
    inward = np.maximum(-np.sum(misfits * (vectors @ slopes.T), axis=1), 0.0)
    return np.asarray(least), np.asarray((across + full * reach) ** 2 + inward)


def _largest_across(gram: Floats, vectors: Floats) -> Floats:
    """Largest singular value of the slopes in the plane across each direction."""
    turned = vectors @ gram
    along = np.sum(vectors * turned, axis=1)
    trace = np.trace(gram) - along
    squares = np.sum(gram * gram) - 2.0 * np.sum(turned * turned, axis=1) + along**2
    spread = np.sqrt(np.maximum(0.5 * squares - 0.25 * trace**2, 0.0))
    return np.asarray(np.sqrt(np.maximum(0.5 * trace + spread, 0.0)))
