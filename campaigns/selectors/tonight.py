"""One instrument's night: what it holds, what is offered, what is best now."""

from collections.abc import Iterable
from datetime import datetime
from typing import TypedDict

import numpy as np

import campaigns.bridge as bridge
from campaigns.events.iso_time import iso_time
from campaigns.events.state import OfferShown
from campaigns.models import Campaign, Claim, Offer, Plan, Tile
from campaigns.rules.clock import campaign_now
from campaigns.selectors.best_tile import TileSuggestion, get_best_tile
from campaigns.selectors.shown import claim_shown, offer_shown
from observers.bridge import place_of
from observers.models import Instrument
from skytiles.night.altitude import altitudes_deg
from skytiles.night.twilight import dark_intervals

NIGHT_HOURS = 24.0
CURVE_STEP_MINUTES = 15
MOST_CURVES = 12
# A tenth of a second.
_SEARCH_ERROR_D = 1e-6

Span = tuple[float, float]


class CurvePoint(TypedDict):
    """One point of an altitude curve."""

    at: str
    altitude_deg: float


class Night(TypedDict):
    """The present or next darkness at the site; null for what lies more than a day away."""

    dusk: str | None
    dawn: str | None


class MyClaim(TypedDict):
    """A held claim with its number."""

    id: int
    tile: int
    seat: int
    observer: int
    instrument: int
    state: str
    held_at: str
    starts_at: str
    until: str
    ended_at: str | None


class Tonight(TypedDict):
    """What the page Tonight shows."""

    instrument: int
    now: str
    claims: list[MyClaim]
    offers: list[OfferShown]
    best: TileSuggestion | None
    alternatives: list[TileSuggestion]
    why_not: str | None
    curves: dict[str, list[CurvePoint]]
    night: Night


def get_tonight(campaign: Campaign, instrument: Instrument, *, wall_now: datetime) -> Tonight:
    """Everything for one card after the other."""
    now = campaign_now(campaign, wall_now)
    claims = _claims(campaign, instrument, now=now)
    offers = _offers(campaign, instrument, now=now)
    best = get_best_tile(campaign, instrument, wall_now=wall_now)
    suggested = [one for one in [best["best"], *best["alternatives"]] if one is not None]
    numbers = [
        *(claim.tile.number for claim in claims),
        *(one["tile"] for one in suggested),
        *(offer.tile.number for offer in offers),
    ]
    dark = _darkness(instrument, now=now)
    return {
        "instrument": instrument.pk,
        "now": iso_time(now),
        "claims": [{"id": claim.pk, **claim_shown(claim)} for claim in claims],
        "offers": [offer_shown(offer) for offer in offers],
        **best,
        "curves": _curves(campaign, instrument, numbers=numbers, dark=_still_to_come(dark, now)),
        "night": _night(dark, now=now),
    }


def _claims(campaign: Campaign, instrument: Instrument, *, now: datetime) -> list[Claim]:
    held = Claim.objects.filter(
        campaign=campaign, instrument=instrument, state=Claim.State.HELD, until__gt=now
    )
    return list(held.select_related("tile").order_by("starts_at", "id"))


def _offers(campaign: Campaign, instrument: Instrument, *, now: datetime) -> list[Offer]:
    plan = Plan.objects.filter(campaign=campaign).last()
    rows = Offer.objects.filter(plan=plan, instrument=instrument, ends_at__gt=now)
    return list(rows.select_related("tile").order_by("starts_at", "id"))


def _darkness(instrument: Instrument, *, now: datetime) -> Span | None:
    """The present darkness from its dusk on, or the next one; a day either way."""
    now_mjd = bridge.mjd_of(now)
    dark = dark_intervals(
        place_of(instrument.site),
        start_mjd=now_mjd - NIGHT_HOURS / 24.0,
        hours=2.0 * NIGHT_HOURS,
    )
    return next(((start, end) for start, end in dark if end > now_mjd), None)


def _still_to_come(dark: Span | None, now: datetime) -> Span | None:
    return None if dark is None else (max(dark[0], bridge.mjd_of(now)), dark[1])


def _night(dark: Span | None, *, now: datetime) -> Night:
    if dark is None:
        return {"dusk": None, "dawn": None}
    return {"dusk": _within_a_day(dark[0], now=now), "dawn": _within_a_day(dark[1], now=now)}


def _within_a_day(mjd: float, *, now: datetime) -> str | None:
    """A darkness that was cut off where the search ends has no dusk or dawn there."""
    is_cut = abs(mjd - bridge.mjd_of(now)) > NIGHT_HOURS / 24.0 - _SEARCH_ERROR_D
    return None if is_cut else iso_time(bridge.time_of(mjd))


def _curves(
    campaign: Campaign,
    instrument: Instrument,
    *,
    numbers: Iterable[int],
    dark: tuple[float, float] | None,
) -> dict[str, list[CurvePoint]]:
    """Altitude through the night of the tiles that are shown, the first twelve."""
    wanted = list(dict.fromkeys(numbers))[:MOST_CURVES]
    tiles = list(Tile.objects.filter(campaign=campaign, number__in=wanted))
    if dark is None or not tiles:
        return {}
    mjds = np.arange(dark[0], dark[1] + 1e-9, CURVE_STEP_MINUTES / 1440.0)
    curves_deg = altitudes_deg(
        [place_of(instrument.site)],
        np.array([tile.ra_deg for tile in tiles]),
        np.array([tile.dec_deg for tile in tiles]),
        mjds,
    )[0]
    times = [iso_time(bridge.time_of(mjd)) for mjd in mjds]
    return {
        str(tile.number): [
            {"at": at, "altitude_deg": round(float(altitude_deg), 1)}
            for at, altitude_deg in zip(times, curve_deg, strict=True)
        ]
        for tile, curve_deg in zip(tiles, curves_deg, strict=True)
    }
