"""The start grid of one observer: slots long enough for a slew and a series."""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from skytiles.planner.observers_to_plan import PlannerInstrument, PlannerObserver

Floats = npt.NDArray[np.float64]
Flags = npt.NDArray[np.bool_]

_MINUTES_PER_DAY = 1440.0
_DAY_S = 86400.0
# Each slot has room for a slew of this size; longer ones need an idle slot before.
SLEW_ALLOWANCE_DEG = 30.0


@dataclass(frozen=True, eq=False)
class StartSlots:
    """(t,) starts and ends, MJD; the observer does one series in one slot."""

    starts_mjd: Floats
    ends_mjd: Floats

    def chosen(self, is_chosen: Flags) -> StartSlots:
        """Some of the slots.

        Parameters
        ----------
        is_chosen : (t,) bool

        Returns
        -------
        StartSlots
        """
        return StartSlots(self.starts_mjd[is_chosen], self.ends_mjd[is_chosen])

    def outside(self, busy: list[tuple[float, float]]) -> StartSlots:
        """Slots that leave promised times alone.

        Parameters
        ----------
        busy : list of (start, end)    MJD

        Returns
        -------
        StartSlots
        """
        is_outside = np.ones(len(self.starts_mjd), dtype=bool)
        for start_mjd, end_mjd in busy:
            is_outside &= (self.ends_mjd <= start_mjd) | (self.starts_mjd >= end_mjd)
        return self.chosen(is_outside)

    def ready_mjds(self, instrument: PlannerInstrument) -> Floats:
        """When an instrument must be on its tile at the latest.

        Parameters
        ----------
        instrument : PlannerInstrument

        Returns
        -------
        (t,) float    MJD
        """
        return self.ends_mjd - instrument.series_s / _DAY_S

    def mids_mjd(self, instrument: PlannerInstrument) -> Floats:
        """Middle of an instrument's series.

        Parameters
        ----------
        instrument : PlannerInstrument

        Returns
        -------
        (t,) float    MJD
        """
        return self.ends_mjd - instrument.series_s / _DAY_S / 2.0


def slot_minutes(observer: PlannerObserver, least_minutes: float) -> float:
    """Length of one observer's slots: slew allowance and longest series, in whole minutes.

    Parameters
    ----------
    observer : PlannerObserver
    least_minutes : float    no slot is shorter

    Returns
    -------
    float    minutes
    """
    needs_s = [
        instrument.series_s + SLEW_ALLOWANCE_DEG / instrument.slew_deg_per_s
        for instrument in observer.instruments
    ]
    return max(least_minutes, float(math.ceil(max(needs_s, default=0.0) / 60.0 - 1e-9)))


def start_slots(
    observer: PlannerObserver,
    *,
    now_mjd: float,
    hours: float,
    least_minutes: float,
) -> StartSlots:
    """Slots of one observer while free, from the first whole minute on.

    Parameters
    ----------
    observer : PlannerObserver
    now_mjd : float          MJD, UTC
    hours : float            no slot ends later than this after `now_mjd`
    least_minutes : float    no slot is shorter

    Returns
    -------
    StartSlots    may be empty
    """
    length_d = slot_minutes(observer, least_minutes) / _MINUTES_PER_DAY
    first_minute = math.ceil(max(now_mjd, observer.free_from_mjd) * _MINUTES_PER_DAY - 1e-4)
    first_mjd = first_minute / _MINUTES_PER_DAY
    last_mjd = min(observer.free_until_mjd, now_mjd + hours / 24.0)
    n_slots = max(0, math.floor((last_mjd - first_mjd) / length_d + 1e-6))
    starts_mjd: Floats = first_mjd + length_d * np.arange(n_slots, dtype=np.float64)
    return StartSlots(starts_mjd, starts_mjd + length_d)
