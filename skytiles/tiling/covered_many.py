"""Pixels of a region under many frames at once."""

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from skytiles.sphere.healpix_door import pixel_area_deg2
from skytiles.tiling.footprint import Footprint
from skytiles.tiling.pixels_under import SMALL_FRAME_PIXELS, covered_pixels, pixels_under_many

Ints = NDArray[np.int64]
Floats = NDArray[np.float64]


def covered_pixels_many(
    footprints: Sequence[Footprint], region_order: int, region_pixels: Ints
) -> list[tuple[Ints, Floats]]:
    """What covered_pixels says of each of many frames, faster than asking one by one.

    Parameters
    ----------
    footprints : Footprint    m frames
    region_order : int    working order of the region
    region_pixels : (p,) int    NESTED, ascending

    Returns
    -------
    m pairs of (n,) int, (n,) float    places in region_pixels, ascending, and covered shares

    Source: as covered_pixels.
    """
    smallest_deg2 = SMALL_FRAME_PIXELS * pixel_area_deg2(region_order)
    is_small = np.array([one.area_deg2 < smallest_deg2 for one in footprints], dtype=bool)
    large = [one for one, small in zip(footprints, is_small, strict=True) if not small]
    wholes = iter(_whole_pixels(large, region_order, region_pixels))
    return [
        covered_pixels(one, region_order, region_pixels) if small else next(wholes)
        for one, small in zip(footprints, is_small, strict=True)
    ]


def _whole_pixels(
    footprints: Sequence[Footprint], order: int, region_pixels: Ints
) -> list[tuple[Ints, Floats]]:
    if not footprints:
        return []
    lists = pixels_under_many(footprints, order)
    places = np.searchsorted(region_pixels, lists.pixels)
    is_there = places < len(region_pixels)
    is_there[is_there] = region_pixels[places[is_there]] == lists.pixels[is_there]
    # How many of the pixels before each start the region has: the starts of what is left.
    starts = np.concatenate([[0], np.cumsum(is_there)])[lists.starts]
    kept = places[is_there].astype(np.int64)
    pieces = np.split(kept, starts[1:-1])
    return [(np.sort(piece), np.ones(len(piece))) for piece in pieces]
