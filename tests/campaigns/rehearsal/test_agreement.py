"""Two screens and the server, compared at the end."""

import pytest

from campaigns.rehearsal.agreement import agreement_problems
from campaigns.rehearsal.screen import EventMissed, Screen

STATE = {"claims": {}, "frames": {"1": {"state": "counted"}}, "offers": [], "recent": []}
COVERAGE = {"imaged": 0.5, "searched": 0.25}


def make_screen(**changes):
    screen = Screen("one", "ws://x/", "token", keeps_state=True)
    screen.seq, screen.state, screen.coverage = 9, dict(STATE), dict(COVERAGE)
    for name, value in changes.items():
        setattr(screen, name, value)
    return screen


def _problems(*screens):
    return list(agreement_problems({"seq": 9, "state": STATE}, COVERAGE, screens))


def test_equal_screens_have_no_problem():
    assert _problems(make_screen(), make_screen(name="two")) == []


@pytest.mark.parametrize(
    "changes, word",
    [
        ({"seq": 8}, "event 8"),
        ({"state": {**STATE, "frames": {}}}, "frames"),
        ({"coverage": {"imaged": 0.5, "searched": 0.26}}, "searched"),
    ],
)
def test_every_difference_is_named(changes, word):
    (problem,) = _problems(make_screen(**changes))
    assert word in problem


def test_a_skipped_number_is_a_gap():
    screen = make_screen(keeps_state=False, state=None)
    with pytest.raises(EventMissed, match="9 then 11"):
        screen._take({"type": "event", "event": {"seq": 11, "kind": "plan.made"}})


def test_an_event_seen_twice_counts_once():
    screen = make_screen(keeps_state=False, state=None)
    screen._take({"type": "event", "event": {"seq": 9, "kind": "claim.met", "payload": {}}})
    screen._take({"type": "event", "event": {"seq": 10, "kind": "claim.met", "payload": {}}})
    assert (screen.seq, screen.n_events) == (10, 1)
