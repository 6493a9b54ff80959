"""Somebody gives a tile back."""

from datetime import datetime

from campaigns.actions.answer_once import Answer
from campaigns.errors import ClaimEnded
from campaigns.events.append import append_event
from campaigns.events.iso_time import iso_time
from campaigns.events.kinds import ClaimReleased
from campaigns.events.said import About
from campaigns.models import Claim
from campaigns.rules.clock import campaign_now
from campaigns.selectors.shown import claim_shown
from observers.actions.write_transaction import write_transaction


def release_claim(claim: Claim, *, wall_now: datetime) -> Answer:
    """End a claim fetched by access_claim. A repeat of it is no error: the tile is free."""
    now = campaign_now(claim.campaign, wall_now)
    with write_transaction():
        rows = Claim.objects.filter(pk=claim.pk, state=Claim.State.HELD)
        is_mine_to_end = bool(rows.update(state=Claim.State.RELEASED, ended_at=now))
        claim.refresh_from_db(fields=["state", "ended_at"])
        if is_mine_to_end:
            happening = ClaimReleased(id=claim.pk, ended_at=iso_time(now))
            about = About(observer=claim.person.name, tile=claim.tile.number)
            append_event(claim.campaign_id, happening, at=now, about=about)
        elif claim.state != Claim.State.RELEASED:
            raise ClaimEnded(
                f"This claim is {claim.state} already.", "There is nothing to give back."
            )
    return Answer(200, {"id": claim.pk, **claim_shown(claim)})
