"""When a direction may be observed from a place."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from skytiles.night.altitude import altitudes_deg, sun_altitudes_deg
from skytiles.night.intervals import (
    MINUTE_D,
    Interval,
    common_intervals,
    intervals_below_zero,
)
from skytiles.night.mount_limits import NO_LIMITS, MountLimits
from skytiles.night.place import Place
from skytiles.night.reach import is_limited, reach_mask, reach_windows
from skytiles.night.solar_rating import SolarRating
from skytiles.night.sun_rule import (
    MARGIN_D,
    NEAR_SUN_DEG,
    NEAR_SUN_MARGIN_D,
    elongations_deg,
    sun_heights_deg,
    sun_up_minutes,
)
from skytiles.night.twilight import check_stretch, dark_intervals

Floats = npt.NDArray[np.float64]
Bools = npt.NDArray[np.bool_]

# A claim runs this long beyond its planned series.
LEASE_GRACE_S = 900.0
_DAY_S = 86400.0


def tile_windows(
    place: Place,
    ra_deg: float,
    dec_deg: float,
    *,
    start_mjd: float,
    hours: float,
    sun_below_deg: float = -12.0,
    solar: SolarRating | None = None,
    mount: MountLimits = NO_LIMITS,
) -> list[Interval]:
    """When a tile is within reach, the sky dark, and the solar rule content.

    Parameters
    ----------
    place : Place
    ra_deg, dec_deg : float          middle of the tile, ICRS, degrees
    start_mjd, hours : float         where the search starts (MJD, UTC) and how long it is
    sun_below_deg : float            the Sun's centre must be below this, degrees; 90: any time
    solar : SolarRating or None      the instrument; None: only up and dark
    mount : MountLimits              where it can point

    Returns
    -------
    list of (start, end)    MJD, UTC, in order; the way to the tile is not judged here: ask
        solar_problems for a start

    Raises
    ------
    NightError    for a stretch that is empty, endless or longer than 40 days

    Source: altitudes as in altitudes_deg, the Sun as in sun_altitudes_deg.
    """
    check_stretch(start_mjd, hours)
    end_mjd = start_mjd + hours / 24.0
    windows = reach_windows(place, mount, ra_deg, dec_deg, start_mjd=start_mjd, end_mjd=end_mjd)
    dark = dark_intervals(place, start_mjd=start_mjd, hours=hours, sun_below_deg=sun_below_deg)
    windows = common_intervals(windows, dark)
    if solar is None:
        return windows
    safe = safe_intervals(place, solar, ra_deg, dec_deg, start_mjd=start_mjd, end_mjd=end_mjd)
    return common_intervals(windows, safe)


def safe_intervals(
    place: Place,
    rating: SolarRating,
    ra_deg: float,
    dec_deg: float,
    *,
    start_mjd: float,
    end_mjd: float,
) -> list[Interval]:
    """When the solar rule lets an instrument look at a direction, margins taken off.

    Parameters
    ----------
    place : Place
    rating : SolarRating
    ra_deg, dec_deg : float       ICRS, degrees
    start_mjd, end_mjd : float    MJD, UTC

    Returns
    -------
    list of (start, end)    MJD, UTC, in order

    Source: our rule (DEVELOPERS.md, solar safety).
    """
    elongation_deg = elongations_deg(
        rating, np.array([ra_deg]), np.array([dec_deg]), start_mjd=start_mjd, end_mjd=end_mjd
    )[0]
    if rating.may_work_by_day and elongation_deg >= rating.avoidance_deg:
        return [(start_mjd, end_mjd)]
    margin_d = NEAR_SUN_MARGIN_D if elongation_deg <= NEAR_SUN_DEG else MARGIN_D
    sun_down = intervals_below_zero(
        lambda mjds: sun_heights_deg(place, mjds),
        start_mjd=start_mjd,
        end_mjd=end_mjd + margin_d,
        step_d=MINUTE_D,
    )
    # A window that runs into the Sun, or out of the search, ends its margin earlier.
    return [(start, end - margin_d) for start, end in sun_down if end - margin_d > start]


def observable_mask(
    place: Place,
    rating: SolarRating,
    ras_deg: Floats,
    decs_deg: Floats,
    mjds: Floats,
    *,
    duration_s: float = 0.0,
    sun_below_deg: float = -12.0,
    lease_grace_s: float = LEASE_GRACE_S,
    mount: MountLimits = NO_LIMITS,
) -> Bools:
    """Which tiles can be started when: within reach, dark and safe until the series is over.

    Parameters
    ----------
    place : Place
    rating : SolarRating
    ras_deg, decs_deg : (k,) float    ICRS, degrees
    mjds : (t,) float                 starts, MJD, UTC
    duration_s : float                length of the series, seconds
    sun_below_deg : float             the Sun's centre must stay below this, degrees
    lease_grace_s : float             the solar rule is judged this long beyond the series
    mount : MountLimits               where the instrument can point

    Returns
    -------
    (k, t) bool    the way to the tile is not judged: ask solar_problems for a chosen start

    Source: the same rule as solar_problems, never more permissive.
    """
    mjds = np.atleast_1d(np.asarray(mjds, dtype=float))
    ends = mjds + duration_s / _DAY_S
    moments = np.concatenate([mjds, (mjds + ends) / 2.0, ends])
    # A direction in the sky is up over a series when it is up at both ends and halfway.
    is_up = altitudes_deg([place], ras_deg, decs_deg, moments)[0] >= place.min_altitude_deg
    is_dark = sun_altitudes_deg([place], moments)[0] < sun_below_deg
    is_open = np.logical_and.reduce(np.split(is_up & is_dark, 3, axis=1))
    if is_limited(place, mount):
        is_open &= reach_mask(place, mount, ras_deg, decs_deg, mjds, duration_s=duration_s)
    lease_d = (duration_s + lease_grace_s) / _DAY_S
    return np.asarray(is_open & safe_mask(place, rating, ras_deg, decs_deg, mjds, lease_d=lease_d))


def safe_mask(
    place: Place,
    rating: SolarRating,
    ras_deg: Floats,
    decs_deg: Floats,
    mjds: Floats,
    *,
    lease_d: float,
) -> Bools:
    """Which tiles the solar rule allows for leases of one length from many starts.

    Parameters
    ----------
    place : Place
    rating : SolarRating
    ras_deg, decs_deg : (k,) float    ICRS, degrees
    mjds : (t,) float                 starts, MJD, UTC
    lease_d : float                   days

    Returns
    -------
    (k, t) bool

    Source: the same rule as solar_problems, never more permissive.
    """
    first_mjd, last_mjd = float(np.min(mjds)), float(np.max(mjds)) + lease_d
    elongations = elongations_deg(rating, ras_deg, decs_deg, start_mjd=first_mjd, end_mjd=last_mjd)[
        :, None
    ]
    minutes, is_up = sun_up_minutes(
        place, start_mjd=first_mjd, end_mjd=last_mjd + NEAR_SUN_MARGIN_D
    )
    n_up_before = np.concatenate([[0], np.cumsum(is_up)])

    def is_sun_coming(margin_d: float) -> Bools:
        firsts = np.searchsorted(minutes, mjds, side="right") - 1
        lasts = np.searchsorted(minutes, mjds + lease_d + margin_d, side="left")
        lasts = np.minimum(lasts, len(minutes) - 1)
        return np.asarray(n_up_before[lasts + 1] > n_up_before[firsts])

    is_near = elongations <= NEAR_SUN_DEG
    is_coming = np.where(is_near, is_sun_coming(NEAR_SUN_MARGIN_D), is_sun_coming(MARGIN_D))
    if rating.may_work_by_day:
        return np.asarray(~(is_coming & (elongations < rating.avoidance_deg)))
    return np.asarray(~is_coming)
