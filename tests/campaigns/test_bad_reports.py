"""Frames and claims that cannot be: a clear problem, the same on every retry, nothing written."""

import uuid

import pytest
from rest_framework.test import APIClient

from campaigns.actions.close_campaign import close_campaign
from campaigns.models import Claim, Frame, IdempotencyKey, Membership
from tests.campaigns import stage
from tests.campaigns.nothing_written import check_problem, nothing_written

pytestmark = pytest.mark.django_db

SOLVED = {
    "NAXIS1": 2400,
    "NAXIS2": 1600,
    "CTYPE1": "RA---TAN",
    "CTYPE2": "DEC--TAN",
    "CRVAL1": stage.RA_DEG,
    "CRVAL2": stage.DEC_DEG,
    "CRPIX1": 1200.5,
    "CRPIX2": 800.5,
    "CD1_1": -0.001,
    "CD2_2": 0.001,
    "DATE-OBS": "2024-03-14T20:50:00",
    "EXPTIME": 120.0,
}
POINTED = {
    "OBJCTRA": "09 20 00",
    "OBJCTDEC": "+30 00 00",
    "DATE-OBS": "2024-03-14T20:50:00",
    "EXPTIME": 120.0,
}
TYPED = {
    "ra_deg": stage.RA_DEG,
    "dec_deg": stage.DEC_DEG,
    "mid_time": "2024-03-14T20:55:00Z",
    "duration_s": 300.0,
}


def without(fields, *names):
    return {name: value for name, value in fields.items() if name not in names}


@pytest.fixture
def campaign(coordinator, camera, other_camera):
    """A rehearsal whose clock stands at NOW; the two observers are members."""
    return stage.launch(coordinator, is_rehearsal=True, clock_now=stage.NOW)


@pytest.fixture
def newcomer(campaign):
    """The camera of somebody who is no member yet."""
    return stage.make_observer("Observer Cyd")


def post(camera, campaign, path, body, *, key):
    client = APIClient()
    client.force_authenticate(camera.owner)
    return client.post(
        f"/api/v1/campaigns/{campaign.pk}/{path}",
        {"instrument": camera.pk, **body},
        format="json",
        headers={"Idempotency-Key": key},
    )


def refused(camera, campaign, path, body, *, status, key):
    """The problem, heard twice under the same key; nothing may be written."""
    with nothing_written():
        answers = [post(camera, campaign, path, body, key=key) for _ in range(2)]
    for answer in answers:
        assert answer.status_code == status, answer.content
        assert answer["Content-Type"] == "application/problem+json"
        assert "Idempotency-Replayed" not in answer
    first, second = (answer.json() for answer in answers)
    assert first == second
    return first


# The body, the code, words of the detail, words of the advice, the field that is named.
BAD_HEADERS = {
    "without position": (without(POINTED, "OBJCTDEC"), "no position", "type the position"),
    "impossible declination": (
        POINTED | {"OBJCTDEC": "-99 00 00"},
        "declination -99.*-90 to 90",
        "Type the position by hand",
    ),
    "impossible right ascension": (
        POINTED | {"OBJCTRA": "25 00 00"},
        "right ascension 375",
        "Type the position by hand",
    ),
    "impossible plate solution": (SOLVED | {"CRVAL2": 99.0}, "Dec 99", "Solve the frame again"),
    "exposure in ms": (SOLVED | {"EXPTIME": 120_000.0}, "milliseconds", "if it was 120 s|120 s"),
    "exposure in ms by two cards": (
        SOLVED | {"EXPTIME": 5000.0, "EXPOSURE": 5.0},
        "milliseconds",
        "type the exposure",
    ),
    "without date": (without(SOLVED, "DATE-OBS"), "date and time", "in UTC by hand"),
    "without exposure": (without(SOLVED, "EXPTIME"), "no EXPTIME", "Type the exposure"),
    "of something else": ({"COMMENT": "a flat", "NAXIS": 2}, "no EXPTIME", "Type the exposure"),
}
BAD_TYPED = {
    "without position": (without(TYPED, "ra_deg"), "position", "ra_deg"),
    "impossible right ascension": (TYPED | {"ra_deg": 400.0}, "0 to 360", "ra_deg"),
    "impossible declination": (TYPED | {"dec_deg": -91.0}, "-90 to 90", "dec_deg"),
    "date in the future": (
        TYPED | {"mid_time": "2024-03-14T22:00:00Z"},
        "1 h 0 min in the future. Is it local time",
        "mid_time",
    ),
    "header of the future": (
        {"header": SOLVED | {"DATE-OBS": "2024-03-14T21:59:00"}},
        "1 h 0 min in the future",
        "mid_time",
    ),
    "of another year": (TYPED | {"mid_time": "2023-03-14T20:55:00Z"}, "a day before", "mid_time"),
    "exposure in ms": (TYPED | {"duration_s": 300_000.0}, "milliseconds", "duration_s"),
    "exposure in ms beside a header": (
        {"header": SOLVED, "duration_s": 300_000.0},
        "milliseconds",
        "duration_s",
    ),
    "a misspelt field": (TYPED | {"exposure": 3.0}, "no such field", "exposure"),
    "words for a number": (TYPED | {"duration_s": "long"}, "valid number", "duration_s"),
    "a bare date": (TYPED | {"mid_time": "tomorrow"}, "wrong format", "mid_time"),
}


