import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from skytiles.night.altitude import (
    altitude_azimuth_deg,
    altitude_azimuth_of_date_deg,
    altitudes_deg,
    moon_altitudes_deg,
    sun_altitudes_deg,
    zenith_radec_deg,
)
from skytiles.night.night_error import NightError
from skytiles.night.place import Place
from skytiles.sphere.angles import unit_vectors
from skytiles.sphere.time_scales import ut1_mjds

TONIGHT = 61375.7 + np.arange(24) / 24.0
ARCSEC = 1.0 / 3600.0
PLACES = [
    Place(52.1, 5.2, 10.0),
    Place(-30.2, -70.7, 2700.0),
    Place(-89.99, 0.0, 2800.0),
    Place(89.9, 120.0),
    Place(0.0, 179.999, 0.0),
    Place(19.8, -155.5, 4200.0),
]


def whole_sky(n, seed=5):
    rng = np.random.default_rng(seed)
    return rng.uniform(0.0, 360.0, n), np.degrees(np.arcsin(rng.uniform(-1.0, 1.0, n)))


def test_venus_over_washington(authority):
    # Meeus 1998, Ex. 13.b (published); azimuth there is counted from the south.
    row = authority["altaz_13b"]
    given_ = row["inputs"]
    altitudes, azimuths = altitude_azimuth_of_date_deg(
        Place(given_["latitude_deg"], given_["longitude_deg"]),
        unit_vectors([given_["ra_deg"]], [given_["dec_deg"]]),
        np.array([given_["gast_hour"] * np.pi / 12.0]),
    )
    assert [azimuths[0], altitudes[0]] == pytest.approx(row["expected"], abs=row["tolerance"])


@pytest.mark.parametrize("place", PLACES)
def test_altitudes_agree_with_astropy(place, astropy_oracle, no_network):
    ras_deg, decs_deg = whole_sky(150)
    expected, _ = astropy_oracle.altitudes_azimuths_deg(place, ras_deg, decs_deg, TONIGHT)
    found = altitudes_deg([place], ras_deg, decs_deg, TONIGHT)[0]
    is_high = expected > 10.0
    assert np.max(np.abs(found - expected)[is_high]) < 2.0 * ARCSEC


@pytest.mark.parametrize("place", PLACES[:2])
def test_altitudes_five_years_ahead_without_network(
    place, astropy_oracle, no_network, five_years_ahead_mjd
):
    ras_deg, decs_deg = whole_sky(50)
    mjds = five_years_ahead_mjd + TONIGHT % 1.0
    # Nobody knows how far the Earth will have turned: both are told the same.
    ut1_minus_utc_s = (ut1_mjds(mjds) - mjds) * 86400.0
    expected, _ = astropy_oracle.altitudes_azimuths_deg(
        place, ras_deg, decs_deg, mjds, ut1_minus_utc_s=ut1_minus_utc_s
    )
    found = altitudes_deg([place], ras_deg, decs_deg, mjds)[0]
    assert np.max(np.abs(found - expected)[expected > 10.0]) < 2.0 * ARCSEC


def test_altitudes_over_many_nights_agree_with_astropy(astropy_oracle):
    place = PLACES[0]
    ras_deg, decs_deg = whole_sky(20)
    mjds = 61075.0 + np.arange(0.0, 300.0, 7.31)
    expected, _ = astropy_oracle.altitudes_azimuths_deg(place, ras_deg, decs_deg, mjds)
    found = altitudes_deg([place], ras_deg, decs_deg, mjds)[0]
    assert np.max(np.abs(found - expected)[expected > 10.0]) < 2.0 * ARCSEC


def test_altitude_near_the_zenith_keeps_its_precision(astropy_oracle):
    place = PLACES[1]
    ra_deg, dec_deg = zenith_radec_deg(place, TONIGHT[3])
    ras_deg = ra_deg + np.linspace(-0.5, 0.5, 11)
    decs_deg = np.full(11, dec_deg)
    expected, _ = astropy_oracle.altitudes_azimuths_deg(place, ras_deg, decs_deg, TONIGHT[3:4])
    found = altitudes_deg([place], ras_deg, decs_deg, TONIGHT[3:4])[0]
    assert np.max(np.abs(found - expected)) < 2.0 * ARCSEC


