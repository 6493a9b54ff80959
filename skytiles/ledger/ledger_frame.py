"""What the ledger needs to know of one frame."""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from skytiles.errors import LedgerError

Floats = npt.NDArray[np.float64]

# Beyond this many s below the limit nothing is found: many shallow frames are not a deep one.
CUT_S = 3.0
SATURATION_S_MAG = 0.2


@dataclass(frozen=True)
class LedgerFrame:
    """One counted frame: time since the event, field, examination and effective limit.

    `m_eff` is None without a limit; `completeness` is c of the way it was examined;
    `saturation_mag` matters only where a program examined the frame and `masks_saturated`.
    """

    key: int
    t_d: float
    instrument: int | str
    ra_deg: float
    dec_deg: float
    field_deg: float
    is_examined: bool
    completeness: float
    m_eff: float | None
    s: float = 0.2
    saturation_mag: float | None = None
    masks_saturated: bool = False
    band: str = "clear"

    def __post_init__(self) -> None:
        place = (self.t_d, self.ra_deg, self.dec_deg, self.field_deg)
        if not all(map(math.isfinite, place)) or self.field_deg <= 0.0:
            raise LedgerError(
                f"frame {self.key} with time, centre and field {place}",
                "finite numbers and a field above 0 degrees",
                "correct the frame",
            )
        if not 0.0 <= self.completeness <= 1.0 or not self.s > 0.0:
            raise LedgerError(
                f"frame {self.key} with completeness {self.completeness} and s {self.s}",
                "completeness from 0 to 1, s above 0",
                "correct the examination",
            )
        if self.m_eff is not None and not math.isfinite(self.m_eff):
            raise LedgerError(
                f"frame {self.key} with limit {self.m_eff}", "a finite magnitude", "leave it out"
            )

    @property
    def is_look(self) -> bool:
        """Whether it can find anything: examined, with a limit."""
        return self.is_examined and self.m_eff is not None


def detection_efficiency(
    magnitudes: npt.ArrayLike,
    m_eff: npt.ArrayLike,
    *,
    s: float,
    saturation_mag: float | None = None,
) -> Floats:
    """Chance that an examined frame shows a source, by its magnitude.

    Parameters
    ----------
    magnitudes : (...) float         of the source; +inf: no light
    m_eff : (...) float              effective limit of the frame, broadcast against magnitudes
    s : float                        softness of the limit, magnitudes
    saturation_mag : float or None   brighter sources are masked; None: nothing is masked

    Returns
    -------
    (...) float    0..1

    Formula: eps = 1 / (1 + exp((m - m_eff) / s)) up to m_eff + 3 s, else 0.

    Source: DEVELOPERS.md, ledger; the logistic curve is that of Veres & Chesley 2017.
    """
    mags, limits = np.asarray(magnitudes, np.float64), np.asarray(m_eff, np.float64)
    is_within = mags <= limits + CUT_S * s
    # No light stays no light: the cut, not the exponent, decides about +inf.
    depth = np.where(is_within, (mags - limits) / s, 0.0)
    found = np.where(is_within, 1.0 / (1.0 + np.exp(depth)), 0.0)
    if saturation_mag is not None:
        masked = np.clip((saturation_mag - mags) / SATURATION_S_MAG, -700.0, 700.0)
        found = found / (1.0 + np.exp(masked))
    return found


def frame_efficiency(frame: LedgerFrame, magnitudes: npt.ArrayLike) -> Floats:
    """Chance that one frame shows a source, were all of the pixel under it.

    Parameters
    ----------
    frame : LedgerFrame            with a limit
    magnitudes : (...) float       of the source at the frame's time in its band

    Returns
    -------
    (...) float    0..1, without the completeness of the examination
    """
    assert frame.m_eff is not None, "only frames with a limit find anything"
    saturation_mag = frame.saturation_mag if frame.masks_saturated else None
    return detection_efficiency(magnitudes, frame.m_eff, s=frame.s, saturation_mag=saturation_mag)
