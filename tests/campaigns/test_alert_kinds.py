"""Alerts of every kind through the API: what becomes a campaign, and what never does."""

import json
from pathlib import Path

import pytest
from django.core.files.uploadedfile import SimpleUploadedFile
from django.test import Client

from campaigns.ingest.kept_constraint import constraints_of
from campaigns.models import Campaign, Constraint
from campaigns.rules.campaign import message_problems, role_problems
from skytiles.region.alert import ROLES
from tests.skytiles.region.voevent_words import packet, where_when

pytestmark = pytest.mark.django_db

ALERTS = Path(__file__).resolve().parents[2] / "fixtures" / "alerts"
REAL = ("moc.json", "moc.txt", "polygon.json", "targets.json", "voevent-2.0.xml", "voevent-2.1.xml")


@pytest.fixture
def browser(coordinator, camera):
    client = Client()
    client.force_login(coordinator)
    return client


def look_at(browser, data, name):
    file = SimpleUploadedFile(name, data)
    return browser.post("/api/v1/region", {"file": file})


def launch(browser, upload, **wish):
    body = {"upload": upload, "title": "T"} | wish
    return browser.post("/api/v1/campaigns", body, content_type="application/json")


@pytest.mark.parametrize("name", REAL)
def test_a_real_alert_of_each_kind_becomes_a_campaign(browser, name):
    data = (ALERTS / f"example-{name}").read_bytes()
    seen = look_at(browser, data, name).json()
    made = launch(browser, seen["upload"])
    assert made.status_code == 201, made.content
    campaign = Campaign.objects.get(pk=made.json()["campaign"])
    # The rows stand alone: what is read from them again is what was launched.
    rows = list(Constraint.objects.filter(campaign=campaign))
    assert [one.to_json() for one in constraints_of(rows)] == seen["alert"]["constraints"]
    assert made.json()["n_tiles"] > 0


def test_what_a_message_says_beside_its_direction_is_shown(browser):
    data = (ALERTS / "example-voevent-2.0.xml").read_bytes()
    alert = look_at(browser, data, "a.xml").json()["alert"]
    assert alert["importance"] == 0.8
    assert alert["citations"][0]["cite"] == "supersedes"
    assert {"uri": "https://alerts.example/7/map.fits", "name": "sky map"} in alert["links"]


@pytest.mark.parametrize("role", ["test", "prediction"])
def test_what_was_not_observed_becomes_only_a_rehearsal(browser, role):
    data = packet(where_when(time="2026-03-14T05:06:07"), role=role)
    upload = look_at(browser, data, "a.xml").json()["upload"]
    refused = launch(browser, upload)
    assert (refused.status_code, refused.json()["code"]) == (422, "test-alert")
    assert f"a {role}" in refused.json()["detail"]
    assert not Campaign.objects.exists()
    assert launch(browser, upload, is_rehearsal=True).status_code == 201


@pytest.mark.parametrize(
    ("data", "words"),
    [
        ((ALERTS / "example-retraction.json").read_bytes(), "takes back invented-cone"),
        ((ALERTS / "example-voevent-retraction.xml").read_bytes(), "takes back ivo://"),
        (packet(where_when(time="2026-03-14T05:06:07"), role="utility"), "not about the sky"),
        (packet(), "no direction"),
    ],
)
def test_a_message_that_opens_nothing_is_told_why(browser, data, words):
    answer = look_at(browser, data, "message")
    assert answer.status_code == 400
    assert words in json.dumps(answer.json())
    assert not Campaign.objects.exists()


@pytest.mark.parametrize(
    "data",
    [
        b'<!DOCTYPE v [<!ENTITY x SYSTEM "file:///etc/passwd">]><v>&x;</v>',
        b"<v>" + b" " * 2_000_000,
        packet(where_when(), role="rumour"),
        b"30/1 2 3",
    ],
)
def test_a_hostile_or_damaged_message_is_a_named_problem(browser, data):
    answer = look_at(browser, data, "from-a-stranger.xml")
    assert answer.status_code == 400
    problem = answer.json()
    assert problem["code"] == "bad-alert"
    assert "from-a-stranger.xml" in problem["detail"]
    assert "root:" not in json.dumps(problem)


def test_only_an_observation_is_real():
    problems = {role: role_problems(role, is_rehearsal=False) for role in ROLES}
    assert [role for role, found in problems.items() if not found] == ["observation"]
    assert not any(role_problems(role, is_rehearsal=True) for role in ROLES)
    assert not message_problems("observation", retracted=(), has_direction=True)


def test_a_coverage_map_without_a_date_is_not_called_far_from_the_event(browser):
    data = (ALERTS / "example-cone.json").read_bytes()
    launched = launch(browser, look_at(browser, data, "cone.json").json()["upload"]).json()
    undated = (ALERTS / "example-moc.txt").read_bytes()
    again = launch(browser, look_at(browser, undated, "moc.txt").json()["upload"]).json()
    for made, is_dated in ((launched, True), (again, False)):
        row = Constraint.objects.get(campaign=made["campaign"])
        assert (row.message_time is not None) == is_dated
