"""Somebody says: I am in, clouded, out."""

from datetime import datetime

from campaigns.actions.answer_once import Answer
from campaigns.actions.join_campaign import join_campaign
from campaigns.errors import InvalidInput
from campaigns.events.append import append_events
from campaigns.events.iso_time import iso_time
from campaigns.events.kinds import ClaimReleased, Happening, ObserverStatus
from campaigns.events.said import About
from campaigns.events.state import MemberStatus
from campaigns.models import Campaign, Claim, Membership
from campaigns.rules.clock import campaign_now
from observers.actions.write_transaction import write_transaction
from observers.models import Person
from observers.rules.problem import Problem

STATUSES: dict[str, MemberStatus] = {"in": "in", "clouded": "clouded", "out": "out"}


def set_status(actor: Person, campaign: Campaign, *, status: str, wall_now: datetime) -> Answer:
    """Note what the member says; who cannot observe gives held tiles back."""
    if status not in STATUSES:
        allowed = ", ".join(STATUSES)
        raise InvalidInput(
            f"The status is {status!r}.",
            f"Say one of {allowed}.",
            problems=[Problem("status", f"Say one of {allowed}.")],
        )
    join_campaign(campaign, actor, wall_now=wall_now)
    now = campaign_now(campaign, wall_now)
    with write_transaction():
        rows = Membership.objects.filter(campaign=campaign, person=actor).exclude(status=status)
        happenings: list[tuple[Happening, About]] = []
        if rows.update(status=status):
            about = About(observer=actor.name)
            happenings.append((ObserverStatus(observer=actor.pk, status=STATUSES[status]), about))
        if status != "in":
            happenings += _give_back(actor, campaign, now=now)
        if happenings:
            append_events(campaign.pk, happenings, at=now)
    return Answer(200, {"observer": actor.pk, "status": status})


def _give_back(
    actor: Person, campaign: Campaign, *, now: datetime
) -> list[tuple[Happening, About]]:
    held = Claim.objects.filter(campaign=campaign, person=actor, state=Claim.State.HELD)
    claims = list(held.select_related("tile"))
    held.update(state=Claim.State.RELEASED, ended_at=now)
    return [
        (
            ClaimReleased(id=claim.pk, ended_at=iso_time(now)),
            About(observer=actor.name, tile=claim.tile.number),
        )
        for claim in claims
    ]
