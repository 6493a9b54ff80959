"""From constraints to the region of a campaign."""

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from skytiles.errors import RegionError
from skytiles.region.areas import MocConstraint, PolygonConstraint
from skytiles.region.arrival_times import ArrivalTimesConstraint
from skytiles.region.constraints import (
    AnyConstraint,
    ConeConstraint,
    Directional,
    EllipseConstraint,
    MapConstraint,
)
from skytiles.region.credible import credible_areas_deg2, densest_first, peak_deg
from skytiles.region.distance import DistanceConstraint
from skytiles.region.galactic_prior import GalacticPrior
from skytiles.region.mesh import COARSER_ORDER, is_thinned, product_of
from skytiles.region.region import Region
from skytiles.region.sky_map import SkyMap
from skytiles.region.targets import TargetListConstraint
from skytiles.sphere.healpix_door import pixel_side_deg

Ints = NDArray[np.int64]
Floats = NDArray[np.float64]

# Order 8 to 10, at most 200,000 pixels, 99.9 % of the probability.
LOWEST_ORDER, HIGHEST_ORDER = 8, 10
MOST_PIXELS = 200_000
CREDIBLE_SHARE = 0.999
PRIORS = ("flat", "galactic")
# The rest of an area is thinner than the sky would be without any alert. It is left outside where
# it would cost resolution, as long as the area itself holds at least this.
_AS_DENSE_AS_NO_ALERT = 1.0
_LEAST_KEPT = 0.5
_LEVELS = {"50": 0.50, "90": 0.90, "99": 0.99}


def make_region(
    constraints: Sequence[AnyConstraint],
    *,
    smallest_side_deg: float | None = None,
    order: int | None = None,
    prior: str = "flat",
    galaxy: GalacticPrior | None = None,
) -> Region:
    """The product of constraints and prior on pixels of one working order.

    Parameters
    ----------
    constraints : AnyConstraint    one or more
    smallest_side_deg : float or None    smallest frame side of the network; None: order 8
    order : int or None    working order, 0 to 13, instead of the one chosen from the side
    prior : str    "flat" or "galactic"
    galaxy : GalacticPrior or None    numbers of the Galactic prior; None: the usual ones

    Returns
    -------
    Region    RegionError for no constraint, an unknown prior or an impossible order

    Source: Bayes's rule; credible region of highest density.
    """
    _refuse_bad_requests(constraints, order=order, prior=prior)
    product = product_of(constraints, (galaxy or GalacticPrior()) if prior == "galactic" else None)
    sky_map = product.sky_map
    wanted = order if order is not None else order_for_side(smallest_side_deg)
    has_rest = any(isinstance(one, MocConstraint | PolygonConstraint) for one in constraints)
    chosen, pixels, probabilities, is_cut = _working_pixels(sky_map, wanted, has_rest=has_rest)
    areas = credible_areas_deg2(sky_map, tuple(_LEVELS.values()))
    peak_ra, peak_dec = _peak_deg(constraints, sky_map, prior=prior)
    return Region(
        order=chosen,
        pixels=pixels,
        probabilities=probabilities,
        outside=max(0.0, 1.0 - float(probabilities.sum())),
        area_deg2=dict(zip(_LEVELS, areas, strict=True)),
        peak_ra_deg=peak_ra,
        peak_dec_deg=peak_dec,
        total_probability=_total_as_read(constraints),
        overlap=product.overlap,
        notes=_warnings(constraints)
        + product.notes
        + _notes(wanted, chosen, smallest_side_deg=smallest_side_deg, prior=prior)
        + _rest_note(float(probabilities.sum()), is_cut=is_cut)
        + _thinning_note(constraints, prior=prior),
    )


def order_for_side(smallest_side_deg: float | None) -> int:
    """Order whose pixels are at most a quarter of the smallest frame side.

    Parameters
    ----------
    smallest_side_deg : float or None    degrees; None: unknown

    Returns
    -------
    int    8 to 10

    Source: our definition (DEVELOPERS.md, regions and tiles).
    """
    if smallest_side_deg is None:
        return LOWEST_ORDER
    for order in range(LOWEST_ORDER, HIGHEST_ORDER):
        if pixel_side_deg(order) <= smallest_side_deg / 4.0:
            return order
    return HIGHEST_ORDER


def _refuse_bad_requests(
    constraints: Sequence[AnyConstraint], *, order: int | None, prior: str
) -> None:
    if not any(isinstance(one, Directional | TargetListConstraint) for one in constraints):
        raise RegionError(
            given="nothing says in which direction the source is",
            allowed="one or more constraints on the direction",
            advice="give a map, a cone, an ellipse or an area",
        )
    if prior not in PRIORS:
        raise RegionError(f"prior {prior!r}", " or ".join(PRIORS), "choose one of these")
    if order is not None and not 0 <= order <= 13:
        raise RegionError(f"order {order}", "0 to 13", "leave the order out to have it chosen")


