"""How deep a series will go, tile by tile and hour by hour."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from skytiles.depth.forecast import forecast_limit_mag
from skytiles.depth.limit_kinds import KIND_ESTIMATE, m50_mag
from skytiles.depth.sky_brightness import sky_brightness_mag
from skytiles.night.altitude import moon_altitudes_deg, sun_altitudes_deg
from skytiles.night.moon import moon_phase_angles_deg, moon_radec_deg
from skytiles.planner.observers_to_plan import PlannerInstrument, PlannerObserver
from skytiles.sphere.angles import unit_vectors

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

    Source: forecast_limit_mag with the sky of sky_brightness_mag, taken as a limit that we
    estimate (0.5 mag of caution), and never deeper than the reference.
    """
    moon_ras_deg, moon_decs_deg, _ = moon_radec_deg(mjds)
    cosines = unit_vectors(ras_deg, decs_deg) @ unit_vectors(moon_ras_deg, moon_decs_deg).T
    sky_mag = sky_brightness_mag(
        observer.sky_brightness_mag,
        altitudes_deg,
        sun_altitudes_deg=sun_altitudes_deg([observer.place], mjds)[0],
        moon_altitudes_deg=moon_altitudes_deg([observer.place], mjds)[0],
        moon_separations_deg=np.degrees(np.arccos(np.clip(cosines, -1.0, 1.0))),
        moon_phase_angles_deg=moon_phase_angles_deg(mjds),
    )
    limits = forecast_limit_mag(
        instrument.gear,
        sky_mag=sky_mag,
        altitudes_deg=altitudes_deg,
        seeing_arcsec=observer.seeing_arcsec,
    )
    expected = limits + m50_mag(0.0, KIND_ESTIMATE)
    if instrument.reference_mag is None:
        return expected
    return np.minimum(expected, instrument.reference_mag)
