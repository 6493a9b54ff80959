"""Altitudes of 200 sites x 2,000 directions x 96 times, against astropy's AltAz in the same run."""

import time

import astropy
import astropy.units as u
import numpy as np
from astropy.coordinates import AltAz, EarthLocation, SkyCoord
from astropy.time import Time
from astropy.utils import iers

from skytiles.night import Place, altitudes_deg

N_SITES, N_DIRECTIONS, N_TIMES = 200, 2_000, 96
START_MJD = 61_375.0
iers.conf.auto_download = False
iers.conf.auto_max_age = None


def bench_altitudes():
    """Ours for all sites; astropy's for 4 of them, times 50 (it takes long and scales linearly)."""
    places, ras_deg, decs_deg, mjds = _question(np.random.default_rng(1))
    out = np.empty((N_SITES, N_DIRECTIONS, N_TIMES), dtype=np.float32)
    altitudes_deg(places, ras_deg, decs_deg, mjds, out=out)
    seconds = []
    for _ in range(5):
        started = time.perf_counter()
        altitudes_deg(places, ras_deg, decs_deg, mjds, out=out)
        seconds.append(time.perf_counter() - started)
    n_sampled = 4
    _astropy_deg(places[0], ras_deg[:2], decs_deg[:2], mjds)
    started = time.perf_counter()
    theirs = [_astropy_deg(place, ras_deg, decs_deg, mjds) for place in places[:n_sampled]]
    peer_s = (time.perf_counter() - started) * N_SITES / n_sampled
    errors_arcsec = [
        3600 * np.abs(out[site] - altitudes)[altitudes > 10].max()
        for site, altitudes in enumerate(theirs)
    ]
    ours_s = float(np.median(seconds))
    return {
        "ours_s": ours_s,
        "peer": f"astropy {astropy.__version__} SkyCoord.transform_to(AltAz)",
        "peer_s": peer_s,
        "ratio": peer_s / ours_s,
        "error": f"{max(errors_arcsec):.2f} arcsec above 10 deg",
        "peer_measured_sites": n_sampled,
    }


def _question(rng):
    places = [
        Place(float(latitude), float(longitude), 500.0)
        for latitude, longitude in zip(
            rng.uniform(-65, 65, N_SITES), rng.uniform(-180, 180, N_SITES), strict=True
        )
    ]
    ras_deg = rng.uniform(0, 360, N_DIRECTIONS)
    decs_deg = np.degrees(np.arcsin(rng.uniform(-1, 1, N_DIRECTIONS)))
    return places, ras_deg, decs_deg, START_MJD + np.arange(N_TIMES) / 96


def _astropy_deg(place, ras_deg, decs_deg, mjds):
    location = EarthLocation.from_geodetic(
        place.longitude_deg * u.deg, place.latitude_deg * u.deg, place.height_m * u.m
    )
    frame = AltAz(obstime=Time(mjds, format="mjd", scale="utc"), location=location)
    directions = SkyCoord(ras_deg[:, None] * u.deg, decs_deg[:, None] * u.deg)
    return directions.transform_to(frame).alt.deg
