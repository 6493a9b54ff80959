"""astropy as an oracle: offline, and quiet about dates beyond its tables."""

import functools
import warnings

import numpy as np
import pytest
from astropy import units
from astropy.coordinates import AltAz, EarthLocation, SkyCoord, get_body
from astropy.time import Time
from astropy.utils import iers

# Beyond every table that this computer can hold.
_FIVE_YEARS_AHEAD_MJD = 63200.0


def _quiet(question):
    """Dates beyond the tables are meant: astropy need not warn of them."""

    @functools.wraps(question)
    def ask(*args, **kwargs):
        with warnings.catch_warnings():
            warnings.filterwarnings("ignore", message=".*dubious year.*")
            warnings.filterwarnings("ignore", message=".*polar motions.*")
            warnings.filterwarnings("ignore", message=".*outside of the range.*")
            return question(*args, **kwargs)

    return ask


class AstropyOracle:
    """Altitudes, Sun and Moon by astropy (ERFA)."""

    @_quiet
    def altitudes_azimuths_deg(self, place, ras_deg, decs_deg, mjds, *, ut1_minus_utc_s=None):
        stars = SkyCoord(np.asarray(ras_deg) * units.deg, np.asarray(decs_deg) * units.deg)
        times = Time(np.asarray(mjds)[None, :], format="mjd", scale="utc")
        if ut1_minus_utc_s is not None:
            times.delta_ut1_utc = ut1_minus_utc_s[None, :]
        seen = stars[:, None].transform_to(AltAz(obstime=times, location=_location(place)))
        return seen.alt.deg, seen.az.deg

    @_quiet
    def body_altitudes_deg(self, name, place, mjds):
        horizon = AltAz(obstime=Time(mjds, format="mjd"), location=_location(place))
        seen = get_body(name, horizon.obstime, horizon.location, ephemeris="builtin")
        return seen.transform_to(horizon).alt.deg

    @_quiet
    def body_radec_deg(self, name, mjds):
        seen = get_body(name, Time(mjds, format="mjd"), ephemeris="builtin")
        return seen.ra.deg, seen.dec.deg, seen.distance.km


def _location(place):
    return EarthLocation.from_geodetic(
        place.longitude_deg * units.deg, place.latitude_deg * units.deg, place.height_m * units.m
    )


@pytest.fixture(scope="session")
def astropy_oracle():
    """astropy with its downloads off, whatever the date."""
    with (
        iers.conf.set_temp("auto_download", False),
        iers.conf.set_temp("auto_max_age", None),
    ):
        yield AstropyOracle()


@pytest.fixture
def five_years_ahead_mjd():
    """A date beyond every table that this computer can hold."""
    return _FIVE_YEARS_AHEAD_MJD
