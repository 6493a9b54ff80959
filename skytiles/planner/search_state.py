"""A plan in the making: what remains to be found, who is free when, and what an option adds."""

from __future__ import annotations

from dataclasses import dataclass, field

import numpy as np
import numpy.typing as npt

from skytiles.planner.option_gains import option_gains
from skytiles.planner.plan_problem import (
    NOT_OFFERED,
    Commitment,
    ObserverOptions,
    OptionBlock,
    PlanProblem,
)
from skytiles.planner.slewing import Reach, reach_between, tile_vectors
from skytiles.planner.tile_sums import TileSums

Floats = npt.NDArray[np.float64]
Ints = npt.NDArray[np.int64]
Flags = npt.NDArray[np.bool_]

# A claim outlives its planned end by this much (leases, DEVELOPERS.md).
LEASE_MARGIN_D = 15.0 / 1440.0
# Frames of one instrument at one place within this time are one look: a second adds little.
SAME_LOOK_D = 60.0 / 1440.0


@dataclass(frozen=True, eq=False)
class Choice:
    """One option that was taken."""

    observer: int
    block: int
    place: int
    slot: int
    gain: float


@dataclass(eq=False)
class _Schedule:
    """What one observer has so far."""

    is_free: Flags
    n_left: list[int]
    commitments: list[Commitment]
    reaches: list[Reach]
    n_changes: int = 0


