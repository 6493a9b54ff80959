"""The best tile now for one instrument, from the live ledger."""

from datetime import datetime
from typing import TypedDict

import campaigns.bridge as bridge
from campaigns.events.iso_time import iso_time
from campaigns.ledger_replica import held_replica
from campaigns.models import Campaign, Offer, Tile
from campaigns.rules.clock import campaign_now
from campaigns.rules.lease import LONGEST
from campaigns.selectors.planning import get_roster, plan_problem
from observers.models import Instrument
from skytiles.planner.best_tiles import best_tiles_now
from skytiles.planner.plan_result import TileNow

N_TILES = 4
# First what can be claimed now; if that is nothing, when the night will bring something.
_HOURS = (LONGEST.total_seconds() / 3600.0, 12.0)


class TileSuggestion(TypedDict):
    """A tile that is worth taking now, and why."""

    tile: int
    ra_deg: float
    dec_deg: float
    starts_at: str
    ends_at: str
    gain: float
    reason: str
    altitude_deg: float
    limit_forecast_mag: float
    exposure_s: float
    n_exposures: int
    offered: bool


class BestTile(TypedDict):
    """The best, the next ones, or why there is none."""

    best: TileSuggestion | None
    alternatives: list[TileSuggestion]
    why_not: str | None


def get_best_tile(
    campaign: Campaign, instrument: Instrument, *, wall_now: datetime, n: int = N_TILES
) -> BestTile:
    """Ask the planner's own gain for one instrument."""
    now = campaign_now(campaign, wall_now)
    found, why_not = _tiles_now(campaign, instrument, now=now, n=n)
    suggestions = _suggestions(campaign, instrument, found)
    return {
        "best": suggestions[0] if suggestions else None,
        "alternatives": suggestions[1:],
        "why_not": why_not or None,
    }


def get_alternative(
    campaign: Campaign, instrument: Instrument, *, but_not: int, wall_now: datetime
) -> TileSuggestion | None:
    """The best tile now that is not the refused one."""
    best = get_best_tile(campaign, instrument, wall_now=wall_now, n=2)
    candidates = [best["best"], *best["alternatives"]]
    return next((one for one in candidates if one and one["tile"] != but_not), None)


def _tiles_now(
    campaign: Campaign, instrument: Instrument, *, now: datetime, n: int
) -> tuple[list[TileNow], str]:
    roster = get_roster(campaign, now=now, only_person=instrument.owner_id)
    key = instrument.site_id
    if key not in {observer.key for observer in roster.observers}:
        return [], _why_not_planned(roster.absent, instrument.owner_id)
    for hours in _HOURS:
        with held_replica(campaign.pk) as replica:
            problem = plan_problem(replica, campaign, roster, now=now, hours=hours, only_key=key)
        found, why_not = best_tiles_now(problem, key, n, instrument_key=instrument.pk)
        if found:
            break
    return found, why_not


def _why_not_planned(absent: object, person_id: int) -> str:
    reasons = dict(absent) if isinstance(absent, list) else {}
    return reasons.get(person_id, "this instrument is out of use")


def _suggestions(
    campaign: Campaign, instrument: Instrument, found: list[TileNow]
) -> list[TileSuggestion]:
    numbers = [one.tile_key for one in found]
    rows = Tile.objects.filter(campaign=campaign, number__in=numbers)
    tiles = {tile.number: tile for tile in rows}
    offered = set(
        Offer.objects.filter(instrument=instrument, tile__in=rows).values_list(
            "tile__number", flat=True
        )
    )
    return [
        {
            "tile": one.tile_key,
            "ra_deg": tiles[one.tile_key].ra_deg,
            "dec_deg": tiles[one.tile_key].dec_deg,
            "starts_at": iso_time(bridge.time_of(one.start_mjd)),
            "ends_at": iso_time(bridge.time_of(one.end_mjd)),
            "gain": one.gain,
            "reason": one.reason,
            "altitude_deg": one.altitude_deg,
            "limit_forecast_mag": one.limit_mag,
            "exposure_s": instrument.exposure_s,
            "n_exposures": instrument.n_exposures,
            "offered": one.tile_key in offered,
        }
        for one in found
    ]
