"""Who may not revise a region, what is refused, and who comes first."""

import uuid

import pytest

import campaigns.bridge as bridge
from campaigns import errors
from campaigns.actions import lay_grids
from campaigns.actions import revise_region as module
from campaigns.actions.claim_tile import claim_tile
from campaigns.actions.close_campaign import close_campaign
from campaigns.actions.switch_constraint import retract_constraint
from campaigns.errors import CampaignClosed, InvalidInput, MessagesApart, RegionMoved, TileDropped
from campaigns.models import Campaign, Constraint, RegionRevision
from observers.models import Instrument, Role
from tests.campaigns import stage
from tests.campaigns.revision_stage import add, meanwhile, newest, second_alert, switch
from tests.skytiles.region.bursts import burst_json

pytestmark = pytest.mark.django_db


def test_a_dropped_tile_takes_no_new_claim(coordinator, campaign, camera):
    answer = add(coordinator, campaign)
    with pytest.raises(TileDropped):
        claim_tile(
            camera.owner,
            campaign,
            tile_number=answer["tiles_dropped"][0],
            instrument=camera,
            starts_at=stage.NOW,
            wall_now=stage.NOW,
        )


def test_the_last_constraint_in_use_must_stay(coordinator, campaign):
    for change in (
        lambda: switch(coordinator, campaign, 1, is_on=False),
        lambda: retract_constraint(coordinator, campaign, number=1, wall_now=stage.NOW),
    ):
        with pytest.raises(InvalidInput, match="must stay"):
            change()
    assert newest(campaign).revision == 1
    assert campaign.constraints.get().is_on


def test_messages_more_than_ten_seconds_apart_need_a_coordinators_word(coordinator, campaign):
    late = second_alert(seconds=12.0)
    with pytest.raises(MessagesApart, match=r"12\.0 s from the others"):
        add(coordinator, campaign, late)
    assert campaign.constraints.count() == 1
    answer = add(coordinator, campaign, late, despite_time_apart=True)
    assert "Constraint 2 is from a message 12.0 s from the event" in answer["notes"][-1]
    assert campaign.constraints.get(position=1).is_apart_confirmed
    # Two messages on either side of the event may be too far from each other.
    add(coordinator, campaign, second_alert(seconds=9.0))
    with pytest.raises(MessagesApart):
        add(coordinator, campaign, second_alert(seconds=-9.0))


def test_the_same_rule_reads_the_times_of_stations(coordinator, campaign):
    fields = burst_json("AB", [0.0, 0.01], sigma_s=1e-3)
    fields["reference_time"] = (stage.EVENT_TIME + stage.timedelta(seconds=30)).isoformat()
    alert = {**second_alert(seconds=0.0), "constraints": [fields]}
    with pytest.raises(MessagesApart, match=r"30\.0 s"):
        add(coordinator, campaign, alert)


def test_a_test_alert_is_added_to_rehearsals_alone(coordinator, campaign):
    with pytest.raises(errors.TestAlertRefused):
        add(coordinator, campaign, second_alert(role="test"))
    rehearsal = stage.launch(coordinator, is_rehearsal=True, clock_now=stage.NOW, title="Rehearsed")
    assert add(coordinator, rehearsal, second_alert(role="test"))["revision"] == 2


def test_a_closed_campaign_keeps_its_region(coordinator, campaign):
    close_campaign(campaign, wall_now=stage.NOW)
    with pytest.raises(CampaignClosed):
        add(coordinator, campaign)


def test_a_campaign_closed_meanwhile_is_not_revised(coordinator, campaign, monkeypatch):
    meanwhile(
        monkeypatch,
        lambda: close_campaign(Campaign.objects.get(pk=campaign.pk), wall_now=stage.NOW),
    )
    with pytest.raises(CampaignClosed):
        add(coordinator, campaign)
    assert newest(campaign).revision == 1


def test_who_is_overtaken_is_judged_anew_on_top(coordinator, campaign, monkeypatch):
    meanwhile(monkeypatch, lambda: add(coordinator, campaign, second_alert(radius_deg=2.0)))
    answer = add(coordinator, campaign)
    assert answer["revision"] == 3
    assert newest(campaign).constraints_on == [0, 1, 2]
    assert list(campaign.constraints.values_list("position", flat=True)) == [0, 1, 2]


def test_a_grid_laid_meanwhile_makes_the_revision_start_anew(
    coordinator, campaign, camera, monkeypatch
):
    wide = stage.make_instrument(camera.site, "wide", width_deg=6.0, height_deg=6.0)
    # Registered after the region was computed: its grid knows the old region alone.
    Instrument.objects.filter(pk=wide.pk).update(is_in_use=False)

    def lay():
        wide.save()
        assert lay_grids.lay_grid(campaign, wide, wall_now=stage.NOW) > 0

    meanwhile(monkeypatch, lay)
    assert add(coordinator, campaign)["revision"] == 2
    region = bridge.region_of(newest(campaign))
    tiles = list(campaign.tiles.all())
    shares = bridge.tile_shares(tiles, region)
    assert {tile.number: tile.probability for tile in tiles} == pytest.approx(shares)
    assert campaign.tiles.filter(width_deg__gt=5.0).exists()


def test_a_grid_computed_for_an_older_region_is_laid_for_the_newer(
    coordinator, campaign, camera, monkeypatch
):
    wide = stage.make_instrument(camera.site, "wide", width_deg=6.0, height_deg=6.0)
    compute = lay_grids.grid_rows
    waiting = [lambda: add(coordinator, campaign)]

    def compute_then_revise(*args, **kwargs):
        rows = compute(*args, **kwargs)
        if waiting:
            wide.is_in_use = False
            wide.save()
            waiting.pop()()
        return rows

    monkeypatch.setattr(lay_grids, "grid_rows", compute_then_revise)
    assert lay_grids.lay_grid(campaign, wide, wall_now=stage.NOW) > 0
    tiles = list(campaign.tiles.filter(width_deg__gt=5.0))
    shares = bridge.tile_shares(tiles, bridge.region_of(newest(campaign)))
    assert {tile.number: tile.probability for tile in tiles} == pytest.approx(shares)


def test_whoever_is_overtaken_every_time_is_told(coordinator, campaign, monkeypatch):
    def always_moved(_revision):
        raise module._moved()

    monkeypatch.setattr(module, "_write", always_moved)
    with pytest.raises(RegionMoved):
        add(coordinator, campaign)


def test_the_same_key_revises_once(coordinator, campaign):
    once = module.Once(coordinator, "region", uuid.uuid4(), "0" * 64, stage.NOW)
    first = add(coordinator, campaign, once=once)
    assert add(coordinator, campaign, once=once) == first
    assert RegionRevision.objects.filter(campaign=campaign).count() == 2
    assert Constraint.objects.filter(campaign=campaign).count() == 2


def test_a_member_coordinator_may_revise_and_nobody_else(campaign, camera, client):
    path = f"/api/v1/campaigns/{campaign.pk}/region"
    body = {"way": "add", "alert": second_alert()}
    onlooker = stage.make_person("Onlooker Olga", Role.ONLOOKER)

    def post(person):
        client.logout()
        if person:
            client.force_login(person)
        return client.post(path, body, content_type="application/json").status_code

    assert [post(None), post(onlooker), post(camera.owner)] == [401, 403, 403]
    campaign.memberships.filter(person=camera.owner).update(role=Role.COORDINATOR)
    assert post(camera.owner) == 201