@dataclass(eq=False)
class SearchState:
    """The state that a greedy search walks through."""

    problem: PlanProblem
    sums: TileSums
    remaining: Floats = field(init=False)
    choices: list[Choice] = field(default_factory=list)
    n_evaluations: int = 0

    def __post_init__(self) -> None:
        problem = self.problem
        self.remaining = problem.remaining.copy()
        self._tile_sums = self.sums.sums(self.remaining)
        self._is_stale = np.zeros(problem.tiles.n_tiles, dtype=bool)
        self._tile_changes = np.zeros(problem.tiles.n_tiles, dtype=np.int64)
        self._vectors = tile_vectors(problem.tiles)
        self._visits: dict[tuple[int, int, int], list[float]] = {}
        self._seats: dict[int, list[tuple[float, float]]] = {}
        for seat in problem.seats_taken:
            self._seats.setdefault(seat.tile, []).append((seat.from_mjd, seat.until_mjd))
        self._schedules = [_new_schedule(observer) for observer in problem.observers]

    def tile_sums(self) -> Floats:
        """What remains under every tile.

        Returns
        -------
        (k, n) float
        """
        return self.sums.sums(self.remaining)

    def version(self, observer: int, tile: int) -> int:
        """Grows whenever the gain of an option of this observer and tile may have changed.

        Parameters
        ----------
        observer, tile : int    positions

        Returns
        -------
        int
        """
        return self._schedules[observer].n_changes + int(self._tile_changes[tile])

    def best_start(self, observer: int, block: int, place: int) -> tuple[float, int]:
        """Largest gain over the starts that are open, for one observer, instrument and tile.

        Parameters
        ----------
        observer, block : int    positions of the observer and of its instrument
        place : int              position of the tile in the block

        Returns
        -------
        float, int    gain in expected searched, 0 when no start is open; the earliest best slot
        """
        self.n_evaluations += 1
        options = self.problem.observers[observer].blocks[block]
        rows = options.rows[place]
        by_row = options.detections @ self._sum_of(int(options.tiles[place]))
        gains = np.where(self._open_starts(observer, block, place), by_row[rows], 0.0)
        slot = int(np.argmax(gains)) if len(gains) else 0
        return (float(gains[slot]) if len(gains) else 0.0), slot

    def open_gains(self, observer: int, block: int) -> Floats:
        """Gains of all options of one instrument, 0 where something stands against them.

        Parameters
        ----------
        observer, block : int    positions of the observer and of its instrument

        Returns
        -------
        (k, t) float    gains in expected searched
        """
        options = self.problem.observers[observer].blocks[block]
        gains = option_gains(options, self.tile_sums())
        for place in np.flatnonzero(gains.max(axis=1, initial=0.0) > 0.0).tolist():
            gains[place] *= self._open_starts(observer, block, place)
        return gains

    def take(self, choice: Choice) -> None:
        """Put one option into the plan.

        Parameters
        ----------
        choice : Choice    open, as `best_start` found it
        """
        observer = self.problem.observers[choice.observer]
        options = observer.blocks[choice.block]
        tile = int(options.tiles[choice.place])
        start_mjd = float(observer.starts_mjd[choice.slot])
        end_mjd = float(observer.ends_mjd[choice.slot])
        self._miss(tile, options.detections[options.rows[choice.place, choice.slot]])
        self._seats.setdefault(tile, []).append((start_mjd, end_mjd + LEASE_MARGIN_D))
        visit = (choice.observer, choice.block, choice.place)
        self._visits.setdefault(visit, []).append(start_mjd)
        ready_mjd = float(options.ready_mjds[choice.slot])
        self._occupy(choice, Commitment(ready_mjd, end_mjd, self._vectors[tile]))
        self.choices.append(choice)

    def _sum_of(self, tile: int) -> Floats:
        if self._is_stale[tile]:
            self._tile_sums[tile] = self.sums.sum_of(tile, self.remaining)
            self._is_stale[tile] = False
        row: Floats = self._tile_sums[tile]
        return row

    def _open_starts(self, observer: int, block: int, place: int) -> Flags:
        """(t,) starts at which nothing stands against this option."""
        schedule = self._schedules[observer]
        options = self.problem.observers[observer].blocks[block]
        if schedule.n_left[block] <= 0:
            return np.zeros(len(schedule.is_free), dtype=bool)
        tile = int(options.tiles[place])
        is_open = schedule.is_free & (options.rows[place] != NOT_OFFERED)
        is_open &= schedule.reaches[block].is_within(self._vectors[tile])
        is_open &= self._is_seat_free(observer, tile)
        starts_mjd = self.problem.observers[observer].starts_mjd
        for visit_mjd in self._visits.get((observer, block, place), ()):
            is_open &= np.abs(starts_mjd - visit_mjd) >= SAME_LOOK_D
        return is_open

    def _is_seat_free(self, observer: int, tile: int) -> Flags | bool:
        taken = self._seats.get(tile)
        if not taken:
            return True
        who = self.problem.observers[observer]
        n_taken = np.zeros(who.n_starts, dtype=np.int64)
        for from_mjd, until_mjd in taken:
            is_before_end = who.starts_mjd < until_mjd
            n_taken += is_before_end & (who.ends_mjd + LEASE_MARGIN_D > from_mjd)
        return n_taken < self.problem.tiles.seats[tile]

    def _miss(self, tile: int, detections: Floats) -> None:
        """What remains under a tile after a look that may find."""
        tiles = self.problem.tiles
        pixels, fractions = tiles.pixels_of(tile), tiles.fractions_of(tile)
        self.remaining[pixels] *= 1.0 - fractions[:, None] * detections[None, :]
        touched = self.sums.overlapping(tile)
        self._is_stale[touched] = True
        self._tile_changes[touched] += 1

    def _occupy(self, choice: Choice, commitment: Commitment) -> None:
        observer = self.problem.observers[choice.observer]
        schedule = self._schedules[choice.observer]
        schedule.is_free[choice.slot] = False
        schedule.n_left[choice.block] -= 1
        schedule.commitments.append(commitment)
        schedule.reaches = _reaches(observer, schedule.commitments)
        schedule.n_changes += 1


def _new_schedule(observer: ObserverOptions) -> _Schedule:
    commitments = list(observer.commitments)
    return _Schedule(
        is_free=np.ones(observer.n_starts, dtype=bool),
        n_left=[block.n_tiles_left for block in observer.blocks],
        commitments=commitments,
        reaches=_reaches(observer, commitments),
    )


def _reaches(observer: ObserverOptions, commitments: list[Commitment]) -> list[Reach]:
    return [_reach(block, observer, commitments) for block in observer.blocks]


def _reach(block: OptionBlock, observer: ObserverOptions, commitments: list[Commitment]) -> Reach:
    return reach_between(
        block.ready_mjds, observer.ends_mjd, commitments, slew_deg_per_s=block.slew_deg_per_s
    )
