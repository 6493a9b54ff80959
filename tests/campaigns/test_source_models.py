"""Source models from launch to ledger: prior, offsets per pixel, early frames, what is shown."""

from datetime import timedelta
from itertools import count

import numpy as np
import pytest
from rest_framework.test import APIClient

import campaigns.ingest.kept_region
import campaigns.ingest.placed_source
from campaigns.actions.make_plan import make_plan
from campaigns.actions.report_frame import Depth, report_frame
from campaigns.ingest.frame_report import read_report
from campaigns.ingest.kept_arrays import hash_of, kept_arrays
from campaigns.ingest.placed_source import placed_source
from campaigns.ledger_replica import drop_replicas, get_coverage, held_replica, rebuilt_coverage
from campaigns.models import Campaign, Event, RegionRevision
from campaigns.selectors.shown import campaign_shown
from skytiles.errors import SourceError
from skytiles.source.presets import PRESETS
from tests.campaigns import stage
from tests.campaigns.stage import EVENT_TIME, NOW, cone_alert

# In the plane of the Galaxy, high over Europe at NOW.
RA_DEG, DEC_DEG = 95.0, 16.0
_numbers = count(1)


def launch(actor, **wish):
    """Each campaign has a title, and so an address, of its own."""
    return stage.launch(actor, title=f"An invented burst {next(_numbers)}", **wish)


def plane_alert(**changes):
    alert = cone_alert()
    cone = alert["constraints"][0] | {"ra_deg": RA_DEG, "dec_deg": DEC_DEG, "radius_deg": 3.0}
    return alert | {"constraints": [cone]} | changes


@pytest.fixture
def collapse(coordinator, camera):
    return launch(coordinator, alert=plane_alert(), source="core collapse")


def region_of(campaign):
    return RegionRevision.objects.filter(campaign=campaign).latest("revision")


def take_frame(campaign, camera, *, mid_time, limit_mag=13.0, **values):
    report = read_report(
        {
            "ra_deg": RA_DEG,
            "dec_deg": DEC_DEG,
            "mid_time": mid_time,
            "duration_s": 60.0,
            **values,
        },
        camera,
    )
    depth = Depth(limit_mag=limit_mag, is_examined=True, examined_way="image by eye")
    return report_frame(
        camera.owner,
        Campaign.objects.get(pk=campaign.pk),
        instrument=camera,
        report=report,
        depth=depth,
        wall_now=NOW,
    )


def test_a_core_collapse_takes_the_prior_of_the_galaxy(collapse, coordinator):
    flat = launch(coordinator, alert=plane_alert(), source="core collapse", prior="flat")
    assert collapse.source_model["prior"] == "galactic"
    assert region_of(collapse).area_deg2["90"] < 0.8 * region_of(flat).area_deg2["90"]
    assert "Galactic disc" in " ".join(region_of(collapse).notes)
    assert flat.source_model["prior"] == "flat"


@pytest.mark.parametrize("name", PRESETS)
def test_every_preset_launches_and_counts(coordinator, camera, name):
    campaign = launch(coordinator, alert=plane_alert(), source=name)
    take_frame(campaign, camera, mid_time=NOW - timedelta(minutes=5))
    coverage = get_coverage(campaign.pk)
    assert 0.0 <= coverage.searched < coverage.imaged < 1.0
    drop_replicas()
    assert rebuilt_coverage(campaign.pk).searched == pytest.approx(coverage.searched, abs=1e-6)


def test_the_ledger_of_a_core_collapse_has_offsets_per_pixel(collapse):
    with held_replica(collapse.pk) as replica:
        ledger = replica.ledger
        n_pixels = len(ledger.probabilities)
        assert ledger.offset_weights.shape == (n_pixels, len(ledger.source_model.offsets_mag))
        assert np.ptp(ledger.offset_weights, axis=0).max() > 0.001


def test_a_red_camera_is_worth_more_than_a_blue_one_behind_dust(coordinator, camera):
    def searched(band):
        campaign = launch(coordinator, alert=plane_alert(), source="core collapse")
        take_frame(campaign, camera, mid_time=NOW - timedelta(minutes=5), limit_mag=1.5, band=band)
        return get_coverage(campaign.pk).searched

    assert searched("I") > searched("R") > searched("V") > searched("B") > 0.0


def test_a_core_collapse_can_be_planned(collapse):
    plan = make_plan(collapse.pk, wall_now=NOW)
    assert plan.n_assignments > 0
    assert 0.0 < plan.searched_expected <= plan.searched_bound + 1e-9


def test_offsets_and_regions_are_computed_once(collapse, coordinator, monkeypatch):
    get_coverage(collapse.pk)

    def refuse(*_args, **_kwargs):
        raise AssertionError("computed again")

    monkeypatch.setattr(campaigns.ingest.placed_source.bridge, "place_source_of", refuse)
    monkeypatch.setattr(campaigns.ingest.kept_region, "make_region", refuse)
    drop_replicas()
    first = placed_source(collapse, region_of(collapse))
    again = launch(coordinator, alert=plane_alert(), source="core collapse")
    second = placed_source(again, region_of(again))
    np.testing.assert_array_equal(first.offset_weights, second.offset_weights)
    assert region_of(again).notes == region_of(collapse).notes
    assert region_of(again).area_deg2 == region_of(collapse).area_deg2


def test_other_numbers_are_another_region(collapse, coordinator):
    source = {"preset": "core collapse", "parameters": {"disc_height_kpc": 0.3}}
    thick = launch(coordinator, alert=plane_alert(), source=source)
    assert region_of(thick).area_deg2["90"] > 1.1 * region_of(collapse).area_deg2["90"]


