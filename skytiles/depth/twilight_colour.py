"""Twilight at the zenith in several bands, as measured at a dark site."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from skytiles.depth.bands import band_named
from skytiles.depth.depth_error import DepthError

Floats = npt.NDArray[np.float64]

# Coefficients of a parabola in (zenith distance of the Sun - 95 degrees); in part from memory.
_PARABOLAS = {
    "U": (11.78, 1.376, -0.039),
    "B": (11.84, 1.411, -0.041),
    "V": (11.84, 1.518, -0.057),
    "R": (11.40, 1.567, -0.064),
    "I": (10.93, 1.470, -0.062),
}
PATAT_BANDS = tuple(_PARABOLAS)
_HIGHEST_SUN_DEG, _LOWEST_SUN_DEG = -5.0, -15.0


def measured_twilight_mag(sun_altitudes_deg: Floats, band: str) -> Floats:
    """Brightness of the zenith in twilight, dark sky included.

    Parameters
    ----------
    sun_altitudes_deg : (n,) float    of the Sun's centre, degrees; the ends of -15..-5 are used
        beyond them
    band : str                        one of U, B, V, R, I

    Returns
    -------
    (n,) float    magnitudes per square arcsecond; good to 0.1 to 0.4

    Raises
    ------
    DepthError    for a band that was not measured

    Formula: m = a0 + a1 x + a2 x^2, x = zenith distance of the Sun less 95 degrees.

    Source: Patat, Ugolnikov & Postylyakov 2006, A&A 455, 385, Table 1 (in part from memory).
    """
    if band not in _PARABOLAS:
        raise DepthError(
            f"twilight in {band!r}", ", ".join(_PARABOLAS), "take the nearest of these"
        )
    suns = np.clip(np.asarray(sun_altitudes_deg, dtype=float), _LOWEST_SUN_DEG, _HIGHEST_SUN_DEG)
    start, slope, bend = _PARABOLAS[band]
    x = -5.0 - suns
    return np.asarray(start + (slope + bend * x) * x)


def twilight_colour_mag(sun_altitudes_deg: Floats, band: str) -> Floats:
    """Twilight in a band less twilight in V.

    Parameters
    ----------
    sun_altitudes_deg : (n,) float    of the Sun's centre, degrees
    band : str                        one of BANDS; the nearest measured one in wavelength is used

    Returns
    -------
    (n,) float    magnitudes

    Raises
    ------
    DepthError    for an unknown band

    Source: measured_twilight_mag.
    """
    wavelength_um = band_named(band).wavelength_um
    nearest = min(_PARABOLAS, key=lambda one: abs(band_named(one).wavelength_um - wavelength_um))
    in_band = measured_twilight_mag(sun_altitudes_deg, nearest)
    return in_band - measured_twilight_mag(sun_altitudes_deg, "V")
