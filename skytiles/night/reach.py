"""Whether a site's skyline and a mount's limits leave a direction free."""

from __future__ import annotations

import itertools
import math
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from skytiles.night.apparent_place import apparent_vectors
from skytiles.night.clock_words import clock_words
from skytiles.night.horizon_mask import skyline_altitudes_deg
from skytiles.night.intervals import MINUTE_D, Interval, intervals_below_zero
from skytiles.night.mount_limits import NO_LIMITS, MountLimits
from skytiles.night.place import Place
from skytiles.sphere.angles import unit_vectors
from skytiles.sphere.sidereal import gast_rad
from skytiles.sphere.time_scales import ut1_mjds

Floats = npt.NDArray[np.float64]
Bools = npt.NDArray[np.bool_]

_DAY_S = 86400.0
_DEG_PER_HOUR = 15.0
# A series is looked at in steps of this length: the sky turns by half a degree.
_STEP_S = 120.0


@dataclass(frozen=True)
class LocalDirections:
    """Directions as a mount meets them, degrees: (k, t), and declinations of date (k, 1)."""

    altitudes_deg: Floats
    azimuths_deg: Floats
    hour_angles_deg: Floats
    decs_deg: Floats


def local_directions(
    place: Place, ras_deg: Floats, decs_deg: Floats, mjds: Floats
) -> LocalDirections:
    """Altitudes, azimuths, hour angles and declinations of date.

    Parameters
    ----------
    place : Place
    ras_deg, decs_deg : (k,) float    ICRS, degrees
    mjds : (t,) float                 MJD, UTC

    Returns
    -------
    LocalDirections    degrees, hour angles -180..180, negative before the meridian; good to 2
        arcsec within half a day of the middle of the times, to 20 within three weeks

    Source: Meeus 1998, Astronomical Algorithms, eq. 13.5 and 13.6, in vectors; hour angle = local
    apparent sidereal time less right ascension of date.
    """
    stars = apparent_vectors(unit_vectors(ras_deg, decs_deg), float(np.mean(mjds)))
    meridians = gast_rad(ut1_mjds(np.asarray(mjds))) + math.radians(place.longitude_deg)
    latitude = math.radians(place.latitude_deg)
    x, y, z = (stars[:, axis, None] for axis in range(3))
    towards_meridian = x * np.cos(meridians) + y * np.sin(meridians)
    east = y * np.cos(meridians) - x * np.sin(meridians)
    north = z * math.cos(latitude) - towards_meridian * math.sin(latitude)
    up = z * math.sin(latitude) + towards_meridian * math.cos(latitude)
    return LocalDirections(
        altitudes_deg=np.degrees(np.arctan2(up, np.hypot(east, north))),
        azimuths_deg=np.mod(np.degrees(np.arctan2(east, north)), 360.0),
        hour_angles_deg=np.degrees(np.arctan2(-east, towards_meridian)),
        decs_deg=np.degrees(np.arcsin(np.clip(z, -1.0, 1.0))),
    )


def clearances_deg(place: Place, mount: MountLimits, seen: LocalDirections) -> Floats:
    """How far inside all limits directions are.

    Parameters
    ----------
    place : Place                 its lowest altitude and its horizon mask
    mount : MountLimits
    seen : LocalDirections        of k directions at t times

    Returns
    -------
    (k, t) float    degrees to the nearest limit; negative: out of reach

    Source: definition.
    """
    floors = np.maximum(
        skyline_altitudes_deg(place.horizon, seen.azimuths_deg),
        max(place.min_altitude_deg, mount.min_altitude_deg),
    )
    rooms = [
        seen.altitudes_deg - floors,
        _room(seen.altitudes_deg, -np.inf, _open(mount.max_altitude_deg, 90.0)),
        _room(
            seen.hour_angles_deg,
            _open(mount.min_hour_angle_h, -12.0) * _DEG_PER_HOUR,
            _open(mount.max_hour_angle_h, 12.0) * _DEG_PER_HOUR,
        ),
        _room(seen.decs_deg, _open(mount.min_dec_deg, -90.0), _open(mount.max_dec_deg, 90.0)),
    ]
    return np.asarray(np.minimum.reduce([np.broadcast_to(r, rooms[0].shape) for r in rooms]))


def is_limited(place: Place, mount: MountLimits) -> bool:
    """Whether more than the lowest altitude of the site has to be asked.

    Parameters
    ----------
    place : Place
    mount : MountLimits

    Returns
    -------
    bool
    """
    return bool(place.horizon) or mount != NO_LIMITS


def reach_mask(
    place: Place,
    mount: MountLimits,
    ras_deg: Floats,
    decs_deg: Floats,
    mjds: Floats,
    *,
    duration_s: float,
) -> Bools:
    """Which tiles stay within reach from which starts until the series is over.

    Parameters
    ----------
    place : Place
    mount : MountLimits
    ras_deg, decs_deg : (k,) float    ICRS, degrees
    mjds : (t,) float                 starts, MJD, UTC
    duration_s : float                length of the series, seconds

    Returns
    -------
    (k, t) bool    judged every two minutes of the series

    Source: definition.
    """
    starts = np.atleast_1d(np.asarray(mjds, dtype=float))
    is_free = np.ones((np.size(ras_deg), len(starts)), dtype=bool)
    first_hours = last_hours = np.zeros(is_free.shape)
    for number, offset_s in enumerate(_offsets_s(duration_s)):
        seen = local_directions(place, ras_deg, decs_deg, starts + offset_s / _DAY_S)
        is_free &= clearances_deg(place, mount, seen) >= 0.0
        first_hours = seen.hour_angles_deg if number == 0 else first_hours
        last_hours = seen.hour_angles_deg
    if mount.crosses_meridian:
        return is_free
    return np.asarray(is_free & ~_crosses(first_hours, last_hours))


