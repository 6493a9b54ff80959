"""How bright the sky is behind a tile: site, Moon and twilight."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from skytiles.night.airmass import sky_airmass

Floats = npt.NDArray[np.float64]

# Extinction in V that the moonlight model was made with, magnitudes per airmass.
KS91_EXTINCTION_MAG = 0.172
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

    Source: polynomial by J. Thorstensen, fitted to Meinel & Meinel 1983, Sunsets, Twilights and
    Evening Skies, p. 38.
    """
    suns = np.asarray(sun_altitudes_deg, dtype=float)
    y = (-np.clip(suns, _LOWEST_TWILIGHT_DEG, _HIGHEST_TWILIGHT_DEG) - 9.0) / 9.0
    brightening = ((2.0635175 * y + 1.246602) * y - 9.4084495) * y + 6.132725
    return np.where(suns < _LOWEST_TWILIGHT_DEG, 0.0, np.maximum(brightening, 0.0))


def sky_brightness_mag(
    zenith_mag: float,
    altitudes_deg: Floats,
    *,
    sun_altitudes_deg: Floats,
    moon_altitudes_deg: Floats,
    moon_separations_deg: Floats,
    moon_phase_angles_deg: Floats,
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

    Returns
    -------
    (n,) float    V magnitudes per square arcsecond; shapes broadcast. The zenith's twilight is
        used everywhere, which is too dark towards the Sun.

    Source: sum of dark_sky_nl, moonlight_nl and twilight_brightening_mag.
    """
    dark = dark_sky_nl(zenith_mag, altitudes_deg)
    twilight = dark * 10.0 ** (0.4 * twilight_brightening_mag(sun_altitudes_deg))
    moon = moonlight_nl(
        moon_separations_deg,
        altitudes_deg,
        moon_altitudes_deg=moon_altitudes_deg,
        moon_phase_angles_deg=moon_phase_angles_deg,
    )
    return sky_mags(twilight + moon)


def _phase_loss_mag(phase_angles_deg: Floats) -> Floats:
    angles = np.abs(np.asarray(phase_angles_deg, dtype=float))
    return np.asarray(0.026 * angles + 4e-9 * angles**4)
