"""Dusk and dawn at the site; astropy is the oracle."""

from datetime import UTC, datetime, timedelta

import pytest
from astropy import units
from astropy.coordinates import AltAz, EarthLocation, get_sun
from astropy.time import Time

from campaigns.selectors.tonight import get_tonight
from tests.campaigns import stage

pytestmark = pytest.mark.django_db


def tonight(campaign, instrument, now):
    campaign.clock_now = now
    return get_tonight(campaign, instrument, wall_now=now)


def sun_altitude_deg(site, moment):
    place = EarthLocation(site.longitude_deg * units.deg, site.latitude_deg * units.deg)
    frame = AltAz(obstime=Time(moment), location=place)
    return get_sun(frame.obstime).transform_to(frame).alt.deg


@pytest.mark.parametrize("hour", [18, 19, 21, 24, 27, 28, 31])
def test_dusk_and_dawn_are_those_of_the_present_or_the_next_darkness(campaign, camera, hour):
    now = stage.NOW.replace(hour=0) + timedelta(hours=hour)
    night = tonight(campaign, camera, now)["night"]
    dusk, dawn = (datetime.fromisoformat(night[name]) for name in ("dusk", "dawn"))
    assert dawn > now
    assert (dusk <= now) == (sun_altitude_deg(camera.site, now) <= -12.0)
    for moment in (dusk, dawn):
        # The Sun falls or rises by a degree in 6 minutes: 5 seconds.
        assert sun_altitude_deg(camera.site, moment) == pytest.approx(-12.0, abs=0.015)
    assert sun_altitude_deg(camera.site, dusk + timedelta(hours=1)) < -12.0


def test_when_it_is_dark_already_the_curves_begin_now(campaign, camera):
    answer = tonight(campaign, camera, stage.NOW)
    assert answer["night"]["dusk"] < answer["now"]
    assert answer["curves"]
    assert {curve[0]["at"] for curve in answer["curves"].values()} == {answer["now"]}


@pytest.mark.parametrize(("latitude_deg", "month", "is_dark"), [(89.0, 6, False), (89.0, 12, True)])
def test_where_the_sun_stays_up_or_down_there_is_neither_dusk_nor_dawn(
    campaign, latitude_deg, month, is_dark
):
    camera = stage.make_observer("Observer Pol", latitude_deg=latitude_deg)
    now = datetime(2024, month, 21, 12, tzinfo=UTC)
    assert (sun_altitude_deg(camera.site, now) < -12.0) == is_dark
    assert tonight(campaign, camera, now)["night"] == {"dusk": None, "dawn": None}
