"""Reports: judged, counted once, set right, withdrawn."""

from datetime import timedelta

import pytest

from campaigns.actions.claim_tile import claim_tile
from campaigns.actions.close_campaign import close_campaign
from campaigns.actions.correct_frame import correct_frame
from campaigns.actions.examine_frame import examine_frame
from campaigns.actions.report_frame import Depth, report_frame
from campaigns.actions.withdraw_frame import withdraw_frame
from campaigns.errors import CampaignClosed, CampaignError, InvalidInput
from campaigns.ingest.frame_report import read_report
from campaigns.ledger_replica import drop_replicas, get_coverage, rebuilt_coverage
from campaigns.models import Claim, Event, Frame
from tests.campaigns.stage import DEC_DEG, EVENT_TIME, NOW, RA_DEG, later, tile_at

EXAMINED = {"limit_mag": 16.5, "is_examined": True, "examined_way": "image by eye"}


def typed(**values):
    return {
        "ra_deg": RA_DEG,
        "dec_deg": DEC_DEG,
        "mid_time": later(minutes=-5),
        "duration_s": 300.0,
        **values,
    }


def send(campaign, camera, values=None, *, depth=None, claim=None, wall_now=NOW):
    answer = report_frame(
        camera.owner,
        type(campaign).objects.get(pk=campaign.pk),
        instrument=camera,
        report=read_report(values or typed(), camera),
        depth=Depth(**(depth or EXAMINED)),
        claim=claim,
        wall_now=wall_now,
    )
    return answer, Frame.objects.get(campaign=campaign, number=answer.body["number"])


def test_an_examined_frame_with_a_limit_counts_as_imaged_and_searched(campaign, camera):
    send(campaign, camera)
    coverage = get_coverage(campaign.pk)
    assert 0.0 < coverage.searched < coverage.imaged < 1.0


def test_a_frame_that_nobody_examined_is_imaged_not_searched(campaign, camera):
    send(campaign, camera, depth={"limit_mag": 16.5})
    coverage = get_coverage(campaign.pk)
    assert coverage.imaged > 0.0
    assert coverage.searched == 0.0


def test_examining_it_later_counts_the_same(campaign, camera):
    _, frame = send(campaign, camera, depth={"limit_mag": 16.5})
    examine_frame(frame, is_examined=True, examined_way="image by eye", wall_now=NOW)
    later_searched = get_coverage(campaign.pk).searched
    withdraw_frame(frame, wall_now=NOW)
    send(campaign, camera)
    assert get_coverage(campaign.pk).searched == pytest.approx(later_searched, abs=1e-12)


def test_withdrawing_gives_the_numbers_back(campaign, camera):
    _, frame = send(campaign, camera)
    withdraw_frame(frame, wall_now=NOW)
    coverage = get_coverage(campaign.pk)
    assert (coverage.imaged, coverage.searched) == (0.0, 0.0)
    assert not coverage.detected.any()


def test_the_live_ledger_equals_a_rebuild_from_the_rows(campaign, camera, other_camera):
    for index, instrument in enumerate([camera, other_camera, camera, other_camera]):
        values = typed(ra_deg=RA_DEG + index, mid_time=later(minutes=-30 + 7 * index))
        _, frame = send(campaign, instrument, values)
        get_coverage(campaign.pk)
    correct_frame(
        frame.person, frame, changes={"limit_mag": 18.0, "dec_deg": DEC_DEG + 1}, wall_now=NOW
    )
    get_coverage(campaign.pk)
    withdraw_frame(Frame.objects.get(campaign=campaign, number=2), wall_now=NOW)
    live, rebuilt = get_coverage(campaign.pk), rebuilt_coverage(campaign.pk)
    assert live.detected == pytest.approx(rebuilt.detected, abs=1e-6)
    assert live.searched == pytest.approx(rebuilt.searched, abs=1e-6)
    assert live.imaged == pytest.approx(rebuilt.imaged, abs=1e-6)
    assert live.through_seq == rebuilt.through_seq


def test_a_process_that_missed_everything_catches_up_before_it_answers(campaign, camera):
    before = get_coverage(campaign.pk)
    send(campaign, camera)
    campaign.refresh_from_db()
    after = get_coverage(campaign.pk)
    assert after.through_seq == campaign.seq > before.through_seq
    drop_replicas()
    assert get_coverage(campaign.pk).searched == after.searched


def test_a_new_base_drops_the_replica(campaign, camera):
    send(campaign, camera)
    get_coverage(campaign.pk)
    rows = type(campaign).objects.filter(pk=campaign.pk)
    fainter = {"preset": "steady", "parameters": {"magnitude": 19.0, "sigma_mag": 0.5}}
    before = get_coverage(campaign.pk).searched
    rows.update(ledger_base_seq=campaign.seq, source_model=fainter)
    assert get_coverage(campaign.pk).searched < before / 2


def test_history_tells_the_numbers_around_an_event(campaign, camera):
    answer, _ = send(campaign, camera)
    first = get_coverage(campaign.pk).around(answer.body["seq"])
    assert first[2] == 0.0
    second, _ = send(campaign, camera, typed(ra_deg=RA_DEG + 2))
    coverage = get_coverage(campaign.pk)
    imaged, searched, before = coverage.around(second.body["seq"])
    assert before == pytest.approx(first[1])
    assert (imaged, searched) == (coverage.imaged, coverage.searched)
    assert coverage.around(answer.body["seq"]) == first


