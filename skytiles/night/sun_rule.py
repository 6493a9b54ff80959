"""The numbers of the solar rule, and the Sun as the rule sees it."""

from __future__ import annotations

import math

import numpy as np
import numpy.typing as npt

from skytiles.night.altitude import sun_altitudes_deg
from skytiles.night.intervals import MINUTE_D
from skytiles.night.place import Place
from skytiles.night.solar_rating import SolarRating
from skytiles.night.sun import sun_radec_deg
from skytiles.sphere.angles import unit_vectors

Floats = npt.NDArray[np.float64]
Bools = npt.NDArray[np.bool_]

# The upper limb clears a flat horizon when the centre, without refraction, is at -0.83 degree.
SUN_LIMIT_DEG = -1.0
# Dip of the horizon seen from a height: 0.03 degree times the square root of the metres.
_DIP_DEG_PER_ROOT_M = 0.03
# Our Sun errs by 0.001 degree, UT1 by up to 0.004, sampling by the minute by 0.001.
_SLACK_DEG = 0.01

NEAR_SUN_DEG = 20.0
MARGIN_D = 10.0 * MINUTE_D
NEAR_SUN_MARGIN_D = 20.0 * MINUTE_D
LONGEST_D = 31.0


def sun_limit_deg(place: Place) -> float:
    """Altitude of the Sun's centre, without refraction, above which eyes are in danger.

    Parameters
    ----------
    place : Place

    Returns
    -------
    float    degrees, at most -1

    Formula: h = -1 - 0.03 sqrt(height in m).

    Source: dip of the horizon 0.03 degree x sqrt(height in m), common practice of navigation.
    """
    return SUN_LIMIT_DEG - _DIP_DEG_PER_ROOT_M * math.sqrt(max(place.height_m, 0.0))


def sun_heights_deg(place: Place, mjds: Floats) -> Floats:
    """How far the Sun is above the limit, on the side of caution.

    Parameters
    ----------
    place : Place
    mjds : (t,) float    MJD, UTC

    Returns
    -------
    (t,) float    degrees; not below zero means that the rule takes the Sun as up

    Source: as sun_altitudes_deg; 0.01 degree of slack for all errors together.
    """
    return np.asarray(sun_altitudes_deg([place], mjds)[0] - sun_limit_deg(place) + _SLACK_DEG)


def sun_up_minutes(place: Place, *, start_mjd: float, end_mjd: float) -> tuple[Floats, Bools]:
    """Minute by minute, both ends included: is the Sun up by the rule?

    Parameters
    ----------
    place : Place
    start_mjd, end_mjd : float    MJD, UTC

    Returns
    -------
    (t,) float, (t,) bool    MJD; is the Sun above the limit then
    """
    n_minutes = math.ceil((end_mjd - start_mjd) / MINUTE_D) + 1
    mjds = np.linspace(start_mjd, end_mjd, max(n_minutes, 2))
    return mjds, sun_heights_deg(place, mjds) >= 0.0


def elongations_deg(
    rating: SolarRating, ras_deg: Floats, decs_deg: Floats, *, start_mjd: float, end_mjd: float
) -> Floats:
    """Smallest separation between Sun and field over a stretch of time, on the side of caution.

    Parameters
    ----------
    rating : SolarRating              its field radius is taken off
    ras_deg, decs_deg : (k,) float    ICRS, degrees
    start_mjd, end_mjd : float        MJD, UTC

    Returns
    -------
    (k,) float    degrees
    """
    # The Sun moves 0.04 degree in an hour: hourly samples lose nothing.
    n_samples = math.ceil((end_mjd - start_mjd) * 24.0) + 2
    suns = unit_vectors(*sun_radec_deg(np.linspace(start_mjd, end_mjd, n_samples)))
    nearest = np.max(unit_vectors(ras_deg, decs_deg) @ suns.T, axis=-1)
    separations = np.degrees(np.arccos(np.clip(nearest, -1.0, 1.0)))
    return np.asarray(separations - max(rating.field_radius_deg, 0.0) - _SLACK_DEG)
