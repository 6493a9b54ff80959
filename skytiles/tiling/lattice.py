"""The lattice of tiles of one size over the whole sky, in rows of declination.

Every point of the sky lies in one cell (a row, and a range of right ascension in it), and each
cell lies wholly inside its tile: so there are no gaps, at the poles and across RA 0 as anywhere.
"""

import math
from dataclasses import dataclass
from functools import lru_cache

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skytiles.sphere.angles import wrap_ra_deg

Ints = NDArray[np.int64]
Floats = NDArray[np.float64]

# Cells are made this much smaller than they could be, so that rounding opens no gap.
_SLACK = 1e-9
# So many more tiles than needed are tried in a row; wide low tiles want them.
_MORE_TILES = 400


@dataclass(frozen=True, eq=False)
class Lattice:
    """Rows from south to north: lower edges, tile centres, number of tiles in each.

    edges_deg (r + 1,), decs_deg (r,), counts (r,).
    """

    width_deg: float
    height_deg: float
    edges_deg: Floats
    decs_deg: Floats
    counts: Ints

    @property
    def firsts(self) -> Ints:
        """Number of the first cell of each row (r + 1,)."""
        return np.concatenate([[0], np.cumsum(self.counts)])

    def cells_at(self, ras_deg: ArrayLike, decs_deg: ArrayLike) -> Ints:
        """Numbers of the cells that hold the positions."""
        rows = np.searchsorted(self.edges_deg, decs_deg, side="right") - 1
        rows = np.clip(rows, 0, len(self.counts) - 1)
        counts = self.counts[rows]
        columns = np.rint(wrap_ra_deg(ras_deg) * counts / 360.0).astype(np.int64) % counts
        return np.asarray(self.firsts[rows] + columns)

    def centres_deg(self, cells: Ints) -> tuple[Floats, Floats]:
        """Right ascensions and declinations of the tiles of cells."""
        firsts = self.firsts
        rows = np.searchsorted(firsts, cells, side="right") - 1
        return (cells - firsts[rows]) * (360.0 / self.counts[rows]), self.decs_deg[rows]


@lru_cache(maxsize=64)
def make_lattice(width_deg: float, height_deg: float) -> Lattice:
    """The lattice of tiles of one size.

    Parameters
    ----------
    width_deg, height_deg : float    sides of a tile, degrees, up to 60

    Returns
    -------
    Lattice    rows symmetrical about the equator

    Source: our own; a tile is a gnomonic rectangle (four great circles), north up.
    """
    north = _northern_rows(math.radians(width_deg), math.radians(height_deg))
    tops = [row[0] for row in north]
    decs = [row[1] for row in north]
    counts = [row[2] for row in north]
    # The first row lies across the equator; the others have a twin in the south.
    return Lattice(
        width_deg=width_deg,
        height_deg=height_deg,
        edges_deg=np.degrees([-top for top in tops[::-1]] + tops),
        decs_deg=np.degrees([-dec for dec in decs[:0:-1]] + decs),
        counts=np.array(counts[:0:-1] + counts, dtype=np.int64),
    )


def _northern_rows(width: float, height: float) -> list[tuple[float, float, int]]:
    """Top edge, tile centre and number of tiles of each row from the equator on, radians."""
    rows = [_best_row(0.0, 0.0, least=_n_tiles(0.0, 0.0, width), height=height)]
    while (edge := rows[-1][0]) < math.pi / 2.0:
        rows.append(_row_above(edge, width, height))
    return rows


def _row_above(edge: float, width: float, height: float) -> tuple[float, float, int]:
    if math.pi / 2.0 - edge <= min(width, height) / 2.0 * (1.0 - _SLACK):
        # What is left round the pole fits into one tile.
        return math.pi / 2.0, math.pi / 2.0, 1
    dec = min(edge + height / 2.0 * (1.0 - _SLACK), math.pi / 2.0 - 1e-6)
    return _best_row(edge, dec, least=_n_tiles(edge, dec, width), height=height)


def _n_tiles(edge: float, dec: float, width: float) -> int:
    """Tiles that a row needs so that each covers its cell at the edge nearer to the equator.

    A point at hour offset a and declination e is at x = sin a / (sin d tan e + cos d cos a) on
    the plane of the tile; x = tan(w / 2) is solved for a.
    """
    half = math.tan(width / 2.0) * (1.0 - _SLACK)
    slope = half * math.cos(dec)
    sine = half * math.sin(dec) * math.tan(edge) / math.hypot(1.0, slope)
    # Three at least: a cell must lie on the tile's side of the pole.
    reach = math.pi if sine >= 1.0 else math.atan(slope) + math.asin(sine)
    return max(3, math.ceil(math.pi / reach))


def _best_row(edge: float, dec: float, *, least: int, height: float) -> tuple[float, float, int]:
    """The row with the most sky for each tile: more tiles make narrower, higher cells.

    On the plane of the tile the circle of declination e stands at tan(e) / cos(a) = tan(d + y),
    nearest to the tile's upper edge at the ends of the cell.
    """
    counts = least + np.arange(_MORE_TILES)
    upper = dec + height / 2.0
    tops = np.full(len(counts), math.pi / 2.0)
    if upper < math.pi / 2.0:
        tops = np.arctan(np.cos(np.pi / counts) * math.tan(upper)) * (1.0 - _SLACK)
    best = int(np.argmax((np.sin(tops) - math.sin(edge)) / counts))
    return float(tops[best]), dec, int(counts[best])
