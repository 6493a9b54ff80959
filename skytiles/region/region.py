"""The region of a campaign: a probability for each pixel of one working order."""

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

Ints = NDArray[np.int64]
Floats = NDArray[np.float64]


@dataclass(frozen=True, eq=False)
class Region:
    """Pixels inside the 99.9 % credible area; the rest is `outside`, never dropped silently.

    pixels (p,) NESTED, ascending, of the working order; probabilities (p,);
    sum(probabilities) + outside == 1. Areas and peak come from the finest cells there are.
    """

    order: int
    pixels: Ints
    probabilities: Floats
    outside: float
    area_deg2: dict[str, float]
    peak_ra_deg: float
    peak_dec_deg: float
    # As read, before normalising.
    total_probability: float = 1.0
    # How well the constraint that fits least agrees with the others: 1 is what unrelated
    # directions have on average, below 0.01 they contradict each other; None for a single one.
    overlap: float | None = None
    notes: tuple[str, ...] = ()

    @property
    def n_pixels(self) -> int:
        """Number of pixels of the working region."""
        return len(self.pixels)


def describe_region(region: Region) -> dict[str, Any]:
    """What the command `region --json` prints.

    Parameters
    ----------
    region : Region    the region

    Returns
    -------
    dict    area_deg2, peak, order, n_pixels, outside, total_probability, overlap, notes

    Source: our own.
    """
    return {
        "area_deg2": dict(region.area_deg2),
        "peak": {"ra_deg": region.peak_ra_deg, "dec_deg": region.peak_dec_deg},
        "order": region.order,
        "n_pixels": region.n_pixels,
        "outside": region.outside,
        "total_probability": region.total_probability,
        "overlap": region.overlap,
        "notes": list(region.notes),
    }
