"""The stated problem: who may shoot which tile in which start slot, and what it would find."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from skytiles.planner.tiles_to_plan import PlannerTiles

Floats = npt.NDArray[np.float64]
Ints = npt.NDArray[np.int64]

# Row of `OptionBlock.detections` that stands for "not offered": it finds nothing.
NOT_OFFERED = 0


@dataclass(frozen=True, eq=False)
class Commitment:
    """A pointing that is fixed: promised, just taken, or already in the plan."""

    ready_mjd: float
    end_mjd: float
    vector: Floats


@dataclass(frozen=True, eq=False)
class OptionBlock:
    """Everything that one instrument could do: k tiles x t start slots.

    `detections` (u, n) is, for each distinct pair of time and forecast limit and each source
    scenario, the chance that the frame is taken and finds the source under it; `rows` (k, t) says
    which row holds for which option, NOT_OFFERED where there is none. `ready_mjds` (t,) is when
    the instrument must be on the tile at the latest.
    """

    instrument_key: int
    tiles: Ints
    detections: Floats
    rows: Ints
    ready_mjds: Floats
    slew_deg_per_s: float
    n_tiles_left: int
    limits_mag: Floats
    altitudes_deg: Floats


@dataclass(frozen=True, eq=False)
class ObserverOptions:
    """One observer's start slots, options and fixed pointings. One series at a time."""

    key: int
    starts_mjd: Floats
    ends_mjd: Floats
    blocks: tuple[OptionBlock, ...]
    commitments: tuple[Commitment, ...] = ()
    reason: str = ""

    @property
    def n_tiles_left(self) -> int:
        """Tiles that all instruments together may still take."""
        return sum(block.n_tiles_left for block in self.blocks)

    @property
    def n_starts(self) -> int:
        """Number of start slots."""
        return len(self.starts_mjd)


@dataclass(frozen=True, eq=False)
class SeatTaken:
    """A tile that a claim holds for a while."""

    tile: int
    from_mjd: float
    until_mjd: float


@dataclass(frozen=True, eq=False)
class PlanProblem:
    """What a plan is judged by.

    `remaining` (p, n) is the probability, by pixel and source scenario, that the source is there
    and has been missed by the ledger's frames and by the claims in hand; `searched_now` counts the
    frames, `searched_held` also the claims, each with its chance to be met. `observers` without a
    block say in `reason` why.
    """

    remaining: Floats
    tiles: PlannerTiles
    observers: tuple[ObserverOptions, ...]
    searched_now: float
    searched_held: float
    seats_taken: tuple[SeatTaken, ...] = ()

    @property
    def n_options(self) -> int:
        """Number of (observer, instrument, tile, start) on offer."""
        blocks = [block for observer in self.observers for block in observer.blocks]
        return sum(int(np.count_nonzero(block.rows)) for block in blocks)
