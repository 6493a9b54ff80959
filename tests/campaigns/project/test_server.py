"""`serve` as people start it: a process with its worker."""

import contextlib
import os
import re
import shutil
import signal
import socket
import subprocess
import sys
import time
from datetime import UTC, datetime
from pathlib import Path

import httpx
import pytest

ROOT = Path(__file__).resolve().parents[3]
START_S = 60


class Served:
    def __init__(self, folder, *arguments):
        environment = {
            **os.environ,
            "QUARTERSKY_DATA": str(folder),
            "DATABASE_URL": "",
            "REDIS_URL": "",
            "DJANGO_SETTINGS_MODULE": "campaigns.project.settings",
            "PYTHONUNBUFFERED": "1",
        }
        self.process = subprocess.Popen(
            [sys.executable, "-m", "django", "serve", "--port", "0", *arguments],
            env=environment,
            cwd=ROOT,
            stdout=subprocess.PIPE,
            stderr=subprocess.DEVNULL,
            text=True,
        )
        self.lines = []

    def read_until(self, pattern):
        deadline = time.monotonic() + START_S
        while time.monotonic() < deadline:
            line = self.process.stdout.readline()
            assert line or self.process.poll() is None, self.lines
            self.lines.append(line)
            if found := re.search(pattern, line):
                return found[0]
        raise AssertionError(self.lines)

    def close(self):
        if self.process.poll() is None:
            self.process.terminate()
            with contextlib.suppress(subprocess.TimeoutExpired):
                self.process.wait(timeout=20)
        if self.process.poll() is None:
            self.process.kill()
            self.process.wait()
        self.process.stdout.close()


@pytest.fixture
def serve(tmp_path):
    started = []

    def start(*arguments):
        started.append(Served(tmp_path, *arguments))
        return started[-1]

    yield start
    for served in started:
        served.close()


def _children(pid):
    """Process ids whose parent is `pid`."""
    lines = subprocess.run(
        ["ps", "-A", "-o", "pid=,ppid="], capture_output=True, text=True, check=True
    ).stdout.splitlines()
    pairs = [tuple(map(int, line.split())) for line in lines]
    return [child for child, parent in pairs if parent == pid]


def _is_running(pid):
    try:
        os.kill(pid, 0)
    except ProcessLookupError:
        return False
    return not _is_zombie(pid)


def _is_zombie(pid):
    state = Path(f"/proc/{pid}/stat")
    return state.exists() and ") Z " in state.read_text()


def _wait_until(is_reached, *, timeout_s):
    deadline = time.monotonic() + timeout_s
    while time.monotonic() < deadline:
        if is_reached():
            return True
        time.sleep(0.05)
    return False


def test_a_new_server_prints_its_port_and_a_link_that_makes_the_first_coordinator(serve):
    served = serve("--no-worker")
    url = served.read_until(r"http://127\.0\.0\.1:[1-9]\d*")
    token = served.read_until(r"/join/[\w-]+").removeprefix("/join/")
    with httpx.Client(base_url=url, trust_env=False) as browser:
        assert browser.get(f"/join/{token}/").status_code == 200
        body = {"token": token, "name": "Ada Merken", "password": "a dark clear night"}
        session = browser.post("/api/v1/invitations/accept", json=body)
        assert session.json()["observer"]["role"] == "coordinator"
        assert browser.get("/launch/").status_code == 200
    served.close()
    again = serve("--no-worker")
    again.read_until("http://")
    again.close()
    assert "/join/" not in "".join(again.lines)


@contextlib.contextmanager
def _coordinator(served):
    """A browser that is signed in as the first coordinator."""
    url = served.read_until(r"http://127\.0\.0\.1:[1-9]\d*")
    token = served.read_until(r"/join/[\w-]+").removeprefix("/join/")
    with httpx.Client(base_url=f"{url}/api/v1", trust_env=False, timeout=30) as browser:
        body = {"token": token, "name": "Ada Merken", "password": "a dark clear night"}
        session = browser.post("/invitations/accept", json=body).json()
        browser.headers["X-CSRFToken"] = session["csrf"]
        yield browser


def _cone(now):
    return {
        "id": "invented-7",
        "event_time": now.isoformat(),
        "kind": "neutrino burst",
        "role": "observation",
        "constraints": [{"type": "cone", "ra_deg": 30.0, "dec_deg": 80.0, "radius_deg": 3.0}],
    }


def _gear(browser):
    site = {"name": "hill", "latitude_deg": 60.0, "longitude_deg": 10.0}
    site_id = browser.post("/sites", json=site).raise_for_status().json()["id"]
    sizes = {"width_deg": 2.0, "height_deg": 2.0, "aperture_mm": 200.0, "pixel_arcsec": 2.0}
    camera = {"site": site_id, "name": "camera", "kind": "camera", **sizes}
    browser.post("/instruments", json=camera).raise_for_status()


def test_a_new_campaign_is_planned_by_the_worker_without_being_asked(serve):
    served = serve()
    with _coordinator(served) as browser:
        _gear(browser)
        body = {"alert": _cone(datetime.now(UTC)), "title": "An invented burst"}
        launched = browser.post("/campaigns", json=body).raise_for_status().json()
        address = f"/campaigns/{launched['campaign']}"

        def kinds():
            events = browser.get(f"{address}/events", params={"since": 0}).json()["events"]
            return [event["kind"] for event in events]

        assert _wait_until(lambda: "plan.made" in kinds(), timeout_s=30), kinds()
        assert browser.get(address).json()["state"]["plan"] is not None


@pytest.mark.skipif(shutil.which("ps") is None, reason="needs ps")
@pytest.mark.parametrize("ending", [signal.SIGTERM, signal.SIGINT, signal.SIGKILL])
def test_the_worker_lives_and_ends_with_the_server(serve, ending):
    served = serve()
    served.read_until("http://")
    assert _wait_until(lambda: _children(served.process.pid), timeout_s=10)
    (worker,) = _children(served.process.pid)
    served.process.send_signal(ending)
    served.process.wait(timeout=20)
    assert _wait_until(lambda: not _is_running(worker), timeout_s=10)


@pytest.mark.skipif(shutil.which("ps") is None, reason="needs ps")
def test_a_worker_that_dies_is_replaced(serve):
    served = serve()
    served.read_until("http://")
    assert _wait_until(lambda: _children(served.process.pid), timeout_s=10)
    (worker,) = _children(served.process.pid)
    os.kill(worker, signal.SIGKILL)
    assert _wait_until(
        lambda: [pid for pid in _children(served.process.pid) if pid != worker], timeout_s=10
    )


def test_a_port_that_is_taken_is_said_and_nothing_is_served(tmp_path):
    with socket.socket() as taken:
        taken.bind(("127.0.0.1", 0))
        taken.listen()
        port = str(taken.getsockname()[1])
        done = subprocess.run(
            [sys.executable, "-m", "django", "serve", "--port", port],
            env={
                **os.environ,
                "QUARTERSKY_DATA": str(tmp_path),
                "DATABASE_URL": "",
                "DJANGO_SETTINGS_MODULE": "campaigns.project.settings",
            },
            cwd=ROOT,
            capture_output=True,
            text=True,
            timeout=60,
            check=False,
        )
    assert done.returncode == 2
    assert port in done.stderr
    assert "--port" in done.stderr
