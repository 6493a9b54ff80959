from django.test import Client

from observers.models import ApiToken

JSON = "application/json"


def _make(client, owner):
    client.force_login(owner)
    made = client.post("/api/v1/tokens", {"label": "dome"}, content_type=JSON).json()
    client.logout()
    return made


def _as_program(secret):
    return Client(enforce_csrf_checks=True, headers={"Authorization": f"Bearer {secret}"})


def test_a_program_acts_as_its_owner_without_csrf(client, observer):
    made = _make(client, observer)
    program = _as_program(made["token"])
    assert program.get("/api/v1/session").json()["observer"]["id"] == observer.pk
    assert program.post("/api/v1/tokens", {"label": "2"}, content_type=JSON).status_code == 201


def test_the_secret_is_shown_once_and_not_stored(client, observer):
    made = _make(client, observer)
    program = _as_program(made["token"])
    listed = program.get("/api/v1/tokens")
    assert made["token"] not in listed.content.decode()
    assert made["token"] not in str(ApiToken.objects.get().__dict__)
    assert [token["label"] for token in listed.json()] == ["dome"]


def test_a_revoked_token_opens_nothing(client, observer):
    made = _make(client, observer)
    program = _as_program(made["token"])
    assert program.delete(f"/api/v1/tokens/{made['id']}").status_code == 204
    refused = program.get("/api/v1/tokens")
    assert (refused.status_code, refused.json()["code"]) == (401, "bad-token")
    assert refused["WWW-Authenticate"].startswith("Bearer")


def test_nobody_revokes_the_token_of_somebody_else(client, observer, coordinator):
    made = _make(client, observer)
    client.force_login(coordinator)
    assert client.delete(f"/api/v1/tokens/{made['id']}").status_code == 404
    assert ApiToken.objects.get().revoked_at is None


def test_a_token_in_the_address_opens_nothing(client, observer):
    secret = _make(client, observer)["token"]
    answer = client.get(f"/api/v1/tokens?token={secret}&access_token={secret}")
    assert answer.status_code == 401


def test_the_token_of_somebody_shut_out_opens_nothing(client, observer):
    made = _make(client, observer)
    observer.is_active = False
    observer.save()
    assert _as_program(made["token"]).get("/api/v1/tokens").status_code == 401


def test_a_label_is_needed(client, observer):
    client.force_login(observer)
    answer = client.post("/api/v1/tokens", {"label": "  "}, content_type=JSON)
    assert (answer.status_code, answer.json()["errors"][0]["field"]) == (400, "label")
