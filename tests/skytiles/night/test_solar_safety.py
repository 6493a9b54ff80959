"""The rule that can hurt somebody, each clause by itself."""

import functools

import numpy as np
import pytest

from skytiles.night.night_error import NightError
from skytiles.night.place import Place
from skytiles.night.solar_rating import SolarRating
from skytiles.night.solar_safety import solar_problems
from skytiles.night.sun_rule import sun_limit_deg
from tests.skytiles.night.sun_cases import MINUTE, ask, limit_deg

DAY = 61375.0
SEA_LEVEL = Place(50.0, 8.0, 0.0)
PEAK = Place(50.0, 8.0, 4000.0)
EYE = SolarRating("eye")
ROBOT = SolarRating("camera", is_daytime_rated=True, is_eye_free=True, sun_avoidance_deg=45.0)
# Well away from the Sun of that day, which stands at RA 248, Dec -22.
FAR = (100.0, 40.0)


@pytest.fixture(scope="module")
def sun_rises_mjd(astropy_oracle):
    """When the Sun comes above a place's limit on the day of these tests, by astropy."""

    @functools.cache
    def find(place):
        minutes = DAY + np.arange(0.25, 0.35, MINUTE / 4.0)
        heights = astropy_oracle.body_altitudes_deg("sun", place, minutes) - limit_deg(place)
        return float(minutes[np.flatnonzero((heights[1:] > 0.0) & (heights[:-1] <= 0.0))[0]])

    return find


@pytest.fixture
def sun_radec(astropy_oracle):
    """Direction of the Sun by astropy."""

    def find(mjd):
        ras_deg, decs_deg, _ = astropy_oracle.body_radec_deg("sun", np.array([mjd]))
        return float(ras_deg[0]), float(decs_deg[0])

    return find


def test_the_limit_falls_with_the_dip_of_the_horizon():
    assert sun_limit_deg(Place(0.0, 0.0, 0.0)) == -1.0
    assert sun_limit_deg(Place(0.0, 0.0, 2500.0)) == pytest.approx(-2.5)
    assert sun_limit_deg(Place(0.0, 0.0, -400.0)) == -1.0


@pytest.mark.parametrize(
    "rating",
    [
        SolarRating("eye", is_daytime_rated=True, is_eye_free=True),
        SolarRating("binoculars", is_daytime_rated=True, is_eye_free=True),
        SolarRating("eyepiece", is_daytime_rated=True, is_eye_free=True),
        SolarRating("something new", is_daytime_rated=True, is_eye_free=True),
        SolarRating("camera"),
        SolarRating("camera", is_daytime_rated=True),
        SolarRating("camera", is_eye_free=True),
    ],
)
def test_only_a_camera_declared_twice_may_work_by_day(rating, sun_rises_mjd):
    noon = DAY + 0.48
    assert ask(SEA_LEVEL, rating, FAR, noon, noon + 0.01)
    midnight = DAY
    assert ask(SEA_LEVEL, rating, FAR, midnight, midnight + 0.01) == []


def test_a_declared_camera_works_by_day_away_from_the_sun():
    noon = DAY + 0.48
    assert ask(SEA_LEVEL, ROBOT, FAR, noon, noon + 0.1) == []


@pytest.mark.parametrize(("minutes_left", "is_safe"), [(11.0, True), (9.0, False), (-30.0, False)])
def test_work_ends_ten_minutes_before_the_sun_comes(sun_rises_mjd, minutes_left, is_safe):
    end = sun_rises_mjd(SEA_LEVEL) - minutes_left * MINUTE
    assert (ask(SEA_LEVEL, EYE, FAR, end - 20.0 * MINUTE, end) == []) is is_safe


