"""Positions of an older or newer equinox brought to J2000."""

import numpy as np
from numpy.typing import NDArray

Floats = NDArray[np.float64]

_ARCSEC_RAD = np.pi / 648000.0


def precession_from_j2000(equinox_year: float) -> Floats:
    """Rotation of vectors from the mean equator and equinox of J2000 to those of a year.

    Parameters
    ----------
    equinox_year : float    Julian epoch, such as 2027.5

    Returns
    -------
    (3, 3) float    matrix; its transpose leads back to J2000

    Source: IAU 1976 angles, Lieske et al. 1977, A&A 58, 1 (as in Meeus 1998, eq. 21.3);
    0.15 arcsec from modern precession until 2030.
    """
    t = (equinox_year - 2000.0) / 100.0
    zeta = (2306.2181 + (0.30188 + 0.017998 * t) * t) * t * _ARCSEC_RAD
    z = (2306.2181 + (1.09468 + 0.018203 * t) * t) * t * _ARCSEC_RAD
    theta = (2004.3109 - (0.42665 + 0.041833 * t) * t) * t * _ARCSEC_RAD
    return _about_pole(z) @ _about_node(theta) @ _about_pole(zeta)


def _about_pole(angle_rad: float) -> Floats:
    """Adds an angle to right ascension."""
    c, s = np.cos(angle_rad), np.sin(angle_rad)
    return np.array([[c, -s, 0.0], [s, c, 0.0], [0.0, 0.0, 1.0]])


def _about_node(angle_rad: float) -> Floats:
    """Tilts the pole along the meridian of right ascension zero."""
    c, s = np.cos(angle_rad), np.sin(angle_rad)
    return np.array([[c, 0.0, -s], [0.0, 1.0, 0.0], [s, 0.0, c]])
