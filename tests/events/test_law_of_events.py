"""apply(state before, events) is the state after, for every kind of event."""

import json
from pathlib import Path

import pytest

from campaigns.events.apply import apply_all
from campaigns.events.kinds import KINDS, read_happening
from campaigns.events.shape import shape_problems
from campaigns.events.state import State
from tests.events.law_play import record_cases

CASES = json.loads(Path(__file__).with_name("law-cases.json").read_text())


@pytest.mark.parametrize("case", CASES, ids=lambda case: case["name"])
def test_applied_events_give_the_state_after(case):
    assert apply_all(case["before"], case["events"]) == case["after"]


@pytest.mark.django_db
def test_the_law_holds_for_the_actions_as_they_are_now():
    for case in record_cases():
        assert apply_all(case["before"], case["events"]) == case["after"], case["name"]


def test_every_kind_of_event_is_among_the_cases():
    seen = {event["kind"] for case in CASES for event in case["events"]}
    # A region is revised by the launch itself.
    assert seen == set(KINDS)


def test_the_cases_have_the_declared_shape():
    for case in CASES:
        assert list(shape_problems(State, case["after"], where=case["name"])) == []
        for event in case["events"]:
            assert read_happening(event["kind"], event["payload"]).payload() == event["payload"]


def test_apply_leaves_the_state_before_alone():
    for case in CASES:
        before = json.dumps(case["before"])
        apply_all(case["before"], case["events"])
        assert json.dumps(case["before"]) == before


def test_only_the_last_forty_events_are_recent():
    case = next(case for case in CASES if case["name"] == "extend")
    state = case["before"]
    for _ in range(60):
        state = apply_all(state, case["events"])
    assert len(state["recent"]) == 40
