"""From the first keystroke to a running command: help, set-up, then the command itself."""

import os
import sys

from campaigns.project.set_up import environment, front_end, run_tests, turn
from campaigns.project.set_up.places import ROOT, VENV_PYTHON, SetUpError
from campaigns.project.set_up.requirements import list_requirements, list_unsatisfied

_GUARD = "QUARTERSKY_RESTARTED_FOR"
_TEST_COMMANDS = ("test", "bench")

HELP = """\
Quartersky: a campaign board for distributed observers.

usage: python3 manage.py COMMAND [OPTIONS]     (COMMAND --help shows its options)

  rehearse   run the whole job with a simulated network, and serve its board
  test       run the tests (--all adds the slow ones)
  region     read an alert or a sky map and describe its region
  launch     open a campaign from an alert file
  plan       plan a campaign for the registered observers
  serve      serve all campaigns and run the worker
  bench      measure against general libraries, side by side

The first use sets up an environment of its own in .venv and builds the browser side.
"""


def main(argv: list[str]) -> int:
    """Run one command line; returns the exit status."""
    if len(argv) < 2 or argv[1] in ("--help", "-h", "help"):
        sys.stdout.write(HELP)
        return 0
    extras = ["test"] if argv[1] in _TEST_COMMANDS else []
    try:
        _ensure(argv, extras)
    except SetUpError as error:
        sys.stderr.write(f"set-up failed: {error}\n")
        return 3
    except KeyboardInterrupt:
        sys.stderr.write("\nset-up interrupted: the same command goes on from here.\n")
        return 3
    return _run(argv)


def _ensure(argv: list[str], extras: list[str]) -> None:
    if environment.is_ready(extras):
        if not environment.is_inside():
            _restart(argv)
    elif environment.is_inside() or list_unsatisfied(list_requirements(extras)):
        with turn.one_at_a_time():
            if not environment.is_ready(extras):
                environment.make(extras)
        _restart(argv)
    _ensure_front_end(with_tools=argv[1] == "test")


def _ensure_front_end(*, with_tools: bool) -> None:
    if front_end.is_ready(with_tools=with_tools):
        return
    with turn.one_at_a_time():
        if not front_end.is_ready(with_tools=with_tools):
            front_end.make()


def _restart(argv: list[str]) -> None:
    if os.environ.get(_GUARD) == str(VENV_PYTHON):
        raise SetUpError(".venv was made but cannot be entered: delete it and run this again.")
    os.environ[_GUARD] = str(VENV_PYTHON)
    os.execv(VENV_PYTHON, [str(VENV_PYTHON), str(ROOT / "manage.py"), *argv[1:]])


def _run(argv: list[str]) -> int:
    os.environ.pop(_GUARD, None)
    if argv[1] == "test":
        return run_tests.main(argv[2:])
    os.environ.setdefault("DJANGO_SETTINGS_MODULE", "campaigns.project.settings")
    from django.core.management import execute_from_command_line  # packages exist only now

    execute_from_command_line(argv)
    return 0
