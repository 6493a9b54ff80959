"""One thing that the light could do: first light, rise to the peak, decline."""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from skytiles.errors import SourceError

Floats = npt.NDArray[np.float64]

# The brightness stands still this long after first light, then follows log time.
FIRST_PLATEAU_D = 0.01
# A light that always shone: first light this long before the event.
ALWAYS_D = -1.0e9


@dataclass(frozen=True)
class Hypothesis:
    """Weight, time of first light after the event, and magnitudes from then on."""

    label: str
    weight: float
    first_light_d: float
    m_first: float
    m_peak: float
    rise_d: float
    slope_mag_per_d: float = 0.0

    def __post_init__(self) -> None:
        numbers = (self.first_light_d, self.m_first, self.m_peak, self.slope_mag_per_d)
        if not all(map(math.isfinite, numbers)):
            raise SourceError(
                f"hypothesis {self.label!r} with {numbers}", "finite numbers", "correct it"
            )
        if not 0.0 <= self.weight <= 1.0:
            raise SourceError(
                f"hypothesis {self.label!r} with weight {self.weight}", "0 to 1", "correct it"
            )
        if not FIRST_PLATEAU_D < self.rise_d < math.inf:
            raise SourceError(
                f"hypothesis {self.label!r} with a rise of {self.rise_d} d",
                f"more than {FIRST_PLATEAU_D} d",
                "give the time from first light to the peak in days",
            )


def magnitudes(hypothesis: Hypothesis, t_d: npt.ArrayLike, band: str) -> Floats:
    """Magnitudes of one hypothesis at times after the event, before any offset.

    Parameters
    ----------
    hypothesis : Hypothesis
    t_d : (f,) float    days since the event
    band : str          band of the frame; intrinsic colours are 0, so it changes nothing here

    Returns
    -------
    (f,) float    Vega magnitudes; +inf before first light

    Source: DEVELOPERS.md, source model: constant for 0.01 d, linear in the logarithm of the time
    since first light up to the peak, then a constant slope.
    """
    since_d = np.asarray(t_d, dtype=np.float64) - hypothesis.first_light_d
    clipped_d = np.clip(since_d, FIRST_PLATEAU_D, hypothesis.rise_d)
    climbed = np.log(clipped_d / FIRST_PLATEAU_D) / math.log(hypothesis.rise_d / FIRST_PLATEAU_D)
    rising = hypothesis.m_first + (hypothesis.m_peak - hypothesis.m_first) * climbed
    declined = hypothesis.slope_mag_per_d * np.maximum(since_d - hypothesis.rise_d, 0.0)
    return np.where(since_d >= 0.0, rising + declined, np.inf)
