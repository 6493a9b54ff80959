"""The invented network: who observes from where, with what, and how they behave."""

from __future__ import annotations

import json
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np

DEMO_FOLDER = Path(__file__).resolve().parents[2] / "fixtures" / "demo"

# What an instrument says of itself over the API; the rest of a kit is the simulation's own.
INSTRUMENT_FIELDS = (
    "kind",
    "shape",
    "width_deg",
    "height_deg",
    "rotation_deg",
    "aperture_mm",
    "focal_length_mm",
    "pixel_arcsec",
    "obstruction",
    "throughput",
    "read_noise_e",
    "band",
    "exposure_s",
    "n_exposures",
    "overhead_s",
    "slew_deg_per_s",
    "tiles_per_night",
    "is_eye_free",
)


@dataclass(frozen=True)
class Kit:
    """One invented instrument: what is registered of it, and the habits of its owner."""

    name: str
    registered: dict[str, Any]
    examined_way: str
    chart_mag: float
    typical_limit_mag: float
    saturation_mag: float | None
    reports_by: str


@dataclass(frozen=True)
class InventedObserver:
    """One invented person (or robotic dome) with a site and one or more kits."""

    name: str
    continent: str
    pace: str
    site: dict[str, Any]
    kits: tuple[Kit, ...]


@dataclass(frozen=True)
class Demo:
    """Everything invented that a rehearsal needs."""

    alert: bytes
    scenario: dict[str, Any]
    observers: tuple[InventedObserver, ...]


def read_demo(n_observers: int, rng: np.random.Generator) -> Demo:
    """The demo network cut, or repeated at shifted places, to the number asked for."""
    network = _read_json("network.json")
    kits = {name: _make_kit(name, entry) for name, entry in network["gear"].items()}
    entries = network["observers"]
    observers = [
        _make_observer(entries[i % len(entries)], kits, copy=i // len(entries), rng=rng)
        for i in range(n_observers)
    ]
    alert = (DEMO_FOLDER / "alert.json").read_bytes()
    return Demo(alert, _read_json("scenario.json"), tuple(observers))


def _read_json(name: str) -> dict[str, Any]:
    loaded: dict[str, Any] = json.loads((DEMO_FOLDER / name).read_text(encoding="utf-8"))
    return loaded


def _make_kit(name: str, entry: dict[str, Any]) -> Kit:
    return Kit(
        name=name,
        registered={field: entry[field] for field in INSTRUMENT_FIELDS if field in entry},
        examined_way=entry["examined_way"],
        chart_mag=entry["chart_mag"],
        typical_limit_mag=entry["typical_limit_mag"],
        saturation_mag=entry.get("saturation_mag"),
        reports_by=entry["reports_by"],
    )


def _make_observer(
    entry: dict[str, Any], kits: dict[str, Kit], *, copy: int, rng: np.random.Generator
) -> InventedObserver:
    site, name = dict(entry["site"]), entry["name"]
    if copy:
        name = f"{name} {copy + 1}"
        site = _shifted_site(site, rng)
    gear = tuple(kits[kit] for kit in entry["gear"])
    return InventedObserver(name, entry["continent"], entry["pace"], site, gear)


def _shifted_site(site: dict[str, Any], rng: np.random.Generator) -> dict[str, Any]:
    """A neighbour of an invented site, some hundred kilometres away."""
    north_deg, east_deg = rng.normal(scale=1.5, size=2)
    latitude_deg = float(np.clip(site["latitude_deg"] + north_deg, -85.0, 85.0))
    longitude_deg = (site["longitude_deg"] + float(east_deg) + 180.0) % 360.0 - 180.0
    shifted = {"latitude_deg": round(latitude_deg, 4), "longitude_deg": round(longitude_deg, 4)}
    return {**site, **shifted}
