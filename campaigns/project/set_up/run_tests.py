"""`manage.py test`: the scripts' tests under node, then pytest in a fresh process."""

import os
import subprocess
import sys

from campaigns.project.set_up import front_end
from campaigns.project.set_up.places import ROOT, STATIC, say


def main(arguments: list[str]) -> int:
    """Run both suites; the exit status is bad when either is. `--all` adds the slow tests."""
    wants_all = "--all" in arguments
    rest = [argument for argument in arguments if argument != "--all"]
    script_status = 0 if rest else _run_script_tests()
    return _run_pytest(rest, wants_all=wants_all) or script_status


def _run_script_tests() -> int:
    node = front_end.find_node()
    npm = front_end.npm_script(node)
    statuses = []
    for task in ("check", "test"):
        say(f"scripts: npm run {task}")
        command = [node, npm, "run", "--silent", task]
        statuses.append(subprocess.run(command, cwd=STATIC, check=False).returncode)
    return max(statuses)


def _run_pytest(rest: list[str], *, wants_all: bool) -> int:
    command = [sys.executable, "-m", "pytest"]
    if not rest:
        command += ["-n", str(min(4, os.cpu_count() or 1)), "--dist", "loadgroup"]
    if not wants_all and not any(argument.startswith("-m") for argument in rest):
        command += ["-m", "not slow"]
    return subprocess.run([*command, *rest], cwd=ROOT, check=False).returncode
