"""Where the Moon is and how much of it is lit."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from skytiles.night.moon_terms import LATITUDE, LONGITUDE_AND_DISTANCE
from skytiles.night.of_date import equatorial_of_date, icrs_from_of_date
from skytiles.night.sun import AU_KM, sun_distances_au, sun_vectors_of_date
from skytiles.sphere.angles import ras_decs_deg
from skytiles.sphere.time_scales import centuries_since_j2000, tt_mjds

Floats = npt.NDArray[np.float64]

_MEAN_DISTANCE_KM = 385000.56


def moon_radec_deg(mjds: Floats) -> tuple[Floats, Floats, Floats]:
    """Direction of the Moon from the centre of the Earth, on ICRS axes, and its distance.

    Parameters
    ----------
    mjds : (t,) float    MJD, UTC

    Returns
    -------
    (t,) float, (t,) float, (t,) float    right ascension 0..360 and declination, degrees;
        distance, km; error below 0.003 degree (15 arcsec) and 60 km, 1980-2060

    Source: as moon_ecliptic.
    """
    mjds_tt = np.atleast_1d(tt_mjds(mjds))
    positions_km = moon_positions_of_date_km(mjds_tt)
    ras_deg, decs_deg = ras_decs_deg(icrs_from_of_date(positions_km, mjds_tt))
    return ras_deg, decs_deg, np.asarray(np.linalg.norm(positions_km, axis=-1))


def moon_illuminated_fraction(mjds: Floats) -> Floats:
    """Share of the Moon's disc that is lit.

    Parameters
    ----------
    mjds : (t,) float    MJD, UTC

    Returns
    -------
    (t,) float    0..1

    Source: Meeus 1998, Astronomical Algorithms, eq. 48.1.
    """
    return np.asarray((1.0 + np.cos(np.radians(moon_phase_angles_deg(mjds)))) / 2.0)


def moon_phase_angles_deg(mjds: Floats) -> Floats:
    """Angle at the Moon between Sun and Earth: 0 at full moon.

    Parameters
    ----------
    mjds : (t,) float    MJD, UTC

    Returns
    -------
    (t,) float    degrees, 0..180

    Source: Meeus 1998, Astronomical Algorithms, eq. 48.2 and 48.3, in vectors.
    """
    mjds_tt = np.atleast_1d(tt_mjds(mjds))
    to_earth_km = -moon_positions_of_date_km(mjds_tt)
    suns_au = sun_distances_au(centuries_since_j2000(mjds_tt))
    to_sun_km = sun_vectors_of_date(mjds_tt) * suns_au[:, None] * AU_KM + to_earth_km
    crosses = np.linalg.norm(np.cross(to_earth_km, to_sun_km), axis=-1)
    return np.asarray(np.degrees(np.arctan2(crosses, np.sum(to_earth_km * to_sun_km, axis=-1))))


def moon_positions_of_date_km(mjds_tt: Floats) -> Floats:
    """Position of the Moon from the centre of the Earth on the true equator of date.

    Parameters
    ----------
    mjds_tt : (t,) float    MJD, TT

    Returns
    -------
    (t, 3) float    km

    Source: as moon_ecliptic.
    """
    t = centuries_since_j2000(mjds_tt)
    longitudes_deg, latitudes_deg, distances_km = moon_ecliptic(t)
    vectors = equatorial_of_date(np.radians(longitudes_deg), np.radians(latitudes_deg), t)
    return np.asarray(vectors * distances_km[..., None])


def moon_ecliptic(centuries_tt: Floats) -> tuple[Floats, Floats, Floats]:
    """Longitude, latitude and distance of the Moon, mean ecliptic and equinox of date.

    Parameters
    ----------
    centuries_tt : (t,) float    Julian centuries from J2000.0, TT

    Returns
    -------
    (t,) float, (t,) float, (t,) float    degrees (0..360), degrees, km

    Source: Meeus 1998, Astronomical Algorithms, ch. 47 (light time is in its mean longitude).
    """
    t = np.asarray(centuries_tt, dtype=float)
    moon_deg, arguments_deg = _mean_arguments_deg(t)
    added_longitude, added_latitude = _outside_terms(t, moon_deg, arguments_deg)
    phases_rad, scales = _phases(t, arguments_deg, LONGITUDE_AND_DISTANCE)
    longitudes = (np.sin(phases_rad) * scales) @ LONGITUDE_AND_DISTANCE[:, 4] + added_longitude
    distances_m = (np.cos(phases_rad) * scales) @ LONGITUDE_AND_DISTANCE[:, 5]
    phases_rad, scales = _phases(t, arguments_deg, LATITUDE)
    latitudes = (np.sin(phases_rad) * scales) @ LATITUDE[:, 4] + added_latitude
    return (
        np.mod(moon_deg + longitudes * 1e-6, 360.0),
        latitudes * 1e-6,
        _MEAN_DISTANCE_KM + distances_m / 1000.0,
    )


def _mean_arguments_deg(t: Floats) -> tuple[Floats, Floats]:
    """Mean longitude L' (t,), and D, M, M', F (t, 4)."""
    moon = 218.3164477 + (481267.88123421 + (-0.0015786 + (1 / 538841 - t / 65194000) * t) * t) * t
    elongation = 297.8501921 + (445267.1114034 + (-0.0018819 + t / 545868) * t) * t
    sun_anomaly = 357.5291092 + (35999.0502909 - 0.0001536 * t) * t
    moon_anomaly = 134.9633964 + (477198.8675055 + (0.0087414 + t / 69699) * t) * t
    latitude = 93.2720950 + (483202.0175233 + (-0.0036539 - t / 3526000) * t) * t
    return moon, np.stack([elongation, sun_anomaly, moon_anomaly, latitude], axis=-1)


def _phases(t: Floats, arguments_deg: Floats, table: Floats) -> tuple[Floats, Floats]:
    """Phase of every term, and what the Earth's shrinking eccentricity leaves of it."""
    eccentricities = 1.0 - (0.002516 + 0.0000074 * t) * t
    scales = np.power(eccentricities[..., None], np.abs(table[:, 1]))
    return np.radians(arguments_deg @ table[:, :4].T), scales


def _outside_terms(t: Floats, moon_deg: Floats, arguments_deg: Floats) -> tuple[Floats, Floats]:
    """Venus, Jupiter and the flattening of the Earth, 1e-6 degree."""
    moon = np.radians(moon_deg)
    anomaly, latitude = np.radians(arguments_deg[..., 2]), np.radians(arguments_deg[..., 3])
    venus = np.radians(119.75 + 131.849 * t)
    jupiter = np.radians(53.09 + 479264.290 * t)
    third = np.radians(313.45 + 481266.484 * t)
    longitudes = 3958 * np.sin(venus) + 1962 * np.sin(moon - latitude) + 318 * np.sin(jupiter)
    latitudes = (
        -2235 * np.sin(moon)
        + 382 * np.sin(third)
        + 175 * (np.sin(venus - latitude) + np.sin(venus + latitude))
        + 127 * np.sin(moon - anomaly)
        - 115 * np.sin(moon + anomaly)
    )
    return longitudes, latitudes