def test_a_damaged_file_is_computed_again(settings):
    calls = []

    def compute():
        calls.append(1)
        return {"numbers": np.arange(3)}

    name = hash_of("a test", b"bytes")
    kept_arrays(name, compute=compute)
    kept_arrays(name, compute=compute)
    assert len(calls) == 1
    (settings.COMPUTED / f"{name}.npz").write_bytes(b"PK\x03\x04 broken")
    np.testing.assert_array_equal(kept_arrays(name, compute=compute)["numbers"], np.arange(3))
    assert len(calls) == 2


def test_a_frame_before_any_light_adds_nothing_and_everybody_is_told(collapse, camera):
    answer = take_frame(collapse, camera, mid_time=EVENT_TIME + timedelta(seconds=60))
    coverage = get_coverage(collapse.pk)
    assert coverage.imaged > 0.0
    assert coverage.searched == 0.0
    said = Event.objects.get(campaign=collapse, kind="frame.counted").payload["said"]
    assert "before any light could have arrived" in said
    first = campaign_shown(collapse)["source"]["first_light_at"]
    assert first is not None
    assert first > answer.body["frame"]["mid_time"]


def test_a_frame_after_the_first_light_is_not_called_early(collapse, camera):
    take_frame(collapse, camera, mid_time=EVENT_TIME + timedelta(minutes=3))
    assert get_coverage(collapse.pk).searched > 0.0
    said = Event.objects.get(campaign=collapse, kind="frame.counted").payload["said"]
    assert "light" not in said


def test_a_steady_light_has_no_first_light(campaign):
    assert campaign_shown(campaign)["source"]["first_light_at"] is None


def test_whoever_reports_an_early_frame_reads_it_in_the_answer(collapse, camera):
    client = APIClient()
    client.force_authenticate(camera.owner)
    body = {
        "instrument": camera.pk,
        "ra_deg": RA_DEG,
        "dec_deg": DEC_DEG,
        "mid_time": (EVENT_TIME + timedelta(seconds=70)).isoformat(),
        "duration_s": 20.0,
        "limit_mag": 13.0,
        "is_examined": True,
        "examined_way": "image by eye",
    }
    answer = client.post(f"/api/v1/campaigns/{collapse.pk}/frames", body, format="json")
    assert answer.status_code == 201, answer.content
    assert answer.json()["searched"] == 0.0
    assert any("adds nothing to searched" in note for note in answer.json()["notes"])


def test_presets_are_listed_with_all_that_they_assume(coordinator):
    client = APIClient()
    client.force_authenticate(coordinator)
    presets = client.get("/api/v1/source-models").json()["presets"]
    assert [one["preset"] for one in presets] == list(PRESETS)
    for one in presets:
        assert {"label", "about", "prior", "curves"} <= one.keys()
        assert all({"label", "value", "unit", "source"} <= a.keys() for a in one["assumptions"])


def test_a_model_is_drawn_before_anything_is_made_of_it(coordinator):
    client = APIClient()
    client.force_authenticate(coordinator)
    model = {"preset": "nova", "parameters": {"peak_mag": -9.0}}
    drawn = client.post("/api/v1/source-models", model, format="json").json()
    assert [one["name"] for one in drawn["assumptions"] if one["is_changed"]] == ["peak_mag"]
    # The curve is drawn at times beside the peak too: it reaches it to a hundredth.
    peak = min(m for m in drawn["curves"][0]["magnitudes"] if m is not None)
    assert peak == pytest.approx(-9.0, abs=0.05)
    for bad in ({"preset": "nova", "parameters": {"hue": 1}}, {"preset": "?"}, [1]):
        answer = client.post("/api/v1/source-models", bad, format="json")
        assert answer.status_code == 400
        assert answer.json()["advice"]


def test_the_board_reads_every_assumption_of_its_campaign(coordinator, camera):
    source = {"preset": "core collapse", "parameters": {"spread_mag": 0.8}}
    campaign = launch(coordinator, alert=plane_alert(), source=source, is_public=True)
    shown = APIClient().get(f"/api/v1/campaigns/{campaign.pk}/source").json()
    assert shown["prior"] == "galactic"
    by_name = {one["name"]: one for one in shown["assumptions"]}
    assert (by_name["spread_mag"]["value"], by_name["spread_mag"]["is_changed"]) == (0.8, True)
    assert by_name["rsg_weight"]["is_changed"] is False


def test_an_unknown_prior_is_refused(coordinator):
    with pytest.raises(SourceError):
        launch(coordinator, alert=plane_alert(), prior="everywhere")


def test_a_region_can_be_seen_with_the_prior_of_the_galaxy(coordinator):
    client = APIClient()
    client.force_authenticate(coordinator)
    areas = [
        client.post(f"/api/v1/region?prior={prior}", plane_alert(), format="json").json()
        for prior in ("flat", "galactic")
    ]
    assert areas[1]["region"]["area_deg2"]["90"] < areas[0]["region"]["area_deg2"]["90"]
    bad = client.post("/api/v1/region?prior=none", plane_alert(), format="json")
    assert bad.status_code == 400


def test_a_stated_distance_is_that_of_the_red_transient(coordinator, camera):
    alert = plane_alert()
    alert["constraints"].append({"type": "distance", "median_mpc": 20.0, "factor": 1.2})
    campaign = launch(coordinator, alert=alert, source="red transient")
    assert campaign.source_model["parameters"]["distance_mpc"] == 20.0
    typed = {"preset": "red transient", "parameters": {"distance_mpc": 7.0}}
    other = launch(coordinator, alert=alert, source=typed)
    assert other.source_model["parameters"]["distance_mpc"] == 7.0
