"""Alerts that cannot be used: a clear problem by every way in, and nothing written."""

import asyncio
import json
import re
import uuid
from pathlib import Path

import orjson
import pytest
from django.core.files.uploadedfile import SimpleUploadedFile
from django.core.management import call_command
from rest_framework.test import APIClient

from campaigns.ingest.uploads import MOST_BYTES
from campaigns.project.asgi import application
from skytiles.region.read_map import MAX_MAP_BYTES
from tests.campaigns import stage
from tests.campaigns.alert_files import BAD_FILES, BAD_MESSAGES, flat_map, json_bytes
from tests.campaigns.nothing_written import PARTS, check_problem, nothing_written, stored

pytestmark = pytest.mark.django_db

LAUNCH = ("--title", "A burst")


@pytest.fixture
def client(coordinator):
    made = APIClient()
    made.force_authenticate(coordinator)
    return made


def refused(client, path, body, *, status, key=None, fmt="json"):
    """The problem of a request that must be refused; nothing may be written."""
    headers = {"Idempotency-Key": key} if key else {}
    with nothing_written():
        answer = client.post(f"/api/v1/{path}", body, format=fmt, headers=headers)
    assert answer.status_code == status, answer.content
    assert answer["Content-Type"] == "application/problem+json"
    assert answer.json()["status"] == status
    return answer.json()


def refused_twice(client, path, body, *, status):
    """The same keyed request again hears the same: refusals are not kept."""
    key = str(uuid.uuid4())
    first = refused(client, path, body, status=status, key=key)
    assert refused(client, path, body, status=status, key=key) == first
    return first


def run(capsys, *args):
    """Exit status, stdout and stderr of a command."""
    try:
        call_command(*args)
        status = 0
    except SystemExit as end:
        status = end.code
    return status, *capsys.readouterr()


def refused_by_command(capsys, *args):
    with nothing_written():
        status, out, _ = run(capsys, *args, "--json")
    problem = json.loads(out)
    assert status == 2
    return problem


# Files.


@pytest.mark.parametrize("case", BAD_FILES)
def test_a_bad_file_is_refused_by_the_api_under_its_own_name(client, case):
    filename, data, code, detail, advice = BAD_FILES[case]

    def send():
        file = SimpleUploadedFile(filename, data)
        return refused(client, "region", {"file": file}, status=400, fmt="multipart")

    problem = send()
    check_problem(problem, code=code, detail=detail, advice=advice)
    assert problem["detail"].startswith(f"{filename} cannot be used: ")
    assert send() == problem


@pytest.mark.parametrize("case", BAD_FILES)
def test_a_bad_file_is_refused_by_region_and_launch(capsys, tmp_path, case):
    filename, data, code, detail, advice = BAD_FILES[case]
    path = tmp_path / filename
    path.write_bytes(data)
    for command in (["region", str(path)], ["launch", str(path), *LAUNCH]):
        problem = refused_by_command(capsys, *command)
        if case == "a map that is elsewhere":
            # Here it is looked for beside the alert.
            assert problem["detail"].startswith("sky.fits cannot be used: it cannot be read")
            continue
        check_problem(problem, code=code, detail=detail, advice=advice)
        assert problem["detail"].startswith(f"{filename} cannot be used: ")
        assert refused_by_command(capsys, *command) == problem


@pytest.mark.parametrize("case", ["unknown and missing fields", "wrong ORDERING", "truncated JSON"])
def test_for_people_the_command_prints_plain_sentences(capsys, tmp_path, case):
    filename, data, _, detail, advice = BAD_FILES[case]
    path = tmp_path / filename
    path.write_bytes(data)
    status, out, err = run(capsys, "region", str(path))
    assert (status, out) == (2, "")
    assert re.search(detail, err)
    assert re.search(advice, err)
    assert not re.search(r"Given|What to do|  |\.\.$|\. [a-z]", err), err


def test_the_map_that_an_alert_names_is_refused_under_its_own_name(capsys, tmp_path):
    alert = tmp_path / "burst.json"
    alert.write_bytes(BAD_FILES["a map that is elsewhere"][1])
    (tmp_path / "sky.fits").write_bytes(BAD_FILES["negative probability"][1])
    problem = refused_by_command(capsys, "launch", str(alert), *LAUNCH)
    check_problem(problem, code="bad-map", detail="^sky.fits cannot be used", advice="maker")


@pytest.mark.parametrize("what", ["no file", "a folder"])
def test_what_is_no_file_is_refused(capsys, tmp_path, what):
    path = tmp_path if what == "a folder" else tmp_path / "nothing.fits"
    for command in (["region", str(path)], ["launch", str(path), *LAUNCH]):
        problem = refused_by_command(capsys, *command)
        words = f"^{path.name} cannot be used: it cannot be read"
        check_problem(problem, code="bad-alert", detail=words, advice="Check the name")


# Messages.


@pytest.mark.parametrize("case", BAD_MESSAGES)
@pytest.mark.parametrize("way", ["region", "campaigns"])
def test_a_bad_message_is_refused_by_the_api(client, case, way):
    message, detail, advice = BAD_MESSAGES[case]
    body = message if way == "region" else {"alert": message, "title": "A burst"}
    problem = refused_twice(client, way, body, status=400)
    check_problem(problem, code="bad-alert", detail=detail, advice=advice)
    assert problem["detail"].startswith("The alert cannot be used: ")