@pytest.mark.parametrize("case", BAD_HEADERS)
def test_a_bad_header_is_refused(campaign, newcomer, case):
    header, detail, advice = BAD_HEADERS[case]
    key = str(uuid.uuid4())
    problem = refused(newcomer, campaign, "frames", {"header": header}, status=400, key=key)
    words = f"^The header of the frame cannot be used: .*{detail}"
    check_problem(problem, code="bad-header", detail=words, advice=advice)


@pytest.mark.parametrize("case", BAD_TYPED)
def test_bad_values_are_refused_and_named(campaign, newcomer, case):
    body, detail, field = BAD_TYPED[case]
    key = str(uuid.uuid4())
    problem = refused(newcomer, campaign, "frames", body, status=400, key=key)
    check_problem(problem, code="invalid", detail=detail, advice="named|Correct the fields")
    assert [one["field"] for one in problem["errors"]] == [field]


@pytest.mark.parametrize("body", [TYPED, {"header": SOLVED}], ids=["typed", "header"])
def test_after_a_refusal_the_key_is_free_for_the_corrected_frame(campaign, newcomer, body):
    key = str(uuid.uuid4())
    bad = {**body, "duration_s": 300_000.0}
    refused(newcomer, campaign, "frames", bad, status=400, key=key)
    assert post(newcomer, campaign, "frames", body, key=key).status_code == 201
    # So that the tests above would see what a frame writes.
    assert Frame.objects.count() == IdempotencyKey.objects.count() == 1
    assert Membership.objects.filter(person=newcomer.owner).exists()


def test_a_field_below_the_horizon_is_refused_with_the_shifts_that_fit(campaign, newcomer):
    low = TYPED | {"dec_deg": stage.DEC_DEG - 10, "mid_time": "2024-03-14T09:00:00Z"}
    problem = refused(newcomer, campaign, "frames", low, status=422, key=str(uuid.uuid4()))
    check_problem(problem, code="field-was-down", detail="below the horizon", advice="UTC")


@pytest.mark.parametrize("who", ["camera", "newcomer"])
@pytest.mark.parametrize("path", ["frames", "claims"])
def test_a_closed_campaign_takes_neither_frames_nor_claims(campaign, request, who, path):
    instrument = request.getfixturevalue(who)
    close_campaign(campaign, wall_now=stage.NOW)
    body = TYPED if path == "frames" else {"tile": stage.tile_at(campaign).number}
    problem = refused(instrument, campaign, path, body, status=409, key=str(uuid.uuid4()))
    check_problem(problem, code="campaign-closed", detail="closed", advice="list of campaigns")


@pytest.mark.parametrize("who", ["other_camera", "newcomer"])
def test_a_taken_tile_is_refused_with_an_alternative(campaign, camera, request, who):
    instrument = request.getfixturevalue(who)
    tile = {"tile": stage.tile_at(campaign).number}
    held = post(camera, campaign, "claims", tile, key=str(uuid.uuid4()))
    assert held.status_code == 201
    key = str(uuid.uuid4())
    problem = refused(instrument, campaign, "claims", tile, status=409, key=key)
    words = f"Tile {tile['tile']} is held by somebody else"
    check_problem(problem, code="tile-taken", detail=words, advice="Take the alternative")
    assert problem["alternative"]["tile"] != tile["tile"]
    # The key is free: the same request is carried out once the tile is given back.
    path = f"claims/{held.json()['id']}/release"
    assert post(camera, campaign, path, {}, key=key).status_code == 200
    assert post(instrument, campaign, "claims", tile, key=key).status_code == 201
    assert Claim.objects.filter(person=instrument.owner).count() == 1
    assert Membership.objects.filter(person=instrument.owner).exists()


@pytest.mark.parametrize(
    ("body", "status", "code", "detail", "advice"),
    [
        ({"tile": 99999}, 404, "not-found", "no tile 99999", "Board"),
        ({"tile": 0}, 400, "invalid", "greater than or equal to 1", "Correct the fields"),
        ({"starts_at": "2024-03-14T19:00:00Z"}, 400, "invalid", "past", "next two hours"),
        ({"starts_at": "2024-03-15T21:00:00Z"}, 400, "invalid", "2 hours", "next two hours"),
    ],
)
def test_a_claim_that_cannot_be_is_refused(campaign, newcomer, body, status, code, detail, advice):
    asked = {"tile": stage.tile_at(campaign).number, **body}
    problem = refused(newcomer, campaign, "claims", asked, status=status, key=str(uuid.uuid4()))
    check_problem(problem, code=code, detail=detail, advice=advice)


def test_a_key_that_is_no_uuid_is_refused(campaign, newcomer):
    problem = refused(newcomer, campaign, "frames", TYPED, status=400, key="again")
    check_problem(problem, code="invalid", detail="no UUID", advice="random UUID")
