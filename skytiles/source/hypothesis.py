"""One thing that the light could do: first light, rise to the peak, decline."""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from skytiles.errors import SourceError
from skytiles.source.extinction import effective_um

Floats = npt.NDArray[np.float64]

# The brightness stands still this long after first light, then follows log time.
FIRST_PLATEAU_D = 0.01
# A light that always shone: first light this long before the event. One that never shows: after.
ALWAYS_D = -1.0e9
NEVER_D = 1.0e9
# Where the slopes of a light that reddens are given: effective wavelengths of g and i.
_BLUE_UM, _RED_UM = 0.4825, 0.7672


@dataclass(frozen=True)
class Hypothesis:
    """Weight, time of first light after the event, and magnitudes from then on.

    `blue_slope_mag_per_d` is the slope in g where it differs from that in i (a light that reddens);
    in between it is linear in wavelength, and constant beyond.
    """

    label: str
    weight: float
    first_light_d: float
    m_first: float
    m_peak: float
    rise_d: float
    slope_mag_per_d: float = 0.0
    plateau_d: float = FIRST_PLATEAU_D
    blue_slope_mag_per_d: float | None = None

    def __post_init__(self) -> None:
        slopes = (self.slope_mag_per_d, self.blue_slope_mag_per_d or 0.0)
        numbers = (self.first_light_d, self.m_first, self.m_peak, *slopes)
        if not all(map(math.isfinite, numbers)):
            raise SourceError(
                f"hypothesis {self.label!r} with {numbers}", "finite numbers", "correct it"
            )
        if not 0.0 <= self.weight <= 1.0:
            raise SourceError(
                f"hypothesis {self.label!r} with weight {self.weight}", "0 to 1", "correct it"
            )
        if not 0.0 < self.plateau_d < self.rise_d < math.inf:
            raise SourceError(
                f"hypothesis {self.label!r} with a rise of {self.rise_d} d",
                f"more than {self.plateau_d} d, which is more than 0",
                "give the time from first light to the peak in days",
            )

    def slope_in(self, band: str) -> float:
        """Slope after the peak in one band.

        Parameters
        ----------
        band : str    any other name than those of the extinction table counts as clear

        Returns
        -------
        float    magnitudes per day
        """
        if self.blue_slope_mag_per_d is None:
            return self.slope_mag_per_d
        ends = (self.blue_slope_mag_per_d, self.slope_mag_per_d)
        return float(np.interp(effective_um(band), (_BLUE_UM, _RED_UM), ends))


def magnitudes(hypothesis: Hypothesis, t_d: npt.ArrayLike, band: str) -> Floats:
    """Magnitudes of one hypothesis at times after the event, before any offset.

    Parameters
    ----------
    hypothesis : Hypothesis
    t_d : (f,) float    days since the event
    band : str          band of the frame; colours at first light and at the peak are 0

    Returns
    -------
    (f,) float    Vega magnitudes; +inf before first light

    Source: DEVELOPERS.md, source model: constant for 0.01 d (or the stated plateau), linear in the
    logarithm of the time since first light up to the peak, then a constant slope.
    """
    since_d = np.asarray(t_d, dtype=np.float64) - hypothesis.first_light_d
    clipped_d = np.clip(since_d, hypothesis.plateau_d, hypothesis.rise_d)
    log_rise = math.log(hypothesis.rise_d / hypothesis.plateau_d)
    climbed = np.log(clipped_d / hypothesis.plateau_d) / log_rise
    rising = hypothesis.m_first + (hypothesis.m_peak - hypothesis.m_first) * climbed
    declined = hypothesis.slope_in(band) * np.maximum(since_d - hypothesis.rise_d, 0.0)
    is_lit = (since_d >= 0.0) & (hypothesis.first_light_d < NEVER_D)
    return np.where(is_lit, rising + declined, np.inf)
