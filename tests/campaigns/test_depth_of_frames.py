"""The limit of a frame: from one star, by our estimate; a mosaic is one frame."""

import json

import pytest
from django.test import Client

from campaigns.ledger_replica import get_coverage
from campaigns.models import Frame
from tests.campaigns.stage import DEC_DEG, RA_DEG, later, make_instrument

pytestmark = pytest.mark.django_db


@pytest.fixture(autouse=True)
def _at_night(monkeypatch):
    monkeypatch.setattr("django.utils.timezone.now", later)


class Api:
    def __init__(self, person):
        self.client = Client()
        self.client.force_login(person)

    def post(self, path, body):
        return self._read(
            self.client.post(f"/api/v1/{path}", body, content_type="application/json")
        )

    def get(self, path, **query):
        return self._read(self.client.get(f"/api/v1/{path}", query))

    def _read(self, answer):
        return answer.status_code, json.loads(answer.content)


@pytest.fixture
def api(camera):
    return Api(camera.owner)


def frame(camera, **values):
    return {
        "instrument": camera.pk,
        "ra_deg": RA_DEG,
        "dec_deg": DEC_DEG,
        "mid_time": later(minutes=-5).isoformat(),
        "duration_s": 300.0,
        "is_examined": True,
        "examined_way": "image by eye",
        **values,
    }


def report(api, campaign, body):
    return api.post(f"campaigns/{campaign.pk}/frames", body)


def test_one_star_makes_a_five_sigma_limit(api, campaign, camera):
    # A star of 12.0 at a ratio of 50: 12.0 + 2.5 log10(10).
    status, answer = report(api, campaign, frame(camera, star_mag=12.0, star_snr=50.0))
    assert status == 201
    assert answer["frame"]["limit_mag"] == pytest.approx(14.5)
    assert answer["frame"]["limit_kind"] == "5 sigma"
    assert answer["searched"] > 0.0


@pytest.mark.parametrize(
    ("values", "field"),
    [
        ({"star_mag": 12.0}, "star_snr"),
        ({"star_snr": 50.0}, "star_mag"),
        ({"star_mag": 12.0, "star_snr": 0.0}, "star_snr"),
        ({"star_mag": 12.0, "star_snr": 50.0, "limit_mag": 15.0}, "limit_mag"),
    ],
)
def test_half_a_star_or_two_limits_are_refused(api, campaign, camera, values, field):
    status, answer = report(api, campaign, frame(camera, **values))
    assert status == 400
    assert [error["field"] for error in answer["errors"]] == [field]
    assert not Frame.objects.exists()


def test_a_correction_may_name_a_star_too(api, campaign, camera):
    _, first = report(api, campaign, frame(camera, limit_mag=16.0))
    path = f"campaigns/{campaign.pk}/frames/{first['number']}/correct"
    status, answer = api.post(path, {"star_mag": 13.0, "star_snr": 5.0})
    assert status == 200
    assert answer["frame"]["limit_mag"] == pytest.approx(13.0)


def test_where_only_the_exposure_is_known_the_limit_is_marked_as_our_estimate(
    api, campaign, camera
):
    status, answer = report(api, campaign, frame(camera, limit_kind="estimate"))
    assert status == 201
    assert answer["frame"]["limit_kind"] == "estimate"
    assert 15.0 < answer["frame"]["limit_mag"] < 21.0
    # Half a magnitude of caution: the ledger's rule for estimates.
    assert answer["frame"]["m_eff"] == pytest.approx(answer["frame"]["limit_mag"] - 0.5)
    assert any("our estimate" in note for note in answer["notes"])


def test_an_estimate_is_not_made_of_a_field_that_was_down(api, campaign, camera):
    status, answer = report(api, campaign, frame(camera, limit_kind="estimate", dec_deg=-70.0))
    assert status == 422
    assert answer["code"] == "field-was-down"


def test_an_estimate_says_how_sure_it_is_and_what_it_assumed(api, camera, other_camera):
    query = {
        "ra_deg": RA_DEG,
        "dec_deg": DEC_DEG,
        "mid_time": later().isoformat(),
        "duration_s": 300,
    }
    status, answer = api.get(f"instruments/{camera.pk}/depth-estimate", **query)
    assert status == 200
    assert answer["limit_kind"] == "estimate"
    assert 0.1 < answer["uncertainty_mag"] < 1.5
    assert answer["saturation_mag"] < answer["limit_mag"]
    assert answer["assumptions"]
    others = api.get(f"instruments/{other_camera.pk}/depth-estimate", **query)
    assert others[0] == 404


@pytest.mark.parametrize("missing", ["ra_deg", "mid_time", "duration_s"])
def test_a_question_without_its_numbers_is_refused(api, camera, missing):
    query = {"ra_deg": 10, "dec_deg": 10, "mid_time": later().isoformat(), "duration_s": 60}
    del query[missing]
    status, answer = api.get(f"instruments/{camera.pk}/depth-estimate", **query)
    assert status == 400
    assert [error["field"] for error in answer["errors"]] == [missing]


# A mosaic.


def picture(ra_deg, dec_deg):
    step_deg = 2e-4
    return {
        "NAXIS1": 1000,
        "NAXIS2": 1000,
        "CTYPE1": "RA---TAN",
        "CTYPE2": "DEC--TAN",
        "CRPIX1": 500.5,
        "CRPIX2": 500.5,
        "CRVAL1": ra_deg,
        "CRVAL2": dec_deg,
        "CD1_1": -step_deg,
        "CD1_2": 0.0,
        "CD2_1": 0.0,
        "CD2_2": step_deg,
        "OBSERVER": "somebody's name",
    }


def test_a_mosaic_is_one_frame_and_one_look(api, campaign, camera):
    places = [(RA_DEG + right, DEC_DEG + up) for right in (-0.3, 0.3) for up in (-0.2, 0.2)]
    pictures = [picture(*place) for place in places]
    head = {"DATE-OBS": later(minutes=-10).isoformat()[:19], "EXPTIME": 300.0, "FILTER": "r"}
    body = {
        "instrument": camera.pk,
        "header": head,
        "pictures": pictures,
        "limit_mag": 17.0,
        "is_examined": True,
        "examined_way": "image by eye",
    }
    status, answer = report(api, campaign, body)
    assert status == 201
    assert answer["frame"]["footprint"]["shape"] == "mosaic"
    assert len(answer["frame"]["footprint"]["parts"]) == 4
    assert answer["searched"] > 0.0
    (kept,) = Frame.objects.all()
    assert (kept.ra_deg, kept.dec_deg) == pytest.approx((RA_DEG, DEC_DEG), abs=0.01)
    assert "somebody" not in json.dumps(kept.header)
    alone = report(
        api, campaign, body | {"header": {**head, **picture(*places[0])}, "pictures": []}
    )
    # A second look at a quarter of the same pixels: nothing new is imaged.
    assert alone[1]["imaged"] == pytest.approx(answer["imaged"])
    assert get_coverage(campaign.pk).searched >= answer["searched"]


def test_the_magnification_of_an_eyepiece_changes_the_estimate(api, camera):
    site = camera.site
    found = []
    for power in (20.0, 150.0):
        scope = make_instrument(
            site, f"x{power}", kind="eyepiece", shape="circle", height_deg=2.4, magnification=power
        )
        query = {
            "ra_deg": RA_DEG,
            "dec_deg": DEC_DEG,
            "mid_time": later().isoformat(),
            "duration_s": 60,
        }
        found.append(api.get(f"instruments/{scope.pk}/depth-estimate", **query)[1]["limit_mag"])
    assert found[1] > found[0] + 0.3
