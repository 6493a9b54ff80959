"""The rule that can hurt somebody, minute by minute in random cases, with astropy's Sun."""

import numpy as np
from hypothesis import HealthCheck, assume, given, settings
from hypothesis import strategies as st

from skytiles.night.place import Place
from skytiles.night.solar_rating import SolarRating
from skytiles.night.windows import safe_intervals, safe_mask
from skytiles.sphere.angles import separations_deg
from tests.skytiles.night.sun_cases import MINUTE, ask, limit_deg

AT_EASE = settings(
    max_examples=40, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture]
)
places = st.builds(
    Place,
    latitude_deg=st.floats(-90.0, 90.0),
    longitude_deg=st.floats(-180.0, 180.0),
    height_m=st.floats(-400.0, 6000.0),
)
eyes = st.builds(
    SolarRating,
    kind=st.sampled_from(["eye", "binoculars", "eyepiece", "camera"]),
    is_daytime_rated=st.booleans(),
    is_eye_free=st.just(False),
    sun_avoidance_deg=st.floats(0.0, 90.0),
)
robots = st.builds(
    SolarRating,
    kind=st.just("camera"),
    is_daytime_rated=st.just(True),
    is_eye_free=st.just(True),
    sun_avoidance_deg=st.floats(0.0, 90.0),
)
directions = st.tuples(st.floats(0.0, 360.0), st.floats(-90.0, 90.0))
leases_d = st.floats(1.0, 200.0).map(lambda minutes: minutes * MINUTE)


def astropy_sun(oracle, place, start_mjd, end_mjd):
    """Minute by minute: how far the Sun is above the limit, and where it is."""
    minutes = np.append(np.arange(start_mjd, end_mjd, MINUTE), end_mjd)
    heights = oracle.body_altitudes_deg("sun", place, minutes) - limit_deg(place)
    ras_deg, decs_deg, _ = oracle.body_radec_deg("sun", minutes)
    return heights, ras_deg, decs_deg


def nearest_crossing(oracle, place, day):
    """A moment of that day when the Sun crosses the limit, else its closest approach."""
    minutes = day + np.arange(0.0, 1.0, 20.0 * MINUTE)
    heights = oracle.body_altitudes_deg("sun", place, minutes) - limit_deg(place)
    rising = np.flatnonzero((heights[1:] > 0.0) & (heights[:-1] <= 0.0))
    return float(minutes[rising[0]] if rising.size else minutes[np.argmin(np.abs(heights))])


@AT_EASE
@given(
    place=places,
    rating=eyes,
    target=directions,
    day=st.floats(59000.0, 63000.0),
    lease_d=leases_d,
    minutes_before=st.floats(-30.0, 90.0),
)
def test_no_accepted_case_has_the_sun_above_the_limit_for_eyes_at_any_minute(
    astropy_oracle, place, rating, target, day, lease_d, minutes_before
):
    end = nearest_crossing(astropy_oracle, place, day) - minutes_before * MINUTE
    start = end - lease_d
    assume(ask(place, rating, target, start, end) == [])
    heights, ras_deg, decs_deg = astropy_sun(astropy_oracle, place, start, end + 20.0 * MINUTE)
    n_lease = len(heights) - 20
    assert np.max(heights[: n_lease + 9]) <= 0.0
    if np.min(separations_deg(*target, ras_deg, decs_deg)) <= 20.0:
        assert np.max(heights) <= 0.0


@AT_EASE
@given(
    place=places,
    rating=robots,
    target=directions,
    before=directions,
    start=st.floats(59000.0, 63000.0),
    lease_d=leases_d,
)
def test_no_accepted_robot_comes_nearer_to_the_sun_than_it_may(
    astropy_oracle, place, rating, target, before, start, lease_d
):
    assume(ask(place, rating, target, start, start + lease_d, before=before) == [])
    heights, ras_deg, decs_deg = astropy_sun(astropy_oracle, place, start, start + lease_d)
    if np.max(heights) <= 0.0:
        return
    kept_deg = max(20.0, rating.sun_avoidance_deg)
    assert np.min(separations_deg(*target, ras_deg, decs_deg)) >= kept_deg
    # Both axes turning at one rate for the whole way: one of the paths that a mount may take.
    shares = np.linspace(0.0, 1.0, 200)
    turn_deg = (target[0] - before[0] + 180.0) % 360.0 - 180.0
    turns = np.sign(turn_deg) * np.minimum(shares * 180.0, abs(turn_deg))
    climb_deg = target[1] - before[1]
    climbs = np.sign(climb_deg) * np.minimum(shares * 180.0, abs(climb_deg))
    way = separations_deg(before[0] + turns, before[1] + climbs, ras_deg[0], decs_deg[0])
    assert np.min(way) >= kept_deg


@AT_EASE
@given(place=places, rating=eyes, target=directions, start=st.floats(59000.0, 63000.0))
def test_with_the_sun_far_down_nothing_is_refused(astropy_oracle, place, rating, target, start):
    end = start + 60.0 * MINUTE
    heights, _, _ = astropy_sun(astropy_oracle, place, start, end + 21.0 * MINUTE)
    assume(np.max(heights) < -0.1)
    assert ask(place, rating, target, start, end) == []


@AT_EASE
@given(
    place=places,
    rating=st.one_of(eyes, robots),
    targets=st.lists(directions, min_size=1, max_size=3),
    day=st.floats(59000.0, 63000.0),
    lease_d=leases_d,
)
def test_the_planners_mask_is_never_more_permissive(place, rating, targets, day, lease_d):
    ras_deg, decs_deg = np.array(targets).T
    starts = day + np.arange(0.0, 1.0, 1.0 / 8.0)
    mask = safe_mask(place, rating, ras_deg, decs_deg, starts, lease_d=lease_d)
    for tile, target in enumerate(targets):
        for start in starts[mask[tile]]:
            found = ask(place, rating, target, start, start + lease_d)
            assert [problem for problem in found if "On the way" not in problem] == []


@AT_EASE
@given(place=places, rating=st.one_of(eyes, robots), target=directions, day=st.floats(59e3, 63e3))
def test_safe_intervals_hold_what_they_promise(place, rating, target, day):
    intervals = safe_intervals(place, rating, *target, start_mjd=day, end_mjd=day + 1.0)
    # Of a window shorter than twice the slack nothing would be left to ask about.
    for start, end in [(a, b) for a, b in intervals if b - a > 0.2 * MINUTE]:
        found = ask(place, rating, target, start + 0.1 * MINUTE, end - 0.1 * MINUTE)
        assert [problem for problem in found if "On the way" not in problem] == []
