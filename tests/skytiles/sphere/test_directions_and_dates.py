import sys
from datetime import UTC, datetime, timedelta, timezone
from subprocess import run

import numpy as np
import pytest
from astropy import units
from astropy.coordinates import FK5, SkyCoord
from astropy.time import Time

from skytiles.sphere.angles import ras_decs_deg, separations_deg, unit_vectors
from skytiles.sphere.calendar import datetime_from_mjd, mjd_from_datetime, mjd_from_iso
from skytiles.sphere.galactic import galactic_lons_lats_deg
from skytiles.sphere.precession import precession_from_j2000


def test_galactic_coordinates_agree_with_astropy():
    rng = np.random.default_rng(1)
    ras, decs = rng.uniform(0, 360, 500), np.degrees(np.arcsin(rng.uniform(-1, 1, 500)))
    expected = SkyCoord(ras * units.deg, decs * units.deg).galactic
    lons, lats = galactic_lons_lats_deg(ras, decs)
    # astropy goes through FK4 with constants of a few milliarcsec.
    assert separations_deg(lons, lats, expected.l.deg, expected.b.deg).max() < 0.1 / 3600


def test_theta_persei_of_meeus(authority):
    # Meeus 1998, Ex. 21.b p. 135, the same IAU 1976 angles: 0.01 arcsec; published.
    row = authority["precess_21b"]
    given = row["inputs"]
    years = (given["mjd_tt"] - 51544.5) / 365.25
    ra = given["ra_deg"] + 15.0 * given["pm_ra_s_per_yr"] * years / 3600.0
    dec = given["dec_deg"] + given["pm_dec_arcsec_per_yr"] * years / 3600.0
    moved = precession_from_j2000(2000.0 + years) @ unit_vectors(ra, dec)
    assert separations_deg(*ras_decs_deg(moved), *row["expected"]) < 0.01 / 3600.0


@pytest.mark.parametrize("year", [1990.0, 2015.5, 2027.2])
def test_precession_agrees_with_astropy(year):
    ras, decs = np.array([0.0, 83.6, 200.0]), np.array([89.9, -5.4, -60.0])
    expected = SkyCoord(ras * units.deg, decs * units.deg, frame=FK5(equinox="J2000"))
    expected = expected.transform_to(FK5(equinox=Time(year, format="jyear")))
    found = ras_decs_deg(unit_vectors(ras, decs) @ precession_from_j2000(year).T)
    # astropy's FK5 uses the angles of Capitaine et al. 2003: 0.15 arcsec until 2030.
    assert separations_deg(*found, expected.ra.deg, expected.dec.deg).max() < 0.15 / 3600


def test_dates_agree_with_astropy():
    for text in ("1987-04-10T19:21:00", "2027-03-14T05:06:07.25", "2000-01-01T12:00:00"):
        assert mjd_from_iso(text) == pytest.approx(Time(text, scale="utc").mjd, abs=1e-10)


def test_zones_are_honoured_and_utc_is_assumed():
    local = datetime(2027, 3, 14, 7, 6, 7, tzinfo=timezone(timedelta(hours=2)))
    assert mjd_from_datetime(local) == mjd_from_iso("2027-03-14T05:06:07Z")
    assert mjd_from_iso("2027-03-14T05:06:07") == mjd_from_iso("2027-03-14T07:06:07+02:00")


def test_dates_and_back():
    moment = datetime(2027, 3, 14, 5, 6, 7, tzinfo=UTC)
    assert abs(datetime_from_mjd(mjd_from_datetime(moment)) - moment) < timedelta(microseconds=2)


def test_nothing_imports_healpy_or_astropy():
    """They cost seconds; the arithmetic that is needed is our own, held against them here."""
    modules = "skytiles.region.make_region, skytiles.tiling.frame_header, skytiles.planner"
    check = f"import sys, {modules}; assert not {{'healpy', 'astropy'}} & set(sys.modules)"
    run([sys.executable, "-c", check], check=True)
