"""Plans for an invented network: right, fair, repeatable, and honest about what they leave out."""

import dataclasses
import json
from itertools import pairwise

import numpy as np
import pytest

from skytiles.ledger.ledger_frame import LedgerFrame
from skytiles.night.altitude import altitudes_deg, sun_altitudes_deg
from skytiles.planner import reasons
from skytiles.planner.make_plan import make_plan
from skytiles.planner.observers_to_plan import HeldClaim, RecentPointing
from skytiles.planner.problem import build_problem
from skytiles.source.hypothesis import Hypothesis
from skytiles.source.source_model import SourceModel
from skytiles.sphere.angles import separations_deg
from tests.skytiles.planner.small_network import (
    camera,
    disc_region,
    fresh_ledger,
    grid_tiles,
    network,
    observer,
)

NOW_MJD = 61113.8
EVENT_MJD = NOW_MJD - 0.1


@pytest.fixture(scope="module")
def region():
    return disc_region(ra_deg=150.0, dec_deg=10.0, area_deg2=150.0, order=7)


@pytest.fixture(scope="module")
def tiles(region):
    return grid_tiles(*region, sides_deg=(2.5, 4.0))


def plan_for(region, tiles, people, *, ledger=None, source=None, hours=12.0, **changes):
    ledger = ledger or fresh_ledger(*region, source)
    values = {"event_mjd": EVENT_MJD, "now_mjd": NOW_MJD, "hours": hours} | changes
    problem = build_problem(ledger, tiles, people, **values)
    return problem, make_plan(problem)


def people_of(n=12):
    rng = np.random.default_rng(4)
    everybody = network(n, now_mjd=NOW_MJD, rng=rng)
    return [
        dataclasses.replace(
            person,
            instruments=(
                camera(person.key + 1000, side_deg=2.5 if person.key % 2 else 4.0, n_tiles_left=6),
            ),
        )
        for person in everybody
    ]


def night_person(**changes):
    """Somebody in Europe, at whose place it is dark at 19:12 UT in March."""
    values = {
        "latitude_deg": 45.0,
        "longitude_deg": 15.0,
        "now_mjd": NOW_MJD,
        "instruments": [camera(1001, side_deg=2.5)],
    }
    return observer(1, **(values | changes))


@pytest.fixture(scope="module")
def plan(region, tiles):
    return plan_for(region, tiles, people_of())


def test_everybody_gets_a_tile_or_a_reason(plan):
    problem, result = plan
    served = {one.observer_key for one in result.assignments}
    left_out = {one.observer_key for one in result.unassigned}
    assert served | left_out == {person.key for person in people_of()}
    assert not served & left_out
    assert all(one.reason for one in result.unassigned)
    helpful = {who.key for who in problem.observers if who.blocks}
    assert served == helpful


def test_every_offer_is_up_and_dark_and_in_the_grid(plan, tiles):
    people = {person.key: person for person in people_of()}
    for one in plan[1].assignments:
        person = people[one.observer_key]
        place = int(np.flatnonzero(tiles.keys == one.tile_key)[0])
        mjds = np.linspace(one.start_mjd, one.end_mjd, 5)
        spot = tiles.ras_deg[place : place + 1], tiles.decs_deg[place : place + 1]
        assert altitudes_deg([person.place], *spot, mjds).min() >= person.place.min_altitude_deg
        assert sun_altitudes_deg([person.place], mjds).max() < -12.0
        assert tiles.widths_deg[place] == person.instruments[0].tile_width_deg


