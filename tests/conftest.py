"""What every test may rely on."""

import os
import shutil
import signal
import socket
import subprocess
import tempfile
import time
from pathlib import Path

import hypothesis
import pytest

_NEEDED = ("browser", "postgresql", "redis")
_skipped: list[str] = []

# The same examples every time, and no time limit that a busy machine could break.
hypothesis.settings.register_profile("steady", derandomize=True, deadline=None, database=None)
hypothesis.settings.load_profile("steady")


@pytest.hookimpl(wrapper=True)
def pytest_runtest_logreport(report):
    """Remember skips of tests that CI must not skip."""
    if report.skipped and any(marker in report.keywords for marker in _NEEDED):
        _skipped.append(report.nodeid)
    return (yield)


def pytest_sessionfinish(session):
    """QUARTERSKY_REQUIRE=all: a skipped browser, PostgreSQL or Redis test fails the run."""
    is_controller = not hasattr(session.config, "workerinput")
    if _skipped and is_controller and os.environ.get("QUARTERSKY_REQUIRE") == "all":
        session.exitstatus = pytest.ExitCode.TESTS_FAILED


def pytest_terminal_summary(terminalreporter):
    for name in _skipped:
        terminalreporter.write_line(f"needed, but skipped: {name}")


@pytest.fixture(scope="session")
def postgresql_url():
    """A private PostgreSQL on a free port, gone after the run."""
    folder = shutil.which("initdb", path=":".join(_postgresql_folders()))
    if folder is None:
        pytest.skip("PostgreSQL is not installed (Debian: apt install postgresql)")
    programs = Path(folder).parent
    data = Path(tempfile.mkdtemp(prefix="quartersky-postgresql-"))
    user = _postgresql_user(data)
    port = _free_port()
    subprocess.run(
        [programs / "initdb", "-D", data / "db", "-A", "trust", "-U", "postgres"],
        check=True,
        capture_output=True,
        user=user,
    )
    server = subprocess.Popen(
        [programs / "postgres", "-D", data / "db", "-p", str(port), "-k", data],
        stdout=subprocess.DEVNULL,
        stderr=subprocess.DEVNULL,
        user=user,
    )
    _wait_until_ready(programs, port)
    yield f"postgresql://postgres@127.0.0.1:{port}/postgres"
    server.send_signal(signal.SIGINT)
    server.wait(timeout=20)
    shutil.rmtree(data, ignore_errors=True)


def _postgresql_folders():
    return [str(folder) for folder in Path("/usr/lib/postgresql").glob("*/bin")]


def _postgresql_user(data):
    """Its initdb refuses root: use the account that the Debian package makes."""
    if os.geteuid() != 0:
        return None
    shutil.chown(data, "postgres")
    return "postgres"


def _free_port():
    with socket.socket() as probe:
        probe.bind(("127.0.0.1", 0))
        return probe.getsockname()[1]


def _wait_until_ready(programs, port, *, timeout_s=30):
    deadline = time.monotonic() + timeout_s
    while time.monotonic() < deadline:
        answer = subprocess.run(
            [programs / "pg_isready", "-h", "127.0.0.1", "-p", str(port)],
            capture_output=True,
            check=False,
        )
        if answer.returncode == 0:
            return
        time.sleep(0.05)
    pytest.fail("PostgreSQL did not start")
