"""The region of a campaign through the HTTP API, every answer held against /api/schema/."""

import json
import uuid

import pytest
from django.core.files.uploadedfile import SimpleUploadedFile
from drf_spectacular.generators import SchemaGenerator

from campaigns.models import RegionRevision
from campaigns.rules.combination import revision_problems
from tests.campaigns import stage
from tests.campaigns.test_api_main_path import Api

pytestmark = pytest.mark.django_db


@pytest.fixture(scope="module")
def schema():
    return json.loads(json.dumps(SchemaGenerator().get_schema(request=None, public=True)))


@pytest.fixture
def coordinator_api(coordinator, schema):
    return Api(coordinator, schema)


@pytest.fixture
def path(campaign):
    return f"campaigns/{campaign.pk}/region"


def cone(dec_deg=stage.DEC_DEG + 1.0):
    return stage.cone_alert(radius_deg=2.0)["constraints"][0] | {"dec_deg": dec_deg}


def add(api, path, **more):
    return api.post(path, {"way": "add", "constraints": [cone()], **more})


def test_a_constraint_from_an_uploaded_file(coordinator_api, path):
    file = SimpleUploadedFile("second.json", json.dumps(stage.cone_alert(radius_deg=2.0)).encode())
    looked = coordinator_api.client.post("/api/v1/region", {"file": file}).json()
    body = {"way": "add", "upload": looked["upload"], "filename": "second.json"}
    answer = coordinator_api.post(path, body)
    assert answer["revision"] == 2
    assert answer["area_deg2"]["90"] < answer["area_before_deg2"]["90"]
    history = coordinator_api.get(f"{path}/revisions")
    assert [one["number"] for one in history["constraints"]] == [1, 2]
    assert history["constraints"][1]["label"] == "invented-1"
    assert coordinator_api.get(path)["revision"] == 2
    assert coordinator_api.get(path.replace("/region", "/coverage"))["revision"] == 2


def test_switch_replace_and_retract(coordinator_api, path):
    add(coordinator_api, path)
    off = coordinator_api.post(path, {"way": "switch", "constraint": 1, "is_on": False})
    assert off["said"].startswith("Constraint 1 (cone) switched off.")
    replaced = {"way": "replace", "constraint": 2, "constraints": [cone(stage.DEC_DEG)]}
    assert coordinator_api.post(path, replaced)["revision"] == 4
    coordinator_api.post(path, {"way": "switch", "constraint": 1, "is_on": True})
    assert coordinator_api.post(path, {"way": "retract", "constraint": 3})["revision"] == 6


def test_a_key_makes_one_revision_and_another_body_is_refused(coordinator_api, path):
    key = str(uuid.uuid4())
    body = {"way": "add", "constraints": [cone()]}
    first = coordinator_api.post(path, body, key=key)
    assert coordinator_api.post(path, body, key=key) == first
    other = {"way": "add", "constraints": [cone(0.0)]}
    assert coordinator_api.post(path, other, key=key, status=422)["code"] == "key-used-otherwise"
    assert RegionRevision.objects.count() == 2


def test_messages_apart_are_refused_until_a_coordinator_says_so(coordinator_api, path):
    late = stage.cone_alert(event_time=stage.EVENT_TIME + stage.timedelta(seconds=60))
    body = {"way": "add", "alert": late}
    refusal = coordinator_api.post(path, body, status=409)
    assert refusal["code"] == "messages-apart"
    assert refusal["errors"][0]["field"] == "despite_time_apart"
    assert coordinator_api.post(path, {**body, "despite_time_apart": True})["revision"] == 2


WRONG = [
    ({"way": "destroy"}, "way"),
    ({"way": "add"}, "upload"),
    ({"way": "add", "constraints": []}, "upload"),
    ({"way": "add", "constraints": [{}], "upload": "0" * 64}, "upload"),
    ({"way": "add", "constraints": [{}], "constraint": 1}, "constraint"),
    ({"way": "add", "constraints": [{}], "is_on": True}, "is_on"),
    ({"way": "switch", "constraint": 1}, "is_on"),
    ({"way": "switch", "is_on": True}, "constraint"),
    ({"way": "switch", "constraint": 9, "is_on": True}, "constraint"),
    ({"way": "switch", "constraint": 1, "is_on": True}, "is_on"),
    ({"way": "switch", "constraint": 1, "is_on": False}, "constraint"),
    ({"way": "retract", "constraint": 0}, "constraint"),
    ({"way": "retract", "constraint": 1, "alert": {"a": 1}}, "upload"),
    ({"way": "replace", "constraints": [{}]}, "constraint"),
    ({"way": "add", "constraints": [{}], "colour": "red"}, "colour"),
]


@pytest.mark.parametrize(("body", "field"), WRONG)
def test_bad_input_names_the_field(coordinator_api, path, body, field):
    answer = coordinator_api.post(path, body, status=400)
    assert field in [error["field"] for error in answer["errors"]]
    assert RegionRevision.objects.count() == 1


@pytest.mark.parametrize(
    "body",
    [
        {"way": "add", "constraints": [{"type": "ring"}]},
        {"way": "add", "constraints": ["a cone"]},
        {"way": "add", "constraints": [{"type": "map", "file": "m.fits"}]},
        {"way": "add", "alert": {"event_time": "soon", "constraints": []}},
        {"way": "add", "alert": "an alert"},
    ],
)
def test_an_alert_that_cannot_be_read_changes_nothing(coordinator_api, path, body):
    answer = coordinator_api.client.post(f"/api/v1/{path}", body, content_type="application/json")
    assert 400 <= answer.status_code < 500
    assert answer.json()["advice"]
    assert RegionRevision.objects.count() == 1


def test_an_upload_that_is_not_there_is_not_found(coordinator_api, path):
    coordinator_api.post(path, {"way": "add", "upload": "0" * 64}, status=404)


def test_whoever_watches_sees_the_history(campaign, path, schema, camera):
    Api(camera.owner, schema).get(f"{path}/revisions")
    Api(None, schema).get(f"{path}/revisions", status=404)
    campaign.is_public = True
    campaign.save()
    assert Api(None, schema).get(f"{path}/revisions")["revisions"][0]["revision"] == 1


def test_only_the_coordinator_revises(camera, path, schema):
    body = {"way": "add", "constraints": [cone()]}
    assert Api(camera.owner, schema).post(path, body, status=403)["code"] == "not-allowed"
    Api(None, schema).post(path, body, status=401)


def test_the_api_and_the_rule_refuse_the_same_wishes():
    assert revision_problems({"way": "add", "constraints": [{}]}) == []
    assert revision_problems({"way": "switch", "constraint": 1, "is_on": False}) == []
    assert [p.field for p in revision_problems({"way": "switch"})] == ["constraint", "is_on"]


def test_the_history_takes_few_questions(coordinator_api, path, django_assert_max_num_queries):
    for dec_deg in (29.0, 30.0, 31.0):
        coordinator_api.post(path, {"way": "add", "constraints": [cone(dec_deg)]})
    with django_assert_max_num_queries(6):
        coordinator_api.get(f"{path}/revisions")
