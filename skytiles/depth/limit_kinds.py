"""What a reported limit means, and the magnitude at which half of the sources are found."""

from __future__ import annotations

import math
from collections.abc import Callable

from skytiles.depth.depth_error import DepthError

KIND_50_PERCENT = "50 %"
KIND_5_SIGMA = "5 sigma"
KIND_3_SIGMA = "3 sigma"
KIND_90_PERCENT = "90 %"
KIND_FAINTEST_STAR = "faintest star seen"
KIND_ESTIMATE = "estimate"

# 2.5 log10(5/3): from a 3 sigma to a 5 sigma limit where the sky sets the noise.
_SIGMA_3_TO_5_MAG = 0.55
# People report the faintest star, and we guess the depth, on the hopeful side.
_CAUTION_MAG = 0.5
_LN_9 = math.log(9.0)

_M50: dict[str, Callable[[float, float], float]] = {
    KIND_50_PERCENT: lambda limit_mag, s: limit_mag,
    KIND_5_SIGMA: lambda limit_mag, s: limit_mag,
    KIND_3_SIGMA: lambda limit_mag, s: limit_mag - _SIGMA_3_TO_5_MAG,
    KIND_90_PERCENT: lambda limit_mag, s: limit_mag + s * _LN_9,
    KIND_FAINTEST_STAR: lambda limit_mag, s: limit_mag - _CAUTION_MAG,
    KIND_ESTIMATE: lambda limit_mag, s: limit_mag - _CAUTION_MAG,
}
LIMIT_KINDS = tuple(_M50)

SHARP_S_MAG = 0.2
SOFT_S_MAG = 0.4
WAY_EYEPIECE = "eyepiece"


def default_s_mag(limit_kind: str, *, examined_way: str = "") -> float:
    """Softness of the detection curve where the observer states none.

    Parameters
    ----------
    limit_kind : str      one of LIMIT_KINDS
    examined_way : str    how the frame was examined; "eyepiece" is soft

    Returns
    -------
    float    s of 1/(1 + exp((m - m50)/s)), magnitudes

    Raises
    ------
    DepthError    for an unknown kind

    Source: the ledger's definition (DEVELOPERS.md); an assumption, editable.
    """
    _check_kind(limit_kind)
    is_soft = limit_kind == KIND_FAINTEST_STAR or examined_way == WAY_EYEPIECE
    return SOFT_S_MAG if is_soft else SHARP_S_MAG


def m50_mag(limit_mag: float, limit_kind: str, *, s: float = SHARP_S_MAG) -> float:
    """Magnitude at which half of the sources are found, from a reported limit.

    Parameters
    ----------
    limit_mag : float     the limit as reported, magnitudes
    limit_kind : str      what it means: one of LIMIT_KINDS
    s : float             softness of the detection curve, magnitudes

    Returns
    -------
    float    magnitudes

    Raises
    ------
    DepthError    for an unknown kind

    Formula: 50 % and 5 sigma: m; 3 sigma: m - 0.55; 90 %: m + s ln 9; faintest star and estimate:
    m - 0.5.

    Source: logistic detection curve of Veres & Chesley 2017 (its 90 % point lies s ln 9 above
    m50); 3 sigma to 5 sigma is 2.5 log10(5/3); half a magnitude of caution is an assumption.
    """
    _check_kind(limit_kind)
    return _M50[limit_kind](limit_mag, s)


def effective_limit_mag(m50: float, reference_mag: float | None = None) -> float:
    """Depth that counts: a new source is found only against what shows that it was not there.

    Parameters
    ----------
    m50 : float                     50 % limit of the frame, magnitudes
    reference_mag : float or None   depth of the reference it was compared with; None: unknown,
                                    taken as deep enough

    Returns
    -------
    float    the brighter of the two, magnitudes
    """
    return m50 if reference_mag is None else min(m50, reference_mag)


def limit_from_star_mag(star_mag: float, *, signal_to_noise: float) -> float:
    """Five sigma limit of an image from one star measured on it.

    Parameters
    ----------
    star_mag : float          magnitude of the star
    signal_to_noise : float   its measured signal-to-noise ratio, > 0

    Returns
    -------
    float    magnitudes

    Raises
    ------
    DepthError    when the ratio is not a positive number

    Formula: m_limit = m_star + 2.5 log10(snr / 5).

    Source: definition; exact where the sky, not the star, sets the noise.
    """
    if not signal_to_noise > 0.0:
        raise DepthError(
            f"signal-to-noise {signal_to_noise}",
            "a number above 0",
            "measure the star's signal-to-noise ratio on the image",
        )
    return star_mag + 2.5 * math.log10(signal_to_noise / 5.0)


def _check_kind(limit_kind: str) -> None:
    if limit_kind not in _M50:
        raise DepthError(
            f"limit kind {limit_kind!r}",
            ", ".join(LIMIT_KINDS),
            "say what the reported limit means",
        )