def test_one_series_at_a_time_with_room_for_the_slew(plan, tiles):
    people = {person.key: person for person in people_of()}
    by_person = {}
    for one in plan[1].assignments:
        by_person.setdefault(one.observer_key, []).append(one)
    for key, mine in by_person.items():
        instrument = people[key].instruments[0]
        assert len(mine) <= instrument.n_tiles_left
        for before, after in pairwise(mine):
            a, b = (int(np.flatnonzero(tiles.keys == x.tile_key)[0]) for x in (before, after))
            apart = separations_deg(
                tiles.ras_deg[a], tiles.decs_deg[a], tiles.ras_deg[b], tiles.decs_deg[b]
            )
            needs_s = float(apart) / instrument.slew_deg_per_s + instrument.series_s
            assert (after.end_mjd - before.end_mjd) * 86400.0 >= needs_s - 1e-3


def test_nobody_comes_back_to_a_tile_within_the_hour(plan):
    visits = {}
    for one in plan[1].assignments:
        visits.setdefault((one.observer_key, one.tile_key), []).append(one.start_mjd)
    for starts in visits.values():
        assert np.all(np.diff(np.sort(starts)) >= 1.0 / 24.0 - 1e-9)


def test_a_tile_has_one_holder_at_a_time(plan):
    by_tile = {}
    for one in plan[1].assignments:
        by_tile.setdefault(one.tile_key, []).append((one.start_mjd, one.end_mjd))
    for spans in by_tile.values():
        spans.sort()
        for before, after in pairwise(spans):
            assert after[0] >= before[1] + 15.0 / 1440.0 - 1e-9


def test_numbers_of_the_plan_belong_together(plan):
    problem, result = plan
    gains = sum(one.gain for one in result.assignments)
    assert result.searched_expected == pytest.approx(problem.searched_held + gains, abs=1e-9)
    assert result.certificate == pytest.approx(result.searched_expected / result.searched_bound)
    assert 0.9 <= result.certificate <= 1.0
    assert result.searched_bound <= 1.0


def test_the_same_problem_gives_the_same_plan(region, tiles, plan):
    assert plan_for(region, tiles, people_of())[1] == plan[1]


def test_expected_searched_is_what_the_ledger_would_say(region, tiles):
    """Every offer met for certain: the frames in the ledger give the plan's number."""
    people = [
        dataclasses.replace(person, met_chance=1.0, clear_chance=1.0) for person in people_of()
    ]
    problem, result = plan_for(region, tiles, people)
    ledger = fresh_ledger(*region)
    limits = {}
    for number, who in enumerate(problem.observers):
        for block in who.blocks:
            for place, tile in enumerate(block.tiles):
                for slot, start in enumerate(who.starts_mjd):
                    limits[who.key, int(tile), start] = block.limits_mag[place, slot]
        assert who.key == people[number].key
    by_key = {person.key: person for person in people}
    for key, one in enumerate(result.assignments):
        place = int(np.flatnonzero(tiles.keys == one.tile_key)[0])
        instrument = by_key[one.observer_key].instruments[0]
        frame = LedgerFrame(
            key=key,
            t_d=one.end_mjd - instrument.series_s / 86400.0 / 2.0 - EVENT_MJD,
            instrument=instrument.key,
            ra_deg=float(tiles.ras_deg[place]),
            dec_deg=float(tiles.decs_deg[place]),
            field_deg=instrument.tile_width_deg,
            is_examined=True,
            completeness=instrument.completeness,
            m_eff=float(limits[one.observer_key, place, one.start_mjd]),
            s=instrument.s_mag,
        )
        ledger.add(frame, tiles.pixels_of(place), tiles.fractions_of(place))
    # The budget of the design is 0.01; forecast limits are rounded down by up to 0.05 mag.
    assert result.searched_expected == pytest.approx(ledger.searched, abs=0.01)
    assert result.searched_expected <= ledger.searched + 1e-9


def test_a_far_slew_leaves_its_slot_idle(region, tiles):
    # A slot has room for 30 degrees; from 45 degrees away the first one cannot be reached.
    slow = [camera(1001, side_deg=2.5, slew_deg_per_s=0.05)]
    starts = []
    for ra_deg in (150.0, 150.0 - 45.0 - 10.0):
        person = night_person(instruments=slow, last_ra_deg=ra_deg, last_dec_deg=10.0)
        _, result = plan_for(region, tiles, [person])
        starts.append(result.assignments[0].start_mjd)
    assert (starts[1] - starts[0]) * 1440.0 == pytest.approx(15.0, abs=1e-6)