def reach_windows(
    place: Place,
    mount: MountLimits,
    ra_deg: float,
    dec_deg: float,
    *,
    start_mjd: float,
    end_mjd: float,
) -> list[Interval]:
    """When a direction is within reach.

    Parameters
    ----------
    place : Place
    mount : MountLimits
    ra_deg, dec_deg : float       ICRS, degrees
    start_mjd, end_mjd : float    MJD, UTC

    Returns
    -------
    list of (start, end)    MJD, UTC, in order; for a mount that must turn over at the meridian two
        windows meet there, so that no series lies across it

    Source: definition; crossings by bisection to 0.001 s, gaps shorter than two minutes are missed.
    """
    ras, decs = np.array([ra_deg]), np.array([dec_deg])

    def seen(mjds: Floats) -> LocalDirections:
        return local_directions(place, ras, decs, mjds)

    windows = intervals_below_zero(
        lambda mjds: -clearances_deg(place, mount, seen(mjds))[0],
        start_mjd=start_mjd,
        end_mjd=end_mjd,
        step_d=2.0 * MINUTE_D,
    )
    if mount.crosses_meridian:
        return windows
    # The sine of the hour angle is below zero before the meridian and jumps nowhere.
    before = intervals_below_zero(
        lambda mjds: np.sin(np.radians(seen(mjds).hour_angles_deg[0])),
        start_mjd=start_mjd,
        end_mjd=end_mjd,
    )
    turns = [end for _, end in before if end < end_mjd]
    return [part for window in windows for part in _cut(window, turns)]


def reach_problems(
    place: Place,
    mount: MountLimits,
    ra_deg: float,
    dec_deg: float,
    *,
    start_mjd: float,
    end_mjd: float,
) -> list[str]:
    """Why a site or a mount cannot follow a tile during a series.

    Parameters
    ----------
    place : Place
    mount : MountLimits
    ra_deg, dec_deg : float       middle of the tile, ICRS, degrees
    start_mjd, end_mjd : float    MJD, UTC

    Returns
    -------
    list of str    plain sentences, for the owner of the site only: they may give its skyline away

    Source: definition.
    """
    mjds = start_mjd + np.array(_offsets_s((end_mjd - start_mjd) * _DAY_S)) / _DAY_S
    seen = local_directions(place, np.array([ra_deg]), np.array([dec_deg]), mjds)
    return [
        *_altitude_problems(place, mount, seen),
        *_mount_problems(mount, seen),
        *_meridian_problems(mount, seen, mjds),
    ]


def _altitude_problems(place: Place, mount: MountLimits, seen: LocalDirections) -> list[str]:
    lowest, highest = float(seen.altitudes_deg.min()), float(seen.altitudes_deg.max())
    problems = []
    if lowest < place.min_altitude_deg:
        begins = f"this site begins at {place.min_altitude_deg:.0f}"
        problems.append(f"The tile is at {lowest:.0f} degrees then; {begins}.")
    elif (seen.altitudes_deg < skyline_altitudes_deg(place.horizon, seen.azimuths_deg)).any():
        problems.append("The tile is behind the skyline of your site then.")
    if lowest < mount.min_altitude_deg or highest > mount.max_altitude_deg:
        reach = f"{mount.min_altitude_deg:g} to {mount.max_altitude_deg:g} degrees"
        problems.append(f"The mount reaches altitudes from {reach}.")
    return problems


def _mount_problems(mount: MountLimits, seen: LocalDirections) -> list[str]:
    problems = []
    dec_deg = float(seen.decs_deg[0, 0])
    if not mount.min_dec_deg <= dec_deg <= mount.max_dec_deg:
        reach = f"{mount.min_dec_deg:g} to {mount.max_dec_deg:g} degrees"
        problems.append(f"The mount reaches declinations from {reach}.")
    hours = seen.hour_angles_deg / _DEG_PER_HOUR
    if hours.min() < mount.min_hour_angle_h or hours.max() > mount.max_hour_angle_h:
        reach = f"{mount.min_hour_angle_h:g} to {mount.max_hour_angle_h:g} h"
        problems.append(f"The mount reaches hour angles from {reach}.")
    return problems


def _meridian_problems(mount: MountLimits, seen: LocalDirections, mjds: Floats) -> list[str]:
    hours = seen.hour_angles_deg[0]
    if mount.crosses_meridian or not _crosses(hours[:1], hours[-1:])[0]:
        return []
    after = clock_words(float(mjds[np.argmax(hours >= 0.0)]))
    return [f"The series crosses the meridian, where this mount turns over: start about {after}."]


def _crosses(first_hours: Floats, last_hours: Floats) -> Bools:
    """Upper culmination lies between; at the lower one the hour angle jumps the other way."""
    return np.asarray((first_hours < 0.0) & (last_hours > 0.0) & (last_hours - first_hours < 180.0))


def _cut(window: Interval, turns: list[float]) -> list[Interval]:
    inside = [turn for turn in turns if window[0] < turn < window[1]]
    bounds = [window[0], *inside, window[1]]
    return list(itertools.pairwise(bounds))


def _offsets_s(duration_s: float) -> list[float]:
    n_steps = max(2, math.ceil(duration_s / _STEP_S))
    return [duration_s * step / n_steps for step in range(n_steps + 1)]


def _open(limit: float, end_of_range: float) -> float:
    """A limit at the end of its range is none."""
    return math.copysign(np.inf, end_of_range) if limit == end_of_range else limit


def _room(values: Floats, lowest: float, highest: float) -> Floats:
    return np.minimum(values - lowest, highest - values)
