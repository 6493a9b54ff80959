"""rehearse: the whole job with a simulated network, through real HTTP and WebSocket."""

from __future__ import annotations

import asyncio
import json
import signal
import socket
import sys
import time
from typing import Any, NoReturn

import httpx
from django.conf import settings
from django.core.management.base import BaseCommand, CommandParser

from campaigns.problem_details import Problem
from campaigns.rehearsal.agreement import Disagreement
from campaigns.rehearsal.board_client import Refusal, ServerFault
from campaigns.rehearsal.cast import COORDINATOR_NAME
from campaigns.rehearsal.outcome import Outcome
from campaigns.rehearsal.run_rehearsal import Options, run_rehearsal
from campaigns.rehearsal.server_process import (
    RehearsalServer,
    ServerFailed,
    new_folder,
    start_server,
)

# A served run of any length is played in this wall time unless --speed says otherwise; with
# set-up, planning and settling it stays below five minutes.
PLAY_S = 150.0
FAVOURITE_PORT = 8000
FAILURES = (ServerFailed, ServerFault, Disagreement, Refusal, TimeoutError, httpx.HTTPError)
MOST_OBSERVERS, MOST_HOURS = 2000, 72
EXIT_FAILED, EXIT_BAD_INPUT, EXIT_INTERRUPTED = 1, 2, 130


class Command(BaseCommand):
    """Practise, and measure: the board is served meanwhile and, unless told not to, afterwards."""

    help = "Run a rehearsal with an invented alert, source and network, and serve its board."
    # The rehearsal migrates a database of its own; this process opens none.
    requires_system_checks: list[str] = []

    def add_arguments(self, parser: CommandParser) -> None:
        """The options of DEVELOPERS.md."""
        parser.add_argument("--observers", type=int, default=40, help="how many (default 40)")
        parser.add_argument("--hours", type=float, default=10.0, help="of the campaign (10)")
        parser.add_argument("--seed", type=int, default=1, help="same seed, same numbers (1)")
        parser.add_argument(
            "--speed",
            type=float,
            default=None,
            help="campaign seconds per second; default: a served run takes about three "
            "minutes, one with --no-serve is as fast as it can be",
        )
        parser.add_argument("--port", type=int, default=None, help="of the served board")
        parser.add_argument("--no-serve", action="store_true", help="stop when the run ends")
        parser.add_argument("--json", action="store_true", help="print one JSON object")

    def handle(self, *args: Any, **asked: Any) -> None:
        """Start the server, run, print, and keep serving until Ctrl-C."""
        signal.signal(signal.SIGTERM, _stop_in_order)
        if problem := _bad_options(asked):
            self._fail(asked, EXIT_BAD_INPUT, problem)
        try:
            self._rehearse(asked)
        except FAILURES as failure:
            self._fail(asked, EXIT_FAILED, _failed(failure))
        except KeyboardInterrupt:
            _say("stopped before its end: there are no numbers")
            sys.exit(EXIT_INTERRUPTED)

    def _rehearse(self, asked: dict[str, Any]) -> None:
        folder = new_folder(settings.DATA / "rehearsals", seed=asked["seed"])
        _say(f"rehearsal database in {folder}")
        server = start_server(folder, port=_pick_port(asked))
        try:
            _say(f"serving {server.url}")
            options = _options(asked)
            outcome = asyncio.run(run_rehearsal(server.url, server.link_token, options, say=_say))
            self._print(outcome, as_json=asked["json"])
            if not asked["no_serve"]:
                _keep_serving(server, outcome)
        finally:
            server.stop()

    def _print(self, outcome: Outcome, *, as_json: bool) -> None:
        _say(f"what happened: {outcome.tally}")
        self.stdout.write(json.dumps(outcome.to_json()) if as_json else outcome.in_words())
        self.stdout.flush()

    def _fail(self, asked: dict[str, Any], status: int, problem: Problem) -> NoReturn:
        """With --json one problem object on stdout; else the sentences on stderr."""
        if asked["json"]:
            self.stdout.write(json.dumps(problem.to_json()))
        else:
            _say(f"{problem.detail} {problem.advice}")
        sys.exit(status)


def _bad_options(asked: dict[str, Any]) -> Problem | None:
    speed = asked["speed"]
    rules = [
        ("--observers", 1 <= asked["observers"] <= MOST_OBSERVERS, f"1 to {MOST_OBSERVERS}"),
        ("--hours", 0 < asked["hours"] <= MOST_HOURS, f"more than 0, at most {MOST_HOURS}"),
        ("--seed", asked["seed"] >= 0, "0 or more"),
        ("--speed", speed is None or speed > 0, "more than 0"),
    ]
    wrong = [f"{option} must be {allowed}." for option, is_good, allowed in rules if not is_good]
    if not wrong:
        return None
    return Problem(
        code="bad-option",
        status=400,
        title="The rehearsal was not started",
        detail=" ".join(wrong),
        advice="See `manage.py rehearse --help`.",
    )


def _failed(failure: Exception) -> Problem:
    return Problem(
        code="rehearsal-failed",
        status=500,
        title="The rehearsal did not come to its end",
        detail=str(failure) or type(failure).__name__,
        advice="Its database is kept; start again with the same --seed to see it again.",
    )


def _options(asked: dict[str, Any]) -> Options:
    speed = asked["speed"]
    if speed is None and not asked["no_serve"]:
        speed = 3600.0 * asked["hours"] / PLAY_S
    return Options(asked["observers"], asked["hours"], asked["seed"], speed)


def _pick_port(asked: dict[str, Any]) -> int:
    """The usual port for people when it is free; any port for a run that nobody visits."""
    if asked["port"] is not None:
        return int(asked["port"])
    if asked["no_serve"]:
        return 0
    with socket.socket() as probe:
        probe.setsockopt(socket.SOL_SOCKET, socket.SO_REUSEADDR, 1)
        try:
            probe.bind(("127.0.0.1", FAVOURITE_PORT))
        except OSError:
            return 0
    return FAVOURITE_PORT


def _keep_serving(server: RehearsalServer, outcome: Outcome) -> None:
    _say(f"the board stays at {server.url}/c/{outcome.campaign}/ until Ctrl-C")
    _say(f'to go on as coordinator sign in as "{COORDINATOR_NAME}" with {outcome.password}')
    try:
        while server.is_running:
            time.sleep(0.5)
    except KeyboardInterrupt:
        _say("stopped")
        return
    raise ServerFailed("the server has ended by itself")


def _say(sentence: str) -> None:
    sys.stderr.write(f"{sentence}\n")
    sys.stderr.flush()


def _stop_in_order(*_: Any) -> None:
    raise KeyboardInterrupt
