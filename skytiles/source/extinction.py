"""Dust in each band: the ratio of its extinction to that in V."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from skytiles.errors import SourceError

Floats = npt.NDArray[np.float64]

R_V = 3.1

# a and b of A / A_V = a + b / R_V: table 3 of Cardelli, Clayton & Mathis 1989 (R and I are
# Johnson's).
_TABLE_3 = {
    "U": (0.9530, 1.9090),
    "B": (0.9982, 1.0495),
    "V": (1.0000, 0.0000),
    "R": (0.8686, -0.3660),
    "I": (0.6800, -0.6239),
    "J": (0.4008, -0.3679),
    "H": (0.2693, -0.2473),
    "K": (0.1615, -0.1483),
}
_TABLE_3_UM = dict(zip(_TABLE_3, (0.36, 0.44, 0.55, 0.70, 0.90, 1.25, 1.60, 2.20), strict=True))
# Effective wavelengths of the bands that are not in the table: from memory, after Fukugita et
# al. 1996, AJ 111, 1748 (g r i z) and the mission's pivot wavelength (G); clear is an assumption.
EFFECTIVE_UM = {
    "g": 0.4825,
    "r": 0.6261,
    "i": 0.7672,
    "z": 0.9097,
    "G": 0.622,
    "clear": 0.60,
}
BANDS = (*_TABLE_3, *EFFECTIVE_UM)
# A frame whose filter nobody named in these letters counts as taken without one.
DEFAULT_BAND = "clear"

# Coefficients of y = x - 1.82 from the constant up, for x from 1.1 to 3.3 per micrometre.
_OPTICAL_A = (1.0, 0.17699, -0.50447, -0.02427, 0.72085, 0.01979, -0.77530, 0.32999)
_OPTICAL_B = (0.0, 1.41338, 2.28305, 1.07233, -5.38434, -0.62251, 5.30260, -2.09002)


def known_band(band: str) -> str:
    """The band as this module names it.

    Parameters
    ----------
    band : str    as a frame or an instrument names it

    Returns
    -------
    str    "clear" for a name that is not in the table

    Source: our own.
    """
    return band if band in BANDS else DEFAULT_BAND


def extinction_ratio(band: str) -> float:
    """A_band / A_V.

    Parameters
    ----------
    band : str    U B V R I J H K g r i z G or clear; any other name counts as clear

    Returns
    -------
    float    no unit; 1 in V

    Source: Cardelli, Clayton & Mathis 1989, ApJ 345, 245, table 3 for U to K, else eq. 3 at the
    effective wavelength, with R_V = 3.1.
    """
    name = known_band(band)
    if name in _TABLE_3:
        a, b = _TABLE_3[name]
        return a + b / R_V
    return float(extinction_curve(1.0 / EFFECTIVE_UM[name]))


def effective_um(band: str) -> float:
    """Effective wavelength of a band.

    Parameters
    ----------
    band : str    any name that is not in the table counts as clear

    Returns
    -------
    float    micrometres

    Source: Cardelli, Clayton & Mathis 1989, table 3; the others as EFFECTIVE_UM says.
    """
    name = known_band(band)
    return _TABLE_3_UM[name] if name in _TABLE_3_UM else EFFECTIVE_UM[name]


def extinction_curve(wavenumbers_per_um: npt.ArrayLike, *, r_v: float = R_V) -> Floats:
    """A(x) / A_V by the law of the mean Galaxy.

    Parameters
    ----------
    wavenumbers_per_um : (n,) float    reciprocal wavelengths, per micrometre, 0.3..3.3
    r_v : float                        A_V / E(B-V)

    Returns
    -------
    (n,) float    no unit

    Raises
    ------
    SourceError    outside of the range

    Source: Cardelli, Clayton & Mathis 1989, ApJ 345, 245, eq. 2 (infrared) and 3 (optical).
    """
    x = np.asarray(wavenumbers_per_um, dtype=np.float64)
    if not np.all((x >= 0.3) & (x <= 3.3)):
        raise SourceError(f"wavenumbers {x}", "0.3 to 3.3 per micrometre", "use bands from U to K")
    infrared = (0.574 - 0.527 / r_v) * x**1.61
    y = x - 1.82
    optical = np.polynomial.polynomial.polyval(y, _OPTICAL_A)
    optical = optical + np.polynomial.polynomial.polyval(y, _OPTICAL_B) / r_v
    return np.where(x < 1.1, infrared, optical)
