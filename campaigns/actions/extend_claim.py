"""Somebody needs longer for a tile."""

from datetime import datetime

from campaigns.actions.answer_once import Answer
from campaigns.actions.sun_guard import refuse_unsafe_sun
from campaigns.errors import ClaimEnded
from campaigns.events.append import append_event
from campaigns.events.iso_time import iso_time
from campaigns.events.kinds import ClaimExtended
from campaigns.events.said import About
from campaigns.models import Claim
from campaigns.rules.clock import campaign_now
from campaigns.rules.lease import extended_end, series_length
from campaigns.selectors.shown import claim_shown
from observers.actions.write_transaction import write_transaction


def extend_claim(claim: Claim, *, wall_now: datetime) -> Answer:
    """Lengthen the lease of a claim fetched by access_claim by a series, 2 hours ahead at most."""
    now = campaign_now(claim.campaign, wall_now)
    until = extended_end(claim.until, series_length(claim.instrument), now=now)
    refuse_unsafe_sun(claim.instrument, claim.tile, starts_at=claim.starts_at, ends_at=until)
    with write_transaction():
        rows = Claim.objects.filter(pk=claim.pk, state=Claim.State.HELD, until__gt=now)
        if not rows.update(until=until):
            raise ClaimEnded("This claim has ended.", "Take the tile again if it is still free.")
        claim.until = until
        happening = ClaimExtended(id=claim.pk, until=iso_time(until))
        about = About(observer=claim.person.name, tile=claim.tile.number)
        append_event(claim.campaign_id, happening, at=now, about=about)
    return Answer(200, {"id": claim.pk, **claim_shown(claim)})
