"""Altitudes of many directions, at many places, at many times."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

import numpy as np
import numpy.typing as npt
from numpy.typing import ArrayLike

from skytiles.night.apparent_place import apparent_vectors
from skytiles.night.moon import moon_positions_of_date_km
from skytiles.night.of_date import icrs_from_of_date
from skytiles.night.place import Place, positions_km, zenith_vectors
from skytiles.night.sun import AU_KM, sun_distances_au, sun_vectors_of_date
from skytiles.sphere.angles import ras_decs_deg, unit_vectors
from skytiles.sphere.sidereal import gast_rad
from skytiles.sphere.time_scales import centuries_since_j2000, tt_mjds, ut1_mjds

Floats = npt.NDArray[np.float64]
Floats32 = npt.NDArray[np.float32]

# Above 87 degrees single precision would lose more than half an arcsecond in the arc sine.
_SINE_NEAR_ZENITH = 0.9986
# Larger products wake the threads of the linear algebra library, which then wait for each other
# on a busy machine: thirty times slower was seen.
_BLOCK_SIZE = 80_000


def altitudes_deg(
    places: Sequence[Place],
    ras_deg: ArrayLike,
    decs_deg: ArrayLike,
    mjds: ArrayLike,
    *,
    out: Floats32 | None = None,
) -> Floats32:
    """Altitudes without refraction of k directions at s places and t times.

    Parameters
    ----------
    places : (s,) Place
    ras_deg, decs_deg : (k,) float    ICRS, degrees
    mjds : (t,) float                 MJD, UTC
    out : (s, k, t) float32           filled and returned when given: a repeated question is three
        times faster without fresh memory

    Returns
    -------
    (s, k, t) float32    degrees; error below 2 arcsec above 10 degrees in the years for which
        UT1 is tabled (skytiles.sphere.time_scales), else below 15 arcsec

    Source: unit vectors: precession, nutation and aberration once a day, sidereal time, one
    matrix product. Polar motion and diurnal aberration (0.3 arcsec each) are left out.
    """
    mjds = np.atleast_1d(np.asarray(mjds, dtype=float))
    stars = unit_vectors(np.atleast_1d(ras_deg), np.atleast_1d(decs_deg))
    shape = (len(places), len(stars), len(mjds))
    altitudes = np.empty(shape, dtype=np.float32) if out is None else out
    zeniths = zenith_vectors(places)
    for times in _days(mjds):
        apparent = apparent_vectors(stars, float(np.mean(mjds[times])))
        turned = _zeniths_of_date(zeniths, mjds[times])
        for site, site_zeniths in enumerate(turned):
            for rows in _blocks(shape[1], len(site_zeniths)):
                altitudes[site][rows, times] = _arcs_deg(apparent[rows], site_zeniths)
    return altitudes


def altitude_azimuth_deg(
    place: Place, ra_deg: ArrayLike, dec_deg: ArrayLike, mjds: ArrayLike
) -> tuple[Floats, Floats]:
    """Altitude without refraction and azimuth of one direction, or of one for each time.

    Parameters
    ----------
    place : Place
    ra_deg, dec_deg : float or (t,) float    ICRS, degrees
    mjds : (t,) float                        MJD, UTC

    Returns
    -------
    (t,) float, (t,) float    degrees; azimuth from north by east, 0..360

    Source: as altitudes_deg.
    """
    mjds = np.atleast_1d(np.asarray(mjds, dtype=float))
    ras, decs = np.broadcast_to(ra_deg, mjds.shape), np.broadcast_to(dec_deg, mjds.shape)
    stars = unit_vectors(ras, decs)
    for times in _days(mjds):
        stars[times] = apparent_vectors(stars[times], float(np.mean(mjds[times])))
    return altitude_azimuth_of_date_deg(place, stars, gast_rad(ut1_mjds(mjds)))


def altitude_azimuth_of_date_deg(
    place: Place, vectors: Floats, gasts_rad: Floats
) -> tuple[Floats, Floats]:
    """Altitude and azimuth of directions that are already on the equator of date.

    Parameters
    ----------
    place : Place
    vectors : (t, 3) float      unit vectors, true equator and equinox of date
    gasts_rad : (t,) float      Greenwich apparent sidereal time, radians

    Returns
    -------
    (t,) float, (t,) float    degrees; azimuth from north by east, 0..360

    Source: Meeus 1998, Astronomical Algorithms, eq. 13.5 and 13.6, in vectors.
    """
    meridians = gasts_rad + np.radians(place.longitude_deg)
    latitude = np.radians(place.latitude_deg)
    towards_meridian = vectors[:, 0] * np.cos(meridians) + vectors[:, 1] * np.sin(meridians)
    east = vectors[:, 1] * np.cos(meridians) - vectors[:, 0] * np.sin(meridians)
    north = vectors[:, 2] * np.cos(latitude) - towards_meridian * np.sin(latitude)
    up = vectors[:, 2] * np.sin(latitude) + towards_meridian * np.cos(latitude)
    azimuths = np.mod(np.degrees(np.arctan2(east, north)), 360.0)
    return np.degrees(np.arctan2(up, np.hypot(east, north))), azimuths


def zenith_radec_deg(place: Place, mjd: float) -> tuple[float, float]:
    """Direction of the zenith.

    Parameters
    ----------
    place : Place
    mjd : float    MJD, UTC

    Returns
    -------
    float, float    right ascension 0..360 and declination, ICRS, degrees

    Source: sidereal time, precession and nutation; aberration (20 arcsec) is left out.
    """
    mjds = np.array([mjd])
    zenith = _zeniths_of_date(zenith_vectors([place]), mjds)[0]
    ras_deg, decs_deg = ras_decs_deg(icrs_from_of_date(zenith, tt_mjds(mjds)))
    return float(ras_deg[0]), float(decs_deg[0])


def sun_altitudes_deg(places: Sequence[Place], mjds: ArrayLike) -> Floats:
    """Altitudes of the Sun's centre, without refraction.

    Parameters
    ----------
    places : (s,) Place
    mjds : (t,) float    MJD, UTC

    Returns
    -------
    (s, t) float    degrees; error below 20 arcsec

    Source: as sun_radec_deg, seen from the place.
    """
    mjds = np.atleast_1d(np.asarray(mjds, dtype=float))
    mjds_tt = tt_mjds(mjds)
    distances_km = AU_KM * sun_distances_au(centuries_since_j2000(mjds_tt))
    return _body_altitudes_deg(places, sun_vectors_of_date(mjds_tt) * distances_km[:, None], mjds)


def moon_altitudes_deg(places: Sequence[Place], mjds: ArrayLike) -> Floats:
    """Altitudes of the Moon's centre as seen from the places, without refraction.

    Parameters
    ----------
    places : (s,) Place
    mjds : (t,) float    MJD, UTC

    Returns
    -------
    (s, t) float    degrees; error below 30 arcsec

    Source: as moon_radec_deg, less the place's own position (the parallax is up to a degree).
    """
    mjds = np.atleast_1d(np.asarray(mjds, dtype=float))
    return _body_altitudes_deg(places, moon_positions_of_date_km(tt_mjds(mjds)), mjds)


def _body_altitudes_deg(places: Sequence[Place], positions: Floats, mjds: Floats) -> Floats:
    zeniths = _zeniths_of_date(zenith_vectors(places), mjds)
    own_positions = _zeniths_of_date(positions_km(places), mjds)
    seen = positions[None, :, :] - own_positions
    heights = np.sum(zeniths * seen, axis=-1)
    crosses = np.linalg.norm(np.cross(zeniths, seen), axis=-1)
    return np.asarray(np.degrees(np.arctan2(heights, crosses)))


def _days(mjds: Floats) -> Iterator[slice | npt.NDArray[np.int64]]:
    """Which times belong to the same day; nearly always all of them, in one slice."""
    days = np.floor(mjds - 0.5) if np.ptp(mjds) > 1.0 else np.zeros(len(mjds))
    kinds = np.unique(days)
    if len(kinds) == 1:
        yield slice(None)
        return
    for day in kinds:
        yield np.flatnonzero(days == day)


def _blocks(n_stars: int, n_times: int) -> Iterator[slice]:
    """Rows that make products of at most _BLOCK_SIZE numbers."""
    n_rows = max(1, _BLOCK_SIZE // n_times)
    for first in range(0, n_stars, n_rows):
        yield slice(first, first + n_rows)


def _zeniths_of_date(zeniths: Floats, mjds: Floats) -> Floats:
    """(s, 3) in the frame of the Earth to (s, t, 3) on the equator of date."""
    turns = gast_rad(ut1_mjds(mjds))
    cosines, sines = np.cos(turns), np.sin(turns)
    x, y, z = (zeniths[:, axis, None] for axis in range(3))
    return np.stack(
        [x * cosines - y * sines, x * sines + y * cosines, z + np.zeros_like(turns)], axis=-1
    )


def _arcs_deg(stars: Floats, zeniths: Floats) -> Floats32:
    """(k, t) altitudes in single precision, mended near the zenith in double precision."""
    sines = stars.astype(np.float32) @ zeniths.astype(np.float32).T
    # flatnonzero: nonzero in two dimensions takes longer than everything else here together.
    near_stars, near_times = np.divmod(np.flatnonzero(sines > _SINE_NEAR_ZENITH), sines.shape[1])
    np.clip(sines, -1.0, 1.0, out=sines)
    arcs: Floats32 = np.arcsin(sines, out=sines)
    if near_stars.size:
        crosses = np.linalg.norm(np.cross(stars[near_stars], zeniths[near_times]), axis=-1)
        arcs[near_stars, near_times] = np.pi / 2.0 - np.arcsin(crosses)
    arcs *= np.float32(180.0 / np.pi)
    return arcs
