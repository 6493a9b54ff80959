import time
import uuid
from datetime import UTC, datetime, timedelta

import pytest

from campaigns import ticker as ticker_module
from campaigns.models import IdempotencyKey
from campaigns.ticker import Ticker
from tests.campaigns.stage import make_person

NOW = datetime(2027, 3, 14, 5, 6, 7, tzinfo=UTC)


def test_a_tick_looks_at_claims_and_plans_with_one_time(monkeypatch):
    seen = []
    monkeypatch.setattr(
        ticker_module, "lapse_all_claims", lambda *, wall_now: seen.append(wall_now)
    )
    monkeypatch.setattr(
        ticker_module, "ask_for_due_plans", lambda *, wall_now: seen.append(wall_now)
    )
    ticker_module.tick(wall_now=NOW)
    assert seen == [NOW, NOW]


def test_a_tick_that_fails_is_counted_and_the_next_one_comes(monkeypatch):
    n_ticks = 0

    def fail_first(*, wall_now):
        nonlocal n_ticks
        n_ticks += 1
        if n_ticks == 1:
            raise OSError("no database")

    monkeypatch.setattr(ticker_module, "tick", fail_first)
    monkeypatch.setattr(ticker_module, "forget_old_keys", lambda *, wall_now: None)
    ticker = Ticker(period_s=0.01, clock=lambda: NOW)
    ticker.start()
    deadline = time.monotonic() + 5
    while n_ticks < 3 and time.monotonic() < deadline:
        time.sleep(0.01)
    ticker.stop()
    assert n_ticks >= 3
    assert ticker.n_faults == 1


def test_old_keys_are_forgotten_at_the_start_and_then_once_a_day(monkeypatch):
    forgotten = []
    monkeypatch.setattr(ticker_module, "tick", lambda *, wall_now: None)
    monkeypatch.setattr(
        ticker_module, "forget_old_keys", lambda *, wall_now: forgotten.append(wall_now)
    )
    ticker = Ticker()
    hours = [0.0, 0.1, 23.9, 24.0, 24.1, 47.9, 50.0, 73.9, 74.0]
    for hour in hours:
        ticker.look(wall_now=NOW + timedelta(hours=hour))
    assert [(one - NOW).total_seconds() / 3600.0 for one in forgotten] == [0.0, 24.0, 50.0, 74.0]


def test_a_day_whose_forgetting_failed_is_tried_again_at_the_next_look(monkeypatch):
    tries = []

    def fail_once(*, wall_now):
        tries.append(wall_now)
        if len(tries) == 1:
            raise OSError("no database")

    monkeypatch.setattr(ticker_module, "tick", lambda *, wall_now: None)
    monkeypatch.setattr(ticker_module, "forget_old_keys", fail_once)
    ticker = Ticker()
    with pytest.raises(OSError, match="no database"):
        ticker.look(wall_now=NOW)
    for _ in range(2):
        ticker.look(wall_now=NOW + timedelta(seconds=1))
    assert len(tries) == 2


@pytest.mark.django_db
def test_a_look_deletes_keys_older_than_thirty_days_and_no_others():
    person = make_person("Observer Ada")
    for age_d in (29, 31):
        IdempotencyKey.objects.create(
            person=person,
            operation="claims",
            key=uuid.uuid4(),
            body_sha256="a" * 64,
            status=201,
            answer={},
            made_at=NOW - timedelta(days=age_d),
        )
    Ticker().look(wall_now=NOW)
    assert IdempotencyKey.objects.get().made_at == NOW - timedelta(days=29)
