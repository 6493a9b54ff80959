"""What a simulated observer sends after a series: by FITS keywords or by hand."""

from __future__ import annotations

import math
from dataclasses import dataclass
from datetime import datetime, timedelta
from typing import Any

import numpy as np

from campaigns.events.iso_time import iso_time
from campaigns.rehearsal.demo_network import Kit
from campaigns.rehearsal.hidden_source import (
    COMPLETENESS,
    LIMIT_SHIFT_MAG,
    SeenFrame,
    direction,
)

EYE_WIDTH_MAG, IMAGE_WIDTH_MAG = 0.4, 0.2
CAMERA_LIMIT_KINDS = ("5 sigma", "50 %", "3 sigma", "90 %")
CAMERA_LIMIT_SHARES = (0.7, 0.15, 0.1, 0.05)
# Keeps a header's picture of a wide lens small.
FALLBACK_PIXEL_ARCSEC = 10.0


@dataclass(frozen=True)
class Shot:
    """One finished series: where the camera really pointed, when, and how deep it went."""

    ra_deg: float
    dec_deg: float
    rotation_deg: float
    mid_at: datetime
    duration_s: float
    limit_mag: float
    limit_kind: str


def draw_limit_kind(rng: np.random.Generator, kit: Kit) -> str:
    """How the owner of this kit states a limit."""
    if kit.registered["kind"] != "camera":
        return "faintest star seen"
    return str(rng.choice(CAMERA_LIMIT_KINDS, p=CAMERA_LIMIT_SHARES))


def frame_body(kit: Kit, shot: Shot, *, instrument: int, claim: int | None) -> dict[str, Any]:
    """The report, not yet examined."""
    report: dict[str, Any] = {
        "instrument": instrument,
        "claim": claim,
        "limit_mag": shot.limit_mag,
        "limit_kind": shot.limit_kind,
        "reference_mag": kit.chart_mag,
        "band": kit.registered["band"],
        "is_examined": False,
    }
    if kit.saturation_mag is not None:
        report |= {"saturation_mag": kit.saturation_mag, "masks_saturated": True}
    by_hand = kit.reports_by == "form"
    return report | (_typed_fields(kit, shot) if by_hand else {"header": tan_header(kit, shot)})


def _typed_fields(kit: Kit, shot: Shot) -> dict[str, Any]:
    return {
        "ra_deg": shot.ra_deg,
        "dec_deg": shot.dec_deg,
        "width_deg": kit.registered["width_deg"],
        "height_deg": kit.registered["height_deg"],
        "rotation_deg": shot.rotation_deg,
        "mid_time": iso_time(shot.mid_at),
        "duration_s": shot.duration_s,
    }


def tan_header(kit: Kit, shot: Shot) -> dict[str, Any]:
    """The keywords of a plate-solved FITS file: gnomonic, CD matrix, north up then rotated."""
    pixel_deg = (kit.registered.get("pixel_arcsec") or FALLBACK_PIXEL_ARCSEC) / 3600.0
    n_columns = _n_pixels(kit.registered["width_deg"], pixel_deg)
    n_rows = _n_pixels(kit.registered["height_deg"], pixel_deg)
    turn = math.radians(shot.rotation_deg)
    start = shot.mid_at - timedelta(seconds=shot.duration_s / 2.0)
    return {
        "NAXIS": 2,
        "NAXIS1": n_columns,
        "NAXIS2": n_rows,
        "CTYPE1": "RA---TAN",
        "CTYPE2": "DEC--TAN",
        "CRVAL1": shot.ra_deg,
        "CRVAL2": shot.dec_deg,
        "CRPIX1": (n_columns + 1) / 2.0,
        "CRPIX2": (n_rows + 1) / 2.0,
        "CD1_1": -pixel_deg * math.cos(turn),
        "CD1_2": pixel_deg * math.sin(turn),
        "CD2_1": pixel_deg * math.sin(turn),
        "CD2_2": pixel_deg * math.cos(turn),
        "DATE-OBS": start.replace(tzinfo=None).isoformat(timespec="milliseconds"),
        "EXPTIME": shot.duration_s,
        "FILTER": kit.registered["band"],
    }


def _n_pixels(side_deg: float, pixel_deg: float) -> int:
    plane_deg = math.degrees(2.0 * math.tan(math.radians(side_deg) / 2.0))
    return round(plane_deg / pixel_deg)


def seen_frame(
    kit: Kit, shot: Shot, *, number: int, instrument: int, footprint: dict[str, Any], mid_s: float
) -> SeenFrame:
    """The frame as whoever examines it will see it, by the simulation's own account."""
    is_by_eye = kit.registered["kind"] != "camera"
    width_mag = EYE_WIDTH_MAG if is_by_eye else IMAGE_WIDTH_MAG
    return SeenFrame(
        number=number,
        instrument=instrument,
        mid_s=mid_s,
        footprint=footprint,
        centre=direction(shot.ra_deg, shot.dec_deg),
        field_deg=min(kit.registered["width_deg"], kit.registered["height_deg"]),
        m50_mag=min(shot.limit_mag + limit_shift_mag(shot.limit_kind, width_mag), kit.chart_mag),
        width_mag=width_mag,
        completeness=COMPLETENESS[kit.examined_way],
        saturation_mag=kit.saturation_mag,
    )


def limit_shift_mag(limit_kind: str, width_mag: float) -> float:
    """From the stated limit to the magnitude at which half of the sources are seen."""
    if limit_kind == "90 %":
        return width_mag * math.log(9.0)
    return LIMIT_SHIFT_MAG[limit_kind]
