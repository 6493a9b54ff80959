"""Sums over the pixels under each tile, and which tiles share pixels."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt
from scipy import sparse

from skytiles.planner.tiles_to_plan import PlannerTiles

Floats = npt.NDArray[np.float64]
Ints = npt.NDArray[np.int64]


class TileSums:
    """Sparse incidence of tiles and pixels.

    Parameters
    ----------
    tiles : PlannerTiles
    n_pixels : int    of the region
    """

    def __init__(self, tiles: PlannerTiles, n_pixels: int) -> None:
        shape = (tiles.n_tiles, n_pixels)
        self._by_tile = sparse.csr_matrix((tiles.fractions, tiles.indices, tiles.indptr), shape)
        self._by_pixel = self._by_tile.T.tocsr()
        self._tiles = tiles
        self._overlaps: dict[int, Ints] = {}

    def sums(self, values: Floats) -> Floats:
        """Sum over the pixels under every tile, each times its covered share.

        Parameters
        ----------
        values : (p, n) float

        Returns
        -------
        (k, n) float
        """
        return np.asarray(self._by_tile @ values)

    def sum_of(self, tile: int, values: Floats) -> Floats:
        """Sum over the pixels under one tile, each times its covered share.

        Parameters
        ----------
        tile : int              position of the tile
        values : (p, n) float

        Returns
        -------
        (n,) float
        """
        total: Floats = self._tiles.fractions_of(tile) @ values[self._tiles.pixels_of(tile)]
        return total

    def overlapping(self, tile: int) -> Ints:
        """Tiles of any grid that share a pixel with one tile, itself among them.

        Parameters
        ----------
        tile : int    position of the tile

        Returns
        -------
        (m,) int    positions, ascending
        """
        if tile not in self._overlaps:
            rows = self._by_pixel[self._tiles.pixels_of(tile)]
            self._overlaps[tile] = np.unique(rows.indices).astype(np.int64)
        return self._overlaps[tile]
