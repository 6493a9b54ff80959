"""Run the worker: tasks off the request path, and the ticker."""

import os
import sys
import threading
from argparse import ArgumentParser
from typing import Any

from django.core.management.base import BaseCommand

from campaigns import background
from campaigns.ticker import Ticker


class Command(BaseCommand):
    """`manage.py work`; `serve` starts it as its child."""

    help = "Run the worker: plans and other tasks, and the lapse of claims."

    def add_arguments(self, parser: ArgumentParser) -> None:
        """How it ends."""
        parser.add_argument(
            "--with-stdin",
            action="store_true",
            help="end when standard input closes: its holder is gone",
        )

    def handle(self, *args: Any, **options: Any) -> None:
        """Requeue what a killed worker left, then work until stopped."""
        if options["with_stdin"]:
            threading.Thread(target=_end_with_stdin, daemon=True).start()
            background.requeue_stale_tasks(older_than_s=0.0)
        else:
            background.requeue_stale_tasks()
        ticker = Ticker()
        ticker.start()
        background.run_worker()


def _end_with_stdin() -> None:
    sys.stdin.buffer.read()
    os._exit(0)
