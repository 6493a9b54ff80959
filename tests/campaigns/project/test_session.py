import pytest
from django.test import Client

PASSWORD = "a dark clear night"
JSON = "application/json"


def _sign_in(client, name, password=PASSWORD, **more):
    body = {"name": name, "password": password}
    return client.post("/api/v1/session", body, content_type=JSON, **more)


def test_nobody_is_signed_in_at_first(client, db):
    answer = client.get("/api/v1/session").json()
    assert (answer["signed_in"], answer["observer"]) == (False, None)
    assert answer["csrf"]


def test_signing_in_and_out(client, observer):
    answer = _sign_in(client, "Jon Veld")
    assert answer.status_code == 200
    expected = {"id": observer.pk, "name": "Jon Veld", "role": "observer"}
    assert answer.json()["observer"] == expected
    assert client.get("/api/v1/session").json()["observer"] == expected
    assert client.delete("/api/v1/session").json()["signed_in"] is False
    assert client.get("/api/v1/session").json()["signed_in"] is False


def test_a_name_is_the_same_in_any_case(client, observer):
    assert _sign_in(client, "  jon VELD ").status_code == 200


@pytest.mark.parametrize(
    ("name", "password"), [("Jon Veld", "wrong"), ("Nobody", PASSWORD), ("Jon", PASSWORD)]
)
def test_wrong_name_and_wrong_password_look_the_same(client, observer, name, password):
    answer = _sign_in(client, name, password)
    assert answer.status_code == 401
    assert answer.json()["code"] == "bad-sign-in"
    assert answer.json()["detail"] == "Name and password do not fit."


def test_who_was_shut_out_cannot_sign_in(client, observer):
    observer.is_active = False
    observer.save()
    assert _sign_in(client, "Jon Veld").status_code == 401


def test_guessing_is_slowed_down(client, observer):
    for _ in range(5):
        assert _sign_in(client, "Jon Veld", "guess").status_code == 401
    answer = _sign_in(client, "Jon Veld")
    assert answer.status_code == 429
    assert answer.json()["code"] == "throttled"
    assert int(answer["Retry-After"]) > 0


def test_guessing_shuts_out_neither_others_nor_the_same_person_elsewhere(
    client, observer, coordinator
):
    for _ in range(6):
        _sign_in(client, "Jon Veld", "guess")
    assert _sign_in(client, "Ada Merken").status_code == 200
    assert _sign_in(client, "Jon Veld", REMOTE_ADDR="192.0.2.7").status_code == 200


def test_forty_people_behind_one_address_may_all_sign_in(client, make_person):
    for number in range(40):
        make_person(f"Person {number}")
        assert _sign_in(client, f"Person {number}").status_code == 200


def test_a_new_password_ends_old_sessions(client, observer):
    _sign_in(client, "Jon Veld")
    observer.set_password("another dark night")
    observer.save()
    assert client.get("/api/v1/session").json()["signed_in"] is False


def test_a_browser_that_writes_needs_the_csrf_token(observer):
    browser = Client(enforce_csrf_checks=True)
    csrf = _sign_in(browser, "Jon Veld").json()["csrf"]
    refused = browser.post("/api/v1/tokens", {"label": "x"}, content_type=JSON)
    assert (refused.status_code, refused.json()["code"]) == (403, "csrf")
    headers = {"X-CSRFToken": csrf}
    made = browser.post("/api/v1/tokens", {"label": "x"}, content_type=JSON, headers=headers)
    assert made.status_code == 201


@pytest.mark.parametrize("kind", ["text/plain", "application/x-www-form-urlencoded"])
def test_a_form_of_another_site_cannot_sign_anybody_in(client, observer, kind):
    body = '{"name": "Jon Veld", "password": "a dark clear night"}'
    assert client.post("/api/v1/session", body, content_type=kind).status_code == 415


def test_cookies_are_out_of_reach_for_scripts_and_other_sites(client, observer):
    cookie = _sign_in(client, "Jon Veld").cookies["quartersky_session"]
    assert cookie["httponly"]
    assert cookie["samesite"] == "Lax"
