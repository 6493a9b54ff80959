"""HEALPix pixels under footprints."""

from collections.abc import Sequence

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skytiles.sphere.angles import unit_vectors
from skytiles.sphere.cap_pixels import PixelLists, pixels_inside
from skytiles.sphere.cap_set import CapSet
from skytiles.sphere.healpix_door import MAX_ORDER, pixel_area_deg2
from skytiles.tiling.footprint import Footprint, rectangle_corners

Ints = NDArray[np.int64]
Floats = NDArray[np.float64]

# A frame smaller than this many pixels counts with its covered fraction.
SMALL_FRAME_PIXELS = 9
# A small frame is cut into at least this many parts: its fractions err by about 2 %.
_PARTS_OF_SMALL_FRAME = 4096


def pixels_under(footprint: Footprint, order: int) -> Ints:
    """Pixels whose centre is inside a footprint.

    Parameters
    ----------
    footprint : Footprint    polygon or circle
    order : int    0..29

    Returns
    -------
    (n,) int    NESTED, ascending

    Source: definition; the same pixels as healpy.query_polygon(inclusive=False).
    """
    return np.sort(pixels_under_many([footprint], order).pixels)


def pixels_under_many(footprints: Sequence[Footprint], order: int) -> PixelLists:
    """Pixels whose centre is inside each of many footprints.

    Parameters
    ----------
    footprints : Footprint    m polygons, circles and mosaics, mixed
    order : int    0..29

    Returns
    -------
    starts (m + 1,) int, pixels (n,) int    footprint j holds pixels[starts[j]:starts[j + 1]],
    NESTED, in no particular order within a footprint

    Source: definition; the same pixels as healpy.query_polygon(inclusive=False).
    """
    if any(footprint.pieces for footprint in footprints):
        return _unions(footprints, order)
    corners = [footprint.corners for footprint in footprints]
    # Only circles have no corners.
    counts = np.fromiter(map(len, corners), dtype=np.int64, count=len(corners))
    if counts.all():
        return pixels_inside(_polygon_caps(corners, counts), order)
    circles = pixels_inside(_circle_caps([f for f in footprints if f.shape == "circle"]), order)
    polygons = _polygon_caps([c for c in corners if len(c)], counts[counts > 0])
    return _interleaved(counts == 0, pixels_inside(polygons, order), circles)


def _unions(footprints: Sequence[Footprint], order: int) -> PixelLists:
    """Pixels under any piece of each footprint, each once."""
    owned = [(j, leaf) for j, footprint in enumerate(footprints) for leaf in _leaves(footprint)]
    found = pixels_under_many([leaf for _, leaf in owned], order)
    owners = np.repeat([j for j, _ in owned], np.diff(found.starts)).astype(np.int64)
    places = np.lexsort((found.pixels, owners))
    owners, pixels = owners[places], found.pixels[places]
    is_first = np.ones(len(pixels), dtype=bool)
    is_first[1:] = (np.diff(owners) != 0) | (np.diff(pixels) != 0)
    starts = np.searchsorted(owners[is_first], np.arange(len(footprints) + 1))
    return PixelLists(starts.astype(np.int64), pixels[is_first])


def _leaves(footprint: Footprint) -> list[Footprint]:
    """The convex polygons and circles that a footprint is made of."""
    if not footprint.pieces:
        return [footprint]
    return [leaf for piece in footprint.pieces for leaf in _leaves(piece)]


def pixels_under_tiles(
    ras_deg: ArrayLike,
    decs_deg: ArrayLike,
    *,
    width_deg: float,
    height_deg: float,
    order: int,
) -> PixelLists:
    """Pixels whose centre is inside each of many north-up tiles of one size.

    Parameters
    ----------
    ras_deg, decs_deg : (k,) float    centres, degrees
    width_deg, height_deg : float    sides, degrees
    order : int    0..29

    Returns
    -------
    starts (k + 1,) int, pixels (n,) int    as pixels_under_many

    Source: definition.
    """
    corners = rectangle_corners(ras_deg, decs_deg, width_deg=width_deg, height_deg=height_deg)
    return pixels_inside(CapSet.of_polygons(corners), order)


