"""A draft goes live."""

from datetime import datetime

from campaigns.errors import CampaignClosed
from campaigns.events.append import append_event
from campaigns.events.iso_time import iso_time
from campaigns.events.kinds import CampaignOpened
from campaigns.models import Campaign, CampaignStatus
from campaigns.rules.clock import campaign_now
from observers.actions.write_transaction import write_transaction


def open_campaign(campaign: Campaign, *, wall_now: datetime) -> None:
    """Open a campaign fetched by access_campaign_to_coordinate; a repeat is no error."""
    now = campaign_now(campaign, wall_now)
    with write_transaction():
        rows = Campaign.objects.filter(pk=campaign.pk, status=CampaignStatus.DRAFT)
        if rows.update(status=CampaignStatus.LIVE, opened_at=now):
            append_event(campaign.pk, CampaignOpened(opened_at=iso_time(now)), at=now)
        campaign.refresh_from_db()
    if campaign.status == CampaignStatus.CLOSED:
        raise CampaignClosed("A closed campaign stays closed.", "Launch a new one.")
