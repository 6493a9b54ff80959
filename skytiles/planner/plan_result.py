"""What the planner answers."""

from __future__ import annotations

from dataclasses import dataclass, replace


@dataclass(frozen=True)
class Assignment:
    """One offer: observer, instrument, tile, start and end; gain in expected searched."""

    observer_key: int
    instrument_key: int
    tile_key: int
    start_mjd: float
    end_mjd: float
    gain: float


@dataclass(frozen=True)
class Unassigned:
    """Somebody who got nothing, and why."""

    observer_key: int
    reason: str


@dataclass(frozen=True)
class PlanResult:
    """A plan, what it is expected to reach, and what no plan could exceed.

    `searched_expected` counts the ledger, the claims in hand and the offers, each with its chance;
    `certificate` is `searched_expected / searched_bound`. `n_evaluations` counts the gains that
    were computed, `seconds` is filled in by who holds the clock.
    """

    assignments: tuple[Assignment, ...]
    searched_expected: float
    searched_bound: float
    certificate: float
    unassigned: tuple[Unassigned, ...]
    searched_now: float = 0.0
    n_options: int = 0
    n_evaluations: int = 0
    seconds: float = 0.0

    def timed(self, seconds: float) -> PlanResult:
        """The same plan with the time that it took.

        Parameters
        ----------
        seconds : float    measured by the caller: nothing here reads a clock

        Returns
        -------
        PlanResult
        """
        return replace(self, seconds=seconds)


@dataclass(frozen=True)
class TileNow:
    """A tile worth taking next by one observer, best first in a list of them."""

    tile_key: int
    gain: float
    start_mjd: float
    end_mjd: float
    reason: str
    instrument_key: int
    altitude_deg: float
    limit_mag: float
