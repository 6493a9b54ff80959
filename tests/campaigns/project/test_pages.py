import re
from pathlib import Path

import pytest
from django.utils import timezone

import campaigns
from campaigns.models import Campaign

TEMPLATES = Path(campaigns.__file__).parent / "templates"


@pytest.fixture
def campaign(coordinator):
    now = timezone.now()
    return Campaign.objects.create(
        id="test-1",
        title="A ring in the south",
        status="live",
        is_public=True,
        event_time=now,
        source_model={"preset": "steady", "label": "steady"},
        made_by=coordinator,
        made_at=now,
    )


def _private(campaign):
    campaign.is_public = False
    campaign.save()
    return campaign


@pytest.mark.parametrize("path", ["/", "/sign-in/", "/c/test-1/", "/c/test-1/log/"])
def test_pages_that_everybody_sees(client, campaign, path):
    answer = client.get(path)
    assert answer.status_code == 200
    assert "quartersky_csrf" in answer.cookies


@pytest.mark.parametrize("path", ["/launch/", "/gear/", "/c/test-1/tonight/"])
def test_pages_that_need_an_account_lead_to_the_sign_in_and_back(client, campaign, path):
    answer = client.get(path)
    assert answer.status_code == 302
    assert answer["Location"] == "/sign-in/?next=" + path.replace("/", "%2F")


@pytest.mark.parametrize("path", ["/", "/gear/", "/c/test-1/", "/c/test-1/tonight/"])
def test_pages_of_an_observer(client, campaign, observer, path):
    client.force_login(observer)
    assert client.get(path).status_code == 200


def test_launch_is_for_coordinators(client, observer, coordinator):
    client.force_login(observer)
    assert client.get("/launch/").status_code == 403
    client.force_login(coordinator)
    assert client.get("/launch/").status_code == 200


def test_an_onlooker_has_no_tonight_and_is_told_why(client, campaign, onlooker):
    client.force_login(onlooker)
    answer = client.get("/c/test-1/tonight/")
    assert answer.status_code == 403
    assert "watch" in answer.content.decode()
    assert 'href="/"' in answer.content.decode()


def test_a_private_board_asks_who_is_there(client, campaign, observer):
    _private(campaign)
    assert client.get("/c/test-1/").status_code == 302
    client.force_login(observer)
    assert client.get("/c/test-1/").status_code == 200


def test_a_campaign_that_does_not_exist_looks_like_a_private_one(client, campaign):
    _private(campaign)
    hidden, missing = client.get("/c/test-1/"), client.get("/c/nothing/")
    assert (hidden.status_code, missing.status_code) == (302, 302)


def test_a_campaign_that_does_not_exist_is_a_page_with_a_way_back(client, observer):
    client.force_login(observer)
    answer = client.get("/c/nothing/")
    assert answer.status_code == 404
    assert 'href="/"' in answer.content.decode()


@pytest.mark.parametrize(
    ("wanted", "reached"),
    [
        ("/gear/", "/gear/"),
        ("https://elsewhere.example/", "/"),
        ("//elsewhere.example", "/"),
        ("javascript:alert(1)", "/"),
        ("", "/"),
    ],
)
def test_after_the_sign_in_one_stays_here(client, observer, wanted, reached):
    client.force_login(observer)
    answer = client.get("/sign-in/", {"next": wanted})
    assert (answer.status_code, answer["Location"]) == (302, reached)


def test_pages_only_answer_to_reading(client, db):
    assert client.post("/").status_code == 405


def test_the_policy_allows_nothing_inline_and_nobody_elsewhere(client, db):
    policy = client.get("/")["Content-Security-Policy"]
    assert "unsafe" not in policy
    assert "http" not in policy
    assert "default-src 'none'" in policy
    assert "frame-ancestors 'none'" in policy


@pytest.mark.parametrize("path", ["/", "/api/v1/session", "/nowhere/", "/api/schema/"])
def test_every_answer_carries_the_headers(client, db, path):
    answer = client.get(path)
    for name in ("Content-Security-Policy", "Permissions-Policy", "X-Frame-Options"):
        assert answer[name]
    assert answer["X-Content-Type-Options"] == "nosniff"
    assert answer["Cache-Control"]


@pytest.mark.parametrize("template", sorted(TEMPLATES.rglob("*.html")), ids=lambda p: p.name)
def test_no_template_has_inline_script_or_style(template):
    text = template.read_text()
    assert not re.search(r"<style|\sstyle=|\son[a-z]+=|javascript:", text)
    for script in re.findall(r"<script[^>]*>", text):
        assert "src=" in script