def _peak_deg(
    constraints: Sequence[AnyConstraint], sky_map: SkyMap, *, prior: str
) -> tuple[float, float]:
    """The centre of a lone Gaussian, else the densest cell."""
    pointing = [one for one in constraints if not isinstance(one, DistanceConstraint)]
    only = pointing[0] if len(pointing) == 1 and prior == "flat" else None
    if isinstance(only, ConeConstraint | EllipseConstraint):
        return only.ra_deg, only.dec_deg
    return peak_deg(sky_map)


def _total_as_read(constraints: Sequence[AnyConstraint]) -> float:
    """The map's own sum when there is one map, else 1."""
    maps = [c.sky_map for c in constraints if isinstance(c, MapConstraint)]
    return maps[0].total_probability if len(maps) == 1 else 1.0


def _working_pixels(
    sky_map: SkyMap, wanted: int, *, has_rest: bool
) -> tuple[int, Ints, Floats, bool]:
    """Order, pixels and probabilities, the order lowered until they are few enough.

    Before it is lowered, the flat rest of an area is left outside; the last value says so.
    """
    is_cut = False
    for order in range(wanted, -1, -1):
        coarse = sky_map.at_most_order(order)
        kept = _credible_cells(coarse)
        if has_rest and _n_working_pixels(coarse, kept, order) > MOST_PIXELS:
            inner = kept[coarse.densities[kept] >= _AS_DENSE_AS_NO_ALERT]
            is_cut = float(coarse.probabilities[inner].sum()) >= _LEAST_KEPT
            kept = inner if is_cut else kept
        if _n_working_pixels(coarse, kept, order) <= MOST_PIXELS or order == 0:
            break
    pixels, probabilities = _split_to_order(coarse, kept, order)
    return order, pixels, probabilities, is_cut


def _credible_cells(sky_map: SkyMap) -> Ints:
    """The densest cells that together reach the credible share, in NESTED order."""
    sequence = densest_first(sky_map)
    reached = np.cumsum(sky_map.probabilities[sequence])
    n_kept = int(np.searchsorted(reached, CREDIBLE_SHARE * reached[-1])) + 1
    return np.sort(sequence[:n_kept])


def _n_working_pixels(sky_map: SkyMap, kept: Ints, order: int) -> int:
    return int((1 << 2 * (order - sky_map.orders[kept])).sum())


def _split_to_order(sky_map: SkyMap, kept: Ints, order: int) -> tuple[Ints, Floats]:
    """Cells cut into pixels of the working order, each with its equal share."""
    drops = order - sky_map.orders[kept]
    counts = 1 << 2 * drops
    firsts = sky_map.pixels[kept] << 2 * drops
    places = np.arange(int(counts.sum())) - np.repeat(np.cumsum(counts) - counts, counts)
    shares = np.repeat(sky_map.probabilities[kept] / counts, counts)
    return np.repeat(firsts, counts) + places, shares


def _notes(
    wanted: int, chosen: int, *, smallest_side_deg: float | None, prior: str
) -> tuple[str, ...]:
    notes = []
    if chosen < wanted:
        notes.append(
            f"The working order was lowered from {wanted} to {chosen}, "
            f"because the region would have had more than {MOST_PIXELS:,} pixels."
        )
    if smallest_side_deg is not None and pixel_side_deg(chosen) > smallest_side_deg / 4.0:
        notes.append(
            f"Pixels of {60.0 * pixel_side_deg(chosen):.1f} arcmin are larger than a quarter of "
            f"the smallest frame side ({60.0 * smallest_side_deg:.1f} arcmin); small frames "
            "count with the fraction of each pixel that they cover."
        )
    if prior == "galactic":
        notes.append(
            "The prior is the Galactic disc with the Magellanic Clouds and a small floor over the "
            "whole sky: it says where sources are; dust only dims them."
        )
    return tuple(notes)


def _rest_note(kept: float, *, is_cut: bool) -> tuple[str, ...]:
    if not is_cut:
        return ()
    share = f"{100.0 * (1.0 - kept):.1f} %"
    return (f"{share} is spread over the sky around the area and counts as outside.",)


def _warnings(constraints: Sequence[AnyConstraint]) -> tuple[str, ...]:
    """What single constraints say against themselves."""
    timed = [one for one in constraints if isinstance(one, ArrivalTimesConstraint)]
    return tuple(note for one in timed for note in one.notes)


def _thinning_note(constraints: Sequence[AnyConstraint], *, prior: str) -> tuple[str, ...]:
    is_product = len(constraints) > 1 or prior != "flat"
    if not is_product or not any(is_thinned(constraint) for constraint in constraints):
        return ()
    return (f"A map of very many cells was multiplied at order {COARSER_ORDER}.",)
