"""The main job through the HTTP API, every answer held against /api/schema/."""

import base64
import json
import uuid

import numpy as np
import pytest
from django.core.files.uploadedfile import SimpleUploadedFile
from django.test import Client
from drf_spectacular.generators import SchemaGenerator
from jsonschema import Draft202012Validator
from referencing import Registry, Resource
from referencing.jsonschema import DRAFT202012

from campaigns.actions.make_plan import make_plan
from campaigns.models import Campaign
from observers.models import Role
from tests.campaigns import stage

pytestmark = pytest.mark.django_db


class Api:
    """A signed-in client that holds every answer against the schema."""

    def __init__(self, person, schema):
        self.client = Client()
        self.schema = schema
        if person is not None:
            self.client.force_login(person)

    def get(self, path, *, status=200, **headers):
        return self._checked(
            "get", path, self.client.get(f"/api/v1/{path}", headers=headers), status
        )

    def post(self, path, body=None, *, status=201, key=None):
        headers = {"Idempotency-Key": key} if key else {}
        answer = self.client.post(
            f"/api/v1/{path}", body or {}, content_type="application/json", headers=headers
        )
        return self._checked("post", path, answer, status)

    def patch(self, path, body, *, status=200):
        answer = self.client.patch(f"/api/v1/{path}", body, content_type="application/json")
        return self._checked("patch", path, answer, status)

    def _checked(self, method, path, answer, status):
        assert answer.status_code == status, answer.content[:500]
        if status == 304:
            return None
        described = _operation(self.schema, method, path)["responses"]
        kind = answer["Content-Type"].split(";")[0]
        shape = described.get(str(status), described["default"])["content"][kind]["schema"]
        if status >= 400:
            assert kind == "application/problem+json"
        body = json.loads(answer.content)
        _validator(self.schema, shape).validate(body)
        return body


def _operation(schema, method, path):
    wanted = f"/api/v1/{path.split('?')[0]}".split("/")
    for template, operations in schema["paths"].items():
        parts = template.split("/")
        if len(parts) == len(wanted) and method in operations:
            pairs = zip(parts, wanted, strict=True)
            if all(part == word or part.startswith("{") for part, word in pairs):
                return operations[method]
    raise AssertionError(f"{method} {path} is not in the schema")


def _validator(schema, shape):
    resource = Resource(contents=schema, specification=DRAFT202012)
    registry = Registry().with_resource("urn:api", resource)
    absolute = json.loads(json.dumps(shape).replace('"#/', '"urn:api#/'))
    return Draft202012Validator(absolute, registry=registry)


@pytest.fixture(scope="module")
def schema():
    return json.loads(json.dumps(SchemaGenerator().get_schema(request=None, public=True)))


@pytest.fixture
def coordinator_api(coordinator, schema):
    return Api(coordinator, schema)


@pytest.fixture
def observer_api(camera, schema):
    return Api(camera.owner, schema)


@pytest.fixture
def rehearsal(coordinator_api, camera, other_camera):
    """A rehearsal whose clock stands at NOW."""
    answer = coordinator_api.post(
        "campaigns",
        {
            "alert": stage.cone_alert(),
            "title": "Rehearsed burst",
            "is_rehearsal": True,
            "clock_now": stage.NOW.isoformat(),
        },
    )
    return answer["campaign"]


def test_the_main_job(coordinator_api, observer_api, rehearsal, camera, schema):
    home = f"campaigns/{rehearsal}"
    before = observer_api.get(home)
    assert before["state"]["campaign"]["status"] == "live"
    assert before["now"] == "2024-03-14T21:00:00Z"

    assert coordinator_api.post(f"{home}/plan", status=202)["due_seq"] == before["seq"]
    make_plan(rehearsal, wall_now=stage.NOW)
    observer_api.post(f"{home}/status", {"status": "in"}, status=200)

    tonight = observer_api.get(f"{home}/tonight?instrument={camera.pk}")
    assert tonight["offers"]
    best = tonight["best"]
    assert str(best["tile"]) in tonight["curves"]
    assert observer_api.get(f"{home}/best-tile?instrument={camera.pk}")["best"] == best

    claim = observer_api.post(
        f"{home}/claims",
        {"tile": best["tile"], "instrument": camera.pk, "starts_at": best["starts_at"]},
    )
    extended = observer_api.post(f"{home}/claims/{claim['id']}/extend", status=200)
    assert extended["until"] > claim["until"]
    coordinator_api.post(f"{home}/clock", {"now": "2024-03-14T21:30:00Z"}, status=200)
    frame = observer_api.post(
        f"{home}/frames",
        {
            "instrument": camera.pk,
            "claim": claim["id"],
            "ra_deg": best["ra_deg"],
            "dec_deg": best["dec_deg"],
            "mid_time": "2024-03-14T21:20:00Z",
            "duration_s": 300,
            "limit_mag": 16.5,
        },
    )
    assert frame["imaged"] > 0
    assert frame["searched"] == 0
    examined = observer_api.post(
        f"{home}/frames/{frame['number']}/examine", {"examined_way": "image by eye"}, status=200
    )
    assert examined["searched"] > examined["searched_before"] == 0

    coverage = observer_api.get(f"{home}/coverage")
    assert coverage["searched"] == examined["searched"]
    region = observer_api.get(f"{home}/region")
    detected = np.frombuffer(base64.b64decode(coverage["detected_b64"]), "u1")
    pixels = np.frombuffer(base64.b64decode(region["pixels_b64"]), "<u4")
    assert len(detected) == len(pixels)
    assert detected.max() > 0

    news = observer_api.get(f"{home}/events?since={before['seq']}")
    assert [event["kind"] for event in news["events"]] == [
        "plan.made",
        "observer.status",
        "claim.held",
        "claim.extended",
        "frame.counted",
        "claim.met",
        "frame.examined",
    ]
    observer_api.post(f"{home}/frames/{frame['number']}/correct", {"limit_mag": 15.0}, status=200)
    gone = observer_api.post(f"{home}/frames/{frame['number']}/withdraw", status=200)
    assert gone["imaged"] == 0
    assert len(observer_api.get(f"{home}/darkness?hours=12")) == 2
    coordinator_api.post(f"{home}/close", status=200)
    problem = observer_api.post(
        f"{home}/claims", {"tile": best["tile"], "instrument": camera.pk}, status=409
    )
    assert problem["code"] == "campaign-closed"


