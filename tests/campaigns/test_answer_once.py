"""A keyed request is carried out once."""

import uuid
from datetime import timedelta

import pytest

from campaigns.actions.answer_once import Once, forget_old_keys
from campaigns.actions.claim_tile import claim_tile
from campaigns.actions.release_claim import release_claim
from campaigns.errors import KeyUsedOtherwise, TileTaken
from campaigns.models import Claim, IdempotencyKey
from tests.campaigns.stage import NOW, later, tile_at


def once_for(camera, *, key=None, body="a"):
    return Once(camera.owner, "claims", key or uuid.uuid4(), body * 64, NOW)


def take(campaign, camera, *, once, wall_now=NOW):
    return claim_tile(
        camera.owner,
        campaign,
        tile_number=tile_at(campaign).number,
        instrument=camera,
        starts_at=None,
        wall_now=wall_now,
        once=once,
    )


def test_a_repeat_gets_the_same_answer_and_does_nothing(campaign, camera):
    once = once_for(camera)
    first, second = take(campaign, camera, once=once), take(campaign, camera, once=once)
    assert (second.status, second.body) == (first.status, first.body) == (201, first.body)
    assert second.is_repeat
    assert Claim.objects.count() == 1


def test_a_repeat_is_answered_even_when_it_would_now_be_refused(campaign, camera):
    once = once_for(camera)
    first = take(campaign, camera, once=once)
    campaign.status = "closed"
    campaign.save(update_fields=["status"])
    assert take(campaign, camera, once=once).body == first.body


def test_another_body_under_the_same_key_is_refused(campaign, camera):
    key = uuid.uuid4()
    take(campaign, camera, once=once_for(camera, key=key))
    with pytest.raises(KeyUsedOtherwise) as refusal:
        take(campaign, camera, once=once_for(camera, key=key, body="b"))
    assert refusal.value.status == 422


def test_a_refusal_is_not_kept(campaign, camera, other_camera):
    holder = take(campaign, camera, once=None)
    once = once_for(other_camera)
    with pytest.raises(TileTaken):
        take(campaign, other_camera, once=once)
    assert not IdempotencyKey.objects.exists()
    release_claim(
        Claim.objects.select_related("campaign", "tile", "person").get(pk=holder.body["id"]),
        wall_now=NOW,
    )
    assert take(campaign, other_camera, once=once).status == 201


def test_the_same_key_of_somebody_else_is_another_key(campaign, camera, other_camera):
    key = uuid.uuid4()
    take(campaign, camera, once=once_for(camera, key=key))
    with pytest.raises(TileTaken):
        take(campaign, other_camera, once=once_for(other_camera, key=key))


def test_keys_are_forgotten_after_thirty_days(campaign, camera):
    take(campaign, camera, once=once_for(camera))
    assert forget_old_keys(wall_now=later(days=29)) == 0
    assert forget_old_keys(wall_now=NOW + timedelta(days=30, seconds=1)) == 1
