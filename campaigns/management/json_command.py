"""What the commands for outside programs share: one object with --json, exit 2 on bad input."""

import json
import sys
from argparse import ArgumentParser
from collections.abc import Mapping
from typing import Any

from django.core.management import call_command
from django.core.management.base import BaseCommand, CommandError

from campaigns.problem_details import Problem, problem_of
from observers.errors import CampaignError
from skytiles.errors import SkytilesError

BAD_INPUT = 2


class JsonCommand(BaseCommand):
    """Subclasses write `answer` (the object) and `in_words` (for people)."""

    requires_migrations_checks = False
    # The checks import every page and view; these commands need none of them.
    requires_system_checks: list[str] = []
    needs_database = True

    def create_parser(self, prog_name: str, subcommand: str, **kwargs: Any) -> Any:
        """A wrong option is bad input like any other: raised, not printed and exited."""
        parser = super().create_parser(prog_name, subcommand, **kwargs)
        parser.called_from_command_line = False
        return parser

    def run_from_argv(self, argv: list[str]) -> None:
        """Turn a wrong command line into a problem."""
        try:
            super().run_from_argv(argv)
        except CommandError as error:
            advice = f"See manage.py {argv[1]} --help."
            problem = _bad_options(str(error).removeprefix("Error: "), advice)
            self._fail(problem, as_json="--json" in argv)

    def add_arguments(self, parser: ArgumentParser) -> None:
        """The option that all of them have."""
        parser.add_argument("--json", action="store_true", help="print one JSON object")

    def handle(self, *args: Any, **options: Any) -> None:
        """Answer, or say what is wrong and exit with 2."""
        try:
            if self.needs_database:
                call_command("migrate", verbosity=0, interactive=False)
            answer = self.answer(options)
        except (CampaignError, SkytilesError) as error:
            problem = problem_of(error)
            assert problem is not None, "both families have problems"
            self._fail(problem, as_json=options["json"])
            return
        text = json.dumps(answer) if options["json"] else self.in_words(answer)
        self.stdout.write(text)

    def answer(self, options: Mapping[str, Any]) -> dict[str, Any]:
        """What is printed with --json."""
        raise NotImplementedError

    def in_words(self, answer: Mapping[str, Any]) -> str:
        """The same for people."""
        raise NotImplementedError

    def say(self, text: str) -> None:
        """Progress goes to stderr, so that stdout stays pure."""
        self.stderr.write(text)

    def _fail(self, problem: Problem, *, as_json: bool) -> None:
        if as_json:
            self.stdout.write(json.dumps(problem.to_json()))
            self.stdout.flush()
        else:
            self.say(f"{problem.detail} {problem.advice}")
        sys.exit(BAD_INPUT)


def _bad_options(detail: str, advice: str) -> Problem:
    return Problem("bad-options", 400, "The command line cannot be used", detail, advice)