def test_gear_is_registered_and_tiles_are_laid_while_a_campaign_is_open(
    observer_api, rehearsal, camera
):
    before = observer_api.get(f"campaigns/{rehearsal}")["state"]
    site = observer_api.post(
        "sites", {"name": "hill", "latitude_deg": 47.4567, "longitude_deg": 10.9876}
    )
    instrument = observer_api.post(
        "instruments", {"site": site["id"], "name": "wide lens", **stage.EYEPIECE}
    )
    after = observer_api.get(f"campaigns/{rehearsal}")["state"]
    assert len(after["tiles"]) > len(before["tiles"])
    shown = after["observers"][str(camera.owner_id)]
    assert [one["name"] for one in shown["instruments"]] == ["camera", "wide lens"]
    # Rounded for everybody: a site is somebody's home.
    assert [one["latitude_deg"] for one in shown["sites"]] == [48.1, 47.5]
    observer_api.patch(f"instruments/{instrument['id']}", {"is_in_use": False})
    state = observer_api.get(f"campaigns/{rehearsal}")["state"]
    assert len(state["observers"][str(camera.owner_id)]["instruments"]) == 1
    assert observer_api.get("sites")[1]["latitude_deg"] == 47.4567


def test_a_region_is_described_before_anything_is_made(coordinator_api, camera):
    answer = coordinator_api.post("region", stage.cone_alert(), status=200)
    assert answer["upload"] is None
    assert answer["alert"]["event_time"] == "2024-03-14T20:00:00Z"
    sums = np.frombuffer(base64.b64decode(answer["map"]["probabilities_b64"]), "<f4")
    assert sums.sum() == pytest.approx(1.0 - answer["region"]["outside"], abs=1e-5)
    assert not Campaign.objects.exists()


def test_a_test_alert_becomes_only_a_rehearsal(coordinator_api, camera):
    wish = {"alert": stage.cone_alert(role="test"), "title": "Practice"}
    problem = coordinator_api.post("campaigns", wish, status=422)
    assert problem["code"] == "test-alert"
    assert "rehearsal" in problem["advice"]
    coordinator_api.post("campaigns", {**wish, "is_rehearsal": True})


def test_a_repeated_launch_makes_one_campaign(coordinator_api, camera):
    key = str(uuid.uuid4())
    wish = {"alert": stage.cone_alert(), "title": "Once"}
    first = coordinator_api.post("campaigns", wish, key=key)
    assert coordinator_api.post("campaigns", wish, key=key) == first
    assert Campaign.objects.count() == 1
    other = coordinator_api.post("campaigns", {**wish, "title": "Twice"}, key=key, status=422)
    assert other["code"] == "key-used-otherwise"


def test_the_state_is_not_sent_again_while_nothing_happens(observer_api, rehearsal):
    answer = observer_api.client.get(f"/api/v1/campaigns/{rehearsal}")
    tag = answer["ETag"]
    observer_api.get(f"campaigns/{rehearsal}", status=304, **{"If-None-Match": tag})
    observer_api.post(f"campaigns/{rehearsal}/status", {"status": "in"}, status=200)
    observer_api.get(f"campaigns/{rehearsal}", **{"If-None-Match": tag})


def test_whoever_is_far_behind_or_ahead_asks_again(observer_api, rehearsal):
    assert observer_api.get(f"campaigns/{rehearsal}/events?since=99999")["ask_again"] is True


@pytest.mark.parametrize("query", ["", "?since=", "?since=-1", "?since=x", "?since=1e3"])
def test_a_bad_since_is_a_problem(observer_api, rehearsal, query):
    assert observer_api.get(f"campaigns/{rehearsal}/events{query}", status=400)["code"] == "invalid"


