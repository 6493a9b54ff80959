"""Every way an error arises has one shape."""

import pytest
from django.conf import settings
from django.http import Http404
from django.test import Client, RequestFactory
from rest_framework import exceptions

from campaigns.api.problems import handle_exception
from campaigns.project import failures
from observers.errors import CampaignError, InvalidInput
from observers.rules.problem import Problem
from skytiles.errors import SkytilesError

JSON = "application/json"
NAMED = ["type", "title", "status", "detail", "code", "advice"]


def _is_problem(answer, *, status, code):
    assert answer.status_code == status
    assert answer["Content-Type"] == "application/problem+json"
    body = answer.json()
    assert list(body)[-6:] == NAMED or set(NAMED) <= set(body)
    assert (body["status"], body["code"]) == (status, code)
    assert body["type"] == f"urn:quartersky:problem:{code}"
    assert all(isinstance(body[name], str) and body[name] for name in NAMED if name != "status")


def test_an_address_that_does_not_exist(client, db):
    _is_problem(client.get("/api/v1/nothing/here"), status=404, code="not-found")
    _is_problem(client.get("/api/"), status=404, code="not-found")


def test_a_method_that_is_not_known(client, db):
    _is_problem(client.put("/api/v1/session"), status=405, code="method-not-allowed")


def test_a_body_that_is_no_json(client, db):
    answer = client.post("/api/v1/session", b"{", content_type=JSON)
    _is_problem(answer, status=400, code="parse-error")


def test_a_body_of_another_type(client, db):
    answer = client.post("/api/v1/session", b"x", content_type="text/plain")
    _is_problem(answer, status=415, code="unsupported-media-type")


def test_an_answer_that_we_do_not_give(client, db):
    answer = client.get("/api/v1/session", headers={"Accept": "text/html"})
    _is_problem(answer, status=406, code="not-acceptable")


@pytest.mark.parametrize("body", ["{}", "[]", '"x"', "null", '{"name": 5, "password": []}'])
def test_fields_that_do_not_fit(client, db, body):
    answer = client.post("/api/v1/session", body, content_type=JSON)
    _is_problem(answer, status=400, code="invalid")
    assert all(set(error) == {"field", "detail"} for error in answer.json()["errors"])


def test_an_unknown_field_is_named(client, db):
    body = {"name": "x", "password": "y", "pasword": "z"}
    answer = client.post("/api/v1/session", body, content_type=JSON)
    assert answer.json()["errors"] == [{"field": "pasword", "detail": "There is no such field."}]


def test_nobody_signed_in(client, db):
    _is_problem(client.get("/api/v1/tokens"), status=401, code="not-signed-in")


def test_a_token_that_is_unknown(client, db):
    answer = client.get("/api/v1/tokens", headers={"Authorization": "Bearer x"})
    _is_problem(answer, status=401, code="bad-token")


def test_a_host_that_is_not_ours(client, db):
    answer = client.get("/api/v1/session", headers={"Host": "elsewhere.example"})
    assert answer.status_code == 400


def test_a_fault_of_our_own_tells_nothing_of_its_cause(monkeypatch, db):
    def fail(*args):
        raise RuntimeError("the secret cause")

    monkeypatch.setattr("campaigns.api.session.session_json", fail)
    answer = Client(raise_request_exception=False).get("/api/v1/session")
    _is_problem(answer, status=500, code="server-error")
    assert "secret cause" not in answer.content.decode()


class _Taken(CampaignError):
    code = "tile-taken"
    status = 409
    title = "Taken"


class _BadMap(SkytilesError):
    code = "bad-map"


@pytest.mark.parametrize(
    ("error", "status", "code"),
    [
        (_Taken("No.", "Take another."), 409, "tile-taken"),
        (_BadMap("a text file", "FITS", "Send a sky map."), 400, "bad-map"),
        (Http404(), 404, "not-found"),
        (exceptions.Throttled(), 429, "throttled"),
        (exceptions.PermissionDenied(), 403, "permission-denied"),
    ],
)
def test_errors_inside_views(error, status, code):
    answer = handle_exception(error, {})
    assert (answer.status_code, answer.data["code"]) == (status, code)
    assert set(NAMED) <= set(answer.data)
    assert answer.data["advice"]


def test_the_errors_of_a_rule_and_the_extras_go_along():
    error = InvalidInput(
        "Bad.",
        "Mend it.",
        problems=[Problem("dec_deg", "Out of range.")],
        extras={"alternative": 7},
    )
    body = handle_exception(error, {}).data
    assert body["errors"] == [{"field": "dec_deg", "detail": "Out of range."}]
    assert body["alternative"] == 7


def test_extras_never_overwrite_the_named_fields():
    body = handle_exception(CampaignError("Bad.", "Mend it.", extras={"status": 200}), {}).data
    assert body["status"] == 400


def test_an_unknown_error_is_nobodys_problem():
    assert handle_exception(RuntimeError("ours"), {}) is None


@pytest.mark.parametrize(
    "view",
    [failures.bad_request, failures.not_allowed, failures.not_found, failures.csrf_failure],
)
def test_what_fails_outside_a_view_has_the_same_shape_for_programs(view):
    answer = view(RequestFactory().get("/api/v1/x"))
    answer.json = lambda: __import__("json").loads(answer.content)
    _is_problem(answer, status=answer.status_code, code=answer.json()["code"])


def test_people_get_a_page_with_a_way_back(client, db):
    answer = client.get("/nowhere/")
    assert answer.status_code == 404
    assert 'href="/"' in answer.content.decode()


def test_the_exception_handler_is_in_use():
    handler = settings.REST_FRAMEWORK["EXCEPTION_HANDLER"]
    assert handler == "campaigns.api.problems.handle_exception"
