"""A frame report, from a header or from typed values, as one typed value."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from datetime import datetime
from typing import Any

import campaigns.bridge as bridge
from campaigns.errors import InvalidInput, refuse_problems
from campaigns.ingest.header_keywords import Card, allowed_cards
from campaigns.ingest.typed_beside_header import set_right
from campaigns.rules.frame import typed_problems
from observers.models import Instrument
from observers.rules.problem import Problem
from skytiles.tiling.footprint import Footprint, circle_footprint, rectangle_footprint
from skytiles.tiling.frame_header import ANGLE_UNKNOWN, FrameHeader, read_frame_header
from skytiles.tiling.mosaic_header import read_mosaic_header

MOST_NOTES = 10
ADVICE = "Correct the named fields and send the frame again; nothing was stored."


@dataclass(frozen=True)
class FrameReport:
    """What was taken: where, when, how long, through what, and from where we know it."""

    footprint: Footprint
    mid_time: datetime
    duration_s: float
    band: str
    origin: str
    header: Mapping[str, Card] = field(default_factory=dict)
    notes: tuple[str, ...] = ()


def read_report(values: Mapping[str, Any], instrument: Instrument) -> FrameReport:
    """From the checked values of a request; typed values beside a header set it right."""
    refuse_problems(typed_problems(values), advice=ADVICE)
    if values.get("header"):
        return _from_header(values, instrument)
    return _from_form(values, instrument)


def shaped_footprint(
    instrument: Instrument,
    *,
    ra_deg: float,
    dec_deg: float,
    width_deg: float | None = None,
    height_deg: float | None = None,
    rotation_deg: float | None = None,
) -> Footprint:
    """The footprint of one frame of the instrument at a place.

    A camera angle that nobody knows leaves only the circle that is inside at any angle:
    false coverage is worse than none.
    """
    width = instrument.width_deg if width_deg is None else width_deg
    height = instrument.height_deg if height_deg is None else height_deg
    angle = instrument.rotation_deg if rotation_deg is None else rotation_deg
    if instrument.shape == "circle" or angle is None:
        return circle_footprint(ra_deg=ra_deg, dec_deg=dec_deg, diameter_deg=min(width, height))
    return rectangle_footprint(
        ra_deg=ra_deg, dec_deg=dec_deg, width_deg=width, height_deg=height, rotation_deg=angle
    )


def _from_header(values: Mapping[str, Any], instrument: Instrument) -> FrameReport:
    cards = allowed_cards(values["header"])
    told = set_right(cards, values)
    pictures = [allowed_cards(picture) for picture in values.get("pictures") or ()]
    read = read_mosaic_header(told, pictures) if pictures else read_frame_header(told)
    footprint = _header_footprint(read, values, instrument)
    # The angle may be typed or known from My gear: then the rectangle counts.
    unsaid = {ANGLE_UNKNOWN} if footprint.shape == "polygon" else set()
    return FrameReport(
        footprint=footprint,
        mid_time=values.get("mid_time") or bridge.time_of(read.mid_mjd),
        duration_s=read.duration_s,
        band=values.get("band") or _short_band(read.band) or instrument.band,
        origin="header",
        header=cards,
        notes=tuple(note for note in read.notes if note not in unsaid)[:MOST_NOTES],
    )


def _header_footprint(
    read: FrameHeader, values: Mapping[str, Any], instrument: Instrument
) -> Footprint:
    """The plate solution's outline, else the typed, stated or usual size at the stated place."""
    is_solved = read.footprint is not None and read.width_deg is None
    if read.footprint is not None and is_solved:
        return read.footprint
    width_deg, height_deg = values.get("width_deg"), values.get("height_deg")
    return shaped_footprint(
        instrument,
        ra_deg=read.ra_deg,
        dec_deg=read.dec_deg,
        width_deg=read.width_deg if width_deg is None else width_deg,
        height_deg=read.height_deg if height_deg is None else height_deg,
        rotation_deg=values.get("rotation_deg"),
    )


def _from_form(values: Mapping[str, Any], instrument: Instrument) -> FrameReport:
    needed = ("ra_deg", "dec_deg", "mid_time", "duration_s")
    missing = [Problem(name, f"{name} is missing.") for name in needed if values.get(name) is None]
    if missing:
        raise InvalidInput(
            "A frame needs a position, a mid-time and a duration.",
            "Fill in the named fields, or send the header of the FITS file.",
            problems=missing,
        )
    return FrameReport(
        footprint=_typed_footprint(values, instrument),
        mid_time=values["mid_time"],
        duration_s=values["duration_s"],
        band=values.get("band") or instrument.band,
        origin="form",
    )


def _typed_footprint(values: Mapping[str, Any], instrument: Instrument) -> Footprint:
    return shaped_footprint(
        instrument,
        ra_deg=values["ra_deg"],
        dec_deg=values["dec_deg"],
        width_deg=values.get("width_deg"),
        height_deg=values.get("height_deg"),
        rotation_deg=values.get("rotation_deg"),
    )


def _short_band(band: str | None) -> str:
    return (band or "").strip()[:12]