@pytest.mark.parametrize(("minutes_left", "is_safe"), [(22.0, True), (18.0, False)])
@pytest.mark.parametrize("elongation_deg", [0.0, 10.0, 19.9])
def test_near_the_sun_work_ends_twenty_minutes_before(
    sun_rises_mjd, sun_radec, minutes_left, is_safe, elongation_deg
):
    rises = sun_rises_mjd(SEA_LEVEL)
    ra_deg, dec_deg = sun_radec(rises)
    end = rises - minutes_left * MINUTE
    near = (ra_deg, dec_deg + elongation_deg)
    assert (ask(SEA_LEVEL, EYE, near, end - 10.0 * MINUTE, end) == []) is is_safe


def test_a_wide_field_that_reaches_near_the_sun_counts_as_near(sun_rises_mjd, sun_radec):
    rises = sun_rises_mjd(SEA_LEVEL)
    ra_deg, dec_deg = sun_radec(rises)
    target, end = (ra_deg, dec_deg + 25.0), rises - 15.0 * MINUTE
    assert ask(SEA_LEVEL, EYE, target, end - 5.0 * MINUTE, end) == []
    wide = SolarRating("eye", field_radius_deg=10.0)
    assert ask(SEA_LEVEL, wide, target, end - 5.0 * MINUTE, end)


def test_on_a_peak_the_sun_comes_earlier(sun_rises_mjd):
    end = sun_rises_mjd(SEA_LEVEL) - 12.0 * MINUTE
    assert ask(SEA_LEVEL, EYE, FAR, end - MINUTE, end) == []
    assert ask(PEAK, EYE, FAR, end - MINUTE, end)
    end = sun_rises_mjd(PEAK) - 12.0 * MINUTE
    assert ask(PEAK, EYE, FAR, end - MINUTE, end) == []


def test_the_whole_lease_counts_not_only_its_start(sun_rises_mjd):
    rises = sun_rises_mjd(SEA_LEVEL)
    start = rises - 120.0 * MINUTE
    assert ask(SEA_LEVEL, EYE, FAR, start, rises - 15.0 * MINUTE) == []
    (problem,) = ask(SEA_LEVEL, EYE, FAR, start, rises + 1.0 * MINUTE)
    assert "comes above the limit" in problem
    assert "10 minutes before" in problem


def test_a_sun_that_only_peeps_up_inside_the_lease_is_seen(astropy_oracle):
    # In the far north the Sun of this day stands 0.1 degree above the limit at noon.
    north = Place(69.0, 19.0, 0.0)
    minutes = DAY + np.arange(0.35, 0.6, MINUTE)
    heights = astropy_oracle.body_altitudes_deg("sun", north, minutes) - limit_deg(north)
    up = minutes[heights > 0.0]
    assert 10.0 < up.size < 120.0
    start, end = up[0] - 60.0 * MINUTE, up[-1] + 60.0 * MINUTE
    assert ask(north, EYE, FAR, start, end)
    assert ask(north, EYE, FAR, end, end + 60.0 * MINUTE) == []


def test_after_sunset_work_may_start_at_once(astropy_oracle):
    minutes = DAY + np.arange(0.6, 0.7, MINUTE / 4.0)
    heights = astropy_oracle.body_altitudes_deg("sun", SEA_LEVEL, minutes) + 1.0
    sets = float(minutes[np.flatnonzero((heights[1:] < 0.0) & (heights[:-1] >= 0.0))[0]])
    assert ask(SEA_LEVEL, EYE, FAR, sets + 2.0 * MINUTE, sets + 30.0 * MINUTE) == []
    assert ask(SEA_LEVEL, EYE, FAR, sets - 2.0 * MINUTE, sets + 30.0 * MINUTE)


def test_with_the_sun_well_down_a_tile_near_it_is_safe(sun_rises_mjd, sun_radec):
    end = sun_rises_mjd(SEA_LEVEL) - 60.0 * MINUTE
    ra_deg, dec_deg = sun_radec(end)
    assert ask(SEA_LEVEL, EYE, (ra_deg - 12.0, dec_deg), end - 10.0 * MINUTE, end) == []


