"""`manage.py region FILE`: read an alert or map and describe its region."""

from argparse import ArgumentParser
from collections.abc import Mapping
from pathlib import Path
from typing import Any

from django.utils import timezone

import campaigns.bridge as bridge
from campaigns.management.json_command import JsonCommand
from skytiles.region.make_region import make_region
from skytiles.region.read_alert import read_alert_file
from skytiles.region.region import describe_region


class Command(JsonCommand):
    """Describe; nothing is stored."""

    help = "Read an alert or map and describe its region."
    needs_database = False

    def add_arguments(self, parser: ArgumentParser) -> None:
        """The file and the prior."""
        super().add_arguments(parser)
        parser.add_argument("file", metavar="FILE", help="sky map, MOC, VOEvent, or alert in JSON")
        parser.add_argument(
            "--prior", choices=["flat", "galactic"], default="flat", help="default: flat"
        )

    def answer(self, options: Mapping[str, Any]) -> dict[str, Any]:
        """Areas, peak, working order."""
        alert = read_alert_file(Path(options["file"]), bridge.mjd_of(timezone.now()))
        region = make_region(alert.constraints, prior=options["prior"])
        described = describe_region(region)
        return {**described, "notes": [*alert.notes, *described["notes"]]}

    def in_words(self, answer: Mapping[str, Any]) -> str:
        """A few lines."""
        areas = answer["area_deg2"]
        lines = [f"{share} % within {area:,.1f} square degrees" for share, area in areas.items()]
        peak = answer["peak"]
        lines.append(f"peak at RA {peak['ra_deg']:.3f}, Dec {peak['dec_deg']:+.3f} degrees")
        lines.append(f"working region: order {answer['order']}, {answer['n_pixels']:,} pixels")
        lines.append(f"total probability as read: {answer['total_probability']:.6f}")
        return "\n".join([*lines, *answer["notes"]])
