"""A lease that ran out ends: written by whoever meets it first."""

from datetime import datetime

from campaigns.events.append import append_events
from campaigns.events.iso_time import iso_time
from campaigns.events.kinds import ClaimLapsed, Happening
from campaigns.events.said import About
from campaigns.models import Campaign, CampaignStatus, Claim
from campaigns.rules.clock import campaign_now
from observers.actions.write_transaction import write_transaction


def lapse_claims(campaign: Campaign, *, wall_now: datetime) -> int:
    """End every claim of the campaign whose time is over; returns how many. For the ticker."""
    now = campaign_now(campaign, wall_now)
    due = list(_overdue(campaign.pk, now))
    if not due:
        return 0
    with write_transaction():
        happenings = [pair for claim in due if (pair := end_overdue(claim, now=now))]
        if happenings:
            append_events(campaign.pk, happenings, at=now)
    return len(happenings)


def lapse_all_claims(*, wall_now: datetime) -> int:
    """The same for every live campaign."""
    live = Campaign.objects.filter(status=CampaignStatus.LIVE)
    return sum(lapse_claims(campaign, wall_now=wall_now) for campaign in live)


def end_overdue(claim: Claim, *, now: datetime) -> tuple[Happening, About] | None:
    """End one claim inside the caller's transaction; None when somebody else was first."""
    rows = Claim.objects.filter(pk=claim.pk, state=Claim.State.HELD, until__lte=now)
    if not rows.update(state=Claim.State.LAPSED, ended_at=now):
        return None
    about = About(observer=claim.person.name, tile=claim.tile.number)
    return ClaimLapsed(id=claim.pk, ended_at=iso_time(now)), about


def _overdue(campaign_id: str, now: datetime) -> list[Claim]:
    rows = Claim.objects.filter(campaign_id=campaign_id, state=Claim.State.HELD, until__lte=now)
    return list(rows.select_related("tile", "person"))
