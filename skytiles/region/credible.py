"""Credible areas and peak of a map, from its own cells."""

import numpy as np
from numpy.typing import NDArray

from skytiles.region.sky_map import SkyMap
from skytiles.sphere.angles import ras_decs_deg
from skytiles.sphere.healpix_door import pixel_vectors
from skytiles.sphere.solid_angle import SKY_DEG2

Floats = NDArray[np.float64]
Ints = NDArray[np.int64]

# Cells whose density is this close to the highest share the peak.
_SAME_DENSITY = 1e-9


def densest_first(sky_map: SkyMap) -> Ints:
    """Cells from the densest to the thinnest.

    Parameters
    ----------
    sky_map : SkyMap    the map

    Returns
    -------
    (c,) int    numbers of cells

    Source: definition of a credible region of highest density.
    """
    return np.asarray(np.argsort(-sky_map.densities, kind="stable"), dtype=np.int64)


def credible_areas_deg2(sky_map: SkyMap, levels: tuple[float, ...]) -> tuple[float, ...]:
    """Areas of the smallest regions that hold stated shares of the probability.

    Parameters
    ----------
    sky_map : SkyMap    the map
    levels : float    shares, 0..1

    Returns
    -------
    float    square degrees for each level; the last cell counts with the part that is needed

    Source: definition; the densest cells first.
    """
    sequence = densest_first(sky_map)
    reached = np.concatenate([[0.0], np.cumsum(sky_map.probabilities[sequence])])
    areas = SKY_DEG2 / 12.0 * 4.0 ** -sky_map.orders[sequence].astype(np.float64)
    covered = np.concatenate([[0.0], np.cumsum(areas)])
    # Without the cells that hold nothing the reached share grows strictly.
    is_step = np.concatenate([[True], np.diff(reached) > 0.0])
    return tuple(float(a) for a in np.interp(levels, reached[is_step], covered[is_step]))


def peak_deg(sky_map: SkyMap) -> tuple[float, float]:
    """Where a map is densest.

    Parameters
    ----------
    sky_map : SkyMap    the map

    Returns
    -------
    float, float    right ascension and declination, degrees: the middle of the cells that share
    the highest density

    Source: definition.
    """
    densities = sky_map.densities
    best = np.flatnonzero(densities >= densities.max() * (1.0 - _SAME_DENSITY))
    orders, pixels = sky_map.orders[best], sky_map.pixels[best]
    sizes = 4.0 ** -orders.astype(np.float64)
    middle = np.zeros(3)
    for order in np.unique(orders):
        middle += sizes[orders == order][0] * pixel_vectors(order, pixels[orders == order]).sum(0)
    # Equal peaks far apart have no middle: take the largest cell, of those the first.
    largest = int(np.argmin(orders))
    is_spread = np.linalg.norm(middle) < 0.999 * sizes.sum()
    alone = pixel_vectors(int(orders[largest]), pixels[largest : largest + 1])[0]
    ra, dec = ras_decs_deg(alone if is_spread else middle)
    return float(ra), float(dec)
