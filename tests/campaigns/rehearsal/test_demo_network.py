"""The invented network."""

import json

import numpy as np
import pytest

from campaigns.rehearsal.demo_network import DEMO_FOLDER, read_demo
from campaigns.rehearsal.hidden_source import COMPLETENESS


@pytest.fixture
def demo():
    return read_demo(40, np.random.default_rng(1))


def test_forty_observers_on_five_continents(demo):
    continents = {who.continent for who in demo.observers}
    assert len(demo.observers) == 40
    # Africa, Asia, Australia, Europe and both Americas.
    assert len(continents) == 6


def test_the_gear_is_mixed(demo):
    kinds = {kit.registered["kind"] for who in demo.observers for kit in who.kits}
    assert kinds == {"camera", "eyepiece", "binoculars", "eye"}
    assert {who.pace for who in demo.observers} == {"person", "robot"}


def test_everybody_examines_in_a_way_that_has_a_completeness(demo):
    ways = {kit.examined_way for who in demo.observers for kit in who.kits}
    assert ways <= COMPLETENESS.keys()


def test_only_robots_are_never_near_an_eye(demo):
    assert all(
        kit.registered.get("is_eye_free", False) == (who.pace == "robot")
        for who in demo.observers
        for kit in who.kits
    )


def test_a_larger_network_has_names_of_its_own_at_shifted_places():
    demo = read_demo(100, np.random.default_rng(1))
    names = {who.name for who in demo.observers}
    places = {(w.site["latitude_deg"], w.site["longitude_deg"]) for w in demo.observers}
    assert (len(names), len(places)) == (100, 100)


def test_the_same_seed_gives_the_same_network():
    first, second = (read_demo(90, np.random.default_rng(4)) for _ in range(2))
    assert first == second


def test_the_alert_is_a_test_and_can_only_become_a_rehearsal(demo):
    assert json.loads(demo.alert)["role"] == "test"


def test_every_fixture_says_that_it_is_invented():
    network = json.loads((DEMO_FOLDER / "network.json").read_text(encoding="utf-8"))
    assert network["note"].startswith("Invented")
