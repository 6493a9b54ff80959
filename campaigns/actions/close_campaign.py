"""A campaign takes nothing more."""

from datetime import datetime

from campaigns.errors import CampaignNotOpen
from campaigns.events.append import append_events
from campaigns.events.iso_time import iso_time
from campaigns.events.kinds import CampaignClosed, ClaimReleased, Happening
from campaigns.events.said import About
from campaigns.models import Campaign, CampaignStatus, Claim
from campaigns.rules.clock import campaign_now
from observers.actions.write_transaction import write_transaction


def close_campaign(campaign: Campaign, *, wall_now: datetime) -> None:
    """Release what is held and close; a repeat is no error."""
    now = campaign_now(campaign, wall_now)
    with write_transaction():
        rows = Campaign.objects.filter(pk=campaign.pk, status=CampaignStatus.LIVE)
        if rows.update(status=CampaignStatus.CLOSED, closed_at=now):
            closed = (CampaignClosed(closed_at=iso_time(now)), About())
            append_events(campaign.pk, [*_release_all(campaign, now=now), closed], at=now)
        campaign.refresh_from_db()
    if campaign.status == CampaignStatus.DRAFT:
        raise CampaignNotOpen("A draft cannot be closed.", "Open it first, or leave it.")


def _release_all(campaign: Campaign, *, now: datetime) -> list[tuple[Happening, About]]:
    held = Claim.objects.filter(campaign=campaign, state=Claim.State.HELD)
    claims = list(held.select_related("tile", "person"))
    held.update(state=Claim.State.RELEASED, ended_at=now)
    return [
        (
            ClaimReleased(id=claim.pk, ended_at=iso_time(now)),
            About(observer=claim.person.name, tile=claim.tile.number),
        )
        for claim in claims
    ]
