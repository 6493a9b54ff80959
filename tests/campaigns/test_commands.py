"""region, launch, plan: what outside programs rely on."""

import json

import pytest
from django.core.management import call_command

from campaigns.models import Campaign
from observers.models import Person
from tests.campaigns.stage import cone_alert, make_observer

pytestmark = pytest.mark.django_db


@pytest.fixture
def alert_file(tmp_path):
    def write(**values):
        path = tmp_path / "alert.json"
        path.write_text(json.dumps(cone_alert(**values)))
        return str(path)

    return write


def run(capsys, *args):
    try:
        call_command(*args, "--json")
        status = 0
    except SystemExit as end:
        status = end.code
    return status, json.loads(capsys.readouterr().out)


def test_region_describes_a_cone(capsys, alert_file):
    status, answer = run(capsys, "region", alert_file())
    assert status == 0
    # A Gaussian with 90 % within 3 degrees: the area of a 3 degree cap.
    assert answer["area_deg2"]["90"] == pytest.approx(28.26, rel=0.02)
    assert answer["peak"]["ra_deg"] == pytest.approx(140.0, abs=0.3)
    assert answer["total_probability"] == pytest.approx(1.0)
    assert {"order", "n_pixels"} <= answer.keys()


def test_launch_opens_a_campaign_on_an_empty_server(capsys, alert_file):
    status, answer = run(capsys, "launch", alert_file(), "--title", "A burst")
    assert status == 0
    campaign = Campaign.objects.get(pk=answer["campaign"])
    assert campaign.status == "live"
    assert answer["url"] == f"/c/{campaign.pk}/"
    assert answer["n_tiles"] == campaign.tiles.count() > 0
    # Nobody can sign in as the account that stands for the server.
    assert not Person.objects.filter(is_active=True).exists()


def test_launch_keeps_a_draft(capsys, alert_file):
    _, answer = run(capsys, "launch", alert_file(), "--title", "Perhaps", "--draft")
    assert Campaign.objects.get(pk=answer["campaign"]).status == "draft"


def test_a_test_alert_is_refused_with_a_hint(capsys, alert_file):
    status, problem = run(capsys, "launch", alert_file(role="test"), "--title", "No")
    assert (status, problem["code"]) == (2, "test-alert")
    assert "rehearsal" in problem["advice"]
    assert not Campaign.objects.exists()


def test_plan_prints_its_certificate(capsys, alert_file):
    make_observer("Observer Ada")
    make_observer("Observer Ben")
    _, launched = run(capsys, "launch", alert_file(), "--title", "A burst")
    status, answer = run(capsys, "plan", launched["campaign"], "--at", "2024-03-14T21:00:00Z")
    assert status == 0
    assert answer["n_observers"] == 2
    assert answer["n_assignments"] > 2
    assert 0 < answer["searched_expected"] <= answer["searched_bound"]
    assert 0.5 <= answer["certificate"] <= 1.0


@pytest.mark.parametrize(
    ("args", "code"),
    [
        (["region", "no such file"], "bad-alert"),
        (["plan", "no-such-campaign"], "not-found"),
        (["plan", "no-such-campaign", "--at", "yesterday"], "not-found"),
    ],
)
def test_bad_input_is_one_problem_object_and_exit_2(capsys, args, code):
    status, problem = run(capsys, *args)
    assert (status, problem["code"]) == (2, code)
    assert {"type", "title", "status", "detail", "code", "advice"} <= problem.keys()


@pytest.mark.parametrize("content", [b"", b"SIMPLE  =", b"{", b'{"constraints": 5}', b"\x00" * 99])
def test_a_damaged_alert_is_a_clear_problem(capsys, tmp_path, content):
    path = tmp_path / "damaged"
    path.write_bytes(content)
    status, problem = run(capsys, "launch", str(path), "--title", "No")
    assert status == 2
    assert problem["advice"]
    assert not Campaign.objects.exists()


def test_an_unknown_source_model_is_named(capsys, alert_file):
    status, problem = run(capsys, "launch", alert_file(), "--title", "No", "--source", "magic")
    assert (status, problem["code"]) == (2, "bad-source-model")
    assert not Campaign.objects.exists()
