"""Rows: fields, constraints and a name each; what is done with them stands in actions."""

from campaigns.models.campaign import Campaign, CampaignStatus, Membership
from campaigns.models.frame import Frame
from campaigns.models.record import Event, IdempotencyKey
from campaigns.models.region import Constraint, RegionRevision, Tile
from campaigns.models.work import Claim, Offer, Plan

__all__ = [
    "Campaign",
    "CampaignStatus",
    "Claim",
    "Constraint",
    "Event",
    "Frame",
    "IdempotencyKey",
    "Membership",
    "Offer",
    "Plan",
    "RegionRevision",
    "Tile",
]
