"""Rows as everybody may see them: the parts of the state."""

from collections.abc import Iterable

import campaigns.bridge as bridge
from campaigns.events import state
from campaigns.events.iso_time import iso_time
from campaigns.models import Campaign, Claim, Frame, Offer, Plan, RegionRevision, Tile
from campaigns.rules.first_light import first_light_at
from observers.bridge import tile_size_of
from observers.models import Instrument, Site
from observers.rules.site import public_place_deg


def campaign_shown(campaign: Campaign) -> state.CampaignShown:
    """The campaign itself."""
    source = campaign.source_model
    first = first_light_at(source, campaign.event_time)
    return {
        "id": campaign.pk,
        "title": campaign.title,
        "status": campaign.status,
        "is_rehearsal": campaign.is_rehearsal,
        "is_public": campaign.is_public,
        "kind": campaign.kind,
        "event_time": iso_time(campaign.event_time),
        "opened_at": iso_time(campaign.opened_at),
        "closed_at": iso_time(campaign.closed_at),
        "source": {
            "preset": source.get("preset", ""),
            "label": source.get("label", ""),
            "first_light_at": iso_time(first) if first else None,
        },
    }


def region_shown(region: RegionRevision) -> state.RegionShown:
    """The region without its pixels (int64: 8 bytes each)."""
    return {
        "revision": region.revision,
        "order": region.order,
        "n_pixels": len(region.pixels) // 8,
        "outside": region.outside,
        "area_deg2": region.area_deg2,
        "peak": region.peak,
        "notes": region.notes,
        "overlap": region.overlap,
        "change": region.change,
    }


def site_shown(site: Site) -> state.SiteShown:
    """A site, its place rounded."""
    latitude_deg, longitude_deg = public_place_deg(site.latitude_deg, site.longitude_deg)
    return {"name": site.name, "latitude_deg": latitude_deg, "longitude_deg": longitude_deg}


def instrument_shown(instrument: Instrument) -> state.InstrumentShown:
    """An instrument and its tile grid."""
    tile_width_deg, tile_height_deg = tile_size_of(instrument)
    return {
        "id": instrument.pk,
        "name": instrument.name,
        "width_deg": instrument.width_deg,
        "height_deg": instrument.height_deg,
        "kind": instrument.kind,
        "band": instrument.band,
        "tile_width_deg": tile_width_deg,
        "tile_height_deg": tile_height_deg,
    }


def observer_shown(
    name: str, status: state.MemberStatus, *, instruments: Iterable[Instrument]
) -> state.ObserverShown:
    """A member with the instruments in use and the sites where these stand."""
    instruments = sorted(instruments, key=lambda instrument: instrument.pk)
    sites = {instrument.site_id: instrument.site for instrument in instruments}
    return {
        "name": name,
        "status": status,
        "sites": [site_shown(sites[site_id]) for site_id in sorted(sites)],
        "instruments": [instrument_shown(instrument) for instrument in instruments],
    }


def tile_shown(tile: Tile) -> state.TileShown:
    """One tile."""
    return {
        "ra_deg": tile.ra_deg,
        "dec_deg": tile.dec_deg,
        "width_deg": tile.width_deg,
        "height_deg": tile.height_deg,
        "probability": tile.probability,
        "seats": tile.seats,
        "is_dropped": tile.is_dropped,
    }


def plan_shown(plan: Plan) -> state.PlanShown:
    """What a plan promises."""
    return {
        "made_at": iso_time(plan.made_at),
        "searched_expected": plan.searched_expected,
        "searched_bound": plan.searched_bound,
        "certificate": plan.certificate,
        "n_observers": plan.n_observers,
        "n_assignments": plan.n_assignments,
        "seconds": plan.seconds,
        "unassigned": plan.unassigned,
    }


def offer_shown(offer: Offer) -> state.OfferShown:
    """One proposal; its tile must be fetched with it."""
    return {
        "observer": offer.person_id,
        "instrument": offer.instrument_id,
        "tile": offer.tile.number,
        "starts_at": iso_time(offer.starts_at),
        "ends_at": iso_time(offer.ends_at),
        "gain": offer.gain,
    }


def claim_shown(claim: Claim) -> state.ClaimShown:
    """One promise; its tile must be fetched with it."""
    return {
        "tile": claim.tile.number,
        "seat": claim.seat,
        "observer": claim.person_id,
        "instrument": claim.instrument_id,
        "state": claim.state,
        "held_at": iso_time(claim.held_at),
        "starts_at": iso_time(claim.starts_at),
        "until": iso_time(claim.until),
        "ended_at": iso_time(claim.ended_at),
    }


def frame_shown(frame: Frame) -> state.FrameShown:
    """One frame; claim and tile must be fetched with it."""
    return {
        "observer": frame.person_id,
        "instrument": frame.instrument_id,
        "tile": frame.claim.tile.number if frame.claim else None,
        "state": frame.state,
        "footprint": frame.footprint,
        "mid_time": iso_time(frame.mid_time),
        "duration_s": frame.duration_s,
        "band": frame.band,
        "limit_mag": frame.limit_mag,
        "limit_kind": frame.limit_kind,
        "m_eff": bridge.m_eff_of(frame),
        "is_examined": frame.is_examined,
        "examined_way": frame.examined_way,
        "reported_at": iso_time(frame.reported_at),
    }
