"""Races on a real database: exactly one wins, everybody else gets a clear answer."""

import json
import os
import subprocess
import sys
from pathlib import Path

import pytest

psycopg = pytest.importorskip("psycopg")

SCRIPT = Path(__file__).with_name("run_contest.py")


@pytest.fixture(params=["sqlite", pytest.param("postgresql", marks=pytest.mark.postgresql)])
def contest(request, tmp_path):
    """Run a contest in a process of its own."""
    environment = {**os.environ, "QUARTERSKY_DATA": str(tmp_path)}
    environment.pop("DATABASE_URL", None)
    if request.param == "postgresql":
        environment["DATABASE_URL"] = _new_database(request.getfixturevalue("postgresql_url"))

    def run(name, number):
        done = subprocess.run(
            [sys.executable, SCRIPT, name, str(number)],
            env=environment,
            capture_output=True,
            text=True,
            check=False,
            timeout=300,
        )
        assert done.returncode == 0, done.stderr[-3000:]
        return json.loads(done.stdout)

    return run


def _new_database(url):
    with psycopg.connect(url, autocommit=True) as connection:
        name = f"contest_{os.getpid()}_{os.urandom(3).hex()}"
        connection.execute(f"CREATE DATABASE {name}")
    return f"{url.rsplit('/', 1)[0]}/{name}"


def test_of_forty_who_grab_one_tile_one_holds_it(contest):
    outcome = contest("grab", 40)
    assert outcome["answers"].pop("tile-taken") == 39
    assert list(outcome["answers"].values()) == [1]
    assert outcome["n_held"] == 1
    assert outcome["n_alternatives"] == 39
    assert outcome["is_gapless"]


# A private PostgreSQL has 100 connections; forty grabs run on it.
@pytest.mark.slow
@pytest.mark.parametrize("contest", ["sqlite"], indirect=True)
def test_of_two_hundred_who_grab_one_tile_one_holds_it(contest):
    outcome = contest("grab", 200)
    assert outcome["answers"].pop("tile-taken") == 199
    assert outcome["n_held"] == 1
    assert outcome["n_alternatives"] == 199


def test_the_same_key_at_the_same_time_gives_the_same_answer(contest):
    outcome = contest("same_key", 12)
    assert len(outcome["answers"]) == 1
    assert outcome["n_claims"] == outcome["n_keys"] == 1
    assert outcome["is_gapless"]


def test_twenty_writers_meet_no_error(contest):
    outcome = contest("throughput", 200)
    assert outcome["answers"] == {"201": 200}
    assert outcome["is_gapless"]


def test_revisions_at_the_same_time_come_one_after_the_other(contest):
    outcome = contest("revise", 5)
    answers = outcome["answers"]
    n_added = answers["201"]
    assert answers.pop("True") == 1
    assert n_added + answers.get("region-moved", 0) == 4
    # Whoever is told to look again has changed nothing; everybody else stands in the record.
    assert outcome["revisions"] == list(range(1, n_added + 2))
    assert outcome["positions"] == outcome["in_use"] == list(range(n_added + 1))
    assert outcome["worst_tile"] < 1e-12
    assert outcome["base_is_newest"]
    assert outcome["is_gapless"]
