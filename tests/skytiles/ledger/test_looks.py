"""Frames join looks in time order, whatever the order in which they arrive."""

from itertools import permutations

import pytest

from skytiles.ledger.ledger_frame import LedgerFrame
from skytiles.ledger.looks import InstrumentLooks, separation_deg

MINUTE_D = 1.0 / 1440.0


def frame(key, minutes, *, ra_deg=100.0, dec_deg=0.0):
    return LedgerFrame(key, minutes * MINUTE_D, "A", ra_deg, dec_deg, 2.0, True, 0.85, 15.0)


def looks_after(frames):
    looks = InstrumentLooks()
    for one in frames:
        looks.add(one)
    return sorted(looks.looks.values())


def test_frames_within_an_hour_of_the_first_are_one_look():
    frames = [frame(1, 0), frame(2, 30), frame(3, 60)]
    assert looks_after(frames) == [(1, 2, 3)]


def test_the_hour_counts_from_the_first_frame_not_from_the_last():
    frames = [frame(1, 0), frame(2, 40), frame(3, 80)]
    assert looks_after(frames) == [(1, 2), (3,)]


def test_frames_further_than_half_a_field_are_two_looks():
    frames = [frame(1, 0), frame(2, 5, ra_deg=100.9), frame(3, 10, ra_deg=101.1)]
    assert looks_after(frames) == [(1, 2), (3,)]


def test_a_frame_joins_the_first_look_that_fits():
    frames = [frame(1, 0), frame(2, 5, ra_deg=101.5), frame(3, 10, ra_deg=100.8)]
    assert looks_after(frames) == [(1, 3), (2,)]


def test_centres_across_ra_zero_are_near():
    assert looks_after([frame(1, 0, ra_deg=359.9), frame(2, 5, ra_deg=0.1)]) == [(1, 2)]


@pytest.mark.parametrize("order", list(permutations(range(5))))
def test_order_of_arrival_does_not_matter(order):
    frames = [frame(0, 0), frame(1, 20), frame(2, 50), frame(3, 75), frame(4, 130)]
    assert looks_after([frames[place] for place in order]) == [(0, 1, 2), (3, 4)]


def test_a_late_arrival_that_came_first_splits_the_looks_after_it():
    looks = InstrumentLooks()
    for one in (frame(1, 30), frame(2, 80), frame(3, 95)):
        looks.add(one)
    assert sorted(looks.looks.values()) == [(1, 2), (3,)]
    ended, begun = looks.add(frame(0, 0))
    assert sorted(looks.looks.values()) == [(0, 1), (2, 3)]
    assert ended == {(1, 2), (3,)}
    assert begun == {(0, 1), (2, 3)}


def test_removing_the_first_frame_joins_the_rest_anew():
    looks = InstrumentLooks()
    for one in (frame(0, 0), frame(1, 30), frame(2, 80), frame(3, 95)):
        looks.add(one)
    looks.remove(0)
    assert sorted(looks.looks.values()) == [(1, 2), (3,)]


def test_a_change_leaves_looks_of_other_hours_alone():
    looks = InstrumentLooks()
    for key in range(50):
        looks.add(frame(key, 120 * key))
    ended, begun = looks.add(frame(100, 10))
    assert ended == {(0,)}
    assert begun == {(0, 100)}


def test_separation_is_exact_for_small_and_large_angles():
    one = frame(1, 0, ra_deg=0.0)
    assert separation_deg(one, frame(2, 0, ra_deg=1e-7)) == pytest.approx(1e-7, rel=1e-9)
    assert separation_deg(one, frame(3, 0, ra_deg=90.0)) == pytest.approx(90.0, abs=1e-12)
    # 4.99523809 degrees: (10, 60) to (20, 60), recomputed (Vincenty form).
    pair = frame(4, 0, ra_deg=10.0, dec_deg=60.0), frame(5, 0, ra_deg=20.0, dec_deg=60.0)
    assert separation_deg(*pair) == pytest.approx(4.99523809, abs=1e-8)