def test_an_offer_is_worth_its_chance(region, tiles):
    once = {"instruments": [camera(1001, side_deg=2.5, n_tiles_left=1)]}
    chances = ((1.0, 1.0), (0.5, 1.0), (1.0, 0.25))
    gains = []
    for met_chance, clear_chance in chances:
        person = night_person(met_chance=met_chance, clear_chance=clear_chance, **once)
        gains.append(plan_for(region, tiles, [person])[1].searched_expected)
    assert gains[1] == pytest.approx(0.5 * gains[0], rel=1e-9)
    assert gains[2] == pytest.approx(0.25 * gains[0], rel=1e-9)


def claim_of(tile_key, *, minutes=0.0, observer_key=1):
    start = NOW_MJD + minutes / 1440.0
    return HeldClaim(observer_key, 1000 + observer_key, tile_key, start, start + 25.0 / 1440.0)


def test_claims_count_with_their_chance_and_keep_tile_and_time(region, tiles):
    person = night_person()
    _, free = plan_for(region, tiles, [person])
    first = free.assignments[0]
    claim = claim_of(first.tile_key)
    problem, result = plan_for(region, tiles, [person], held_claims=[claim])
    assert problem.searched_now == 0.0
    assert problem.searched_held > 0.0
    assert result.searched_expected > problem.searched_held
    until = claim.start_mjd + 6.0 / 1440.0
    assert all(one.start_mjd >= until for one in result.assignments)
    again = [one for one in result.assignments if one.tile_key == first.tile_key]
    assert all(one.start_mjd >= claim.end_mjd for one in again)


def test_a_held_claim_is_worth_its_chance_times_its_detection(region, tiles):
    sure = night_person(met_chance=1.0, clear_chance=1.0)
    half = night_person(met_chance=0.5, clear_chance=1.0)
    key = int(tiles.keys[np.argmin(np.hypot(tiles.ras_deg - 150.0, tiles.decs_deg - 10.0))])
    held = [
        plan_for(region, tiles, [person], held_claims=[claim_of(key, minutes=60.0)])[0]
        for person in (sure, half)
    ]
    assert held[1].searched_held == pytest.approx(0.5 * held[0].searched_held, rel=1e-9)


def test_a_tile_that_somebody_else_holds_is_not_offered(region, tiles):
    holder = night_person()
    other = dataclasses.replace(holder, key=2)
    _, free = plan_for(region, tiles, [other], hours=1.0)
    wanted = free.assignments[0].tile_key
    claim = HeldClaim(1, 1001, wanted, NOW_MJD, NOW_MJD + 2.0 / 24.0)
    _, result = plan_for(region, tiles, [holder, other], hours=1.0, held_claims=[claim])
    assert wanted not in {one.tile_key for one in result.assignments}


def test_a_recent_look_is_not_repeated_within_the_hour(region, tiles):
    person = night_person()
    _, free = plan_for(region, tiles, [person], hours=1.0)
    first = free.assignments[0]
    place = int(np.flatnonzero(tiles.keys == first.tile_key)[0])
    here = RecentPointing(
        1001, float(tiles.ras_deg[place]), float(tiles.decs_deg[place]), NOW_MJD - 5.0 / 1440.0
    )
    _, result = plan_for(region, tiles, [dataclasses.replace(person, recent=(here,))], hours=0.9)
    assert first.tile_key not in {one.tile_key for one in result.assignments}


def reason_of(region, tiles, person, **changes):
    _, result = plan_for(region, tiles, [person], **changes)
    assert result.assignments == ()
    return result.unassigned[0].reason


