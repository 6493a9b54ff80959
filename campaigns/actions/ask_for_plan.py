"""A coordinator wants a new plan; it is made off the request path."""

from campaigns.errors import CampaignClosed
from campaigns.events.after_commit import notify
from campaigns.models import Campaign, CampaignStatus
from observers.actions.write_transaction import write_transaction


def ask_for_plan(campaign: Campaign) -> int:
    """Ask for it, and return the number that the plan's event will exceed."""
    if campaign.status == CampaignStatus.CLOSED:
        raise CampaignClosed("A closed campaign needs no plan.", "See the list of campaigns.")
    with write_transaction():
        notify(campaign.pk, "plan due")
    return campaign.seq
