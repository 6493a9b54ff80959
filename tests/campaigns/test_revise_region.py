"""Constraints added, replaced, switched and retracted: the region, the tiles, the numbers."""

import numpy as np
import pytest

import campaigns.bridge as bridge
from campaigns.actions.add_constraints import add_constraints, replace_constraint
from campaigns.actions.claim_tile import claim_tile
from campaigns.actions.make_plan import make_plan
from campaigns.actions.switch_constraint import retract_constraint
from campaigns.errors import InvalidInput
from campaigns.events.after_commit import register, unregister
from campaigns.ingest.alert_file import alert_of_bytes
from campaigns.ledger_replica import get_coverage, list_tiles_to_plan, rebuilt_coverage
from campaigns.models import Campaign, RegionRevision
from campaigns.selectors.events import list_events_since
from campaigns.selectors.region_history import get_region_history
from campaigns.selectors.snapshot import get_snapshot
from skytiles.region.make_region import make_region
from tests.campaigns import stage
from tests.campaigns.revision_stage import add, kept, map_bytes, newest, second_alert, switch
from tests.events.law_play import _reporter

pytestmark = pytest.mark.django_db


def test_an_added_constraint_multiplies_the_region_and_everything_is_kept(coordinator, campaign):
    before = newest(campaign)
    answer = add(coordinator, campaign)
    after = newest(campaign)
    values = [bridge.constraint_of(row, open_upload=None) for row in campaign.constraints.all()]
    expected = make_region(values, smallest_side_deg=1.6)
    assert (after.revision, after.constraints_on) == (2, [0, 1])
    assert np.array_equal(bridge.pixels_of(after), expected.pixels)
    assert bridge.probabilities_of(after) == pytest.approx(expected.probabilities)
    assert answer["area_before_deg2"] == before.area_deg2
    assert answer["area_deg2"]["90"] < before.area_deg2["90"]
    assert answer["overlap"] == pytest.approx(expected.overlap)
    assert answer["overlap"] > 1.0
    assert RegionRevision.objects.get(campaign=campaign, revision=1).area_deg2 == before.area_deg2
    assert after.made_by == coordinator


def test_everybody_is_told_what_changed(coordinator, campaign):
    seq = campaign.seq
    answer = add(coordinator, campaign)
    _, events = list_events_since(campaign.pk, seq)
    assert events[0]["kind"] == "region.revised"
    change = events[0]["payload"]["region"]["change"]
    assert change["said"] in events[0]["said"]
    assert change["tiles_dropped"] == answer["tiles_dropped"] != []
    assert f"{len(answer['tiles_dropped'])} dropped out" in change["said"]
    assert "(before: 28)" in change["said"]
    _, state = get_snapshot(campaign.pk)
    assert state["region"]["change"] == change


def test_tiles_keep_their_numbers_and_new_ones_are_added(coordinator, campaign):
    places = {tile.number: (tile.ra_deg, tile.dec_deg) for tile in campaign.tiles.all()}
    add(coordinator, campaign, second_alert(dec_deg=stage.DEC_DEG + 4.0))
    answer = switch(coordinator, campaign, 1, is_on=False)
    tiles = {tile.number: tile for tile in campaign.tiles.all()}
    assert answer["n_tiles_new"] > 0
    assert len(tiles) > len(places)
    assert all((tiles[n].ra_deg, tiles[n].dec_deg) == places[n] for n in places)
    assert len({(t.ra_deg, t.dec_deg, t.width_deg) for t in tiles.values()}) == len(tiles)
    # What the tiles hold is what the region has under them: rows overlap a little.
    total = sum(tile.probability for tile in tiles.values() if not tile.is_dropped)
    assert total == pytest.approx(1.0 - newest(campaign).outside, abs=0.05)


def test_switching_off_and_on_again_brings_region_and_tiles_back(coordinator, campaign):
    first = add(coordinator, campaign)
    before = newest(campaign)
    shares = {tile.number: tile.probability for tile in campaign.tiles.all()}
    dropped = set(campaign.tiles.filter(is_dropped=True).values_list("number", flat=True))
    assert dropped == set(first["tiles_dropped"])
    off = switch(coordinator, campaign, 2, is_on=False)
    assert set(off["tiles_back"]) == dropped
    switch(coordinator, campaign, 2, is_on=True)
    after = newest(campaign)
    assert after.revision == 4
    assert bytes(after.probabilities) == bytes(before.probabilities)
    again = {tile.number: tile.probability for tile in campaign.tiles.filter(number__in=shares)}
    assert again == pytest.approx(shares)


def test_frames_and_claims_stay_and_the_numbers_are_computed_anew(coordinator, campaign, camera):
    tile = stage.tile_at(campaign)
    _reporter(campaign)(camera, tile, now=stage.later(minutes=10))
    claim_tile(
        camera.owner,
        Campaign.objects.get(pk=campaign.pk),
        tile_number=tile.number,
        instrument=camera,
        starts_at=stage.later(minutes=20),
        wall_now=stage.later(minutes=20),
    )
    before = get_coverage(campaign.pk)
    assert before.imaged > 0
    add(coordinator, campaign, second_alert(dec_deg=tile.dec_deg, radius_deg=0.5))
    after = get_coverage(campaign.pk)
    assert after.revision == 2
    assert after.imaged > before.imaged
    assert len(after.detected) == len(bridge.pixels_of(newest(campaign)))
    rebuilt = rebuilt_coverage(campaign.pk)
    assert (after.imaged, after.searched) == pytest.approx((rebuilt.imaged, rebuilt.searched))
    assert campaign.frames.get().state == "counted"
    assert campaign.claims.get().state == "held"


