import time

from campaigns import ticker as ticker_module
from campaigns.ticker import Ticker


def test_a_tick_looks_at_claims_and_plans_with_one_time(monkeypatch):
    seen = []
    monkeypatch.setattr(
        ticker_module, "lapse_all_claims", lambda *, wall_now: seen.append(wall_now)
    )
    monkeypatch.setattr(
        ticker_module, "ask_for_due_plans", lambda *, wall_now: seen.append(wall_now)
    )
    ticker_module.tick()
    assert len(seen) == 2
    assert seen[0] == seen[1]
    assert seen[0].utcoffset().total_seconds() == 0


def test_a_tick_that_fails_is_counted_and_the_next_one_comes(monkeypatch):
    n_ticks = 0

    def fail_first():
        nonlocal n_ticks
        n_ticks += 1
        if n_ticks == 1:
            raise OSError("no database")

    monkeypatch.setattr(ticker_module, "tick", fail_first)
    ticker = Ticker(period_s=0.01)
    ticker.start()
    deadline = time.monotonic() + 5
    while n_ticks < 3 and time.monotonic() < deadline:
        time.sleep(0.01)
    ticker.stop()
    assert n_ticks >= 3
    assert ticker.n_faults == 1
