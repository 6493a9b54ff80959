"""A rehearsal's driver moves the campaign's clock on."""

from datetime import datetime

from django.db.models import Q

from campaigns.actions.lapse_claims import lapse_claims
from campaigns.errors import ClockRefused
from campaigns.events.after_commit import notify
from campaigns.models import Campaign
from campaigns.rules.clock import clock_problems
from observers.actions.write_transaction import write_transaction


def move_clock(campaign: Campaign, *, to: datetime, wall_now: datetime) -> None:
    """Set the clock; leases that are over by then lapse at once."""
    problems = clock_problems(campaign, to)
    if problems:
        raise _refusal(problems[0].detail)
    with write_transaction():
        # The same rule in the statement: two drivers cannot turn it back between them.
        rows = Campaign.objects.filter(pk=campaign.pk, is_rehearsal=True)
        if not rows.filter(Q(clock_now=None) | Q(clock_now__lte=to)).update(clock_now=to):
            raise _refusal("The clock of a campaign never goes back.")
        notify(campaign.pk, "clock")
    campaign.clock_now = to
    lapse_claims(campaign, wall_now=wall_now)


def _refusal(detail: str) -> ClockRefused:
    return ClockRefused(detail, "Only the clock of a rehearsal moves, and only forwards.")