def test_reasons_say_what_is_the_matter(region, tiles):
    def check(expected, changes=None, **plan_changes):
        person = night_person(**(changes or {}))
        assert reason_of(region, tiles, person, **plan_changes) == expected

    check(reasons.NO_INSTRUMENT, {"instruments": []})
    check(reasons.TILES_USED_UP, {"instruments": [camera(1001, side_deg=2.5, n_tiles_left=0)]})
    check(reasons.NO_GRID, {"instruments": [camera(1001, side_deg=3.3)]})
    check(reasons.not_free(12), {"free_from_mjd": NOW_MJD + 1.0})
    check(reasons.no_darkness(6), {"longitude_deg": -165.0}, hours=6.0)
    check(reasons.never_up(12), {"latitude_deg": -70.0})
    blind = camera(1001, side_deg=2.5, reference_mag=-30.0)
    check(reasons.TOO_SHALLOW, {"instruments": [blind]})


def test_without_an_option_the_empty_plan_is_the_best_possible(region, tiles):
    _, result = plan_for(region, tiles, [])
    assert (result.searched_expected, result.searched_bound, result.certificate) == (0.0, 0.0, 1.0)


def test_reason_when_everything_has_been_searched(region, tiles):
    ledger = fresh_ledger(*region)
    ledger.add(
        LedgerFrame(1, 0.05, "all sky", 150.0, 10.0, 30.0, True, 1.0, 60.0),
        np.arange(len(region[0])),
        np.ones(len(region[0])),
    )
    person = night_person()
    assert reason_of(region, tiles, person, ledger=ledger) == reasons.NOTHING_LEFT


def test_reason_when_all_is_taken(region, tiles):
    person = dataclasses.replace(night_person(), key=2)
    claims = [HeldClaim(1, 1001, int(key), NOW_MJD, NOW_MJD + 1.0) for key in tiles.keys]
    assert reason_of(region, tiles, person, held_claims=claims) == reasons.TAKEN


def late_light(first_light_d):
    late = Hypothesis("late", 1.0, first_light_d, 12.0, 10.0, 5.0)
    return SourceModel((late,), np.array([0.0]), np.array([1.0]), "late")


def test_no_offer_before_the_light_can_show(region, tiles):
    first_light_d = NOW_MJD - EVENT_MJD + 2.0 / 24.0
    _, result = plan_for(region, tiles, [night_person()], source=late_light(first_light_d))
    assert result.assignments
    series_d = night_person().instruments[0].series_s / 86400.0
    for one in result.assignments:
        assert one.end_mjd - series_d / 2.0 >= EVENT_MJD + first_light_d - 1e-9


def test_light_after_the_plan_is_a_reason(region, tiles):
    person = night_person()
    assert reason_of(region, tiles, person, source=late_light(5.0)) == reasons.NOT_YET


def test_light_that_emerges_brings_searched_tiles_back(region, tiles):
    early = Hypothesis("early", 0.5, -1.0, 12.0, 12.0, 1.0)
    late = Hypothesis("late", 0.5, 0.12, 12.0, 10.0, 5.0)
    source = SourceModel((early, late), np.array([0.0]), np.array([1.0]), "two delays")
    ledger = fresh_ledger(*region, source)
    everything = np.arange(len(region[0])), np.ones(len(region[0]))
    ledger.add(LedgerFrame(1, 0.05, "all", 150.0, 10.0, 30.0, True, 1.0, 60.0), *everything)
    problem, result = plan_for(region, tiles, [night_person()], ledger=ledger)
    assert problem.searched_now == pytest.approx(0.5 * 0.98 * 0.98, rel=1e-6)
    assert result.assignments
    assert min(one.start_mjd for one in result.assignments) > EVENT_MJD + 0.12 - 0.01


def test_a_plan_is_plain_data(plan):
    assert json.loads(json.dumps(dataclasses.asdict(plan[1])))["certificate"] <= 1.0
