from datetime import UTC, datetime, timedelta

import pytest
from django.db import transaction
from django.utils import timezone
from django_tasks_db.models import DBTaskResult

from campaigns import background
from campaigns.events import kinds
from campaigns.events.after_commit import notify
from campaigns.events.append import append_event
from campaigns.models import Campaign, Plan

OPENED_AT = "2027-03-14T05:06:07Z"
NOW = datetime(2027, 3, 14, 5, 6, 7, tzinfo=UTC)


@pytest.fixture
def campaign(coordinator):
    return Campaign.objects.create(
        id="test-1",
        title="A ring in the south",
        status="live",
        event_time=NOW,
        source_model={},
        made_by=coordinator,
        made_at=NOW,
    )


def _append(campaign, happening):
    with transaction.atomic():
        return append_event(campaign.pk, happening, at=NOW)


def _plan(campaign, *, seq, made_at, seconds=1.0):
    Campaign.objects.filter(pk=campaign.pk).update(planned_seq=seq)
    Plan.objects.create(
        campaign=campaign,
        made_at=made_at,
        planned_seq=seq,
        searched_expected=0.1,
        searched_bound=0.2,
        certificate=0.5,
        n_observers=1,
        n_assignments=1,
        seconds=seconds,
    )


def test_two_requests_for_one_campaign_are_one_task(campaign):
    background.ask_for_plan("test-1")
    background.ask_for_plan("test-1")
    background.ask_for_plan("test-2")
    assert DBTaskResult.objects.count() == 2


@pytest.mark.django_db(transaction=True)
def test_a_commit_that_asks_for_a_plan_makes_a_task(campaign):
    background.listen()
    with transaction.atomic():
        notify(campaign.pk, "plan due")
        assert not DBTaskResult.objects.exists()
    assert DBTaskResult.objects.count() == 1


def test_a_campaign_that_moved_on_is_due(campaign):
    assert background.ask_for_due_plans(wall_now=NOW) == []
    _append(campaign, kinds.CampaignOpened(opened_at=OPENED_AT))
    assert background.ask_for_due_plans(wall_now=NOW) == ["test-1"]
    assert DBTaskResult.objects.count() == 1


def test_a_planned_campaign_is_not_due(campaign):
    seq = _append(campaign, kinds.CampaignOpened(opened_at=OPENED_AT))
    _plan(campaign, seq=seq, made_at=NOW)
    assert background.ask_for_due_plans(wall_now=NOW + timedelta(hours=1)) == []


@pytest.mark.parametrize(("seconds", "rest_s"), [(1.0, 60), (30.0, 120)])
def test_plans_follow_each_other_with_a_rest(campaign, seconds, rest_s):
    _plan(campaign, seq=0, made_at=NOW, seconds=seconds)
    _append(campaign, kinds.CampaignOpened(opened_at=OPENED_AT))
    early, late = NOW + timedelta(seconds=rest_s - 1), NOW + timedelta(seconds=rest_s)
    assert background.ask_for_due_plans(wall_now=early) == []
    assert background.ask_for_due_plans(wall_now=late) == ["test-1"]


def test_an_event_that_changes_no_choice_makes_nothing_due(campaign):
    _append(campaign, kinds.ClaimExtended(id=1, until=OPENED_AT))
    assert background.ask_for_due_plans(wall_now=NOW) == []


@pytest.mark.parametrize("changes", [{"is_rehearsal": True}, {"status": "closed"}])
def test_rehearsals_and_closed_campaigns_are_never_due_by_themselves(campaign, changes):
    _append(campaign, kinds.CampaignOpened(opened_at=OPENED_AT))
    Campaign.objects.update(**changes)
    assert background.ask_for_due_plans(wall_now=NOW) == []


def test_what_a_killed_worker_left_starts_again(campaign):
    background.ask_for_plan("test-1")
    DBTaskResult.objects.update(status="RUNNING", started_at=timezone.now())
    assert background.requeue_stale_tasks() == 0
    assert background.requeue_stale_tasks(older_than_s=0.0) == 1
    assert DBTaskResult.objects.get().status == "READY"


def test_every_material_kind_is_a_kind_of_event():
    known = {cls.kind for cls in kinds.Happening.__subclasses__()}
    assert set(background._MATERIAL) <= known
