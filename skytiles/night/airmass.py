"""How much air a line of sight crosses, and how far air bends it."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

Floats = npt.NDArray[np.float64]

# Beyond this true altitude below the horizon no formula here means anything.
_LOWEST_BENDING_DEG = -1.9


def airmass(altitudes_deg: Floats) -> Floats:
    """Relative optical air mass along a line of sight.

    Parameters
    ----------
    altitudes_deg : (n,) float    apparent altitude, degrees

    Returns
    -------
    (n,) float    no unit; inf below the horizon

    Formula: X = 1 / (sin h + 0.50572 (h + 6.07995)^-1.6364), h in degrees.

    Source: Kasten & Young 1989, Applied Optics 28, 4735, eq. 3. Error: 3e-4 at the zenith.
    """
    altitudes = np.asarray(altitudes_deg, dtype=float)
    risen = np.maximum(altitudes, 0.0)
    masses = 1.0 / (np.sin(np.radians(risen)) + 0.50572 * (risen + 6.07995) ** -1.6364)
    return np.where(altitudes >= 0.0, masses, np.inf)


def sky_airmass(altitudes_deg: Floats) -> Floats:
    """Length of the glowing layer along a line of sight: for sky brightness only.

    Parameters
    ----------
    altitudes_deg : (n,) float    degrees; taken as 0 below the horizon

    Returns
    -------
    (n,) float    no unit; 1 at the zenith, 5 at the horizon

    Formula: X = (1 - 0.96 sin^2 z)^-0.5, z the zenith distance.

    Source: Krisciunas & Schaefer 1991, PASP 103, 1033, eq. 3.
    """
    risen_rad = np.radians(np.maximum(np.asarray(altitudes_deg, dtype=float), 0.0))
    return np.asarray((1.0 - 0.96 * np.cos(risen_rad) ** 2) ** -0.5)


def refraction_deg(true_altitudes_deg: Floats) -> Floats:
    """How much higher air makes a direction appear, from its true altitude.

    Parameters
    ----------
    true_altitudes_deg : (n,) float    altitude without air, degrees

    Returns
    -------
    (n,) float    degrees, at 1010 hPa and 10 C; 0 far below the horizon

    Formula: R = 1.02 / tan(h + 10.3 / (h + 5.11)) arcmin, h in degrees.

    Source: Saemundsson 1986, Sky & Telescope 72, 70 (Meeus 1998, eq. 16.4).
    """
    altitudes = np.asarray(true_altitudes_deg, dtype=float)
    bent = np.maximum(altitudes, _LOWEST_BENDING_DEG)
    arcmins = 1.02 / np.tan(np.radians(bent + 10.3 / (bent + 5.11)))
    return np.where(altitudes < _LOWEST_BENDING_DEG, 0.0, arcmins / 60.0)


def refraction_of_apparent_deg(apparent_altitudes_deg: Floats) -> Floats:
    """How much higher air makes a direction appear, from its apparent altitude.

    Parameters
    ----------
    apparent_altitudes_deg : (n,) float    altitude as seen, 0..90 degrees

    Returns
    -------
    (n,) float    degrees, at 1010 hPa and 10 C

    Formula: R = 1 / tan(h + 7.31 / (h + 4.4)) arcmin, h in degrees.

    Source: Bennett 1982, Journal of Navigation 35, 255 (Meeus 1998, eq. 16.3).
    """
    altitudes = np.asarray(apparent_altitudes_deg, dtype=float)
    arcmins = 1.0 / np.tan(np.radians(altitudes + 7.31 / (altitudes + 4.4)))
    return np.asarray(arcmins / 60.0)
