"""A claim is a lease: from the planned start to the series and a margin, two hours at most."""

from datetime import datetime, timedelta
from typing import Protocol

from observers.rules.problem import Problem

MARGIN = timedelta(minutes=15)
LONGEST = timedelta(hours=2)


class HasSeries(Protocol):
    """An instrument, as far as its series is concerned."""

    exposure_s: float
    n_exposures: int
    overhead_s: float


def series_length(instrument: HasSeries) -> timedelta:
    """Time that one tile takes once the instrument points at it."""
    return timedelta(seconds=instrument.exposure_s * instrument.n_exposures + instrument.overhead_s)


def lease_end(starts_at: datetime, series: timedelta, *, now: datetime) -> datetime:
    """Until when the tile is kept: start, series, 15 minutes; at most 2 hours ahead."""
    return min(max(starts_at, now) + series + MARGIN, now + LONGEST)


def start_problems(starts_at: datetime, series: timedelta, *, now: datetime) -> list[Problem]:
    """Judge the planned start of a claim."""
    if starts_at < now - MARGIN:
        return [Problem("starts_at", "The start lies in the past.")]
    if starts_at + series > now + LONGEST:
        return [
            Problem(
                "starts_at",
                "The series would end more than 2 hours from now; a claim looks no further ahead.",
            )
        ]
    return []


def extended_end(until: datetime, series: timedelta, *, now: datetime) -> datetime:
    """Until when an extended lease runs: one more series and margin, at most 2 hours ahead."""
    return max(until, min(max(until, now) + series + MARGIN, now + LONGEST))
