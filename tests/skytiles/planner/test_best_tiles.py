"""The best tile now: the same gain as the planner's, with alternatives and reasons."""

import dataclasses

import numpy as np
import pytest

from skytiles.errors import PlannerError
from skytiles.ledger.ledger_frame import LedgerFrame
from skytiles.planner import reasons
from skytiles.planner.best_tiles import best_tiles_now
from skytiles.planner.make_plan import make_plan
from skytiles.planner.observers_to_plan import HeldClaim
from skytiles.planner.problem import build_problem
from tests.skytiles.planner.small_network import (
    camera,
    disc_region,
    fresh_ledger,
    grid_tiles,
    observer,
)

NOW_MJD = 61113.8
REGION = disc_region(ra_deg=150.0, dec_deg=10.0, area_deg2=150.0, order=7)
TILES = grid_tiles(*REGION, sides_deg=(2.5,))
PERSON = observer(
    1,
    latitude_deg=45.0,
    longitude_deg=15.0,
    now_mjd=NOW_MJD,
    instruments=[camera(1001, side_deg=2.5)],
    free_from_mjd=NOW_MJD - 1.0,
)


def problem_for(people=(PERSON,), *, ledger=None, now_mjd=NOW_MJD, hours=6.0, **changes):
    ledger = ledger or fresh_ledger(*REGION)
    values = {"event_mjd": NOW_MJD - 0.1, "now_mjd": now_mjd, "hours": hours} | changes
    return build_problem(ledger, TILES, people, plan_for={1}, **values)


def test_the_best_comes_first_and_starts_now():
    found, why_not = best_tiles_now(problem_for(), 1)
    assert why_not == ""
    assert len(found) == 4
    gains = [tile.gain for tile in found]
    assert gains == sorted(gains, reverse=True)
    assert found[0].start_mjd == pytest.approx(NOW_MJD, abs=1.0 / 1440.0)
    assert len({tile.tile_key for tile in found}) == 4


def test_gain_is_that_of_a_plan_of_one_tile():
    once = dataclasses.replace(PERSON, instruments=(camera(1001, side_deg=2.5, n_tiles_left=1),))
    problem = problem_for([once], hours=0.2)
    best = best_tiles_now(problem, 1)[0][0]
    offer = make_plan(problem).assignments[0]
    assert (best.tile_key, best.start_mjd) == (offer.tile_key, offer.start_mjd)
    assert best.gain == pytest.approx(offer.gain, abs=1e-12)


def test_reason_names_share_altitude_and_limit():
    best = best_tiles_now(problem_for(), 1)[0][0]
    assert f"{best.altitude_deg:.0f} degrees up" in best.reason
    assert f"limit about {best.limit_mag:.1f}" in best.reason
    assert "% of what is left" in best.reason


def test_the_ledger_moves_the_best_tile():
    first = best_tiles_now(problem_for(), 1)[0][0]
    place = int(np.flatnonzero(TILES.keys == first.tile_key)[0])
    ledger = fresh_ledger(*REGION)
    deep = LedgerFrame(1, 0.1, "other", 0.0, 0.0, 2.5, True, 0.97, 40.0)
    ledger.add(deep, TILES.pixels_of(place), TILES.fractions_of(place))
    second = best_tiles_now(problem_for(ledger=ledger), 1)[0][0]
    assert second.tile_key != first.tile_key


def test_a_tile_held_by_somebody_else_is_not_the_best():
    first = best_tiles_now(problem_for(), 1)[0][0]
    other = dataclasses.replace(PERSON, key=2)
    claim = HeldClaim(2, 1001, first.tile_key, NOW_MJD, NOW_MJD + 0.02)
    found, _ = best_tiles_now(problem_for([PERSON, other], held_claims=[claim]), 1)
    assert first.tile_key not in {tile.tile_key for tile in found}


def test_by_day_the_best_is_the_first_tile_of_the_night():
    found, why_not = best_tiles_now(problem_for(now_mjd=NOW_MJD - 0.2, hours=12.0), 1)
    assert why_not == ""
    assert found[0].start_mjd > NOW_MJD - 0.1


def test_why_not_is_said():
    day = problem_for(now_mjd=NOW_MJD - 0.4, hours=2.0)
    assert best_tiles_now(day, 1) == ([], reasons.no_darkness(2))
    claims = [HeldClaim(2, 1001, int(key), NOW_MJD, NOW_MJD + 1.0) for key in TILES.keys]
    assert best_tiles_now(problem_for(held_claims=claims), 1) == ([], reasons.TAKEN)


def test_another_instrument_can_be_asked_for():
    assert best_tiles_now(problem_for(), 1, instrument_key=1001)[0]
    assert best_tiles_now(problem_for(), 1, instrument_key=5)[0] == []


def test_a_stranger_is_refused():
    with pytest.raises(PlannerError):
        best_tiles_now(problem_for(), 99)