@pytest.mark.parametrize(
    ("owner_deg", "elongation_deg", "is_safe"),
    [
        (45.0, 46.0, True),
        (45.0, 44.0, False),
        (60.0, 50.0, False),
        (5.0, 19.0, False),
        (5.0, 21.0, True),
        (-90.0, 10.0, False),
        (float("nan"), 100.0, False),
        (float("inf"), 100.0, False),
    ],
)
def test_by_day_the_owners_angle_is_kept_and_never_below_twenty(
    sun_radec, owner_deg, elongation_deg, is_safe
):
    noon = DAY + 0.48
    ra_deg, dec_deg = sun_radec(noon)
    rating = SolarRating("camera", True, True, owner_deg)
    target = (ra_deg, dec_deg + elongation_deg)
    assert (ask(SEA_LEVEL, rating, target, noon, noon + 0.02) == []) is is_safe


def test_the_way_may_not_pass_the_sun(sun_radec):
    noon = DAY + 0.48
    ra_deg, dec_deg = sun_radec(noon)
    west, east = (ra_deg - 60.0, dec_deg), (ra_deg + 60.0, dec_deg)
    (problem,) = ask(SEA_LEVEL, ROBOT, east, noon, noon + 0.02, before=west)
    assert "On the way" in problem
    assert ask(SEA_LEVEL, ROBOT, east, noon, noon + 0.02, before=(ra_deg + 90.0, dec_deg)) == []


def test_axes_that_turn_one_after_the_other_may_not_pass_the_sun_either(sun_radec):
    noon = DAY + 0.48
    ra_deg, dec_deg = sun_radec(noon)
    # Right ascension first runs along the Sun's declination; the great circle keeps far away.
    before, target = (ra_deg - 70.0, dec_deg), (ra_deg + 60.0, dec_deg + 70.0)
    assert ask(SEA_LEVEL, ROBOT, target, noon, noon + 0.02, before=before)


def test_at_night_the_way_past_the_sun_is_free(sun_radec):
    midnight = DAY
    ra_deg, dec_deg = sun_radec(midnight)
    west, east = (ra_deg - 60.0, dec_deg), (ra_deg + 60.0, dec_deg)
    assert ask(SEA_LEVEL, ROBOT, east, midnight, midnight + 0.02, before=west) == []


@pytest.mark.parametrize("before", [(None, None), (10.0, None), (float("nan"), 0.0), (0.0, 91.0)])
def test_an_unknown_start_is_judged_from_the_resting_places(sun_radec, before):
    # A tropical summer noon: from the zenith and from the pole the way south is barred by the Sun.
    south = Place(-10.0, 8.0, 0.0)
    noon = DAY + 0.48
    ra_deg, dec_deg = sun_radec(noon)
    times = {"start_mjd": noon, "end_mjd": noon + 0.01}
    known = {"from_ra_deg": before[0], "from_dec_deg": before[1]}
    rating = SolarRating("camera", True, True, 20.0)
    across = (ra_deg, dec_deg + 40.0)
    assert solar_problems(south, rating, *across, **times, **known)
    aside = (ra_deg + 90.0, -60.0)
    assert solar_problems(south, rating, *aside, **times, **known) == []


@pytest.mark.parametrize(
    ("target", "start", "end"),
    [
        ((float("nan"), 0.0), DAY, DAY + 0.1),
        ((0.0, 91.0), DAY, DAY + 0.1),
        ((0.0, 0.0), DAY, DAY - 0.1),
        ((0.0, 0.0), DAY, float("inf")),
        ((0.0, 0.0), float("nan"), DAY),
        ((0.0, 0.0), DAY, DAY + 32.0),
    ],
)
def test_what_cannot_be_judged_is_refused(target, start, end):
    with pytest.raises(NightError):
        ask(SEA_LEVEL, EYE, target, start, end, before=(0.0, 0.0))
