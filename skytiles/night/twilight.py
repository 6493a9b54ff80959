"""When it is dark."""

from __future__ import annotations

import math

from skytiles.night.altitude import sun_altitudes_deg
from skytiles.night.intervals import Interval, intervals_below_zero
from skytiles.night.night_error import NightError
from skytiles.night.place import Place

# Altitude of the Sun's centre at which each twilight ends, degrees. Source: the definitions of
# the almanacs.
TWILIGHTS = {"civil": -6.0, "nautical": -12.0, "astronomical": -18.0}

_LONGEST_HOURS = 24.0 * 40.0


def dark_intervals(
    place: Place, *, start_mjd: float, hours: float, sun_below_deg: float = -12.0
) -> list[Interval]:
    """When the Sun is lower than a given altitude.

    Parameters
    ----------
    place : Place
    start_mjd : float        MJD, UTC
    hours : float            how far to look ahead, above 0
    sun_below_deg : float    altitude of the Sun's centre without refraction, degrees

    Returns
    -------
    list of (start, end)    MJD, UTC, in order; cut off at the ends of the search

    Raises
    ------
    NightError    for a stretch of time that is empty, endless or longer than 40 days

    Source: as sun_altitudes_deg; crossings by bisection to 0.001 s.
    """
    check_stretch(start_mjd, hours)
    return intervals_below_zero(
        lambda mjds: sun_altitudes_deg([place], mjds)[0] - sun_below_deg,
        start_mjd=start_mjd,
        end_mjd=start_mjd + hours / 24.0,
    )


def check_stretch(start_mjd: float, hours: float) -> None:
    """Refuse a stretch of time that cannot be searched.

    Parameters
    ----------
    start_mjd : float    MJD, UTC
    hours : float        length, hours

    Raises
    ------
    NightError    for a stretch that is empty, endless or longer than 40 days
    """
    if not (math.isfinite(start_mjd) and 0.0 < hours <= _LONGEST_HOURS):
        raise NightError(
            f"{hours} hours from MJD {start_mjd}",
            f"more than 0 and at most {_LONGEST_HOURS:.0f} hours from a finite time",
            "ask for a shorter stretch of time",
        )
