"""How deep a series will go, tile by tile and hour by hour."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from skytiles.depth.forecast import band_of, forecast_limit_mag
from skytiles.depth.limit_kinds import KIND_ESTIMATE, m50_mag
from skytiles.depth.sky_over_place import sky_over_place_mag
from skytiles.planner.observers_to_plan import PlannerInstrument, PlannerObserver

Floats = npt.NDArray[np.float64]


def forecast_limits_mag(
    observer: PlannerObserver,
    instrument: PlannerInstrument,
    *,
    ras_deg: Floats,
    decs_deg: Floats,
    mjds: Floats,
    altitudes_deg: Floats,
) -> Floats:
    """Effective limits that a plan counts on.

    Parameters
    ----------
    observer : PlannerObserver
    instrument : PlannerInstrument
    ras_deg, decs_deg : (k,) float     of the tiles, ICRS, degrees
    mjds : (t,) float                  middles of the series, MJD, UTC
    altitudes_deg : (k, t) float       of the tiles then, degrees

    Returns
    -------
    (k, t) float    magnitudes; -inf below the horizon

    Source: forecast_limit_mag with the sky of sky_over_place_mag, taken as a limit that we
    estimate (0.5 mag of caution), and never deeper than the reference.
    """
    sky_mag = sky_over_place_mag(
        observer.place,
        observer.sky_brightness_mag,
        ras_deg=ras_deg,
        decs_deg=decs_deg,
        mjds=mjds,
        altitudes_deg=altitudes_deg,
        band=band_of(instrument.gear),
    )
    limits = forecast_limit_mag(
        instrument.gear,
        sky_mag=sky_mag,
        altitudes_deg=altitudes_deg,
        seeing_arcsec=observer.seeing_arcsec,
        height_m=observer.place.height_m,
    )
    expected = limits + m50_mag(0.0, KIND_ESTIMATE)
    if instrument.reference_mag is None:
        return expected
    return np.minimum(expected, instrument.reference_mag)
