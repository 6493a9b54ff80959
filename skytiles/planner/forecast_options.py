"""The options of one instrument: detection for every tile and start that is allowed."""

from __future__ import annotations

import numpy as np
import numpy.typing as npt

from skytiles.ledger.ledger_frame import detection_efficiency
from skytiles.planner.observers_to_plan import PlannerInstrument, PlannerObserver
from skytiles.planner.plan_problem import NOT_OFFERED, OptionBlock
from skytiles.planner.scenarios import Scenarios
from skytiles.planner.start_slots import StartSlots

Floats = npt.NDArray[np.float64]
Ints = npt.NDArray[np.int64]
Flags = npt.NDArray[np.bool_]

# Forecast limits are rounded down to this: far below what a forecast can know.
LIMIT_STEP_MAG = 0.05


def make_block(
    observer: PlannerObserver,
    instrument: PlannerInstrument,
    *,
    scenarios: Scenarios,
    slots: StartSlots,
    event_mjd: float,
    tiles: Ints,
    is_allowed: Flags,
    limits_mag: Floats,
    altitudes_deg: Floats,
) -> OptionBlock:
    """Options of one instrument from what is allowed and how deep it would go.

    Parameters
    ----------
    observer : PlannerObserver
    instrument : PlannerInstrument
    scenarios : Scenarios             n scenarios
    slots : StartSlots                t slots
    event_mjd : float                 MJD, UTC
    tiles : (k,) int                  positions of the tiles of its grid
    is_allowed : (k, t) bool          up, dark, safe, free
    limits_mag : (k, t) float         effective limits forecast
    altitudes_deg : (k, t) float      at mid-series

    Returns
    -------
    OptionBlock
    """
    # Tiles that are never on offer are left out: a region is mostly below somebody's horizon.
    is_ever = is_allowed.any(axis=1)
    allowed, limits = is_allowed[is_ever], limits_mag[is_ever]
    magnitudes = scenarios.magnitudes(slots.mids_mjd(instrument) - event_mjd, instrument.band)
    detections, rows = _table(allowed, limits, magnitudes, instrument)
    return OptionBlock(
        instrument_key=instrument.key,
        tiles=tiles[is_ever],
        detections=observer.chance * detections,
        rows=rows,
        ready_mjds=slots.ready_mjds(instrument),
        slew_deg_per_s=instrument.slew_deg_per_s,
        n_tiles_left=instrument.n_tiles_left,
        limits_mag=limits,
        altitudes_deg=altitudes_deg[is_ever],
    )


def expected_detection(
    instrument: PlannerInstrument, magnitudes: Floats, limits_mag: npt.ArrayLike
) -> Floats:
    """Chance that one frame of an instrument finds a source under it.

    Parameters
    ----------
    instrument : PlannerInstrument
    magnitudes : (..., n) float      of the source scenarios
    limits_mag : (..., 1) float      effective limits

    Returns
    -------
    (..., n) float    0..1
    """
    seen = detection_efficiency(magnitudes, limits_mag, s=instrument.s_mag)
    return instrument.completeness * seen


def _table(
    allowed: Flags, limits_mag: Floats, magnitudes: Floats, instrument: PlannerInstrument
) -> tuple[Floats, Ints]:
    """Distinct detections (u, n), the first of them nothing, and which (k, t) has which."""
    distinct_mags, mags_of_slot = np.unique(magnitudes, axis=0, return_inverse=True)
    steps = np.floor(limits_mag / LIMIT_STEP_MAG + 1e-9)
    lowest = steps[allowed].min(initial=0.0)
    n_steps = steps[allowed].max(initial=0.0) - lowest + 1.0
    codes = mags_of_slot.reshape(-1)[None, :] * n_steps + (steps - lowest)
    distinct, row_of = np.unique(codes[allowed], return_inverse=True)
    rows = np.full(allowed.shape, NOT_OFFERED, dtype=np.int64)
    rows[allowed] = 1 + row_of.reshape(-1)
    which, step = np.divmod(distinct, n_steps)
    limits = (step + lowest) * LIMIT_STEP_MAG
    found = expected_detection(instrument, distinct_mags[which.astype(np.int64)], limits[:, None])
    return np.concatenate([np.zeros((1, magnitudes.shape[1])), found]), rows
