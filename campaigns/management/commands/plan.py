"""`manage.py plan CAMPAIGN`: plan it for the registered observers."""

from argparse import ArgumentParser
from collections.abc import Mapping
from datetime import datetime
from typing import Any

from django.utils import timezone

from campaigns.actions.make_plan import make_plan
from campaigns.errors import InvalidInput, NotFound
from campaigns.events.iso_time import read_iso_time
from campaigns.management.json_command import JsonCommand
from campaigns.models import Campaign
from observers.rules.problem import Problem


class Command(JsonCommand):
    """Plan now, in this process."""

    help = "Plan a campaign for the registered observers."

    def add_arguments(self, parser: ArgumentParser) -> None:
        """Which campaign, and for when."""
        super().add_arguments(parser)
        parser.add_argument("campaign", metavar="CAMPAIGN", help="its short id")
        parser.add_argument("--at", metavar="UTC", help="plan for this moment (ISO 8601)")

    def answer(self, options: Mapping[str, Any]) -> dict[str, Any]:
        """What the plan promises."""
        campaign_id = options["campaign"]
        if not Campaign.objects.filter(pk=campaign_id).exists():
            raise NotFound(
                f"There is no campaign {campaign_id!r}.", "manage.py launch prints the id."
            )
        plan = make_plan(campaign_id, wall_now=timezone.now(), at=_moment(options["at"]))
        return {
            "campaign": campaign_id,
            "n_observers": plan.n_observers,
            "n_assignments": plan.n_assignments,
            "searched_expected": plan.searched_expected,
            "searched_bound": plan.searched_bound,
            "certificate": plan.certificate,
            "seconds": plan.seconds,
        }

    def in_words(self, answer: Mapping[str, Any]) -> str:
        """One sentence."""
        return (
            f"{answer['n_assignments']} tiles offered among {answer['n_observers']} observers: "
            f"{100 * answer['searched_expected']:.1f} % searched expected, at least "
            f"{100 * answer['certificate']:.0f} % of the best possible "
            f"({answer['seconds']:.1f} s)."
        )


def _moment(text: str | None) -> datetime | None:
    if text is None:
        return None
    try:
        return read_iso_time(text)
    except ValueError as error:
        detail = f"--at is {text!r}, which is no time."
        raise InvalidInput(
            detail,
            "Give UTC such as 2027-03-14T05:06:07Z.",
            problems=[Problem("at", detail)],
        ) from error