def test_an_onlooker_watches_a_public_campaign_and_changes_nothing(
    coordinator, camera, schema, coordinator_api
):
    public = stage.launch(coordinator, is_public=True, wall_now=stage.NOW)
    nobody = Api(None, schema)
    home = f"campaigns/{public.pk}"
    for path in (home, f"{home}/events?since=0", f"{home}/coverage", f"{home}/region"):
        nobody.get(path)
    assert [one["id"] for one in nobody.get("campaigns")] == [public.pk]
    nobody.post(f"{home}/claims", {"tile": 1, "instrument": camera.pk}, status=401)
    onlooker = Api(stage.make_person("Onlooker Oz", Role.ONLOOKER), schema)
    onlooker.post(f"{home}/status", {"status": "in"}, status=403)


def test_what_may_not_be_seen_does_not_exist(coordinator, camera, schema, observer_api):
    private = stage.launch(coordinator)
    Api(None, schema).get(f"campaigns/{private.pk}", status=404)
    draft = stage.launch(coordinator, is_draft=True, title="Another one")
    observer_api.get(f"campaigns/{draft.pk}", status=404)


def test_only_owner_and_coordinators_see_an_exact_place(
    camera, other_camera, schema, coordinator_api, rehearsal
):
    stranger = Api(other_camera.owner, schema)
    stranger.patch(f"sites/{camera.site_id}", {"height_m": 5}, status=404)
    for path in (
        "",
        "/events?since=0",
        "/coverage",
        "/darkness",
        f"/tonight?instrument={other_camera.pk}",
    ):
        answer = stranger.client.get(f"/api/v1/campaigns/{rehearsal}{path}")
        assert answer.status_code == 200
        assert b"48.12" not in answer.content
        assert b"11.56" not in answer.content
    assert coordinator_api.patch(f"sites/{camera.site_id}", {"height_m": 5})["height_m"] == 5


def test_a_misspelt_field_is_refused_by_name(observer_api, rehearsal, camera):
    body = {"tile": 1, "instrument": camera.pk, "start_at": "2024-03-14T21:00:00Z"}
    problem = observer_api.post(f"campaigns/{rehearsal}/claims", body, status=400)
    assert problem["errors"] == [{"field": "start_at", "detail": "There is no such field."}]


def test_a_clock_never_goes_back_and_only_in_rehearsals(coordinator, coordinator_api, rehearsal):
    back = {"now": "2024-03-14T20:59:00Z"}
    coordinator_api.post(f"campaigns/{rehearsal}/clock", back, status=409)
    real = stage.launch(coordinator, title="A real one")
    coordinator_api.post(f"campaigns/{real.pk}/clock", back, status=409)


def test_an_event_in_the_future_is_refused(coordinator_api, camera):
    wish = {"alert": stage.cone_alert(event_time=stage.later(days=36500)), "title": "Too early"}
    problem = coordinator_api.post("campaigns", wish, status=400)
    assert problem["code"] == "bad-alert"
    assert not Campaign.objects.exists()


@pytest.mark.parametrize("path", ["campaigns/{}", "campaigns/{}/events?since=0", "campaigns"])
def test_list_pages_keep_a_ceiling_of_queries(
    observer_api, rehearsal, path, django_assert_max_num_queries, coordinator
):
    for number in range(8):
        stage.make_observer(f"Observer {number}")
    stage.launch(coordinator, title="One more")
    with django_assert_max_num_queries(16):
        observer_api.client.get(f"/api/v1/{path.format(rehearsal)}")


def test_an_uploaded_alert_file_is_launched_by_its_hash(coordinator_api, camera, uploads, settings):
    answer = _upload(coordinator_api, json.dumps(stage.cone_alert()).encode())
    assert answer.status_code == 200
    sha256 = answer.json()["upload"]
    assert [path.name for path in settings.UPLOADS.iterdir()] == [sha256]
    coordinator_api.post("campaigns", {"upload": sha256, "title": "From a file"})


@pytest.mark.parametrize("content", [b"", b"SIMPLE  = T", b"{}", b"\x1f\x8b\x00", b"not an alert"])
def test_a_damaged_upload_is_a_problem_and_is_not_kept(coordinator_api, settings, content):
    answer = _upload(coordinator_api, content)
    assert 400 <= answer.status_code < 500
    assert answer.json()["advice"]
    assert not settings.UPLOADS.exists() or not list(settings.UPLOADS.iterdir())


@pytest.mark.parametrize("sha256", ["0" * 64, "../../etc/passwd", "x"])
def test_an_unknown_upload_is_not_found(coordinator_api, sha256):
    body = {"upload": sha256, "title": "From nothing"}
    assert coordinator_api.post("campaigns", body, status=404)["code"] == "not-found"


def _upload(api, content):
    file = SimpleUploadedFile("alert.json", content)
    return api.client.post("/api/v1/region", {"file": file})
