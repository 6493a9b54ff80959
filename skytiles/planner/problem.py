"""From observers, tiles, ledger and claims to the stated problem."""

from __future__ import annotations

from collections.abc import Collection, Sequence

import numpy as np
import numpy.typing as npt

from skytiles.errors import PlannerError
from skytiles.ledger.ledger import Ledger
from skytiles.planner.claims_in_hand import (
    after_claims,
    busy_times,
    fixed_pointings,
    seats_of,
)
from skytiles.planner.observer_options import Outlook, observer_options
from skytiles.planner.observers_to_plan import HeldClaim, PlannerObserver
from skytiles.planner.plan_problem import PlanProblem
from skytiles.planner.scenarios import make_scenarios
from skytiles.planner.tiles_to_plan import PlannerTiles

Floats = npt.NDArray[np.float64]

# Times at which the source scenarios are compared.
_N_COMPARED = 5
LONGEST_HOURS = 48.0


def build_problem(
    ledger: Ledger,
    tiles: PlannerTiles,
    observers: Sequence[PlannerObserver],
    *,
    event_mjd: float,
    now_mjd: float,
    hours: float = 12.0,
    held_claims: Sequence[HeldClaim] = (),
    slot_minutes: float = 10.0,
    sun_below_deg: float = -12.0,
    plan_for: Collection[int] | None = None,
) -> PlanProblem:
    """State what is to be planned.

    Parameters
    ----------
    ledger : Ledger                  live; its source model is the plan's
    tiles : PlannerTiles             of all grids, with the ledger's pixel positions
    observers : sequence of PlannerObserver
                                     all who may be planned for, and all who hold a claim
    event_mjd, now_mjd : float       MJD, UTC
    hours : float                    how far ahead, above 0 and at most 48
    held_claims : sequence of HeldClaim
                                     kept, and counted with the chance that they are met
    slot_minutes : float             no start slot is shorter
    sun_below_deg : float            altitude of the Sun below which frames are taken
    plan_for : collection of int or None
                                     keys of the observers to plan for; None: all

    Returns
    -------
    PlanProblem

    Raises
    ------
    PlannerError    when times, tiles or claims do not fit

    Source: DEVELOPERS.md, planner.
    """
    _check(ledger, tiles, hours, slot_minutes)
    ts_d = now_mjd - event_mjd + np.linspace(0.0, hours / 24.0, _N_COMPARED)
    scenarios = make_scenarios(ledger.source_model, ts_d)
    before = scenarios.remaining(ledger)
    outlook = Outlook(scenarios, tiles, event_mjd, now_mjd, hours, slot_minutes, sun_below_deg)
    by_key = {observer.key: observer for observer in observers}
    remaining = after_claims(before, held_claims, by_key, outlook)
    wanted = [who for who in observers if plan_for is None or who.key in plan_for]
    return PlanProblem(
        remaining=remaining,
        tiles=tiles,
        observers=tuple(
            observer_options(
                who,
                outlook,
                busy=busy_times(who, held_claims),
                commitments=fixed_pointings(who, held_claims, tiles),
            )
            for who in wanted
        ),
        searched_now=ledger.searched,
        searched_held=ledger.searched + float(before.sum() - remaining.sum()),
        seats_taken=seats_of(held_claims, tiles),
    )


def _check(ledger: Ledger, tiles: PlannerTiles, hours: float, slot_minutes: float) -> None:
    if not 0.0 < hours <= LONGEST_HOURS or not slot_minutes > 0.0:
        raise PlannerError(
            f"{hours} hours in slots of {slot_minutes} minutes",
            f"more than 0 and at most {LONGEST_HOURS:g} hours, slots above 0 minutes",
            "plan one night at a time",
        )
    n_pixels = len(ledger.probabilities)
    if len(tiles.indices) and not 0 <= tiles.indices.min() <= tiles.indices.max() < n_pixels:
        raise PlannerError(
            "tiles with pixels outside of the region",
            f"positions from 0 to {n_pixels - 1}",
            "compute the tiles' pixels for this revision of the region",
        )
