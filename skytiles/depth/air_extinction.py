"""How much starlight the air takes away, by band and height of the site."""

from __future__ import annotations

import math

from skytiles.depth.bands import band_named

# Heights over which air and its dust thin out by a factor e, metres (Hayes & Latham 1975).
_AIR_SCALE_M = 7996.0
_DUST_SCALE_M = 1500.0
# Dust of clean air near sea level at 0.55 micrometre, and how it falls with wavelength: an
# assumption; haze doubles it.
_DUST_MAG = 0.07
_DUST_POWER = -1.3


def rayleigh_mag(wavelength_um: float, *, height_m: float = 0.0) -> float:
    """Extinction by the molecules of the air at the zenith.

    Parameters
    ----------
    wavelength_um : float    micrometres, 0.3..2.5
    height_m : float         of the site above the sea, metres

    Returns
    -------
    float    magnitudes per airmass

    Formula: A = 0.0094977 n(w)^2 / w^4 exp(-h / 7.996 km), w in micrometres,
    n = 0.23465 + 107.6 / (146 - w^-2) + 0.93161 / (41 - w^-2).

    Source: Hayes & Latham 1975, ApJ 197, 593, eq. 2 and 3 (from memory).
    """
    wave_numbers = wavelength_um**-2
    index = 0.23465 + 107.6 / (146.0 - wave_numbers) + 0.93161 / (41.0 - wave_numbers)
    at_the_sea = 0.0094977 * index**2 * wave_numbers**2
    return at_the_sea * math.exp(-height_m / _AIR_SCALE_M)


def extinction_mag(band: str, *, height_m: float = 0.0) -> float:
    """Extinction in a band for each airmass.

    Parameters
    ----------
    band : str          one of BANDS
    height_m : float    of the site above the sea, metres

    Returns
    -------
    float    magnitudes per airmass in clean air; a given night differs by 0.1

    Raises
    ------
    DepthError    for an unknown band

    Formula: k = A_Rayleigh(w, h) + 0.07 (w / 0.55)^-1.3 exp(-h / 1.5 km) + A_gases(band).

    Source: the three parts of Hayes & Latham 1975, ApJ 197, 593; dust of clean air and gases
    (ozone, water) are assumptions.
    """
    facts = band_named(band)
    dust = _DUST_MAG * (facts.wavelength_um / 0.55) ** _DUST_POWER
    return (
        rayleigh_mag(facts.wavelength_um, height_m=height_m)
        + dust * math.exp(-height_m / _DUST_SCALE_M)
        + facts.gases_mag
    )
