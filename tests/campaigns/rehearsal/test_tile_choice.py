"""Which tile a simulated observer takes."""

from datetime import UTC, datetime

import numpy as np
import pytest

from campaigns.events.iso_time import iso_time
from campaigns.rehearsal.hunt import Hunt
from campaigns.rehearsal.stage import Stage
from campaigns.rehearsal.tile_choice import choose_tile, wake_up_s
from campaigns.rehearsal.timeline import Timeline

LAUNCHED_AT = datetime(2024, 10, 5, 15, 10, tzinfo=UTC)


@pytest.fixture
def stage():
    return Stage(
        campaign="c",
        launched_at=LAUNCHED_AT,
        scenario={"claim_ahead_s": 1800, "look_again_s": 1500},
        timeline=Timeline(),
        hunt=Hunt(None, np.random.default_rng(1), event_s=0.0),
        say=lambda sentence: None,
        tiles={str(n): {"ra_deg": float(n), "dec_deg": 1.0} for n in range(10)},
    )


def _slot(stage, tile, *, starts_s, ends_s=7200, **more):
    return {
        "tile": tile,
        "starts_at": stage.iso_at(starts_s),
        "ends_at": stage.iso_at(ends_s),
        **more,
    }


def _night(offers=(), best=None, dusk=None):
    return {
        "offers": list(offers),
        "best": best,
        "alternatives": [],
        "night": {"dusk": dusk, "dawn": None},
    }


def test_an_offer_due_soon_comes_before_the_best_tile(stage):
    night = _night([_slot(stage, 3, starts_s=900)], _slot(stage, 4, starts_s=0))
    assert choose_tile([(1, night)], stage).tile == 3


def test_the_earliest_offer_wins_over_all_instruments(stage):
    nights = [
        (1, _night([_slot(stage, 3, starts_s=900)])),
        (2, _night([_slot(stage, 5, starts_s=300)])),
    ]
    choice = choose_tile(nights, stage)
    assert (choice.tile, choice.instrument, choice.ra_deg) == (5, 2, 5.0)


def test_an_offer_hours_away_leaves_the_best_tile_now(stage):
    best = _slot(stage, 4, starts_s=60, limit_forecast_mag=14.2)
    choice = choose_tile([(1, _night([_slot(stage, 3, starts_s=9000)], best))], stage)
    assert (choice.tile, choice.limit_mag) == (4, 14.2)


def test_an_offer_that_is_over_is_not_taken(stage):
    stage.timeline.now_s = 8000.0
    assert choose_tile([(1, _night([_slot(stage, 3, starts_s=0)]))], stage) is None


def test_who_has_nothing_wakes_shortly_before_dusk(stage):
    dusk = iso_time(stage.time_at(1200))
    assert wake_up_s([(1, _night(dusk=dusk))], stage) == pytest.approx(900.0)


def test_who_has_nothing_at_all_looks_again_later(stage):
    assert wake_up_s([(1, _night())], stage) == 1500