def test_azimuths_agree_with_astropy(astropy_oracle):
    place = PLACES[0]
    altitudes, azimuths = altitude_azimuth_deg(place, 83.6, 22.0, TONIGHT)
    expected = astropy_oracle.altitudes_azimuths_deg(place, [83.6], [22.0], TONIGHT)
    assert np.max(np.abs(altitudes - expected[0][0])) < 2.0 * ARCSEC
    across = (azimuths - expected[1][0] + 180.0) % 360.0 - 180.0
    assert np.max(np.abs(across * np.cos(np.radians(altitudes)))) < 2.0 * ARCSEC


@pytest.mark.parametrize("place", PLACES)
def test_sun_and_moon_agree_with_astropy(place, astropy_oracle, no_network):
    mjds = 60975.0 + np.arange(0.0, 400.0, 3.37)
    sun = astropy_oracle.body_altitudes_deg("sun", place, mjds)
    assert np.max(np.abs(sun_altitudes_deg([place], mjds)[0] - sun)) < 5.0 * ARCSEC
    moon = astropy_oracle.body_altitudes_deg("moon", place, mjds)
    assert np.max(np.abs(moon_altitudes_deg([place], mjds)[0] - moon)) < 10.0 * ARCSEC


def test_many_places_give_the_same_as_one_at_a_time():
    ras_deg, decs_deg = whole_sky(30)
    together = altitudes_deg(PLACES, ras_deg, decs_deg, TONIGHT)
    assert together.shape == (len(PLACES), 30, len(TONIGHT))
    for site, place in enumerate(PLACES):
        alone = altitudes_deg([place], ras_deg, decs_deg, TONIGHT)[0]
        assert np.array_equal(together[site], alone)


def test_given_memory_is_filled_and_returned():
    ras_deg, decs_deg = whole_sky(30)
    memory = np.empty((len(PLACES), 30, len(TONIGHT)), dtype=np.float32)
    found = altitudes_deg(PLACES, ras_deg, decs_deg, TONIGHT, out=memory)
    assert found is memory
    assert np.array_equal(found, altitudes_deg(PLACES, ras_deg, decs_deg, TONIGHT))


def test_the_order_of_times_does_not_matter():
    ras_deg, decs_deg = whole_sky(10)
    mjds = 61375.0 + np.array([3.2, 0.1, 7.9, 0.3, 3.3])
    order = np.argsort(mjds)
    mixed = altitudes_deg(PLACES, ras_deg, decs_deg, mjds)
    sorted_ = altitudes_deg(PLACES, ras_deg, decs_deg, mjds[order])
    assert np.array_equal(mixed[:, :, order], sorted_)


def test_the_zenith_stands_at_ninety_degrees():
    for place in PLACES:
        altitude = altitude_azimuth_deg(place, *zenith_radec_deg(place, 61375.3), [61375.3])[0][0]
        assert altitude > 90.0 - 25.0 * ARCSEC


@given(ra_deg=st.floats(0.0, 360.0), dec_deg=st.floats(-90.0, 90.0), hours=st.floats(0.0, 24.0))
def test_opposite_directions_have_opposite_altitudes(ra_deg, dec_deg, hours):
    place, mjds = PLACES[0], [61375.0 + hours / 24.0]
    here = altitudes_deg([place], ra_deg, dec_deg, mjds)[0, 0, 0]
    there = altitudes_deg([place], ra_deg + 180.0, -dec_deg, mjds)[0, 0, 0]
    # Aberration moves both the same way: up to 2 x 20.5 arcsec.
    assert here + there == pytest.approx(0.0, abs=42.0 * ARCSEC)


@pytest.mark.parametrize("latitude_deg", [90.001, -91.0, float("nan"), float("inf")])
def test_a_place_off_the_earth_is_refused(latitude_deg):
    with pytest.raises(NightError, match="latitude"):
        Place(latitude_deg, 0.0)
