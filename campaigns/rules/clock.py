"""The campaign's clock: the real one, or the one that a rehearsal's driver moves on."""

from datetime import datetime
from typing import Protocol

from observers.rules.problem import Problem


class HasClock(Protocol):
    """A campaign, as far as its clock is concerned."""

    is_rehearsal: bool
    clock_now: datetime | None


def campaign_now(campaign: HasClock, wall_now: datetime) -> datetime:
    """The time that leases, windows and frame times of this campaign use."""
    return campaign.clock_now or wall_now


def clock_problems(campaign: HasClock, new_now: datetime) -> list[Problem]:
    """May the clock be set to `new_now`? Only in a rehearsal, and only forwards."""
    if not campaign.is_rehearsal:
        return [Problem("now", "Only the clock of a rehearsal can be moved.")]
    if campaign.clock_now is not None and new_now < campaign.clock_now:
        return [Problem("now", "The clock of a campaign never goes back.")]
    return []
