"""The tiles of one frame size over a region."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from skytiles.errors import FootprintError
from skytiles.region.region import Region
from skytiles.sphere.healpix_door import pixel_centres, pixel_side_deg
from skytiles.tiling.footprint import Footprint, rectangle_footprint
from skytiles.tiling.lattice import Lattice, make_lattice
from skytiles.tiling.pixels_under import pixels_under_tiles

Ints = NDArray[np.int64]
Floats = NDArray[np.float64]

# A tile with less than this of the region's probability is not worth a number.
LEAST_PROBABILITY = 1e-5
# Pixels are cut until a tile holds this many parts, while all parts are at most so many.
_PARTS_PER_SIDE = 8.0
_MOST_PARTS = 1_000_000


@dataclass(frozen=True, eq=False)
class TileGrid:
    """Tiles by row of declination, then right ascension; arrays (k,)."""

    ras_deg: Floats
    decs_deg: Floats
    probabilities: Floats
    width_deg: float
    height_deg: float
    # Tiles that would have been worth a number but were more than allowed.
    n_left_out: int = 0

    @property
    def n_tiles(self) -> int:
        """Number of tiles."""
        return len(self.ras_deg)


def tile_footprint(
    ra_deg: float, dec_deg: float, *, width_deg: float, height_deg: float
) -> Footprint:
    """The patch of sky of a tile: north up.

    Parameters
    ----------
    ra_deg, dec_deg : float    centre, degrees
    width_deg, height_deg : float    sides, degrees

    Returns
    -------
    Footprint    a rectangle

    Source: our definition (DEVELOPERS.md, regions and tiles).
    """
    return rectangle_footprint(
        ra_deg=ra_deg, dec_deg=dec_deg, width_deg=width_deg, height_deg=height_deg
    )


def lay_tiles(
    region: Region, *, width_deg: float, height_deg: float, max_tiles: int = 2000
) -> TileGrid:
    """Tiles of one size that cover a region.

    Parameters
    ----------
    region : Region    the region
    width_deg, height_deg : float    sides of a tile, degrees, 0.01 to 60
    max_tiles : int    the best so many are kept

    Returns
    -------
    TileGrid    tiles with at least 1e-5 of the probability; FootprintError for impossible sides

    Source: our definition (DEVELOPERS.md, regions and tiles).
    """
    for name, side in (("width_deg", width_deg), ("height_deg", height_deg)):
        if not 0.01 <= side <= 60.0:
            raise FootprintError(
                given=f"a tile with {name} = {side}",
                allowed="0.01 to 60 degrees",
                advice="check the field of view of the instrument",
            )
    lattice = make_lattice(width_deg, height_deg)
    order, parts, weights = _parts(region, min(width_deg, height_deg))
    cells = _touched_cells(lattice, order, parts)
    ras, decs = lattice.centres_deg(cells)
    probabilities = _tile_probabilities(
        lattice, ras, decs, order=order, parts=parts, weights=weights
    )
    worthy = np.flatnonzero(probabilities >= LEAST_PROBABILITY)
    kept = np.sort(worthy[np.argsort(-probabilities[worthy], kind="stable")[:max_tiles]])
    return TileGrid(
        ras_deg=ras[kept],
        decs_deg=decs[kept],
        probabilities=probabilities[kept],
        width_deg=width_deg,
        height_deg=height_deg,
        n_left_out=len(worthy) - len(kept),
    )


def tile_probabilities(
    region: Region, ras_deg: Floats, decs_deg: Floats, *, width_deg: float, height_deg: float
) -> Floats:
    """Probability under tiles that were laid before.

    Parameters
    ----------
    region : Region    any, not only the one that they were laid for
    ras_deg, decs_deg : (k,) float    centres, degrees
    width_deg, height_deg : float    sides of all of them, degrees

    Returns
    -------
    (k,) float    as lay_tiles counts them; 0 where nothing of the region is

    Source: our definition (DEVELOPERS.md, regions and tiles).
    """
    order, parts, weights = _parts(region, min(width_deg, height_deg))
    lattice = make_lattice(width_deg, height_deg)
    return _tile_probabilities(
        lattice, ras_deg, decs_deg, order=order, parts=parts, weights=weights
    )


def _parts(region: Region, side_deg: float) -> tuple[int, Ints, Floats]:
    """The region's pixels, cut where tiles are small: order, pixels and probabilities."""
    order = region.order
    n_parts = max(region.n_pixels, 1)
    while pixel_side_deg(order) > side_deg / _PARTS_PER_SIDE and 4 * n_parts <= _MOST_PARTS:
        order, n_parts = order + 1, 4 * n_parts
    cuts = 1 << 2 * (order - region.order)
    pixels = (region.pixels[:, None] * cuts + np.arange(cuts)).reshape(-1)
    return order, pixels, np.repeat(region.probabilities / cuts, cuts)


def _touched_cells(lattice: Lattice, order: int, pixels: Ints) -> Ints:
    """Cells of the lattice that hold a centre of the pixels or a point near their corners."""
    ras, decs = pixel_centres(order, pixels)
    # A pixel reaches 0.71 sides to its corners, a little more where it is drawn out.
    reach = 0.75 * pixel_side_deg(order)
    across = np.minimum(reach / np.maximum(np.cos(np.deg2rad(decs)), 1e-3), 180.0)
    offsets = ((0.0, 0.0), (1.0, 0.0), (-1.0, 0.0), (0.0, 1.0), (0.0, -1.0))
    touched = [
        lattice.cells_at(ras + east * across, np.clip(decs + north * reach, -90.0, 90.0))
        for east, north in offsets
    ]
    return np.unique(np.concatenate([np.unique(cells) for cells in touched]))


def _tile_probabilities(
    lattice: Lattice, ras_deg: Floats, decs_deg: Floats, *, order: int, parts: Ints, weights: Floats
) -> Floats:
    """Probability of all parts whose centre is under each tile."""
    lists = pixels_under_tiles(
        ras_deg,
        decs_deg,
        width_deg=lattice.width_deg,
        height_deg=lattice.height_deg,
        order=order,
    )
    places = np.minimum(np.searchsorted(parts, lists.pixels), len(parts) - 1)
    found = np.where(parts[places] == lists.pixels, weights[places], 0.0)
    reached = np.concatenate([[0.0], np.cumsum(found)])
    return np.asarray(reached[lists.starts[1:]] - reached[lists.starts[:-1]])
