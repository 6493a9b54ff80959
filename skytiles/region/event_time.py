"""Times of events in any time scale and from any place, as UTC at the Earth."""

import re

import numpy as np
from numpy.typing import NDArray

from skytiles.errors import AlertError
from skytiles.sphere.calendar import mjd_from_iso
from skytiles.sphere.time_scales import DAY_S, MJD_J2000, centuries_since_j2000, tt_mjds

Floats = NDArray[np.float64]

# TT = TAI + 32.184 s; GPS = TAI - 19 s; so TT = GPS + 51.184 s (definitions).
_TT_MINUS_GPS_S, _TT_MINUS_TAI_S = 51.184, 32.184
_LIGHT_TIME_OF_AU_S = 499.004784
_OBLIQUITY_RAD = np.deg2rad(23.4392911)
# Jupiter to Neptune: the Sun's mass over theirs, half axis (au), eccentricity, mean longitude and
# longitude of perihelion (degrees, J2000), motion (degrees a century). Source: Standish &
# Williams, approximate positions of the planets, 1800 to 2050 (from memory).
_PLANETS = np.array(
    [
        (1047.349, 5.20288700, 0.04838624, 34.39644051, 14.72847983, 3034.74612775),
        (3497.90, 9.53667594, 0.05386179, 49.95424423, 92.59887831, 1222.49362201),
        (22902.98, 19.18916464, 0.04725744, 313.23810451, 170.95427630, 428.48202785),
        (19412.26, 30.06992276, 0.00859048, -55.12002969, 44.96476227, 218.45945325),
    ]
)
_SIXTIETH_SECOND = re.compile(r"(T\d\d:\d\d:)60(\.\d+)?")


def mjd_of_words(text: str) -> float:
    """Modified Julian date of a time in words, in the scale in which it is written.

    Parameters
    ----------
    text : str    ISO 8601; the 61st second of a minute, a leap second, is the next minute's first

    Returns
    -------
    float    days; AlertError for what is no time

    Source: ISO 8601.
    """
    plain, n_leaps = _SIXTIETH_SECOND.subn(r"\g<1>59\2", text.strip())
    try:
        return mjd_from_iso(plain) + n_leaps / DAY_S
    except (ValueError, OverflowError) as error:
        raise AlertError(
            given=f"its event time is {text[:60]!r}",
            allowed="a time such as 2027-03-14T05:06:07Z",
            advice="correct the time of the event",
        ) from error


def utc_mjd(mjd: float, scale: str) -> float:
    """UTC of a moment in another time scale.

    Parameters
    ----------
    mjd : float    MJD in the scale
    scale : str    UTC, TT, TDB, GPS or TAI

    Returns
    -------
    float    MJD, UTC, good to 0.1 ms; AlertError for another scale

    Source: TT = TAI + 32.184 s, GPS = TAI - 19 s; leap seconds of IERS Bulletin C; TDB - TT by the
    largest terms of Fairhead & Bretagnon 1990 (Astronomical Almanac, section B).
    """
    if scale == "UTC":
        return mjd
    offsets_s = {"TT": 0.0, "GPS": _TT_MINUS_GPS_S, "TAI": _TT_MINUS_TAI_S}
    if scale == "TDB":
        offsets_s["TDB"] = -_tdb_minus_tt_s(mjd)
    if scale not in offsets_s:
        raise AlertError(
            given=f"its time scale is {scale!r}",
            allowed="UTC, TT, TDB, GPS or TAI",
            advice="give the event's time in UTC",
        )
    return _utc_of_tt(mjd + offsets_s[scale] / DAY_S)


def _utc_of_tt(tt_mjd: float) -> float:
    """Three steps settle it, also beside a leap second."""
    utc = tt_mjd
    for _ in range(3):
        utc = tt_mjd - (float(tt_mjds(np.array(utc))) - utc)
    return utc


def _tdb_minus_tt_s(mjd: float) -> float:
    anomaly = np.deg2rad(357.53 + 0.98560028 * (mjd - MJD_J2000))
    return float(0.001657 * np.sin(anomaly) + 0.000014 * np.sin(2.0 * anomaly))


def earth_delay_s(mjd: float, direction: Floats) -> float:
    """How much earlier a wave from a direction passes the Earth than the barycentre.

    Parameters
    ----------
    mjd : float    MJD, any scale
    direction : (3,) float    unit vector, ICRS

    Returns
    -------
    float    seconds, up to 505; right to 0.2 s between 1950 and 2050

    Source: Sun by the low-precision formula of the Astronomical Almanac (0.01 degree); the Sun
    about the barycentre by the mean orbits of the four large planets.
    """
    earth_au = _sun_from_barycentre_au(mjd) - _sun_from_earth_au(mjd)
    return float(earth_au @ direction * _LIGHT_TIME_OF_AU_S)


def _sun_from_earth_au(mjd: float) -> Floats:
    days = mjd - MJD_J2000
    anomaly = np.deg2rad(357.528 + 0.9856003 * days)
    longitude = 280.460 + 0.9856474 * days + 1.915 * np.sin(anomaly) + 0.020 * np.sin(2 * anomaly)
    # From the equinox of date back to that of J2000: precession of 1.397 degrees a century.
    longitude -= 1.396971 * float(centuries_since_j2000(np.array(mjd)))
    distance = 1.00014 - 0.01671 * np.cos(anomaly) - 0.00014 * np.cos(2.0 * anomaly)
    return _equatorial(np.array([distance]), np.deg2rad([longitude]))


def _sun_from_barycentre_au(mjd: float) -> Floats:
    mass_ratios, half_axes, eccentricities, longitudes, perihelia, motions = _PLANETS.T
    means = np.deg2rad(longitudes + motions * float(centuries_since_j2000(np.array(mjd))))
    anomalies = means - np.deg2rad(perihelia)
    # Kepler's equation to the first order of the eccentricity.
    places = means + 2.0 * eccentricities * np.sin(anomalies)
    distances = half_axes * (1.0 - eccentricities * np.cos(anomalies))
    return -_equatorial(distances / (1.0 + mass_ratios), places)


def _equatorial(distances: Floats, longitudes_rad: Floats) -> Floats:
    """Sum of vectors in the ecliptic, turned to the equator of J2000."""
    x = float((distances * np.cos(longitudes_rad)).sum())
    y = float((distances * np.sin(longitudes_rad)).sum())
    return np.array([x, y * np.cos(_OBLIQUITY_RAD), y * np.sin(_OBLIQUITY_RAD)])
