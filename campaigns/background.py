"""Work off the request path. The only module that knows which library runs it."""

from datetime import datetime, timedelta

from django.core.management import call_command
from django.db.models import F
from django.utils import timezone
from django_tasks import task
from django_tasks.base import TaskResultStatus
from django_tasks_db.models import DBTaskResult

from campaigns.actions.make_plan import make_plan
from campaigns.events import after_commit
from campaigns.models import Campaign, CampaignStatus, Event, Plan

# A new plan is worth making after these; the others follow from a plan or change no choice.
_MATERIAL = (
    "campaign.opened",
    "region.revised",
    "tiles.laid",
    "observer.joined",
    "observer.status",
    "claim.released",
    "claim.lapsed",
    "frame.counted",
    "frame.examined",
    "frame.corrected",
    "frame.withdrawn",
)
PLAN_EVERY_S = 60.0
# A plan that took long is not made all the time.
_REST_PER_PLAN = 4.0


@task()
def plan_campaign(campaign_id: str) -> None:
    """Make the plan that is due; a second request for the same state finds nothing to do."""
    make_plan(campaign_id, wall_now=timezone.now())


def ask_for_plan(campaign_id: str) -> None:
    """Have a campaign planned soon; a request that still waits is enough for two."""
    if not _waiting(campaign_id):
        plan_campaign.enqueue(campaign_id)


def hear(campaign_id: str, hint: str) -> None:
    """Listen to commits (campaigns/events/after_commit.py): a plan was asked for."""
    if hint == "plan due":
        ask_for_plan(campaign_id)


def listen() -> None:
    """Turn requests for plans into tasks from now on; for every process that takes requests."""
    after_commit.register(hear)


def ask_for_due_plans(*, wall_now: datetime) -> list[str]:
    """Level-triggered: whatever was lost before, a campaign that has moved on is planned again.

    Rehearsals are planned when their driver says so, else the same seed would not give the same
    numbers.
    """
    moved_on = Campaign.objects.filter(
        status=CampaignStatus.LIVE, is_rehearsal=False, planned_seq__lt=F("seq")
    )
    due = [campaign.pk for campaign in moved_on if _is_due(campaign, wall_now)]
    for campaign_id in due:
        ask_for_plan(campaign_id)
    return due


def requeue_stale_tasks(*, older_than_s: float = 900.0) -> int:
    """Tasks that were running when a worker was killed start again; all of ours may."""
    limit = timezone.now() - timedelta(seconds=older_than_s)
    stale = DBTaskResult.objects.filter(status=TaskResultStatus.RUNNING, started_at__lte=limit)
    return int(stale.update(status=TaskResultStatus.READY))


def run_worker() -> None:
    """Run tasks until SIGTERM or SIGINT."""
    call_command("db_worker", interval=0.5, startup_delay=False, reload=False, verbosity=0)


def _is_due(campaign: Campaign, wall_now: datetime) -> bool:
    plan = Plan.objects.filter(campaign=campaign).last()
    if plan is not None:
        rest_s = max(PLAN_EVERY_S, _REST_PER_PLAN * plan.seconds)
        if wall_now < plan.made_at + timedelta(seconds=rest_s):
            return False
    news = Event.objects.filter(campaign=campaign, seq__gt=campaign.planned_seq)
    return news.filter(kind__in=_MATERIAL).exists()


def _waiting(campaign_id: str) -> bool:
    ready = DBTaskResult.objects.filter(
        status=TaskResultStatus.READY, task_path=plan_campaign.module_path
    )
    return any(waiting.args_kwargs["args"] == [campaign_id] for waiting in ready)
