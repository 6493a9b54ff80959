from datetime import timedelta

import pytest
from django.utils import timezone

from observers.actions.invite_person import invite_first_coordinator, invite_person
from observers.models import Invitation, Person, Role

JSON = "application/json"
PASSWORD = "a dark clear night"


def _invite(client, coordinator, **body):
    client.force_login(coordinator)
    answer = client.post("/api/v1/invitations", body, content_type=JSON)
    client.logout()
    return answer


def _token(answer):
    return answer.json()["link"].rstrip("/").rsplit("/", 1)[1]


def _accept(client, token, name="Lena Koster", password=PASSWORD):
    body = {"token": token, "name": name, "password": password}
    return client.post("/api/v1/invitations/accept", body, content_type=JSON)


def test_a_link_makes_an_account_and_signs_in(client, coordinator):
    made = _invite(client, coordinator, role="observer")
    assert made.status_code == 201
    assert "/join/" in made.json()["link"]
    answer = _accept(client, _token(made))
    assert answer.status_code == 201
    assert answer.json()["observer"]["name"] == "Lena Koster"
    assert client.get("/api/v1/session").json()["observer"]["role"] == "observer"


@pytest.mark.parametrize("role", Role.values)
def test_the_link_decides_the_role(client, coordinator, role):
    _accept(client, _token(_invite(client, coordinator, role=role)))
    assert Person.objects.get(name="Lena Koster").role == role


def test_a_link_works_once(client, coordinator):
    token = _token(_invite(client, coordinator))
    assert _accept(client, token).status_code == 201
    client.logout()
    again = _accept(client, token, name="Somebody Else")
    assert again.status_code == 404
    assert "used" in again.json()["detail"]
    assert not Person.objects.filter(name="Somebody Else").exists()


def test_a_link_expires(client, coordinator):
    token = _token(_invite(client, coordinator))
    Invitation.objects.update(expires_at=timezone.now() - timedelta(seconds=1))
    assert "expired" in _accept(client, token).json()["detail"]


def test_a_guessed_link_leads_nowhere(client, db):
    answer = _accept(client, "guessed")
    assert answer.status_code == 404
    assert answer.json()["advice"]


def test_the_secret_of_a_link_is_not_stored(client, coordinator):
    token = _token(_invite(client, coordinator))
    invitation = Invitation.objects.get()
    assert token not in str(invitation.__dict__)


@pytest.mark.parametrize(
    ("name", "password", "field"),
    [
        ("", PASSWORD, "name"),
        ("Lena\u200b", PASSWORD, "name"),
        ("Lena Koster", "short", "password"),
        ("Lena Koster", "password123", "password"),
    ],
)
def test_a_refusal_leaves_the_link_good(client, coordinator, name, password, field):
    token = _token(_invite(client, coordinator))
    refused = _accept(client, token, name=name, password=password)
    assert refused.status_code == 400
    assert refused.json()["errors"][0]["field"] == field
    assert _accept(client, token).status_code == 201


def test_a_taken_name_in_any_case_leaves_the_link_good(client, coordinator):
    token = _token(_invite(client, coordinator))
    refused = _accept(client, token, name="ADA merken")
    assert (refused.status_code, refused.json()["code"]) == (409, "name-taken")
    assert _accept(client, token).status_code == 201


@pytest.mark.parametrize("who", ["observer", "onlooker"])
def test_only_coordinators_invite(client, request, who):
    client.force_login(request.getfixturevalue(who))
    answer = client.post("/api/v1/invitations", {}, content_type=JSON)
    assert (answer.status_code, answer.json()["code"]) == (403, "not-allowed")


def test_without_an_account_nobody_invites(client, db):
    answer = client.post("/api/v1/invitations", {}, content_type=JSON)
    assert (answer.status_code, answer.json()["code"]) == (401, "not-signed-in")


def test_a_reset_link_gives_a_new_password_and_nothing_else(client, coordinator, observer):
    token = _token(_invite(client, coordinator, person=observer.pk, role="coordinator"))
    assert _accept(client, token, name="", password="quite another night").status_code == 201
    observer.refresh_from_db()
    assert observer.check_password("quite another night")
    assert (observer.name, observer.role) == ("Jon Veld", "observer")
    assert Person.objects.count() == 2


def test_the_first_link_makes_a_coordinator(client, db):
    invited = invite_first_coordinator(now=timezone.now())
    assert _accept(client, invited.secret).json()["observer"]["role"] == "coordinator"


def test_a_new_first_link_voids_the_one_before(client, db):
    old = invite_first_coordinator(now=timezone.now())
    invite_first_coordinator(now=timezone.now())
    assert _accept(client, old.secret).status_code == 404


def test_there_is_no_first_link_once_there_is_an_account(observer):
    assert invite_first_coordinator(now=timezone.now()) is None


def test_the_page_of_a_link_keeps_its_address_to_itself(client, coordinator):
    invited = invite_person(coordinator, role=Role.OBSERVER, now=timezone.now())
    page = client.get(f"/join/{invited.secret}/")
    assert page.status_code == 200
    assert page["Referrer-Policy"] == "no-referrer"
    assert page["Cache-Control"] == "no-store"