def test_the_same_frame_twice_is_one_frame(campaign, camera):
    first, _ = send(campaign, camera)
    second, _ = send(campaign, camera)
    assert (first.status, second.status) == (201, 200)
    assert first.body == second.body
    assert Event.objects.filter(campaign=campaign, kind="frame.counted").count() == 1


def test_a_withdrawn_frame_may_be_reported_again(campaign, camera):
    _, frame = send(campaign, camera)
    withdraw_frame(frame, wall_now=NOW)
    again, _ = send(campaign, camera)
    assert (again.status, again.body["number"]) == (201, 2)


def test_a_frame_meets_its_claim(campaign, camera):
    tile = tile_at(campaign)
    claim = _claimed(campaign, camera, tile)
    send(campaign, camera, typed(ra_deg=tile.ra_deg, dec_deg=tile.dec_deg), claim=claim)
    claim.refresh_from_db()
    assert claim.state == "met"
    kinds = list(Event.objects.filter(campaign=campaign).values_list("kind", flat=True))
    assert kinds[-2:] == ["frame.counted", "claim.met"]


def test_a_frame_of_the_claimed_tile_meets_it_without_being_told(campaign, camera):
    tile = tile_at(campaign)
    claim = _claimed(campaign, camera, tile)
    answer, _ = send(campaign, camera, typed(ra_deg=tile.ra_deg + 0.1, dec_deg=tile.dec_deg))
    claim.refresh_from_db()
    assert claim.state == "met"
    assert answer.body["frame"]["tile"] == tile.number


def test_a_frame_elsewhere_leaves_the_claim_held(campaign, camera):
    claim = _claimed(campaign, camera, tile_at(campaign))
    send(campaign, camera, typed(dec_deg=DEC_DEG + 5))
    claim.refresh_from_db()
    assert claim.state == "held"


@pytest.mark.parametrize(
    ("values", "field", "words"),
    [
        ({"mid_time": later(hours=1)}, "mid_time", "in the future"),
        ({"mid_time": EVENT_TIME - timedelta(days=3)}, "mid_time", "before the event"),
        ({"duration_s": 300_000.0}, "duration_s", "milliseconds"),
        ({"duration_s": 0.0}, "duration_s", "above 0"),
        ({"band": "much too long a band"}, "band", "12 letters"),
    ],
)
def test_impossible_values_are_named(campaign, camera, values, field, words):
    with pytest.raises(InvalidInput, match=words) as refusal:
        send(campaign, camera, typed(**values))
    assert [problem.field for problem in refusal.value.problems] == [field]
    assert not Frame.objects.exists()


@pytest.mark.parametrize("values", [{"ra_deg": 400.0}, {"dec_deg": -91.0}, {"dec_deg": 1e9}])
def test_impossible_coordinates_are_refused(campaign, camera, values):
    with pytest.raises((CampaignError, ValueError)) as refusal:
        send(campaign, camera, typed(**values))
    assert "deg" in str(refusal.value)
    assert not Frame.objects.exists()


def test_a_limit_outside_of_reason_is_refused(campaign, camera):
    with pytest.raises(InvalidInput, match="limiting magnitude"):
        send(campaign, camera, depth={"limit_mag": 165.0})


def test_a_field_below_the_horizon_names_the_shifts_that_fit(campaign, camera):
    # 12 hours off: the field is then below the northern horizon of the site.
    low = typed(dec_deg=DEC_DEG - 10, mid_time=later(hours=-12))
    with pytest.raises(InvalidInput, match="below the horizon") as refusal:
        send(campaign, camera, low)
    # NOW, when the field is high; an hour later would be the future.
    assert max(refusal.value.extras["fitting_shifts_h"]) == 12


def test_no_shift_leads_into_the_future_or_long_before_the_event(campaign, camera):
    low = typed(dec_deg=DEC_DEG - 10, mid_time=later(hours=-9))
    with pytest.raises(InvalidInput, match="below the horizon") as refusal:
        send(campaign, camera, low)
    shifts_h = refusal.value.extras["fitting_shifts_h"]
    assert len(shifts_h) > 3
    for shift_h in shifts_h:
        shifted = low["mid_time"] + timedelta(hours=shift_h)
        assert EVENT_TIME - timedelta(days=1) <= shifted <= NOW
        send(campaign, camera, low | {"mid_time": shifted})


def test_a_closed_campaign_takes_no_report(campaign, camera):
    close_campaign(campaign, wall_now=NOW)
    with pytest.raises(CampaignClosed):
        send(campaign, camera)


def test_an_unknown_camera_angle_counts_only_what_is_inside_at_any_angle(campaign, camera):
    camera.rotation_deg = None
    _, frame = send(campaign, camera)
    assert frame.footprint["shape"] == "circle"
    assert frame.footprint["diameter_deg"] == min(camera.width_deg, camera.height_deg)


def _claimed(campaign, camera, tile):
    answer = claim_tile(
        camera.owner,
        campaign,
        tile_number=tile.number,
        instrument=camera,
        starts_at=None,
        wall_now=NOW,
    )
    return Claim.objects.select_related("tile").get(pk=answer.body["id"])
