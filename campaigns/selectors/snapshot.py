"""The whole state that an onlooker may see, with its sequence number."""

from campaigns.events.append import event_as_sent
from campaigns.events.state import N_RECENT, ObserverShown, Recent, State
from campaigns.models import (
    Campaign,
    Claim,
    Event,
    Frame,
    Membership,
    Offer,
    Plan,
    RegionRevision,
    Tile,
)
from campaigns.selectors import shown
from campaigns.selectors.one_moment import one_moment
from observers.models import Instrument
from observers.selectors.gear import list_instruments_in_use


def get_snapshot(campaign_id: str) -> tuple[int, State]:
    """(sequence number, state), read at one moment."""
    with one_moment():
        campaign = Campaign.objects.get(pk=campaign_id)
        return campaign.seq, _state(campaign)


def _state(campaign: Campaign) -> State:
    region = RegionRevision.objects.filter(campaign=campaign).last()
    plan = Plan.objects.filter(campaign=campaign).last()
    tiles = Tile.objects.filter(campaign=campaign)
    claims = Claim.objects.filter(campaign=campaign).select_related("tile")
    frames = Frame.objects.filter(campaign=campaign).select_related("claim__tile")
    return {
        "campaign": shown.campaign_shown(campaign),
        "region": shown.region_shown(region) if region else None,
        "observers": _observers(campaign),
        "tiles": {str(tile.number): shown.tile_shown(tile) for tile in tiles},
        "plan": shown.plan_shown(plan) if plan else None,
        "offers": [shown.offer_shown(offer) for offer in list_offers(plan)],
        "claims": {str(claim.pk): shown.claim_shown(claim) for claim in claims},
        "frames": {str(frame.number): shown.frame_shown(frame) for frame in frames},
        "recent": _recent(campaign),
    }


def list_offers(plan: Plan | None) -> list[Offer]:
    """The offers of a plan that nobody has taken yet, in order of their start."""
    if plan is None:
        return []
    return list(Offer.objects.filter(plan=plan).select_related("tile").order_by("id"))


def _observers(campaign: Campaign) -> dict[str, ObserverShown]:
    members = Membership.objects.filter(campaign=campaign).select_related("person")
    gear: dict[int, list[Instrument]] = {}
    for instrument in list_instruments_in_use([member.person_id for member in members]):
        gear.setdefault(instrument.owner_id, []).append(instrument)
    return {
        str(member.person_id): shown.observer_shown(
            member.person.name, member.status, instruments=gear.get(member.person_id, [])
        )
        for member in members
    }


def _recent(campaign: Campaign) -> list[Recent]:
    events = Event.objects.filter(campaign=campaign).order_by("-seq")[:N_RECENT]
    sent = [event_as_sent(event) for event in reversed(events)]
    return [{"seq": one["seq"], "at": one["at"], "said": one["said"]} for one in sent]
