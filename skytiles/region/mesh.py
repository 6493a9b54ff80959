"""Cells fine where the constraints have detail, coarse elsewhere, and their product on them."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from skytiles.errors import RegionError
from skytiles.region.agreement import agreement_of
from skytiles.region.arrival_mesh import arrival_needs_split
from skytiles.region.arrival_times import ArrivalTimesConstraint
from skytiles.region.constraints import (
    AnyConstraint,
    ConeConstraint,
    Directional,
    EllipseConstraint,
    MapConstraint,
    MapLike,
)
from skytiles.region.distance import DistanceConstraint
from skytiles.region.galactic_prior import GalacticPrior
from skytiles.region.sky_map import SkyMap
from skytiles.region.target_blend import blended_prior
from skytiles.region.targets import TargetListConstraint
from skytiles.sphere.angles import separations_deg, unit_vectors
from skytiles.sphere.galactic import galactic_lons_lats_deg
from skytiles.sphere.healpix_door import (
    MAX_ORDER,
    n_pixels,
    pixel_area_deg2,
    pixel_centres,
    pixel_side_deg,
)

Ints = NDArray[np.int64]
Floats = NDArray[np.float64]
Bools = NDArray[np.bool_]

# Share of each constraint that is spread over the whole sky before constraints are multiplied,
# so that none of them is ever a hard zero and two that contradict each other still give a region.
FLOOR = 1e-5
_FIRST_ORDER = 3
_FINEST_ORDER = 20
# A Gaussian is followed to this many sigmas (beyond: 4e-6 of it), in cells of this share of its
# smaller sigma: fewer for long ellipses, where they would be many.
_FOLLOWED_SIGMAS = 5.0
_CELLS_PER_SIGMA, _CELLS_PER_SIGMA_LONG, _LONG = 12.0, 6.0, 3.0
# Maps of more cells than this are multiplied at a coarser order.
_MANY_CELLS, COARSER_ORDER = 200_000, 9
# The disc of the Galaxy is half a degree thick where it is far away.
_DISC_ORDER = 8
_DISC_HALF_WIDTH_DEG = 3.0


@dataclass(frozen=True, eq=False)
class Product:
    """The normalised product, how well its constraints agree, and what is to be said about it."""

    sky_map: SkyMap
    # See Agreement.overlap; None when there is nothing to agree with.
    overlap: float | None = None
    notes: tuple[str, ...] = ()


def product_of(constraints: Sequence[AnyConstraint], prior: GalacticPrior | None) -> Product:
    """The normalised product of constraints and prior.

    Parameters
    ----------
    constraints : AnyConstraint    one or more
    prior : GalacticPrior or None    None: flat

    Returns
    -------
    Product    cells over the whole sky (a single map without prior is returned as it is)

    Source: Bayes's rule for independent measurements; the floor is our own.
    """
    distances = tuple(one for one in constraints if isinstance(one, DistanceConstraint))
    lists = [one for one in constraints if isinstance(one, TargetListConstraint)]
    pointing = [one for one in constraints if isinstance(one, Directional)]
    only = pointing[0] if len(pointing) == 1 and not lists and prior is None else None
    if isinstance(only, MapLike):
        return Product(only.sky_map)
    pointing = [_thinned(one) for one in pointing]
    orders, pixels = _cells([*pointing, *lists], prior)
    ras, decs = _centres(orders, pixels)
    pieces = [
        np.log(FLOOR + (1.0 - FLOOR) * _densities(constraint, orders, pixels, ras, decs))
        for constraint in pointing
    ]
    smooth = np.ones(len(pixels)) if prior is None else prior.densities(ras, decs)
    logs = np.sum(pieces, axis=0) if pieces else np.zeros(len(pixels))
    shares = _shares(orders)
    if lists:
        weights, vectors = np.exp(logs - logs.max()) * shares, unit_vectors(ras, decs)
        smooth = blended_prior(smooth, lists, vectors, weights=weights, distances=distances)
    chosen = _normalised(orders, pixels, logs + np.log(smooth))
    return Product(chosen, *_agreement(pointing, pieces, shares))


def _agreement(
    constraints: Sequence[Directional], pieces: Sequence[Floats], shares: Floats
) -> tuple[float | None, tuple[str, ...]]:
    """The overlap of several constraints, and a sentence when they contradict each other."""
    agreement = agreement_of(pieces, shares)
    if agreement is None:
        return None, ()
    note = agreement.note([one.kind for one in constraints])
    return agreement.overlap, (note,) if note else ()


def _shares(orders: Ints) -> Floats:
    """Share of the sky of each cell."""
    return np.asarray(4.0 ** -orders.astype(np.float64) / 12.0)


def product_map(constraints: Sequence[AnyConstraint], prior: GalacticPrior | None) -> SkyMap:
    """The map of a product alone.

    Parameters
    ----------
    constraints, prior    as for product_of

    Returns
    -------
    SkyMap    cells over the whole sky

    Source: as product_of.
    """
    return product_of(constraints, prior).sky_map


def is_thinned(constraint: AnyConstraint) -> bool:
    """Whether a constraint is a map so large that products use it at a coarser order.

    Parameters
    ----------
    constraint : AnyConstraint    any

    Returns
    -------
    bool    True above 200,000 cells

    Source: our own.
    """
    return isinstance(constraint, MapLike) and constraint.sky_map.n_cells > _MANY_CELLS


def _thinned(constraint: Directional) -> Directional:
    """A huge map at a coarser order, anything else as it is."""
    if not isinstance(constraint, MapLike) or not is_thinned(constraint):
        return constraint
    return MapConstraint(sky_map=constraint.sky_map.at_most_order(COARSER_ORDER))


def _normalised(orders: Ints, pixels: Ints, logs: Floats) -> SkyMap:
    weights = np.exp(logs - logs.max()) * 4.0 ** -orders.astype(np.float64)
    sequence = np.argsort(pixels << 2 * (MAX_ORDER - orders))
    probabilities = weights[sequence] / weights.sum()
    return SkyMap(orders=orders[sequence], pixels=pixels[sequence], probabilities=probabilities)


def _cells(
    constraints: Sequence[Directional | TargetListConstraint], prior: GalacticPrior | None
) -> tuple[Ints, Ints]:
    """Orders and pixels: split wherever a constraint or the prior has finer detail."""
    pixels = np.arange(n_pixels(_FIRST_ORDER), dtype=np.int64)
    leaves: list[tuple[int, Ints]] = []
    for order in range(_FIRST_ORDER, MAX_ORDER + 1):
        is_split = np.zeros(len(pixels), dtype=np.bool_)
        for constraint in constraints:
            is_split |= _needs_split(constraint, order, pixels)
        if prior is not None:
            is_split |= _disc_needs_split(prior, order, pixels)
        leaves.append((order, pixels[~is_split]))
        pixels = (4 * pixels[is_split][:, None] + np.arange(4)).reshape(-1)
        if len(pixels) == 0:
            break
    orders = np.concatenate([np.full(len(leaf), order) for order, leaf in leaves])
    return orders.astype(np.int64), np.concatenate([leaf for _, leaf in leaves])


def _needs_split(constraint: Directional | TargetListConstraint, order: int, pixels: Ints) -> Bools:
    if isinstance(constraint, TargetListConstraint):
        return constraint.needs_split(order, pixels)
    if isinstance(constraint, MapLike):
        return _map_needs_split(constraint.sky_map, order, pixels)
    if isinstance(constraint, ArrivalTimesConstraint):
        return arrival_needs_split(constraint, order, pixels)
    return _gaussian_needs_split(constraint, order, pixels)


def _map_needs_split(sky_map: SkyMap, order: int, pixels: Ints) -> Bools:
    """True where the map has a cell border inside a pixel."""
    shift = 2 * (MAX_ORDER - order)
    borders = np.unique(np.concatenate([sky_map.starts, sky_map.ends]))
    after = np.searchsorted(borders, pixels << shift, side="right")
    before_end = np.searchsorted(borders, (pixels + 1) << shift, side="left")
    return np.asarray(before_end > after)


def _gaussian_needs_split(
    gaussian: ConeConstraint | EllipseConstraint, order: int, pixels: Ints
) -> Bools:
    major, minor = gaussian.sigmas_deg
    side = pixel_side_deg(order)
    per_sigma = _CELLS_PER_SIGMA_LONG if major > _LONG * minor else _CELLS_PER_SIGMA
    if order >= _FINEST_ORDER or side <= minor / per_sigma:
        return np.zeros(len(pixels), dtype=np.bool_)
    ras, decs = pixel_centres(order, pixels)
    # A pixel reaches at most 1.1 sides from its centre (order 3 and up).
    distances = separations_deg(gaussian.ra_deg, gaussian.dec_deg, ras, decs)
    near = np.maximum(distances - 1.1 * side, 0.0)
    if isinstance(gaussian, ConeConstraint) or major <= 1.5 * minor:
        return np.asarray(near <= _FOLLOWED_SIGMAS * major)
    logs = gaussian.log_likelihoods(ras, decs)
    # A pixel beside the ellipse is near it when moving it by its size brings it inside.
    mahalanobis = np.sqrt(-2.0 * logs) - 1.1 * side / minor
    return np.asarray((mahalanobis <= _FOLLOWED_SIGMAS) & (near <= _FOLLOWED_SIGMAS * major))


def _disc_needs_split(prior: GalacticPrior, order: int, pixels: Ints) -> Bools:
    if order >= _DISC_ORDER:
        return np.zeros(len(pixels), dtype=np.bool_)
    ras, decs = pixel_centres(order, pixels)
    reach = 1.1 * pixel_side_deg(order)
    _, latitudes = galactic_lons_lats_deg(ras, decs)
    is_near = np.abs(latitudes) <= _DISC_HALF_WIDTH_DEG + reach
    for cloud in prior.clouds:
        distances = separations_deg(cloud.ra_deg, cloud.dec_deg, ras, decs)
        is_near |= distances <= 4.0 * cloud.sigma_deg + reach
    return np.asarray(is_near | (order < _DISC_ORDER - 3))


def _centres(orders: Ints, pixels: Ints) -> tuple[Floats, Floats]:
    ras, decs = np.empty(len(pixels)), np.empty(len(pixels))
    for order in np.unique(orders):
        chosen = orders == order
        ras[chosen], decs[chosen] = pixel_centres(int(order), pixels[chosen])
    return ras, decs


def _densities(
    constraint: Directional, orders: Ints, pixels: Ints, ras_deg: Floats, decs_deg: Floats
) -> Floats:
    """Probability per share of the sky, normalised on the cells: 1 everywhere for a flat one."""
    shares = _shares(orders)
    if isinstance(constraint, MapLike):
        values = _map_densities(constraint.sky_map, orders, pixels)
    else:
        values = np.exp(constraint.log_likelihoods(ras_deg, decs_deg))
    total = float((values * shares).sum())
    if total <= 0.0:
        raise RegionError(
            given=f"a {constraint.kind} too small to be followed",
            allowed=f"a size of at least {pixel_area_deg2(_FINEST_ORDER) ** 0.5:.1g} degrees",
            advice="give the position its honest error, or a systematic error beside it",
        )
    return values / total


def _map_densities(sky_map: SkyMap, orders: Ints, pixels: Ints) -> Floats:
    """Density of the map's cell that holds each pixel; zero where the map has none."""
    places = pixels << 2 * (MAX_ORDER - orders)
    cells = np.searchsorted(sky_map.starts, places, side="right") - 1
    is_inside = (cells >= 0) & (places < sky_map.ends[np.maximum(cells, 0)])
    return np.where(is_inside, sky_map.densities[np.maximum(cells, 0)], 0.0)
