"""Which tiles can be reached in time from the pointing before and towards the one after."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import numpy.typing as npt

from skytiles.planner.plan_problem import Commitment
from skytiles.planner.tiles_to_plan import PlannerTiles
from skytiles.sphere.angles import unit_vectors

Floats = npt.NDArray[np.float64]
Flags = npt.NDArray[np.bool_]

_DAY_S = 86400.0
# Cosines of angles that are equal but for rounding.
_COSINE_SLACK = 1e-12


@dataclass(frozen=True, eq=False)
class Reach:
    """Per start slot (t): the pointings before and after, and how far one can slew from each."""

    vectors_before: Floats
    cosines_before: Floats
    vectors_after: Floats
    cosines_after: Floats

    def is_within(self, vector: Floats) -> Flags:
        """Start slots from which a direction can be reached and left in time.

        Parameters
        ----------
        vector : (3,) float    unit vector of the direction

        Returns
        -------
        (t,) bool
        """
        is_near = self.vectors_before @ vector >= self.cosines_before
        is_near &= self.vectors_after @ vector >= self.cosines_after
        result: Flags = is_near
        return result


def tile_vectors(tiles: PlannerTiles) -> Floats:
    """Directions of the tiles' centres.

    Parameters
    ----------
    tiles : PlannerTiles

    Returns
    -------
    (k, 3) float    unit vectors
    """
    return unit_vectors(tiles.ras_deg, tiles.decs_deg)


def reach_between(
    ready_mjds: Floats,
    ends_mjd: Floats,
    commitments: Sequence[Commitment],
    *,
    slew_deg_per_s: float,
) -> Reach:
    """How far the instrument can be from its neighbours in time, for every start slot.

    Parameters
    ----------
    ready_mjds : (t,) float     when it must be on the tile at the latest, MJD
    ends_mjd : (t,) float       when it may leave it, MJD
    commitments : sequence      fixed pointings, in any order
    slew_deg_per_s : float      slewing speed

    Returns
    -------
    Reach
    """
    n_starts = len(ready_mjds)
    before = _Side.anywhere(n_starts)
    after = _Side.anywhere(n_starts)
    for commitment in sorted(commitments, key=lambda one: one.end_mjd):
        is_earlier = commitment.end_mjd <= ready_mjds
        before.set(is_earlier, commitment, ready_mjds - commitment.end_mjd)
    for commitment in sorted(commitments, key=lambda one: -one.ready_mjd):
        is_later = commitment.ready_mjd >= ends_mjd
        after.set(is_later, commitment, commitment.ready_mjd - ends_mjd)
    return Reach(
        before.vectors,
        before.cosines(slew_deg_per_s),
        after.vectors,
        after.cosines(slew_deg_per_s),
    )


@dataclass(eq=False)
class _Side:
    vectors: Floats
    gaps_d: Floats

    @classmethod
    def anywhere(cls, n_starts: int) -> _Side:
        return cls(np.zeros((n_starts, 3)), np.full(n_starts, np.inf))

    def set(self, is_neighbour: Flags, commitment: Commitment, gaps_d: Floats) -> None:
        """The later of two commitments set wins: call in order of nearness."""
        self.vectors[is_neighbour] = commitment.vector
        self.gaps_d[is_neighbour] = gaps_d[is_neighbour]

    def cosines(self, slew_deg_per_s: float) -> Floats:
        reaches_deg = np.minimum(self.gaps_d * _DAY_S * slew_deg_per_s, 180.0)
        # The null vector of "no neighbour" has cosine 0 with everything: -1 lets all pass.
        cosines: Floats = np.cos(np.radians(reaches_deg)) - _COSINE_SLACK
        return cosines
