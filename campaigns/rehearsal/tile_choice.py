"""Which tile a simulated observer takes: the plan's offer, else the best one now."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from campaigns.rehearsal.stage import Stage

Night = tuple[int, dict[str, Any]]
# Be at the telescope a little before it gets dark, or before a tile's time comes.
EARLY_S = 300.0
SHORTEST_WAIT_S = 300.0


@dataclass(frozen=True)
class TileChoice:
    """A tile to ask for."""

    instrument: int
    tile: int
    ra_deg: float
    dec_deg: float
    starts_at: str
    limit_mag: float | None


def choose_tile(nights: Sequence[Night], stage: Stage) -> TileChoice | None:
    """The earliest offer that is due soon over all instruments, else the first best tile."""
    offers = [
        _choice(instrument, offer, night, stage)
        for instrument, night in nights
        for offer in night["offers"]
        if _is_soon(offer, stage)
    ]
    if offers:
        return min(offers, key=lambda one: (one.starts_at, one.instrument, one.tile))
    best = [
        _choice(instrument, night["best"], night, stage)
        for instrument, night in nights
        if night.get("best") and _is_soon(night["best"], stage)
    ]
    return best[0] if best else None


def wake_up_s(nights: Sequence[Night], stage: Stage) -> float:
    """How long to wait when there is nothing to take now."""
    starts = [
        stage.seconds_at(suggestion["starts_at"]) - stage.now_s
        for _, night in nights
        for suggestion in [*_suggestions(night), *night["offers"]]
    ]
    dusks = [
        stage.seconds_at(night["night"]["dusk"]) - stage.now_s
        for _, night in nights
        if (night.get("night") or {}).get("dusk")
    ]
    ahead = [wait_s - EARLY_S for wait_s in (*starts, *dusks) if wait_s > SHORTEST_WAIT_S]
    waits = [*ahead, stage.scenario["look_again_s"]]
    return max(SHORTEST_WAIT_S, min(waits))


def _suggestions(night: dict[str, Any]) -> list[dict[str, Any]]:
    best = [night["best"]] if night.get("best") else []
    return [*best, *night.get("alternatives", [])]


def _is_soon(suggestion: dict[str, Any], stage: Stage) -> bool:
    wait_s = stage.seconds_at(suggestion["starts_at"]) - stage.now_s
    is_over = stage.seconds_at(suggestion["ends_at"]) <= stage.now_s
    return wait_s <= stage.scenario["claim_ahead_s"] and not is_over


def _choice(
    instrument: int, wanted: dict[str, Any], night: dict[str, Any], stage: Stage
) -> TileChoice:
    """An offer or a suggestion, with its place on the sky and the forecast if there is one."""
    number = int(wanted["tile"])
    tile = stage.tiles[str(number)]
    forecasts = [one for one in _suggestions(night) if one["tile"] == number] or [wanted]
    return TileChoice(
        instrument=instrument,
        tile=number,
        ra_deg=float(tile["ra_deg"]),
        dec_deg=float(tile["dec_deg"]),
        starts_at=str(wanted["starts_at"]),
        limit_mag=forecasts[0].get("limit_forecast_mag"),
    )
