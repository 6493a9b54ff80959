"""The tiles of all grids and the pixels of the region under each."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from skytiles.errors import PlannerError

Floats = npt.NDArray[np.float64]
Ints = npt.NDArray[np.int64]


@dataclass(frozen=True, eq=False)
class PlannerTiles:
    """k tiles of all grids together; equal sides mean the same grid.

    `indices[indptr[j]:indptr[j + 1]]` are the positions, in the region's pixel arrays, of the
    pixels under tile j, `fractions` the covered share of each (1 but for tiny tiles), `seats` how
    many may hold the tile at once.
    """

    keys: Ints
    ras_deg: Floats
    decs_deg: Floats
    widths_deg: Floats
    heights_deg: Floats
    indptr: Ints
    indices: Ints
    fractions: Floats
    seats: Ints

    def __post_init__(self) -> None:
        n_tiles = len(self.keys)
        lengths = {len(self.ras_deg), len(self.decs_deg), len(self.widths_deg)}
        lengths |= {len(self.heights_deg), len(self.seats), len(self.indptr) - 1}
        if lengths != {n_tiles} or len(self.indices) != len(self.fractions):
            raise PlannerError(
                f"tile arrays of lengths {sorted(lengths | {n_tiles})}",
                "one entry for each tile",
                "build them with make_planner_tiles",
            )

    @property
    def n_tiles(self) -> int:
        """Number of tiles of all grids."""
        return len(self.keys)

    def pixels_of(self, tile: int) -> Ints:
        """Positions of the pixels under one tile.

        Parameters
        ----------
        tile : int    position of the tile, not its key

        Returns
        -------
        (n,) int    positions in the region's pixel arrays
        """
        return self.indices[self.indptr[tile] : self.indptr[tile + 1]]

    def fractions_of(self, tile: int) -> Floats:
        """Covered share of each pixel under one tile.

        Parameters
        ----------
        tile : int    position of the tile, not its key

        Returns
        -------
        (n,) float    0..1, in the order of `pixels_of`
        """
        return self.fractions[self.indptr[tile] : self.indptr[tile + 1]]

    def grid_of(self, width_deg: float, height_deg: float) -> Ints:
        """Positions of the tiles of one grid.

        Parameters
        ----------
        width_deg, height_deg : float    sides of the grid's tiles, degrees

        Returns
        -------
        (n,) int    positions, ascending
        """
        is_same = np.isclose(self.widths_deg, width_deg, rtol=1e-6, atol=0.0)
        is_same &= np.isclose(self.heights_deg, height_deg, rtol=1e-6, atol=0.0)
        return np.flatnonzero(is_same)


def make_planner_tiles(
    keys: npt.ArrayLike,
    covered: Sequence[tuple[npt.ArrayLike, npt.ArrayLike]],
    *,
    ras_deg: npt.ArrayLike,
    decs_deg: npt.ArrayLike,
    widths_deg: npt.ArrayLike,
    heights_deg: npt.ArrayLike,
    seats: npt.ArrayLike | None = None,
) -> PlannerTiles:
    """Tiles for the planner from what lies under each.

    Parameters
    ----------
    keys : (k,) int                           the caller's numbers for the tiles
    covered : (k,) pairs                      (pixel positions (n,), fractions (n,)) of each tile
    ras_deg, decs_deg : (k,) float            centres, ICRS degrees
    widths_deg, heights_deg : (k,) float      sides, degrees
    seats : (k,) int or None                  holders allowed at once; None: one

    Returns
    -------
    PlannerTiles
    """
    keys = np.asarray(keys, dtype=np.int64)
    counts = [len(np.asarray(indices)) for indices, _ in covered]
    return PlannerTiles(
        keys=keys,
        ras_deg=np.asarray(ras_deg, dtype=np.float64),
        decs_deg=np.asarray(decs_deg, dtype=np.float64),
        widths_deg=np.asarray(widths_deg, dtype=np.float64),
        heights_deg=np.asarray(heights_deg, dtype=np.float64),
        indptr=np.concatenate([[0], np.cumsum(counts)]).astype(np.int64),
        indices=_joined([indices for indices, _ in covered]).astype(np.int64),
        fractions=_joined([fractions for _, fractions in covered]),
        seats=np.ones(len(keys), np.int64) if seats is None else np.asarray(seats, np.int64),
    )


def _joined(parts: Sequence[npt.ArrayLike]) -> Floats:
    if not parts:
        return np.empty(0)
    return np.concatenate([np.asarray(part, dtype=np.float64) for part in parts])
