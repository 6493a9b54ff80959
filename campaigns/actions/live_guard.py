"""Claims and frames need a live campaign."""

from campaigns.errors import CampaignClosed, CampaignNotOpen
from campaigns.models import Campaign, CampaignStatus


def refuse_unless_live(campaign: Campaign) -> None:
    """Judge before the work; the append inside the transaction guarantees it."""
    if campaign.status == CampaignStatus.CLOSED:
        raise CampaignClosed(
            "This campaign is closed and takes nothing more.",
            "See the list of campaigns for one that is live.",
        )
    if campaign.status == CampaignStatus.DRAFT:
        raise CampaignNotOpen(
            "This campaign is still a draft.", "Wait until a coordinator opens it."
        )