@pytest.mark.parametrize("body", ["{", "[]", "5", '{"constraints": NaN}', ""])
def test_a_body_that_is_no_alert_is_refused(client, body):
    for path in ("region", "campaigns"):
        with nothing_written():
            answer = client.post(f"/api/v1/{path}", body, content_type="application/json")
        assert answer.status_code == 400
        assert answer.json().keys() >= PARTS


# Launches that are refused after the file was read.


def test_a_file_that_was_fine_when_uploaded_is_named_when_its_launch_is_refused(client, camera):
    data = flat_map()
    sent = {"file": SimpleUploadedFile("GW240314.fits", data)}
    answer = client.post("/api/v1/region", sent, format="multipart").json()
    wish = {
        "upload": answer["upload"],
        "filename": "GW240314.fits",
        "title": "Rehearsed",
        "is_rehearsal": True,
        # The rehearsal's clock stands before the event.
        "clock_now": "2024-03-13T00:00:00Z",
    }
    problem = refused_twice(client, "campaigns", wish, status=400)
    check_problem(problem, code="bad-alert", detail="^GW240314.fits cannot", advice="UTC")
    nameless = {name: value for name, value in wish.items() if name != "filename"}
    problem = refused(client, "campaigns", nameless, status=400)
    assert problem["detail"].startswith("The uploaded file cannot be used: ")
    launched = client.post("/api/v1/campaigns", {**wish, "clock_now": None}, format="json")
    assert launched.status_code == 201


@pytest.mark.parametrize(
    ("wish", "status", "code", "advice"),
    [
        ({"alert": stage.cone_alert(role="test")}, 422, "test-alert", "rehearsal"),
        ({"alert": stage.cone_alert(), "source": "magic"}, 400, "bad-source-model", "Choose"),
        ({"alert": stage.cone_alert(), "clock_now": "2024-03-15T00:00:00Z"}, 400, "invalid", "."),
        ({"upload": "0" * 64}, 404, "not-found", "Upload the alert again"),
        ({}, 400, "invalid", "Give upload"),
    ],
)
def test_a_launch_that_cannot_be_is_refused(client, wish, status, code, advice):
    problem = refused_twice(client, "campaigns", {"title": "A burst", **wish}, status=status)
    assert problem["code"] == code
    assert re.search(advice, problem["advice"])


@pytest.mark.parametrize("options", [["--source", "magic"], ["--title", " "]])
def test_a_refused_launch_command_leaves_neither_files_nor_an_account(capsys, tmp_path, options):
    path = tmp_path / "sky.fits"
    path.write_bytes(flat_map())
    problem = refused_by_command(capsys, "launch", str(path), *LAUNCH, *options)
    assert problem["advice"]


def test_a_test_alert_launched_by_command_leaves_nothing(capsys, tmp_path):
    path = tmp_path / "test.json"
    path.write_bytes(json_bytes(stage.cone_alert(role="test")))
    assert refused_by_command(capsys, "launch", str(path), *LAUNCH)["code"] == "test-alert"


def test_a_good_launch_by_command_keeps_its_map(capsys, tmp_path):
    # So that the tests above would see an upload and an account.
    path = tmp_path / "sky.fits"
    path.write_bytes(flat_map())
    before = stored()
    status, *_ = run(capsys, "launch", str(path), *LAUNCH)
    assert status == 0
    assert len(stored()["uploads"]) == len(before["uploads"]) + 1
    assert stored()["rows"]["observers.Person"] == before["rows"]["observers.Person"] + 1


# 2 GB.


@pytest.fixture
def huge_file(tmp_path, monkeypatch):
    """A sparse file above 2 GB that nobody may read."""
    path = tmp_path / "huge.fits"
    with path.open("wb") as file:
        file.truncate(MAX_MAP_BYTES + 1)
    read_bytes = Path.read_bytes

    def read(self):
        assert self.name != path.name, "it was read"
        return read_bytes(self)

    monkeypatch.setattr(Path, "read_bytes", read)
    return path


@pytest.mark.parametrize("command", [["region"], ["launch", *LAUNCH]])
def test_two_gigabytes_are_refused_unread_by_the_commands(capsys, huge_file, command):
    named = huge_file.parent / "burst.json"
    constraint = {"type": "map", "file": huge_file.name}
    named.write_bytes(json_bytes({**stage.cone_alert(), "constraints": [constraint]}))
    for path in (huge_file, named):
        problem = refused_by_command(capsys, *command, str(path))
        check_problem(
            problem,
            code="bad-map",
            detail="^huge.fits cannot be used: it has 2,000,000,001 bytes.*2 GB",
            advice="multi-order",
        )


@pytest.mark.parametrize("n_bytes", [MOST_BYTES + 2_000_000, 2_000_000_001])
def test_two_gigabytes_are_refused_unread_by_the_server(n_bytes):
    sent = []

    async def receive():
        raise AssertionError("it was read")

    async def send(message):
        sent.append(message)

    scope = {
        "type": "http",
        "method": "POST",
        "path": "/api/v1/region",
        "headers": [(b"content-length", str(n_bytes).encode())],
    }
    with nothing_written():
        asyncio.run(application(scope, receive, send))
    assert sent[0]["status"] == 413
    problem = orjson.loads(sent[1]["body"])
    check_problem(problem, code="upload-too-large", detail="256 MB", advice="multi-order")
