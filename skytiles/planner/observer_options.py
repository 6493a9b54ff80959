"""All options of one observer, or the reason why there are none."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from skytiles.night.altitude import altitudes_deg, sun_altitudes_deg
from skytiles.night.reach import is_limited, reach_mask
from skytiles.night.windows import observable_mask
from skytiles.planner import reasons
from skytiles.planner.forecast_limits import forecast_limits_mag
from skytiles.planner.forecast_options import make_block
from skytiles.planner.observers_to_plan import PlannerInstrument, PlannerObserver
from skytiles.planner.plan_problem import Commitment, ObserverOptions, OptionBlock
from skytiles.planner.scenarios import Scenarios
from skytiles.planner.search_state import SAME_LOOK_D
from skytiles.planner.start_slots import StartSlots, start_slots
from skytiles.planner.tiles_to_plan import PlannerTiles
from skytiles.sphere.angles import unit_vectors

Floats = npt.NDArray[np.float64]
Ints = npt.NDArray[np.int64]
Flags = npt.NDArray[np.bool_]

_DAY_S = 86400.0


@dataclass(frozen=True, eq=False)
class Outlook:
    """What all observers of a plan share: scenarios, tiles, times."""

    scenarios: Scenarios
    tiles: PlannerTiles
    event_mjd: float
    now_mjd: float
    hours: float
    slot_minutes: float
    sun_below_deg: float

    def altitudes_deg(self, observer: PlannerObserver, places: Ints, mjds: Floats) -> Floats:
        """Altitudes of some tiles at some times.

        Parameters
        ----------
        observer : PlannerObserver
        places : (k,) int    positions of tiles
        mjds : (t,) float    MJD, UTC

        Returns
        -------
        (k, t) float    degrees
        """
        ras_deg, decs_deg = self.tiles.ras_deg[places], self.tiles.decs_deg[places]
        return altitudes_deg([observer.place], ras_deg, decs_deg, mjds)[0].astype(np.float64)

    def limits_mag(
        self,
        observer: PlannerObserver,
        instrument: PlannerInstrument,
        places: Ints,
        mjds: Floats,
        altitudes_deg: Floats,
    ) -> Floats:
        """Effective limits of some tiles at some times.

        Parameters
        ----------
        observer : PlannerObserver
        instrument : PlannerInstrument
        places : (k,) int               positions of tiles
        mjds : (t,) float               middles of the series, MJD, UTC
        altitudes_deg : (k, t) float    of the tiles then

        Returns
        -------
        (k, t) float    magnitudes, -inf below the horizon
        """
        return forecast_limits_mag(
            observer,
            instrument,
            ras_deg=self.tiles.ras_deg[places],
            decs_deg=self.tiles.decs_deg[places],
            mjds=mjds,
            altitudes_deg=altitudes_deg,
        )


def observer_options(
    observer: PlannerObserver,
    outlook: Outlook,
    *,
    busy: list[tuple[float, float]],
    commitments: tuple[Commitment, ...],
) -> ObserverOptions:
    """What one observer could do during a plan.

    Parameters
    ----------
    observer : PlannerObserver
    outlook : Outlook
    busy : list of (start, end)            MJD: taken by the observer's own claims
    commitments : tuple of Commitment      pointings that are fixed

    Returns
    -------
    ObserverOptions    without blocks, and with the reason, when there is nothing to offer
    """
    slots, reason = _dark_slots(observer, outlook, busy)
    blocks, block_reasons = [], []
    for instrument in observer.instruments if not reason else ():
        block, why = _block(observer, instrument, outlook, slots)
        if block is None:
            block_reasons.append(why)
        else:
            blocks.append(block)
    if not blocks and not reason:
        reason = block_reasons[0]
    return ObserverOptions(
        key=observer.key,
        starts_mjd=slots.starts_mjd,
        ends_mjd=slots.ends_mjd,
        blocks=tuple(blocks),
        commitments=commitments,
        reason=reason if not blocks else "",
    )


def _dark_slots(
    observer: PlannerObserver, outlook: Outlook, busy: list[tuple[float, float]]
) -> tuple[StartSlots, str]:
    """Slots that are free and dark; why there are none."""
    slots = start_slots(
        observer,
        now_mjd=outlook.now_mjd,
        hours=outlook.hours,
        least_minutes=outlook.slot_minutes,
    )
    if not observer.instruments:
        return slots, reasons.NO_INSTRUMENT
    if all(instrument.n_tiles_left <= 0 for instrument in observer.instruments):
        return slots, reasons.TILES_USED_UP
    if len(slots.starts_mjd) == 0:
        return slots, reasons.not_free(outlook.hours)
    sun_deg = sun_altitudes_deg([observer.place], slots.starts_mjd)[0]
    dark = slots.chosen(sun_deg < outlook.sun_below_deg)
    if len(dark.starts_mjd) == 0:
        return dark, reasons.no_darkness(outlook.hours)
    free = dark.outside(busy)
    return free, "" if len(free.starts_mjd) else reasons.BUSY


def _block(
    observer: PlannerObserver,
    instrument: PlannerInstrument,
    outlook: Outlook,
    slots: StartSlots,
) -> tuple[OptionBlock | None, str]:
    """Options of one instrument; why there are none."""
    places = outlook.tiles.grid_of(instrument.tile_width_deg, instrument.tile_height_deg)
    if len(places) == 0:
        return None, reasons.NO_GRID
    mids_mjd = slots.mids_mjd(instrument)
    altitudes = outlook.altitudes_deg(observer, places, mids_mjd)
    is_high = altitudes >= observer.place.min_altitude_deg
    is_ever = is_high.any(axis=1)
    if not is_ever.any():
        return None, reasons.never_up(outlook.hours)
    places, altitudes = places[is_ever], altitudes[is_ever]
    is_allowed = _are_observable(observer, instrument, outlook, places, slots)
    if not is_allowed.any():
        return None, _why_nothing_is_allowed(observer, instrument, outlook, places, slots)
    limits = outlook.limits_mag(observer, instrument, places, mids_mjd, altitudes)
    is_allowed &= np.isfinite(limits)
    is_allowed &= ~_are_same_look(observer, instrument, outlook.tiles, places, slots)
    block = make_block(
        observer,
        instrument,
        scenarios=outlook.scenarios,
        slots=slots,
        event_mjd=outlook.event_mjd,
        tiles=places,
        is_allowed=is_allowed,
        limits_mag=limits,
        altitudes_deg=altitudes,
    )
    if block.detections.max() > 0.0:
        return block, ""
    return None, _why_nothing_is_found(instrument, outlook, slots)


def _are_observable(
    observer: PlannerObserver,
    instrument: PlannerInstrument,
    outlook: Outlook,
    places: Ints,
    slots: StartSlots,
) -> Flags:
    """(k, t) up, dark and safe from the start of the slot to the end of the lease."""
    duration_s = float(slots.ends_mjd[0] - slots.starts_mjd[0]) * _DAY_S
    return observable_mask(
        observer.place,
        instrument.rating,
        outlook.tiles.ras_deg[places],
        outlook.tiles.decs_deg[places],
        slots.starts_mjd,
        duration_s=duration_s,
        sun_below_deg=outlook.sun_below_deg,
        mount=instrument.mount,
    )


def _why_nothing_is_allowed(
    observer: PlannerObserver,
    instrument: PlannerInstrument,
    outlook: Outlook,
    places: Ints,
    slots: StartSlots,
) -> str:
    if not is_limited(observer.place, instrument.mount):
        return reasons.TOO_NEAR_SUN
    is_free = reach_mask(
        observer.place,
        instrument.mount,
        outlook.tiles.ras_deg[places],
        outlook.tiles.decs_deg[places],
        slots.starts_mjd,
        duration_s=instrument.series_s,
    )
    return reasons.TOO_NEAR_SUN if is_free.any() else reasons.OUT_OF_REACH


def _are_same_look(
    observer: PlannerObserver,
    instrument: PlannerInstrument,
    tiles: PlannerTiles,
    places: Ints,
    slots: StartSlots,
) -> Flags:
    """(k, t) where a frame would only join a look that has just been taken or promised."""
    is_same = np.zeros((len(places), len(slots.starts_mjd)), dtype=bool)
    vectors = unit_vectors(tiles.ras_deg[places], tiles.decs_deg[places])
    reach = np.cos(np.radians(max(instrument.tile_width_deg, instrument.tile_height_deg) / 2.0))
    mids_mjd = slots.mids_mjd(instrument)
    for pointing in observer.recent:
        if pointing.instrument_key == instrument.key:
            is_here = vectors @ unit_vectors(pointing.ra_deg, pointing.dec_deg) >= reach
            is_soon = np.abs(mids_mjd - pointing.mid_mjd) < SAME_LOOK_D
            is_same |= is_here[:, None] & is_soon[None, :]
    return is_same


def _why_nothing_is_found(
    instrument: PlannerInstrument, outlook: Outlook, slots: StartSlots
) -> str:
    ts_d = slots.mids_mjd(instrument) - outlook.event_mjd
    has_light = np.isfinite(outlook.scenarios.magnitudes(ts_d, instrument.band)).any()
    return reasons.TOO_SHALLOW if has_light else reasons.NOT_YET
