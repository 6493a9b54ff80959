"""Coverage maps: patches of sky as HEALPix cells (IVOA MOC), flat inside, nothing said outside."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from skytiles.errors import AlertError
from skytiles.sphere.healpix_door import MAX_ORDER, n_pixels
from skytiles.sphere.solid_angle import SKY_DEG2

Ints = NDArray[np.int64]


@dataclass(frozen=True, eq=False)
class Moc:
    """ranges (m, 2): half open, of pixels at order 29, ascending, apart from each other."""

    # The finest order that the map can tell apart; its cells may all be coarser.
    order: int
    ranges: Ints

    @property
    def n_covered(self) -> int:
        """Number of covered pixels of order 29."""
        return int((self.ranges[:, 1] - self.ranges[:, 0]).sum())

    @property
    def sky_share(self) -> float:
        """Share of the whole sky that is covered, 0..1."""
        return self.n_covered / n_pixels(MAX_ORDER)

    @property
    def area_deg2(self) -> float:
        """Covered area, square degrees."""
        return float(self.sky_share * SKY_DEG2)

    def complement(self) -> "Moc":
        """The rest of the sky."""
        edges = np.concatenate([[0], self.ranges.reshape(-1), [n_pixels(MAX_ORDER)]])
        gaps = edges.reshape(-1, 2).astype(np.int64)
        return Moc(self.order, gaps[gaps[:, 1] > gaps[:, 0]])

    def cells(self) -> tuple[Ints, Ints]:
        """Orders and pixels of the fewest cells that cover the same sky, coarse ones first."""
        orders: list[Ints] = []
        pixels: list[Ints] = []
        rest = self.ranges
        for order in range(MAX_ORDER + 1):
            found, rest = _whole_cells(rest, order)
            orders.append(np.full(len(found), order, dtype=np.int64))
            pixels.append(found)
        return np.concatenate(orders), np.concatenate(pixels)

    def to_ascii(self) -> str:
        """The map as a line of text in canonical form, such as 1/1 2 4 2/12-14 8/."""
        orders, pixels = self.cells()
        named = np.unique(np.append(orders, self.order))
        return " ".join(
            f"{order}/" + " ".join(_runs(np.sort(pixels[orders == order]))) for order in named
        )


def _whole_cells(ranges: Ints, order: int) -> tuple[Ints, Ints]:
    """Pixels of an order that lie wholly in the ranges, and what is left of the ranges."""
    shift = 2 * (MAX_ORDER - order)
    firsts, ends = -((-ranges[:, 0]) >> shift), ranges[:, 1] >> shift
    is_whole = ends > firsts
    counts = (ends - firsts)[is_whole]
    places = np.arange(int(counts.sum())) - np.repeat(np.cumsum(counts) - counts, counts)
    pixels = np.repeat(firsts[is_whole], counts) + places
    before = np.stack([ranges[is_whole, 0], firsts[is_whole] << shift], axis=-1)
    after = np.stack([ends[is_whole] << shift, ranges[is_whole, 1]], axis=-1)
    rest = np.concatenate([ranges[~is_whole], before, after])
    return pixels, rest[rest[:, 1] > rest[:, 0]]


def _runs(pixels: Ints) -> list[str]:
    """Numbers in words, neighbours as first-last."""
    if len(pixels) == 0:
        return []
    breaks = np.flatnonzero(np.diff(pixels) != 1) + 1
    return [
        str(run[0]) if len(run) == 1 else f"{run[0]}-{run[-1]}" for run in np.split(pixels, breaks)
    ]


def moc_from_ranges(order: int, ranges: ArrayLike) -> Moc:
    """A coverage map from ranges in any sequence, overlapping or not.

    Parameters
    ----------
    order : int    finest order that the map can tell apart, 0..29
    ranges : (m, 2) int    half open, pixels of order 29, NESTED

    Returns
    -------
    Moc    AlertError for ranges that are none or leave the sky

    Source: IVOA MOC 2.0, section 4.3.1 (RANGE).
    """
    given = np.asarray(ranges, dtype=np.int64).reshape(-1, 2)
    is_good = (
        (given[:, 0] >= 0) & (given[:, 0] < given[:, 1]) & (given[:, 1] <= n_pixels(MAX_ORDER))
    )
    if not is_good.all():
        first = given[np.flatnonzero(~is_good)[0]]
        raise AlertError(
            given=f"its coverage map has a range of cells from {first[0]} to {first[1]}",
            allowed="ranges inside 0 .. 12 x 4^29, each ending after its start",
            advice="fetch the coverage map again; it is damaged",
        )
    return Moc(order, _merged(given))


def moc_from_cells(order: int, orders: ArrayLike, pixels: ArrayLike) -> Moc:
    """A coverage map from cells.

    Parameters
    ----------
    order : int    finest order that the map can tell apart, 0..29
    orders : (c,) int    order of each cell, 0..29
    pixels : (c,) int    NESTED number of each cell at its order

    Returns
    -------
    Moc    AlertError for cells that do not exist

    Source: IVOA MOC 2.0, section 4.1.
    """
    cell_orders, cells = np.asarray(orders, dtype=np.int64), np.asarray(pixels, dtype=np.int64)
    is_order = (cell_orders >= 0) & (cell_orders <= MAX_ORDER)
    last = 12 << 2 * np.clip(cell_orders, 0, MAX_ORDER)
    is_good = is_order & (cells >= 0) & (cells < last)
    if not is_good.all():
        place = int(np.flatnonzero(~is_good)[0])
        raise AlertError(
            given=f"its coverage map has a cell {cells[place]} of order {cell_orders[place]}",
            allowed="order 0 to 29 and cells from 0 to 12 x 4^order - 1",
            advice="fetch the coverage map again; it is damaged",
        )
    shifts = 2 * (MAX_ORDER - cell_orders)
    return Moc(order, _merged(np.stack([cells << shifts, (cells + 1) << shifts], axis=-1)))


def _merged(ranges: Ints) -> Ints:
    """Ranges in ascending order, those that touch or overlap made one."""
    if len(ranges) == 0:
        return ranges.reshape(0, 2)
    sequence = ranges[np.argsort(ranges[:, 0], kind="stable")]
    reached = np.maximum.accumulate(sequence[:, 1])
    is_new = np.concatenate([[True], sequence[1:, 0] > reached[:-1]])
    firsts = np.flatnonzero(is_new)
    lasts = np.append(firsts[1:] - 1, len(sequence) - 1)
    return np.stack([sequence[firsts, 0], reached[lasts]], axis=-1)
