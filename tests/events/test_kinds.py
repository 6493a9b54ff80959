"""Events are typed: what is not declared is refused."""

import pytest

from campaigns.events.kinds import KINDS, ClaimMet, ObserverStatus, read_happening
from campaigns.events.said import _SENTENCES, About, said


def test_an_unknown_field_is_refused():
    payload = {"id": 1, "ended_at": "2027-03-14T21:00:00Z", "site": "home"}
    with pytest.raises(ValueError, match="declared"):
        read_happening("claim.met", payload)


def test_an_unknown_field_deep_inside_is_refused():
    observer = {"name": "Ada", "status": "in", "sites": [], "instruments": [], "email": "x"}
    with pytest.raises(ValueError, match="email is an unknown field"):
        read_happening("observer.joined", {"id": 1, "observer": observer})


def test_a_missing_field_is_refused():
    with pytest.raises(ValueError, match="declared"):
        read_happening("claim.met", {"id": 1})


def test_an_unknown_kind_is_refused():
    with pytest.raises(ValueError, match="unknown event kind"):
        read_happening("claim.stolen", {})


@pytest.mark.parametrize("value", ["7", True, 1.5, None])
def test_a_number_of_another_type_is_refused(value):
    with pytest.raises(ValueError, match="id is"):
        ClaimMet(id=value, ended_at="2027-03-14T21:00:00Z")


def test_a_word_outside_the_list_is_refused():
    with pytest.raises(ValueError, match="not one of"):
        ObserverStatus(observer=1, status="asleep")


def test_every_kind_has_a_sentence():
    assert set(_SENTENCES) == set(KINDS)


def test_a_sentence_is_plain():
    met = ClaimMet(id=1, ended_at="2027-03-14T21:00:00Z")
    assert said(met, About(observer="Ada", tile=12)) == "Ada has shot tile 12."
