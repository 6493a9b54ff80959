"""Gatekeepers of campaigns: edges fetch campaigns, claims and frames only through these."""

from campaigns.errors import NotAllowed, NotFound
from campaigns.models import Campaign, CampaignStatus, Claim, Frame, Membership
from observers.models import Person, Role
from observers.selectors.access import access_account


def role_in(campaign: Campaign, actor: Person | None) -> str:
    """What the person may do in this campaign: the membership's role, else their own."""
    if actor is None or not actor.is_authenticated:
        return str(Role.ONLOOKER)
    membership = Membership.objects.filter(campaign=campaign, person_id=actor.pk).first()
    return str(membership.role if membership and membership.role else actor.role)


def access_campaign(actor: Person | None, campaign_id: str) -> Campaign:
    """A campaign that the person may watch.

    Drafts only for coordinators; without an account only public ones. What may not be seen
    looks as if it did not exist.
    """
    campaign = Campaign.objects.filter(pk=campaign_id).first()
    if campaign is None or not _may_watch(campaign, actor):
        raise NotFound(
            f"There is no campaign {campaign_id!r} that you may see.",
            advice="Sign in, or see the list of campaigns.",
        )
    return campaign


def access_campaign_to_observe(actor: Person | None, campaign_id: str) -> Campaign:
    """A campaign in which the person may claim tiles and report frames."""
    person = access_account(actor)
    campaign = access_campaign(person, campaign_id)
    if role_in(campaign, person) == Role.ONLOOKER:
        raise NotAllowed(
            "An onlooker may watch, not observe.",
            advice="Ask a coordinator to make you an observer.",
        )
    return campaign


def access_campaign_to_coordinate(actor: Person | None, campaign_id: str) -> Campaign:
    """A campaign that the person coordinates."""
    person = access_account(actor)
    campaign = access_campaign(person, campaign_id)
    if role_in(campaign, person) != Role.COORDINATOR:
        raise NotAllowed("Only a coordinator may do this.", advice="Ask a coordinator.")
    return campaign


def access_claim(actor: Person | None, campaign_id: str, claim_id: int) -> Claim:
    """A claim that the person may end or extend: their own, or any for a coordinator."""
    campaign = access_campaign_to_observe(actor, campaign_id)
    rows = Claim.objects.select_related("tile", "person", "instrument__site")
    claim = rows.filter(campaign=campaign, pk=claim_id).first()
    if claim is None:
        raise NotFound(
            f"There is no claim {claim_id} here.", advice="See the claims of the campaign."
        )
    _must_be_theirs(campaign, actor, claim.person_id, "claim")
    return claim


def access_frame(actor: Person | None, campaign_id: str, number: int) -> Frame:
    """A frame that the person may set right: their own, or any for a coordinator."""
    campaign = access_campaign_to_observe(actor, campaign_id)
    rows = Frame.objects.select_related("person", "instrument", "claim__tile")
    frame = rows.filter(campaign=campaign, number=number).first()
    if frame is None:
        raise NotFound(f"There is no frame {number} here.", advice="See the Log of the campaign.")
    _must_be_theirs(campaign, actor, frame.person_id, "frame")
    return frame


def list_campaigns_for(actor: Person | None) -> list[Campaign]:
    """The campaigns that the person may watch, newest first."""
    rows = Campaign.objects.all()
    if actor is None or not actor.is_authenticated:
        return list(rows.filter(is_public=True).exclude(status=CampaignStatus.DRAFT))
    if actor.role == Role.COORDINATOR:
        return list(rows)
    return list(rows.exclude(status=CampaignStatus.DRAFT))


def _may_watch(campaign: Campaign, actor: Person | None) -> bool:
    is_known = actor is not None and actor.is_authenticated and actor.is_active
    if campaign.status == CampaignStatus.DRAFT:
        return is_known and role_in(campaign, actor) == Role.COORDINATOR
    return campaign.is_public or is_known


def _must_be_theirs(campaign: Campaign, actor: Person | None, owner_id: int, what: str) -> None:
    is_theirs = actor is not None and owner_id == actor.pk
    if not is_theirs and role_in(campaign, actor) != Role.COORDINATOR:
        raise NotAllowed(
            f"This {what} belongs to somebody else.",
            advice="Its owner or a coordinator can do this.",
        )