def _circle_caps(circles: Sequence[Footprint]) -> CapSet:
    centres = unit_vectors(
        [circle.centre_ra_deg for circle in circles], [circle.centre_dec_deg for circle in circles]
    )
    return CapSet.of_circles(centres, np.deg2rad([c.diameter_deg / 2.0 for c in circles]))


def _polygon_caps(corners: Sequence[Floats], counts: Ints) -> CapSet:
    """Polygons as caps; where some have fewer corners, their last one is repeated."""
    most = int(counts.max(initial=3))
    if (counts < most).any():
        corners = [_filled(one, most) for one in corners]
    together = np.concatenate(corners) if corners else np.zeros((0, 3))
    return CapSet.of_polygons(together.reshape(-1, most, 3))


def _filled(corners: Floats, most: int) -> Floats:
    repeats = np.repeat(corners[-1:], most - len(corners), axis=0)
    return np.concatenate([corners, repeats])


def _interleaved(is_second: NDArray[np.bool_], first: PixelLists, second: PixelLists) -> PixelLists:
    """Lists of two kinds put back into the order of the footprints."""
    counts = np.empty(len(is_second), dtype=np.int64)
    counts[~is_second], counts[is_second] = np.diff(first.starts), np.diff(second.starts)
    starts = np.concatenate([[0], np.cumsum(counts)])
    pixels = np.empty(starts[-1], dtype=np.int64)
    belongs_to_second = np.repeat(is_second, counts)
    pixels[~belongs_to_second], pixels[belongs_to_second] = first.pixels, second.pixels
    return PixelLists(starts, pixels)


def covered_pixels(
    footprint: Footprint, region_order: int, region_pixels: Ints
) -> tuple[Ints, Floats]:
    """Pixels of a region under a frame, and the share of each that the frame covers.

    Parameters
    ----------
    footprint : Footprint    the frame
    region_order : int    working order of the region
    region_pixels : (p,) int    NESTED, ascending

    Returns
    -------
    (n,) int, (n,) float    places in region_pixels, ascending, and shares: 1 for every pixel
    whose centre is inside; for a frame of fewer than 9 pixels the covered share of every pixel
    that it touches

    Source: our definition (DEVELOPERS.md, regions and tiles).
    """
    is_small = footprint.area_deg2 < SMALL_FRAME_PIXELS * pixel_area_deg2(region_order)
    pixels, shares = (
        _covered_shares(footprint, region_order)
        if is_small
        else _whole_pixels(footprint, region_order)
    )
    return _within(region_pixels, pixels, shares)


def _whole_pixels(footprint: Footprint, order: int) -> tuple[Ints, Floats]:
    pixels = pixels_under(footprint, order)
    return pixels, np.ones(len(pixels))


def _covered_shares(footprint: Footprint, order: int) -> tuple[Ints, Floats]:
    """Touched pixels and their shares, counted in parts of a finer order."""
    parts = footprint.area_deg2 / pixel_area_deg2(order)
    finer = order
    while parts < _PARTS_OF_SMALL_FRAME and finer < MAX_ORDER:
        finer, parts = finer + 1, 4.0 * parts
    drop = 2 * (finer - order)
    pixels, counts = np.unique(pixels_under(footprint, finer) >> drop, return_counts=True)
    return pixels, counts / float(1 << drop)


def _within(region_pixels: Ints, pixels: Ints, shares: Floats) -> tuple[Ints, Floats]:
    """Places in the region of those pixels that it has."""
    places = np.searchsorted(region_pixels, pixels)
    is_there = places < len(region_pixels)
    is_there[is_there] = region_pixels[places[is_there]] == pixels[is_there]
    return places[is_there].astype(np.int64), shares[is_there]
