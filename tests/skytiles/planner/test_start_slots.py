"""The start grid of one observer, and which tiles can be reached in time."""

import numpy as np
import pytest

from skytiles.planner.plan_problem import Commitment
from skytiles.planner.slewing import reach_between
from skytiles.planner.start_slots import slot_minutes, start_slots
from skytiles.sphere.angles import unit_vectors
from tests.skytiles.planner.small_network import camera, observer

NOW_MJD = 61113.80001


def person(**changes):
    values = {"latitude_deg": 45.0, "longitude_deg": 15.0, "now_mjd": NOW_MJD}
    values |= {"instruments": [camera(1, side_deg=2.0)]}
    return observer(1, **(values | changes))


def test_a_slot_holds_slew_and_series_in_whole_minutes():
    # 4 x 60 s, 60 s overhead and 30 degrees at 1 degree a second: 330 s.
    assert slot_minutes(person(), 1.0) == 6.0
    assert slot_minutes(person(), 10.0) == 10.0


def test_the_longest_series_of_several_instruments_decides():
    both = [camera(1, side_deg=2.0), camera(2, side_deg=2.0, overhead_s=600.0)]
    assert slot_minutes(person(instruments=both), 1.0) == 15.0


def test_slots_follow_each_other_from_the_next_whole_minute():
    slots = start_slots(person(), now_mjd=NOW_MJD, hours=2.0, least_minutes=10.0)
    minutes = slots.starts_mjd * 1440.0
    np.testing.assert_allclose(minutes, np.round(minutes), atol=1e-6)
    assert 0.0 <= minutes[0] - NOW_MJD * 1440.0 < 1.0
    np.testing.assert_allclose(slots.ends_mjd[:-1], slots.starts_mjd[1:], atol=1e-9)
    assert slots.ends_mjd[-1] <= NOW_MJD + 2.0 / 24.0 + 1e-6


def test_nobody_is_planned_beyond_the_time_that_they_gave():
    ends = start_slots(
        person(free_until_mjd=NOW_MJD + 0.05), now_mjd=NOW_MJD, hours=12.0, least_minutes=10.0
    ).ends_mjd
    assert ends.max() <= NOW_MJD + 0.05 + 1e-6
    none = start_slots(
        person(free_from_mjd=NOW_MJD + 2.0), now_mjd=NOW_MJD, hours=12.0, least_minutes=10.0
    )
    assert len(none.starts_mjd) == 0


def test_slots_leave_promised_times_alone():
    slots = start_slots(person(), now_mjd=NOW_MJD, hours=2.0, least_minutes=10.0)
    busy = [(slots.starts_mjd[3] + 1e-4, slots.ends_mjd[4] - 1e-4)]
    left = slots.outside(busy)
    assert len(left.starts_mjd) == len(slots.starts_mjd) - 2
    assert not set(slots.starts_mjd[3:5]) & set(left.starts_mjd)


@pytest.mark.parametrize(("apart_deg", "is_open"), [(29.0, True), (31.0, False)])
def test_the_slew_must_fit_between_two_pointings(apart_deg, is_open):
    # 30 s of room at 1 degree a second on both sides.
    ends = 60000.0 + np.array([10.0]) / 1440.0
    ready = ends - 300.0 / 86400.0
    there = unit_vectors(10.0, 0.0)
    before = Commitment(ready[0] - 0.01, ready[0] - 30.0 / 86400.0, there)
    after = Commitment(ends[0] + 30.0 / 86400.0, ends[0] + 0.01, there)
    for commitment in (before, after):
        reach = reach_between(ready, ends, [commitment], slew_deg_per_s=1.0)
        assert reach.is_within(unit_vectors(10.0 + apart_deg, 0.0)).tolist() == [is_open]


def test_the_nearest_pointing_in_time_decides():
    ends = 60000.0 + np.array([100.0]) / 1440.0
    ready = ends - 300.0 / 86400.0
    far, near = unit_vectors(120.0, 0.0), unit_vectors(10.0, 0.0)
    pointings = [
        Commitment(60000.0, 60000.001, far),
        Commitment(60000.01, ready[0] - 10.0 / 86400.0, near),
    ]
    for order in (pointings, pointings[::-1]):
        reach = reach_between(ready, ends, order, slew_deg_per_s=1.0)
        assert reach.is_within(unit_vectors(15.0, 0.0)).all()
        assert not reach.is_within(far).any()


def test_without_other_pointings_everything_is_within_reach():
    ends = 60000.0 + np.arange(1, 4) / 144.0
    reach = reach_between(ends - 0.001, ends, [], slew_deg_per_s=0.01)
    for vector in unit_vectors([0.0, 180.0, 90.0], [0.0, 0.0, -90.0]):
        assert reach.is_within(vector).all()
