"""Pure rules: leases, clocks, times of frames."""

from datetime import timedelta
from types import SimpleNamespace

import pytest

from campaigns.events.iso_time import iso_time, read_iso_time
from campaigns.rules.clock import campaign_now, clock_problems
from campaigns.rules.lease import extended_end, lease_end, start_problems
from tests.campaigns.stage import NOW, later

SERIES = timedelta(minutes=6)


def test_a_lease_is_start_series_and_fifteen_minutes():
    assert lease_end(later(minutes=30), SERIES, now=NOW) == later(minutes=51)


def test_a_lease_of_a_past_start_counts_from_now():
    assert lease_end(later(minutes=-10), SERIES, now=NOW) == later(minutes=21)


def test_no_lease_reaches_beyond_two_hours():
    assert lease_end(later(minutes=100), timedelta(minutes=15), now=NOW) == later(hours=2)
    assert extended_end(later(minutes=115), SERIES, now=NOW) == later(hours=2)


def test_an_extension_never_shortens():
    assert extended_end(later(hours=3), SERIES, now=NOW) == later(hours=3)


@pytest.mark.parametrize(
    ("minutes", "n_problems"), [(-16, 1), (-14, 0), (0, 0), (114, 0), (115, 1)]
)
def test_a_start_is_judged_by_its_distance(minutes, n_problems):
    assert len(start_problems(later(minutes=minutes), SERIES, now=NOW)) == n_problems


def test_a_campaign_without_a_clock_of_its_own_uses_the_real_one():
    real = SimpleNamespace(clock_now=None, is_rehearsal=False)
    moved = SimpleNamespace(clock_now=later(hours=5), is_rehearsal=True)
    assert campaign_now(real, NOW) == NOW
    assert campaign_now(moved, NOW) == later(hours=5)


def test_a_clock_moves_only_in_a_rehearsal_and_only_forwards():
    rehearsal = SimpleNamespace(clock_now=NOW, is_rehearsal=True)
    assert clock_problems(rehearsal, later(hours=1)) == []
    assert clock_problems(rehearsal, NOW) == []
    assert clock_problems(rehearsal, later(hours=-1))
    assert clock_problems(SimpleNamespace(clock_now=None, is_rehearsal=False), NOW)


def test_times_are_written_in_utc_with_milliseconds_only_when_there_are_some():
    assert iso_time(NOW) == "2024-03-14T21:00:00Z"
    assert iso_time(NOW + timedelta(milliseconds=5)) == "2024-03-14T21:00:00.005Z"
    assert iso_time(None) is None
    assert read_iso_time("2024-03-14T22:00:00+01:00") == NOW
    assert read_iso_time("2024-03-14T21:00:00") == NOW
