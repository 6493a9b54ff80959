"""The sky over one place: what its altitude, Sun and Moon make of a line of sight."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from skytiles.depth.air_extinction import extinction_mag
from skytiles.depth.sky_brightness import sky_brightness_mag
from skytiles.night.altitude import moon_altitudes_deg, sun_altitudes_deg
from skytiles.night.moon import moon_phase_angles_deg, moon_radec_deg
from skytiles.night.place import Place
from skytiles.sphere.angles import unit_vectors

Floats = npt.NDArray[np.float64]


def sky_over_place_mag(
    place: Place,
    zenith_mag: float,
    *,
    ras_deg: Floats,
    decs_deg: Floats,
    mjds: Floats,
    altitudes_deg: Floats,
    band: str = "V",
) -> Floats:
    """Brightness of the sky behind k directions at t times.

    Parameters
    ----------
    place : Place
    zenith_mag : float               dark zenith of the site, V magnitudes per square arcsecond
    ras_deg, decs_deg : (k,) float   ICRS, degrees
    mjds : (t,) float                MJD, UTC
    altitudes_deg : (k, t) float     of the directions then, degrees
    band : str                       one of BANDS

    Returns
    -------
    (k, t) float    magnitudes of the band per square arcsecond

    Raises
    ------
    DepthError    for an unknown band

    Source: sky_brightness_mag with Sun and Moon of skytiles.night and the extinction of the site's
    height; the Moon's distance from the line of sight without its parallax (a degree at most).
    """
    moon_ras_deg, moon_decs_deg, _ = moon_radec_deg(mjds)
    cosines = unit_vectors(ras_deg, decs_deg) @ unit_vectors(moon_ras_deg, moon_decs_deg).T
    return sky_brightness_mag(
        zenith_mag,
        altitudes_deg,
        sun_altitudes_deg=sun_altitudes_deg([place], mjds)[0],
        moon_altitudes_deg=moon_altitudes_deg([place], mjds)[0],
        moon_separations_deg=np.degrees(np.arccos(np.clip(cosines, -1.0, 1.0))),
        moon_phase_angles_deg=moon_phase_angles_deg(mjds),
        band=band,
        extinction_mag=extinction_mag(band, height_m=place.height_m),
    )
