"""The rule that keeps eyes and optics away from the Sun.

It is hard: whoever gives out something to point at (an offer, a claim, a plan) asks here first, for
the whole time of the lease and of the exposures.
"""

from __future__ import annotations

import math

import numpy as np

from skytiles.night.altitude import altitude_azimuth_deg, zenith_radec_deg
from skytiles.night.clock_words import clock_words
from skytiles.night.night_error import NightError
from skytiles.night.place import Place
from skytiles.night.slew_path import closest_approach_deg
from skytiles.night.solar_rating import SolarRating
from skytiles.night.sun import sun_radec_deg
from skytiles.night.sun_rule import (
    LONGEST_D,
    MARGIN_D,
    NEAR_SUN_DEG,
    NEAR_SUN_MARGIN_D,
    elongations_deg,
    sun_up_minutes,
)

Direction = tuple[float, float]


def solar_problems(
    place: Place,
    rating: SolarRating,
    ra_deg: float,
    dec_deg: float,
    *,
    start_mjd: float,
    end_mjd: float,
    from_ra_deg: float | None = None,
    from_dec_deg: float | None = None,
) -> list[str]:
    """Why an instrument must not be sent to a direction during a stretch of time.

    Parameters
    ----------
    place : Place
    rating : SolarRating                         the instrument
    ra_deg, dec_deg : float                      middle of the field, ICRS, degrees
    start_mjd, end_mjd : float                   MJD, UTC: the whole lease and series
    from_ra_deg, from_dec_deg : float or None    where it points before; None: not known, then it
        may stand at the celestial pole or at the zenith, where these keep its avoidance angle

    Returns
    -------
    list of str    one plain sentence for each problem; empty: safe by this rule

    Raises
    ------
    NightError    when a number is missing or the stretch ends before it starts or after 31 days:
        what cannot be judged is not safe

    Source: our rule (DEVELOPERS.md, solar safety). Sun, horizon dip and margins as in sun_rule.
    """
    _check_question(ra_deg, dec_deg, start_mjd, end_mjd)
    elongation_deg = float(
        elongations_deg(
            rating, np.array([ra_deg]), np.array([dec_deg]), start_mjd=start_mjd, end_mjd=end_mjd
        )[0]
    )
    margin_d = NEAR_SUN_MARGIN_D if elongation_deg <= NEAR_SUN_DEG else MARGIN_D
    minutes, is_up = sun_up_minutes(place, start_mjd=start_mjd, end_mjd=end_mjd + margin_d)
    if not is_up.any():
        return []
    if not rating.may_work_by_day:
        return [_darkness_problem(float(minutes[np.argmax(is_up)]), start_mjd, margin_d)]
    before = _known_direction(from_ra_deg, from_dec_deg)
    nearest_deg = min(
        _nearest_on_the_way_deg(place, rating, before, (ra_deg, dec_deg), at_mjd=at_mjd)
        for at_mjd in (start_mjd - MARGIN_D, start_mjd, end_mjd)
    )
    return _avoidance_problems(rating, elongation_deg) + _slew_problems(rating, nearest_deg)


def _check_question(ra_deg: float, dec_deg: float, start_mjd: float, end_mjd: float) -> None:
    is_number = all(map(math.isfinite, (ra_deg, dec_deg, start_mjd, end_mjd)))
    if not is_number or abs(dec_deg) > 90.0 or not 0.0 <= end_mjd - start_mjd <= LONGEST_D:
        raise NightError(
            f"RA {ra_deg}, Dec {dec_deg}, MJD {start_mjd} to {end_mjd}",
            f"a direction on the sky and at most {LONGEST_D:.0f} days, the end after the start",
            "correct the direction or the times",
        )


def _known_direction(ra_deg: float | None, dec_deg: float | None) -> Direction | None:
    if ra_deg is None or dec_deg is None:
        return None
    if not (math.isfinite(ra_deg) and math.isfinite(dec_deg) and abs(dec_deg) <= 90.0):
        return None
    return ra_deg, dec_deg


def _darkness_problem(sun_up_mjd: float, start_mjd: float, margin_d: float) -> str:
    if sun_up_mjd <= start_mjd:
        return (
            "The Sun is above the limit for eyes at the start. Only a camera that its owner "
            "declares daytime-rated and eye-free may be used then."
        )
    latest_mjd = sun_up_mjd - margin_d
    return (
        f"The Sun comes above the limit for eyes at {clock_words(sun_up_mjd)}: this instrument "
        f"must be done by {clock_words(latest_mjd)}, {round(margin_d * 1440)} minutes before."
    )


def _avoidance_problems(rating: SolarRating, elongation_deg: float) -> list[str]:
    if elongation_deg >= rating.avoidance_deg:
        return []
    near = f"By day this field comes within {max(elongation_deg, 0.0):.1f} degrees of the Sun"
    return [f"{near}; this instrument keeps {rating.avoidance_deg:.0f} degrees."]


def _slew_problems(rating: SolarRating, nearest_deg: float) -> list[str]:
    if nearest_deg >= rating.avoidance_deg:
        return []
    near = f"On the way it may pass within {max(nearest_deg, 0.0):.1f} degrees of the Sun"
    keeps = f"this instrument keeps {rating.avoidance_deg:.0f} degrees"
    return [f"{near}; {keeps}. Go by another field first."]


def _nearest_on_the_way_deg(
    place: Place,
    rating: SolarRating,
    before: Direction | None,
    target: Direction,
    *,
    at_mjd: float,
) -> float:
    """How near the Sun the field may come while an equatorial or alt-azimuth mount turns."""
    sun = _sun_direction(at_mjd)
    starts = _parking_directions(place, rating, at_mjd) if before is None else [before]
    approaches_deg = [180.0]
    for start in starts:
        horizontal = [_horizontal(place, direction, at_mjd) for direction in (start, target, sun)]
        approaches_deg.append(closest_approach_deg(start, target, sun))
        approaches_deg.append(closest_approach_deg(*horizontal))
    return min(approaches_deg) - max(rating.field_radius_deg, 0.0)


def _parking_directions(place: Place, rating: SolarRating, at_mjd: float) -> list[Direction]:
    """Usual resting places, less those where the instrument would already be too near the Sun."""
    pole = (0.0, math.copysign(90.0, place.latitude_deg))
    least_deg = rating.avoidance_deg + max(rating.field_radius_deg, 0.0)
    sun = _sun_direction(at_mjd)
    return [
        parked
        for parked in (pole, zenith_radec_deg(place, at_mjd))
        if closest_approach_deg(parked, parked, sun) >= least_deg
    ]


def _sun_direction(at_mjd: float) -> Direction:
    ras_deg, decs_deg = sun_radec_deg(np.array([at_mjd]))
    return float(ras_deg[0]), float(decs_deg[0])


def _horizontal(place: Place, direction: Direction, at_mjd: float) -> Direction:
    altitudes, azimuths = altitude_azimuth_deg(place, *direction, np.array([at_mjd]))
    return float(azimuths[0]), float(altitudes[0])
