"""A probability map of the sky as cells of any HEALPix order."""

from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from skytiles.sphere.healpix_door import MAX_ORDER

Ints = NDArray[np.int64]
Floats = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class SkyMap:
    """Cells that do not overlap, in ascending order of their place on the NESTED curve.

    What the cells do not cover has no probability. Probabilities sum to one;
    `total_probability` is their sum as read.
    """

    orders: Ints
    pixels: Ints
    probabilities: Floats
    total_probability: float = 1.0
    # DISTMU, DISTSIGMA, DISTNORM of the cells, where the file has them.
    distances: dict[str, Floats] = field(default_factory=dict)
    # Keywords of the file that say what it is: date, object, instrument.
    keywords: dict[str, str | float | int | bool] = field(default_factory=dict)
    notes: tuple[str, ...] = ()

    @property
    def n_cells(self) -> int:
        """Number of cells."""
        return len(self.pixels)

    @property
    def max_order(self) -> int:
        """Order of the finest cell."""
        return int(self.orders.max(initial=0))

    @property
    def starts(self) -> Ints:
        """First pixel of each cell at the finest order there is."""
        return np.asarray(self.pixels << 2 * (MAX_ORDER - self.orders))

    @property
    def ends(self) -> Ints:
        """One past the last pixel of each cell at the finest order there is."""
        return np.asarray((self.pixels + 1) << 2 * (MAX_ORDER - self.orders))

    @property
    def densities(self) -> Floats:
        """Probability per share of the sky: 1 everywhere for a flat map."""
        return self.probabilities * 12.0 * 4.0 ** self.orders.astype(np.float64)

    def at_most_order(self, order: int) -> "SkyMap":
        """The map with cells finer than an order summed into pixels of that order."""
        if self.max_order <= order:
            return self
        # Cells stand in NESTED order, so those of one pixel are neighbours and stay in order.
        drops = np.maximum(self.orders - order, 0)
        pixels, orders = self.pixels >> 2 * drops, np.minimum(self.orders, order)
        is_first = np.concatenate([[True], (np.diff(pixels) != 0) | (np.diff(orders) != 0)])
        firsts = np.flatnonzero(is_first)
        return SkyMap(
            orders=orders[firsts],
            pixels=pixels[firsts],
            probabilities=np.add.reduceat(self.probabilities, firsts),
            total_probability=self.total_probability,
        )
