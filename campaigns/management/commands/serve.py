"""Serve all campaigns and run the worker."""

import sys
from argparse import ArgumentParser
from typing import Any

from django.core.management import call_command
from django.core.management.base import BaseCommand
from django.db import connection
from django.urls import reverse
from django.utils import timezone

from campaigns.project.server import (
    PortTakenError,
    address_of,
    allow_own_names,
    list_other_addresses,
    listen,
    serve_until_stopped,
)
from observers.actions.invite_person import invite_first_coordinator


class Command(BaseCommand):
    """`manage.py serve`."""

    help = "Serve all campaigns and run the worker (one process and its child)."
    requires_migrations_checks = False

    def add_arguments(self, parser: ArgumentParser) -> None:
        """Where to listen."""
        parser.add_argument("--host", default="127.0.0.1", help="default: this machine only")
        parser.add_argument("--port", type=int, default=8000, help="0: any free port")
        parser.add_argument(
            "--no-worker", action="store_true", help="the worker runs elsewhere (manage.py work)"
        )

    def handle(self, *args: Any, **options: Any) -> None:
        """Migrate, listen, say where, serve."""
        call_command("migrate", verbosity=0, interactive=False)
        try:
            listener = listen(options["host"], options["port"])
        except PortTakenError as error:
            self.stderr.write(f"Cannot listen on {error}. Choose another with --port, or 0.")
            sys.exit(2)
        allow_own_names(options["host"])
        url, others = address_of(listener), list_other_addresses(listener)
        link = self._first_link(url)
        # Threads and the worker open their own.
        connection.close()
        serve_until_stopped(
            listener,
            when_ready=lambda: self._say(url, others, link),
            with_worker=not options["no_worker"],
        )

    def _first_link(self, url: str) -> str:
        invited = invite_first_coordinator(now=timezone.now())
        return url + reverse("join", args=[invited.secret]) if invited else ""

    def _say(self, url: str, others: list[str], link: str) -> None:
        self.stdout.write(f"Quartersky is at {url}/ (stop with Ctrl-C)")
        for address in others:
            self.stdout.write(f"  for others on this network: {address}/")
        if link:
            self.stdout.write("There is no account yet. This link makes the first coordinator:")
            self.stdout.write(f"  {link}")
        self.stdout.flush()
