"""How deep a frame of an instrument probably goes, where only its exposure is known."""

from collections.abc import Mapping
from datetime import datetime
from typing import Any, TypedDict

import campaigns.bridge as bridge
from observers.bridge import gear_of, place_of
from observers.models import Instrument
from skytiles.depth.depth_error import DepthError
from skytiles.depth.estimate import LimitEstimate, estimate_limit
from skytiles.depth.limit_kinds import KIND_ESTIMATE
from skytiles.tiling.footprint import Footprint


class DepthEstimate(TypedDict):
    """An estimate, marked as one: limit, its 1 sigma error, and what was assumed."""

    limit_mag: float
    uncertainty_mag: float
    limit_kind: str
    saturation_mag: float | None
    sky_mag: float
    altitude_deg: float
    assumptions: list[str]


def get_depth_estimate(
    instrument: Instrument, *, ra_deg: float, dec_deg: float, mid_time: datetime, duration_s: float
) -> DepthEstimate:
    """From the gear as its owner describes it and the sky over its site then."""
    found: LimitEstimate = estimate_limit(
        gear_of(instrument),
        place=place_of(instrument.site),
        zenith_mag=instrument.site.sky_brightness_mag,
        seeing_arcsec=instrument.site.seeing_arcsec,
        ra_deg=ra_deg,
        dec_deg=dec_deg,
        mid_mjd=bridge.mjd_of(mid_time),
        duration_s=duration_s,
    )
    return {
        "limit_mag": round(found.limit_mag, 2),
        "uncertainty_mag": round(found.uncertainty_mag, 2),
        "limit_kind": KIND_ESTIMATE,
        "saturation_mag": _rounded(found.saturation_mag),
        "sky_mag": round(found.sky_mag, 2),
        "altitude_deg": round(found.altitude_deg, 1),
        "assumptions": list(found.assumptions),
    }


def with_estimate(
    values: Mapping[str, Any],
    instrument: Instrument,
    *,
    footprint: Footprint,
    mid_time: datetime,
    duration_s: float,
) -> tuple[dict[str, Any], tuple[str, ...]]:
    """Where the limit is to be our estimate: that, and a sentence that says how sure it is."""
    is_asked = values.get("limit_kind") == KIND_ESTIMATE and values.get("limit_mag") is None
    if not is_asked:
        return dict(values), ()
    try:
        found = get_depth_estimate(
            instrument,
            ra_deg=float(footprint.centre_ra_deg),
            dec_deg=float(footprint.centre_dec_deg),
            mid_time=mid_time,
            duration_s=duration_s,
        )
    except DepthError:
        # A field that was down, or no exposure: refused by the rules of frames, with better words.
        return dict(values), ()
    note = (
        f"The limit {found['limit_mag']:.1f} is our estimate from gear and sky, good to "
        f"{found['uncertainty_mag']:.1f} magnitudes; measure a star to do better."
    )
    return {**values, "limit_mag": found["limit_mag"]}, (note,)


def _rounded(value: float | None) -> float | None:
    return None if value is None else round(value, 2)