def test_a_plan_is_due_at_once(coordinator, campaign, django_capture_on_commit_callbacks):
    make_plan(campaign.pk, wall_now=stage.NOW)
    heard = []

    def listener(campaign_id, hint):
        heard.append((campaign_id, hint))

    register(listener)
    with django_capture_on_commit_callbacks(execute=True):
        add(coordinator, campaign)
    unregister(listener)
    campaign.refresh_from_db()
    assert campaign.planned_seq < campaign.seq
    assert heard == [(campaign.pk, "events"), (campaign.pk, "plan due")]


def test_a_dropped_tile_that_is_held_stays_held_and_none_is_offered(coordinator, campaign, camera):
    tile = stage.tile_at(campaign)
    claim_tile(
        camera.owner,
        campaign,
        tile_number=tile.number,
        instrument=camera,
        starts_at=stage.NOW,
        wall_now=stage.NOW,
    )
    answer = replace_constraint(
        coordinator,
        campaign,
        kept(second_alert(dec_deg=stage.DEC_DEG + 8.0)),
        number=1,
        despite_time_apart=False,
        wall_now=stage.NOW,
    ).body
    assert tile.number in answer["tiles_dropped"]
    plan = make_plan(campaign.pk, wall_now=stage.NOW)
    offers = list(plan.offers.select_related("tile"))
    assert offers
    assert not any(offer.tile.is_dropped for offer in offers)
    # Nobody shoots two tiles at once: the held one still takes its time.
    end = campaign.claims.get().starts_at + stage.timedelta(minutes=6)
    mine = [offer.starts_at for offer in offers if offer.instrument_id == camera.pk]
    assert all(start >= end for start in mine)
    tiles = list_tiles_to_plan(campaign.pk)
    assert set(tiles.filter(is_dropped=True)) == {tile}


def test_a_replaced_constraint_is_kept_but_counts_no_more(coordinator, campaign):
    answer = replace_constraint(
        coordinator, campaign, kept(), number=1, despite_time_apart=False, wall_now=stage.NOW
    ).body
    old, new = campaign.constraints.order_by("position")
    assert (old.is_on, old.ending, new.is_on, new.label) == (False, "replaced", True, "invented-2")
    assert "Constraint 1 replaced by constraint 2 (cone of invented-2)" in answer["said"]
    assert newest(campaign).constraints_on == [1]
    with pytest.raises(InvalidInput, match="was replaced, for good"):
        switch(coordinator, campaign, 1, is_on=True)


def test_a_retracted_constraint_never_comes_back(coordinator, campaign):
    add(coordinator, campaign)
    retract_constraint(coordinator, campaign, number=2, wall_now=stage.NOW)
    assert campaign.constraints.get(position=1).ending == "retracted"
    assert newest(campaign).area_deg2 == RegionRevision.objects.get(revision=1).area_deg2
    with pytest.raises(InvalidInput, match="was retracted, for good"):
        switch(coordinator, campaign, 2, is_on=True)


def test_contradictory_constraints_are_reported_with_a_number(coordinator, campaign):
    answer = add(coordinator, campaign, second_alert(dec_deg=-40.0))
    assert answer["overlap"] < 0.01
    assert "contradict" in answer["said"]
    assert any("contradict" in note for note in answer["notes"])
    assert newest(campaign).overlap == answer["overlap"]


def test_a_draft_can_be_revised_before_it_opens(coordinator, camera):
    draft = stage.launch(coordinator, is_draft=True)
    assert add(coordinator, draft)["revision"] == 2


def test_a_map_file_is_added_and_read_again_later(coordinator, campaign):
    name = "later map.fits"
    _, alert = alert_of_bytes(map_bytes(), filename=name, now=stage.NOW)
    add_constraints(coordinator, campaign, alert, despite_time_apart=False, wall_now=stage.NOW)
    row = campaign.constraints.get(position=1)
    assert (row.kind, row.parameters["file"], len(row.upload_sha256)) == ("map", name, 64)
    both = newest(campaign)
    switch(coordinator, campaign, 2, is_on=False)
    switch(coordinator, campaign, 2, is_on=True)
    assert bytes(newest(campaign).probabilities) == bytes(both.probabilities)


def test_the_history_holds_every_revision_and_constraint(coordinator, campaign):
    add(coordinator, campaign)
    switch(coordinator, campaign, 1, is_on=False)
    history = get_region_history(campaign)
    assert [one["revision"] for one in history["revisions"]] == [3, 2, 1]
    assert [one["constraints_on"] for one in history["revisions"]] == [[2], [1, 2], [1]]
    assert [one["is_on"] for one in history["constraints"]] == [False, True]
    assert history["revisions"][-1]["change"] is None
