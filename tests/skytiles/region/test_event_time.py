"""Time scales, the barycentre and FK5, with astropy as the oracle."""

import astropy.units as u
import numpy as np
import pytest
from astropy.constants import c
from astropy.coordinates import FK5, ICRS, SkyCoord, get_body_barycentric
from astropy.time import Time

from skytiles.errors import AlertError
from skytiles.region.event_time import earth_delay_s, mjd_of_words, utc_mjd
from skytiles.region.fk5 import icrs_from_fk5_deg
from skytiles.region.read_voevent import read_voevent
from skytiles.region.voevent_place import SYSTEMS
from skytiles.sphere.angles import separations_deg, unit_vectors
from skytiles.sphere.calendar import mjd_from_iso
from tests.skytiles.region.voevent_words import packet, where_when

MOMENTS = (
    "1999-12-31T23:59:30",
    "2016-12-31T23:59:59",
    "2017-01-01T00:00:00",
    "2027-03-14T05:06:07",
)


def oracle_utc(words, scale):
    """UTC as MJD of days of 86,400 s, by way of astropy's words."""
    given = Time(words, scale="tai" if scale == "GPS" else scale.lower(), precision=9)
    shifted = given + 19.0 * u.s if scale == "GPS" else given
    return mjd_of_words(shifted.utc.isot)


def oracle_delay_s(mjd, ra_deg, dec_deg):
    """Projection of the Earth's barycentric position, by astropy's series."""
    earth = get_body_barycentric("earth", Time(mjd, format="mjd", scale="tdb")).xyz
    return float((earth @ unit_vectors(ra_deg, dec_deg) / c).to_value(u.s))


@pytest.mark.parametrize("scale", ["UTC", "TT", "TDB", "GPS", "TAI"])
@pytest.mark.parametrize("words", MOMENTS)
def test_time_scales_are_turned_to_utc(words, scale):
    ours = utc_mjd(mjd_of_words(words), scale)
    assert abs(ours - oracle_utc(words, scale)) * 86400.0 < 2e-4


def test_beside_a_leap_second_seconds_are_not_lost():
    # TT is TAI + 32.184 s; on 2017-01-01 TAI - UTC went from 36 to 37 s.
    before = utc_mjd(mjd_from_iso("2017-01-01T00:01:07.684"), "TT")
    after = utc_mjd(mjd_from_iso("2017-01-01T00:01:10.184"), "TT")
    assert before == pytest.approx(mjd_from_iso("2016-12-31T23:59:59.5"), abs=1e-9)
    assert after == pytest.approx(mjd_from_iso("2017-01-01T00:00:01"), abs=1e-9)


def test_a_leap_second_is_the_first_of_the_next_minute():
    assert mjd_of_words("2016-12-31T23:59:60") == mjd_from_iso("2017-01-01T00:00:00Z")
    assert mjd_of_words("2016-12-31T23:59:60.5") == pytest.approx(
        mjd_from_iso("2017-01-01T00:00:00.5Z"), abs=1e-10
    )


@pytest.mark.parametrize("words", ["", "2027", "yesterday", "2027-13-01T00:00:00", "9" * 5000])
def test_what_is_no_time_is_refused(words):
    with pytest.raises(AlertError, match="event time"):
        mjd_of_words(words)


def test_another_scale_is_refused():
    with pytest.raises(AlertError, match="'LOCAL'"):
        utc_mjd(61000.0, "LOCAL")


@pytest.mark.parametrize("year", [1960, 1999, 2016, 2027, 2049])
def test_the_delay_to_the_barycentre_agrees_with_astropy(year):
    rng = np.random.default_rng(year)
    for _ in range(20):
        ra, dec = rng.uniform(0.0, 360.0), np.rad2deg(np.arcsin(rng.uniform(-1.0, 1.0)))
        mjd = mjd_from_iso(f"{year}-01-01") + rng.uniform(0.0, 365.0)
        assert abs(earth_delay_s(mjd, unit_vectors(ra, dec)) - oracle_delay_s(mjd, ra, dec)) < 0.25


def test_positions_are_turned_from_fk5_as_astropy_turns_them():
    rng = np.random.default_rng(5)
    ras = np.concatenate([rng.uniform(0.0, 360.0, 20), [0.0, 0.0, 123.0, 359.99999]])
    decs = np.concatenate([rng.uniform(-90.0, 90.0, 20), [90.0, -90.0, 0.0, 0.0]])
    theirs = SkyCoord(ras, decs, unit="deg", frame=FK5(equinox="J2000")).transform_to(ICRS())
    ours = np.array([icrs_from_fk5_deg(*pair) for pair in zip(ras, decs, strict=True)])
    apart = separations_deg(ours[:, 0], ours[:, 1], theirs.ra.deg, theirs.dec.deg)
    assert apart.max() * 3600.0 < 1e-6
    # And it is a turn of some 20 mas, not none.
    assert separations_deg(ours[:, 0], ours[:, 1], ras, decs).max() * 3.6e6 > 15.0


@pytest.mark.parametrize("system", SYSTEMS)
def test_every_system_gives_the_utc_of_astropy(system):
    words = "2027-03-14T05:06:07"
    alert = read_voevent(packet(where_when(system=system, time=words)), now_mjd=None)
    scale, _, place = system.split("-")
    expected = oracle_utc(words, scale)
    if place == "BARY":
        expected -= oracle_delay_s(expected, 266.4, -29.0) / 86400.0
    slack_s = 0.25 if place == "BARY" else 2e-4
    assert abs(alert.event_mjd - expected) * 86400.0 < slack_s
