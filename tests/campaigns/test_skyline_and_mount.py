"""Skyline and mount are heeded by claims, best tile and plan, and the skyline stays home."""

import json

import pytest
from django.test import Client

from campaigns.actions.claim_tile import claim_tile
from campaigns.actions.make_plan import make_plan
from campaigns.errors import TileNotUp
from campaigns.models import Event
from campaigns.selectors.best_tile import get_best_tile
from campaigns.selectors.first_start import get_first_start
from tests.campaigns.stage import NOW, later, make_observer, make_person, tile_at

pytestmark = pytest.mark.django_db

# Altitudes that nobody would guess, so that they can be looked for in everything that is sent.
WALL = [[0.0, 71.8125], [120.0, 83.4375], [240.0, 77.6875]]


def hide_everything(camera):
    camera.site.horizon_mask = [[0.0, 89.9]]
    camera.site.save()


def claim(campaign, camera, **values):
    return claim_tile(
        camera.owner,
        campaign,
        tile_number=tile_at(campaign).number,
        instrument=camera,
        starts_at=values.get("starts_at", later(minutes=1)),
        wall_now=NOW,
    )


def test_a_tile_behind_the_skyline_is_not_claimed_nor_offered(campaign, camera):
    assert get_best_tile(campaign, camera, wall_now=NOW)["best"] is not None
    hide_everything(camera)
    with pytest.raises(TileNotUp, match="skyline"):
        claim(campaign, camera)
    found = get_best_tile(campaign, camera, wall_now=NOW)
    assert found["best"] is None
    assert "skyline" in found["why_not"]


@pytest.mark.parametrize(
    ("limits", "words"),
    [
        ({"max_dec_deg": 0.0}, "declinations"),
        ({"mount_max_altitude_deg": 20.5}, "altitudes"),
        ({"min_hour_angle_h": -12.0, "max_hour_angle_h": -6.0}, "hour angles"),
    ],
)
def test_a_tile_beyond_the_mount_is_not_claimed(campaign, camera, limits, words):
    for name, value in limits.items():
        setattr(camera, name, value)
    camera.save()
    with pytest.raises(TileNotUp, match=words):
        claim(campaign, camera)
    assert get_best_tile(campaign, camera, wall_now=NOW)["best"] is None


def test_the_first_start_waits_for_the_tile_to_come_out_from_behind_a_house(campaign, camera):
    tile = tile_at(campaign)
    assert get_first_start(camera, tile, now=NOW) == NOW
    # The tile is near the meridian, south, and moves west: a wall up to a little west of south.
    camera.site.horizon_mask = [[0.0, 0.0], [90.0, 80.0], [205.0, 80.0], [206.0, 0.0], [359.0, 0.0]]
    camera.site.save()
    start = get_first_start(camera, tile, now=NOW)
    assert start > NOW
    assert claim(campaign, camera, starts_at=start).status == 201


def test_the_plan_gives_nothing_to_whoever_is_behind_a_wall(campaign, camera, other_camera):
    hide_everything(camera)
    make_plan(campaign.pk, wall_now=NOW)
    plan = Event.objects.filter(campaign=campaign, kind="plan.made").last().payload
    assert camera.owner.pk not in {offer["observer"] for offer in plan["offers"]}
    assert other_camera.owner.pk in {offer["observer"] for offer in plan["offers"]}
    reasons = {row["observer"]: row["reason"] for row in plan["plan"]["unassigned"]}
    assert "skyline" in reasons[camera.owner.pk]


# Privacy.


def client_of(person):
    client = Client()
    if person:
        client.force_login(person)
    return client


def add_site(client, **values):
    whole = {"name": "hill", "latitude_deg": 47.0, "longitude_deg": 10.0, **values}
    return client.post("/api/v1/sites", whole, content_type="application/json")


def test_a_skyline_is_kept_and_given_back_to_its_owner():
    ada = client_of(make_person("Ada"))
    made = add_site(ada, horizon_mask=WALL)
    assert made.status_code == 201
    assert json.loads(made.content)["horizon_mask"] == WALL
    assert json.loads(ada.get("/api/v1/sites").content)[0]["horizon_mask"] == WALL


@pytest.mark.parametrize(
    "mask",
    [
        [[400.0, 10.0]],
        [[10.0, 95.0]],
        [[10.0, 5.0], [370.0 - 360.0, 6.0]],
        [[azimuth / 2.0, 1.0] for azimuth in range(400)],
        [[10.0]],
        [["north", 10.0]],
        "90 10",
    ],
)
def test_a_skyline_that_cannot_be_drawn_is_refused(mask):
    answer = add_site(client_of(make_person("Ada")), horizon_mask=mask)
    assert answer.status_code in (400, 422)
    assert "horizon_mask" in {
        e["field"].split(".")[0] for e in json.loads(answer.content)["errors"]
    }


def test_the_skyline_reaches_nobody_but_owner_and_coordinators(campaign, camera, coordinator):
    """Through events, snapshot, plan, darkness and the gear of others: not a number of it."""
    camera.site.horizon_mask = WALL
    camera.site.save()
    other = make_observer("Observer Dan").owner
    client = client_of(other)
    change = {"min_altitude_deg": 25.0}
    client_of(camera.owner).patch(
        f"/api/v1/sites/{camera.site_id}", change, content_type="application/json"
    )
    make_plan(campaign.pk, wall_now=NOW)
    paths = [
        "/api/v1/sites",
        "/api/v1/instruments",
        f"/api/v1/campaigns/{campaign.pk}",
        f"/api/v1/campaigns/{campaign.pk}/events?since=0",
        f"/api/v1/campaigns/{campaign.pk}/darkness",
        f"/api/v1/campaigns/{campaign.pk}/coverage",
        f"/c/{campaign.pk}/",
        f"/c/{campaign.pk}/log/",
    ]
    for path in paths:
        sent = client.get(path).content.decode()
        assert "horizon_mask" not in sent.replace('"horizon_mask":[]', ""), path
        for _, altitude in WALL:
            assert str(altitude) not in sent, path
    stolen = client.patch(
        f"/api/v1/sites/{camera.site_id}", {"name": "x"}, content_type="application/json"
    )
    assert stolen.status_code == 404
    kept = json.dumps([event.payload for event in Event.objects.all()])
    assert "horizon" not in kept
    assert not any(str(altitude) in kept for _, altitude in WALL)
    by_coordinator = client_of(coordinator).patch(
        f"/api/v1/sites/{camera.site_id}", {}, content_type="application/json"
    )
    assert json.loads(by_coordinator.content)["horizon_mask"] == WALL
