"""The whole command, as somebody types it: a real server, real HTTP, real sockets."""

import json
import os
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parents[3]
SHORT = ("--observers", "16", "--hours", "4", "--no-serve", "--json")


def rehearse(data, *options):
    return subprocess.run(
        [sys.executable, str(ROOT / "manage.py"), "rehearse", *options],
        env={**os.environ, "QUARTERSKY_DATA": str(data)},
        cwd=ROOT,
        capture_output=True,
        text=True,
        timeout=400,
        check=False,
    )


@pytest.mark.parametrize(
    "options", [("--observers", "0"), ("--hours", "-1"), ("--seed", "-4"), ("--speed", "0")]
)
def test_bad_options_are_refused_in_one_problem_object(tmp_path, options):
    done = rehearse(tmp_path, *options, "--json")
    problem = json.loads(done.stdout)
    assert done.returncode == 2
    assert options[0] in problem["detail"]
    assert {"type", "title", "status", "detail", "code", "advice"} <= problem.keys()


def test_a_short_rehearsal_ends_with_every_promised_number(tmp_path):
    done = rehearse(tmp_path, *SHORT)
    assert done.returncode == 0, done.stderr
    outcome = json.loads(done.stdout)
    assert 0 < outcome["searched"] < outcome["imaged"] <= 1
    assert outcome["n_observers"] == 16
    assert outcome["n_frames"] > 0
    assert outcome["found"] is None or {"seconds", "frame"} == outcome["found"].keys()
    assert 0 < outcome["certificate"] <= 1
    # An account apart from the ledger: 40,000 hidden sources, statistical error below 0.003.
    assert outcome["many_sources_found"] == pytest.approx(outcome["searched"], abs=0.006)
    assert "rebuilt the same state from their own events" in done.stderr


@pytest.mark.slow
def test_the_same_seed_gives_the_same_numbers(tmp_path):
    first, second = (json.loads(rehearse(tmp_path, *SHORT).stdout) for _ in range(2))
    assert second["imaged"] == pytest.approx(first["imaged"], abs=1e-9)
    assert second["searched"] == pytest.approx(first["searched"], abs=1e-9)
    same = ("n_frames", "n_claims", "n_events", "found", "many_sources_found", "certificate")
    assert {key: second[key] for key in same} == {key: first[key] for key in same}


@pytest.mark.slow
def test_another_seed_gives_another_night(tmp_path):
    first = json.loads(rehearse(tmp_path, *SHORT).stdout)
    second = json.loads(rehearse(tmp_path, *SHORT, "--seed", "2").stdout)
    assert first["searched"] != second["searched"]
