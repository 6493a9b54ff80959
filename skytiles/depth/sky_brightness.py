"""How bright the sky is behind a tile: site, Moon and twilight, in each band."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from skytiles.depth.air_extinction import extinction_mag as air_extinction_mag
from skytiles.depth.bands import band_named
from skytiles.depth.twilight_colour import twilight_colour_mag
from skytiles.night.airmass import sky_airmass

Floats = npt.NDArray[np.float64]

# Extinction in V that the moonlight model was made with, magnitudes per airmass.
KS91_EXTINCTION_MAG = 0.172
# Zenith of a place without lamps, V magnitudes per square arcsecond: what twilight is measured
# against. An assumption; 21.6 to 22.0 are reported.
NATURAL_ZENITH_MAG = 21.75
_LOWEST_TWILIGHT_DEG = -18.0
_HIGHEST_TWILIGHT_DEG = -1.0


def nanolamberts(sky_mags: Floats) -> Floats:
    """Surface brightness in nanolamberts.

    Parameters
    ----------
    sky_mags : (n,) float    V magnitudes per square arcsecond

    Returns
    -------
    (n,) float

    Formula: B = 34.08 exp(20.7233 - 0.92104 V).

    Source: Krisciunas & Schaefer 1991, PASP 103, 1033, eq. 1.
    """
    return np.asarray(34.08 * np.exp(20.7233 - 0.92104 * np.asarray(sky_mags, dtype=float)))


def sky_mags(brightnesses_nl: Floats) -> Floats:
    """Surface brightness in V magnitudes per square arcsecond.

    Parameters
    ----------
    brightnesses_nl : (n,) float    nanolamberts, above 0

    Returns
    -------
    (n,) float

    Formula: V = (20.7233 - ln(B / 34.08)) / 0.92104.

    Source: Krisciunas & Schaefer 1991, PASP 103, 1033, eq. 1, inverted.
    """
    return np.asarray((20.7233 - np.log(np.asarray(brightnesses_nl) / 34.08)) / 0.92104)


def moon_v_mag(phase_angles_deg: Floats) -> Floats:
    """Magnitude of the Moon.

    Parameters
    ----------
    phase_angles_deg : (n,) float    0 at full moon

    Returns
    -------
    (n,) float    V magnitudes

    Formula: V = -12.73 + 0.026 |a| + 4e-9 a^4, a the phase angle in degrees.

    Source: Krisciunas & Schaefer 1991, PASP 103, 1033, eq. 9.
    """
    return np.asarray(-12.73 + _phase_loss_mag(phase_angles_deg))


def moon_illuminance(phase_angles_deg: Floats) -> Floats:
    """Light of the Moon outside the air.

    Parameters
    ----------
    phase_angles_deg : (n,) float    0 at full moon

    Returns
    -------
    (n,) float    footcandles

    Formula: I = 10^(-0.4 (3.84 + 0.026 |a| + 4e-9 a^4)), a the phase angle in degrees.

    Source: Krisciunas & Schaefer 1991, PASP 103, 1033, eq. 8 and 20.
    """
    return np.asarray(10.0 ** (-0.4 * (3.84 + _phase_loss_mag(phase_angles_deg))))


def scattering(separations_deg: Floats) -> Floats:
    """How strongly air scatters moonlight by an angle.

    Parameters
    ----------
    separations_deg : (n,) float    between Moon and line of sight, degrees

    Returns
    -------
    (n,) float    the model's own unit

    Formula: f = 10^5.36 (1.06 + cos^2 r) + 10^(6.15 - r / 40), r in degrees; below 10 degrees the
    second term is 6.2e7 / r^2.

    Source: Krisciunas & Schaefer 1991, PASP 103, 1033, eq. 16 to 21.
    """
    angles = np.maximum(np.asarray(separations_deg, dtype=float), 0.25)
    molecules = 10.0**5.36 * (1.06 + np.cos(np.radians(angles)) ** 2)
    dust = np.where(angles < 10.0, 6.2e7 / angles**2, 10.0 ** (6.15 - angles / 40.0))
    return np.asarray(molecules + dust)


def moonlight_nl(
    separations_deg: Floats,
    altitudes_deg: Floats,
    *,
    moon_altitudes_deg: Floats,
    moon_phase_angles_deg: Floats,
    extinction_mag: float = KS91_EXTINCTION_MAG,
) -> Floats:
    """Sky brightness that the Moon adds.

    Parameters
    ----------
    separations_deg : (n,) float          between Moon and line of sight, degrees
    altitudes_deg : (n,) float            of the line of sight, degrees
    moon_altitudes_deg : (n,) float       degrees
    moon_phase_angles_deg : (n,) float    0 at full moon
    extinction_mag : float                magnitudes per airmass

    Returns
    -------
    (n,) float    nanolamberts; 0 with the Moon below the horizon. Good to 8 to 23 %.

    Formula: B = f(r) I 10^(-0.4 k X(Moon)) (1 - 10^(-0.4 k X)), X as in sky_airmass.

    Source: Krisciunas & Schaefer 1991, PASP 103, 1033, eq. 15.
    """
    way_in = 10.0 ** (-0.4 * extinction_mag * sky_airmass(moon_altitudes_deg))
    scattered = 1.0 - 10.0 ** (-0.4 * extinction_mag * sky_airmass(altitudes_deg))
    light = scattering(separations_deg) * moon_illuminance(moon_phase_angles_deg)
    return np.where(np.asarray(moon_altitudes_deg) > 0.0, light * way_in * scattered, 0.0)


def dark_sky_nl(
    zenith_mag: float, altitudes_deg: Floats, *, extinction_mag: float = KS91_EXTINCTION_MAG
) -> Floats:
    """Sky brightness without Moon and twilight, away from the zenith.

    Parameters
    ----------
    zenith_mag : float            the site's dark sky, V magnitudes per square arcsecond
    altitudes_deg : (n,) float    degrees
    extinction_mag : float        magnitudes per airmass

    Returns
    -------
    (n,) float    nanolamberts

    Formula: B = B_zenith 10^(-0.4 k (X - 1)) X, X as in sky_airmass.

    Source: Krisciunas & Schaefer 1991, PASP 103, 1033, eq. 2.
    """
    masses = sky_airmass(altitudes_deg)
    zenith_nl = nanolamberts(np.asarray(zenith_mag))
    return np.asarray(zenith_nl * masses * 10.0 ** (-0.4 * extinction_mag * (masses - 1.0)))


def twilight_brightening_mag(sun_altitudes_deg: Floats) -> Floats:
    """How much brighter than dark the zenith is in twilight.

    Parameters
    ----------
    sun_altitudes_deg : (n,) float    of the Sun's centre, degrees

    Returns
    -------
    (n,) float    magnitudes, not negative; 0 below -18 degrees, the value of -1 above -1 degree

    Formula: ((2.0635175 y + 1.246602) y - 9.4084495) y + 6.132725, y = (-h - 9) / 9, h the
    altitude of the Sun in degrees.

    Source: polynomial by J. Thorstensen, fitted to Meinel & Meinel 1983, Sunsets, Twilights and
    Evening Skies, p. 38.
    """
    suns = np.asarray(sun_altitudes_deg, dtype=float)
    y = (-np.clip(suns, _LOWEST_TWILIGHT_DEG, _HIGHEST_TWILIGHT_DEG) - 9.0) / 9.0
    brightening = ((2.0635175 * y + 1.246602) * y - 9.4084495) * y + 6.132725
    return np.where(suns < _LOWEST_TWILIGHT_DEG, 0.0, np.maximum(brightening, 0.0))


def twilight_nl(
    sun_altitudes_deg: Floats,
    altitudes_deg: Floats,
    *,
    extinction_mag: float = KS91_EXTINCTION_MAG,
) -> Floats:
    """Sky brightness that twilight adds in V.

    Parameters
    ----------
    sun_altitudes_deg : (n,) float    of the Sun's centre, degrees
    altitudes_deg : (n,) float        of the line of sight, degrees
    extinction_mag : float            magnitudes per airmass

    Returns
    -------
    (n,) float    nanolamberts; the zenith's twilight is used everywhere, which is too dark towards
        the Sun

    Formula: B = B_natural(altitude) (10^(0.4 brightening) - 1).

    Source: twilight_brightening_mag over a natural zenith of 21.75 mag per square arcsecond: lamps
    do not brighten twilight.
    """
    natural = dark_sky_nl(NATURAL_ZENITH_MAG, altitudes_deg, extinction_mag=extinction_mag)
    return natural * (10.0 ** (0.4 * twilight_brightening_mag(sun_altitudes_deg)) - 1.0)


def sky_brightness_mag(
    zenith_mag: float,
    altitudes_deg: Floats,
    *,
    sun_altitudes_deg: Floats,
    moon_altitudes_deg: Floats,
    moon_separations_deg: Floats,
    moon_phase_angles_deg: Floats,
    band: str = "V",
    extinction_mag: float | None = None,
) -> Floats:
    """Brightness of the sky behind a line of sight.

    Parameters
    ----------
    zenith_mag : float                    the site's dark zenith, V magnitudes per square arcsecond
    altitudes_deg : (n,) float            of the line of sight, degrees
    sun_altitudes_deg : (n,) float        degrees
    moon_altitudes_deg : (n,) float       degrees
    moon_separations_deg : (n,) float     between Moon and line of sight, degrees
    moon_phase_angles_deg : (n,) float    0 at full moon
    band : str                            one of BANDS
    extinction_mag : float or None        magnitudes per airmass in the band at the site; None: as
        in the moonlight model (0.172) in V, else that of a site near the sea

    Returns
    -------
    (n,) float    magnitudes of the band per square arcsecond; shapes broadcast. Good to 0.25 with
        a Moon, to a magnitude in twilight

    Raises
    ------
    DepthError    for an unknown band

    Formula: sum of three brightnesses, each moved from V to the band by its own colour.

    Source: dark_sky_nl, moonlight_nl, twilight_nl; colours of the dark sky and of the Moon in
    BANDS, of twilight as in twilight_colour_mag.
    """
    facts = band_named(band)
    usual = KS91_EXTINCTION_MAG if band == "V" else air_extinction_mag(band)
    loss = usual if extinction_mag is None else extinction_mag
    dark = dark_sky_nl(zenith_mag + facts.sky_colour_mag, altitudes_deg, extinction_mag=loss)
    twilight = twilight_nl(sun_altitudes_deg, altitudes_deg, extinction_mag=loss)
    moon = moonlight_nl(
        moon_separations_deg,
        altitudes_deg,
        moon_altitudes_deg=moon_altitudes_deg,
        moon_phase_angles_deg=moon_phase_angles_deg,
        extinction_mag=loss,
    )
    in_band = 10.0 ** (-0.4 * twilight_colour_mag(sun_altitudes_deg, band))
    return sky_mags(dark + twilight * in_band + moon * 10.0 ** (-0.4 * facts.moon_colour_mag))


def _phase_loss_mag(phase_angles_deg: Floats) -> Floats:
    angles = np.abs(np.asarray(phase_angles_deg, dtype=float))
    return np.asarray(0.026 * angles + 4e-9 * angles**4)
