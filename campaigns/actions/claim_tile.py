"""Somebody promises to shoot a tile."""

from dataclasses import dataclass
from datetime import datetime

from django.db import IntegrityError, transaction

from campaigns.actions.answer_once import Answer, Once, answer_once
from campaigns.actions.join_campaign import is_member, join_campaign
from campaigns.actions.lapse_claims import end_overdue
from campaigns.actions.live_guard import refuse_unless_live
from campaigns.actions.sun_guard import refuse_below_horizon, refuse_unsafe_sun
from campaigns.errors import Conflict, NotFound, TileDropped, TileTaken, refuse_problems
from campaigns.events.append import append_events
from campaigns.events.kinds import ClaimHeld, Happening
from campaigns.events.said import About
from campaigns.models import Campaign, Claim, Offer, Tile
from campaigns.rules.clock import campaign_now
from campaigns.rules.lease import lease_end, series_length, start_problems
from campaigns.selectors.best_tile import get_alternative
from campaigns.selectors.first_start import get_first_start
from campaigns.selectors.shown import claim_shown
from observers.models import Instrument, Person


@dataclass(frozen=True)
class Asked:
    """A claim as asked for, not judged yet."""

    person: Person
    campaign: Campaign
    tile_number: int
    instrument: Instrument
    starts_at: datetime | None
    wall_now: datetime


@dataclass(frozen=True)
class Wish:
    """A claim that breaks no rule; whether the tile is free only the database knows."""

    campaign: Campaign
    tile: Tile
    person: Person
    instrument: Instrument
    starts_at: datetime
    until: datetime
    now: datetime
    # Becomes a member with the claim, in its transaction: a refusal makes nobody one.
    is_newcomer: bool = False


class InstrumentBusy(Conflict):
    """One series at a time."""

    code = "instrument-busy"
    title = "The instrument is busy then"


def claim_tile(
    actor: Person,
    campaign: Campaign,
    *,
    tile_number: int,
    instrument: Instrument,
    starts_at: datetime | None,
    wall_now: datetime,
    once: Once | None = None,
) -> Answer:
    """Hold a tile for an instrument of the person who acts, or refuse with an alternative.

    Without a start the first moment counts at which the tile can be shot.
    """
    asked = Asked(actor, campaign, tile_number, instrument, starts_at, wall_now)
    try:
        return answer_once(once, judge=lambda: _judge(asked), write=_hold)
    except TileTaken as refusal:
        refusal.extras["alternative"] = get_alternative(
            campaign, instrument, but_not=tile_number, wall_now=wall_now
        )
        raise


def _judge(asked: Asked) -> Wish:
    campaign, instrument = asked.campaign, asked.instrument
    refuse_unless_live(campaign)
    tile = _tile(campaign, asked.tile_number)
    now = campaign_now(campaign, asked.wall_now)
    series = series_length(instrument)
    start = asked.starts_at or get_first_start(instrument, tile, now=now)
    problems = start_problems(start, series, now=now)
    refuse_problems(problems, advice="Choose a start within the next two hours.")
    until = lease_end(start, series, now=now)
    before = _refuse_busy(campaign, instrument, start=start, end=start + series)
    coming_from = before.tile if before else None
    refuse_unsafe_sun(instrument, tile, starts_at=start, ends_at=until, coming_from=coming_from)
    refuse_below_horizon(instrument, tile, starts_at=start, ends_at=start + series)
    is_newcomer = not is_member(campaign, asked.person)
    return Wish(campaign, tile, asked.person, instrument, start, until, now, is_newcomer)


def _tile(campaign: Campaign, number: int) -> Tile:
    tile = Tile.objects.filter(campaign=campaign, number=number).first()
    if tile is None:
        raise NotFound(f"There is no tile {number} here.", "See the tiles on the Board.")
    if tile.is_dropped:
        raise TileDropped(
            f"A revision of the region left nothing in tile {number}.",
            "Take the best tile now instead.",
        )
    return tile


def _refuse_busy(
    campaign: Campaign, instrument: Instrument, *, start: datetime, end: datetime
) -> Claim | None:
    """Refuse overlapping series; return the claim that comes just before this one."""
    held = Claim.objects.filter(
        campaign=campaign, instrument=instrument, state=Claim.State.HELD, until__gt=start
    )
    before = None
    for claim in held.select_related("tile").order_by("starts_at"):
        its_end = claim.starts_at + series_length(instrument)
        if claim.starts_at < end and start < its_end:
            raise InstrumentBusy(
                f"{instrument.name} holds tile {claim.tile.number} then.",
                "Give that tile back, or start when its series is done.",
            )
        before = claim if its_end <= start else before
    return before


def _hold(wish: Wish) -> Answer:
    """Write first: the partial unique constraint decides who holds the seat."""
    lapsed: list[tuple[Happening, About]] = []
    claim = next(
        (
            claim
            for seat in range(1, wish.tile.seats + 1)
            if (claim := _take_seat(wish, seat, lapsed)) is not None
        ),
        None,
    )
    if claim is None:
        raise TileTaken(
            f"Tile {wish.tile.number} is held by somebody else.",
            "Take the alternative, or wait until it is given back or lapses.",
        )
    Offer.objects.filter(person=wish.person, tile=wish.tile).delete()
    if wish.is_newcomer:
        join_campaign(wish.campaign, wish.person, wall_now=wish.now)
    held = ClaimHeld(id=claim.pk, claim=claim_shown(claim))
    happenings = [*lapsed, (held, About(observer=wish.person.name))]
    append_events(wish.campaign.pk, happenings, at=wish.now, only_while_live=True)
    return Answer(201, {"id": claim.pk, **claim_shown(claim)})


def _take_seat(wish: Wish, seat: int, lapsed: list[tuple[Happening, About]]) -> Claim | None:
    claim = _insert(wish, seat)
    if claim is not None:
        return claim
    holder = _holder(wish.tile, seat)
    ended = end_overdue(holder, now=wish.now) if holder else None
    if holder is not None and ended is None:
        return None
    lapsed += [ended] if ended else []
    return _insert(wish, seat)


def _insert(wish: Wish, seat: int) -> Claim | None:
    try:
        # A savepoint: on PostgreSQL a refused INSERT would spoil the whole transaction.
        with transaction.atomic():
            return Claim.objects.create(
                campaign=wish.campaign,
                tile=wish.tile,
                seat=seat,
                person=wish.person,
                instrument=wish.instrument,
                held_at=wish.now,
                starts_at=wish.starts_at,
                until=wish.until,
            )
    except IntegrityError:
        return None


def _holder(tile: Tile, seat: int) -> Claim | None:
    rows = Claim.objects.filter(tile=tile, seat=seat, state=Claim.State.HELD)
    return rows.select_related("tile", "person").first()
