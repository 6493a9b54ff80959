"""`manage.py launch FILE --title T`: open a campaign from an alert file."""

import random
from argparse import ArgumentParser
from collections.abc import Mapping
from pathlib import Path
from typing import Any

from django.utils import timezone

from campaigns.actions.launch_campaign import LaunchWish, launch_campaign
from campaigns.actions.operator_account import operator_account
from campaigns.ingest.alert_file import alert_of_path
from campaigns.management.json_command import JsonCommand
from skytiles.region.make_region import PRIORS
from skytiles.source.presets import PRESETS


class Command(JsonCommand):
    """Launch; live unless --draft."""

    help = "Open a campaign from an alert file."

    def add_arguments(self, parser: ArgumentParser) -> None:
        """The file and what the coordinator chooses."""
        super().add_arguments(parser)
        parser.add_argument("file", metavar="FILE", help="sky map, MOC, VOEvent, or alert in JSON")
        parser.add_argument("--title", required=True, help="what everybody will call it")
        parser.add_argument(
            "--source",
            default="steady",
            metavar="PRESET",
            help=f"source model: {', '.join(PRESETS)} (default: steady)",
        )
        parser.add_argument(
            "--prior",
            choices=PRIORS,
            default="",
            help="where sources are (default: what suits the source model)",
        )
        parser.add_argument("--draft", action="store_true", help="do not open it yet")

    def answer(self, options: Mapping[str, Any]) -> dict[str, Any]:
        """The new campaign."""
        now = timezone.now()
        kept = alert_of_path(Path(options["file"]), now=now)
        for note in kept.alert.notes:
            self.say(note)
        wish = LaunchWish(
            title=options["title"],
            source=options["source"],
            prior=options["prior"],
            is_draft=options["draft"],
        )
        launched = launch_campaign(
            operator_account(now=now), kept, wish=wish, wall_now=now, rng=random.SystemRandom()
        )
        return launched.body

    def in_words(self, answer: Mapping[str, Any]) -> str:
        """Where it is."""
        area = answer["area_deg2"]["90"]
        return (
            f"Campaign {answer['campaign']} is at {answer['url']}: 90 % within "
            f"{area:,.1f} square degrees, {answer['n_tiles']} tiles."
        )
