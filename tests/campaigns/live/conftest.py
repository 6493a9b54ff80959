"""A real server on a free port with a database of its own, and a second shell beside it."""

import asyncio
import contextlib
import json
import os
import re
import subprocess
import sys
import time
from pathlib import Path

import orjson
import pytest
import websockets

ROOT = Path(__file__).resolve().parents[3]
START_S = 60


class Shell:
    """Another process on the same database: it writes rows and events on request."""

    def __init__(self, environment):
        self._process = subprocess.Popen(
            [sys.executable, str(Path(__file__).with_name("second_shell.py"))],
            env=environment,
            cwd=ROOT,
            stdin=subprocess.PIPE,
            stdout=subprocess.PIPE,
            text=True,
        )

    def __call__(self, order, **arguments):
        self._process.stdin.write(json.dumps({"order": order, **arguments}) + "\n")
        self._process.stdin.flush()
        answer = json.loads(self._process.stdout.readline())
        assert "fault" not in answer, answer["fault"]
        return answer["done"]

    def close(self):
        self._process.stdin.close()
        self._process.wait(timeout=10)
        self._process.stdout.close()


class Server:
    """One running `serve`."""

    def __init__(self, environment):
        self._process = subprocess.Popen(
            [sys.executable, "-m", "django", "serve", "--port", "0", "--no-worker"],
            env=environment,
            cwd=ROOT,
            stdout=subprocess.PIPE,
            text=True,
        )
        self.url = self._read_url()

    @property
    def pid(self):
        return self._process.pid

    def _read_url(self):
        deadline = time.monotonic() + START_S
        while time.monotonic() < deadline:
            line = self._process.stdout.readline()
            if found := re.search(r"http://[\d.]+:\d+", line):
                return found[0]
            assert self._process.poll() is None, "the server ended"
        raise AssertionError("the server did not start")

    def socket_address(self, campaign_id, query=""):
        host = self.url.removeprefix("http://")
        return f"ws://{host}/live/campaigns/{campaign_id}/{query}"

    def kill(self):
        self._process.kill()
        self._process.wait()

    def close(self):
        self._process.terminate()
        with contextlib.suppress(subprocess.TimeoutExpired):
            self._process.wait(timeout=15)
        self.kill()
        self._process.stdout.close()


@pytest.fixture(scope="package")
def data_folder(tmp_path_factory):
    return tmp_path_factory.mktemp("live")


@pytest.fixture(scope="package")
def environment(data_folder):
    return {
        **os.environ,
        "QUARTERSKY_DATA": str(data_folder),
        "DATABASE_URL": f"sqlite:///{data_folder / 'live.sqlite3'}",
        "REDIS_URL": "",
        "DJANGO_SETTINGS_MODULE": "campaigns.project.settings",
        "PYTHONPATH": os.pathsep.join(p for p in (str(ROOT), os.environ.get("PYTHONPATH")) if p),
        "PYTHONUNBUFFERED": "1",
    }


@pytest.fixture(scope="package")
def server(environment):
    server = Server(environment)
    yield server
    server.close()


@pytest.fixture(scope="package")
def shell(server, environment):
    shell = Shell(environment)
    yield shell
    shell.close()


@pytest.fixture
def campaign(shell):
    """A live campaign of a few pixels that everybody may watch."""
    return shell("make_campaign", is_public=True)


@pytest.fixture
def start_server(environment):
    """Further servers on the same database."""
    started = []

    def start():
        started.append(Server(environment))
        return started[-1]

    yield start
    for server in started:
        server.close()


@pytest.fixture
def start_on(environment):
    """A server and a shell on another database."""
    started = []

    def start(database_url):
        elsewhere = {**environment, "DATABASE_URL": database_url}
        started.append(Server(elsewhere))
        started.append(Shell(elsewhere))
        return tuple(started[-2:])

    yield start
    for process in reversed(started):
        process.close()


class OpenScreen:
    """A screen that follows the socket as a browser does."""

    def __init__(self, socket):
        self.socket = socket
        self.seq = None
        self.state = None
        self.seqs = []
        self.messages = []
        self.coverage = []

    async def hear(self, timeout_s=5.0):
        message = orjson.loads(await asyncio.wait_for(self.socket.recv(), timeout_s))
        self.messages.append(message)
        if message["type"] == "snapshot":
            self.seq, self.state = message["seq"], message["state"]
        elif message["type"] == "event":
            self.seq = message["event"]["seq"]
            self.seqs.append(self.seq)
        elif message["type"] == "coverage":
            self.coverage.append(message)
        return message

    async def hear_until(self, is_reached, timeout_s=5.0):
        deadline = time.monotonic() + timeout_s
        while not is_reached(self):
            await self.hear(max(0.01, deadline - time.monotonic()))
        return self

    async def hear_seq(self, seq, timeout_s=5.0):
        return await self.hear_until(lambda screen: (screen.seq or 0) >= seq, timeout_s)

    async def hear_coverage(self, seq):
        return await self.hear_until(lambda screen: screen.coverage[-1]["through_seq"] >= seq)


@pytest.fixture
def open_screen(request):
    """`async with open_screen(campaign, since=3, token=...) as screen`."""

    @contextlib.asynccontextmanager
    async def open_it(campaign_id, *, at=None, since=None, token=None, headers=None, **more):
        query = "" if since is None else f"?since={since}"
        headers = dict(headers or {})
        if token:
            headers["Authorization"] = f"Bearer {token}"
        at = at or request.getfixturevalue("server")
        address = at.socket_address(campaign_id, query)
        async with websockets.connect(
            address, additional_headers=headers, max_size=None, proxy=None, **more
        ) as socket:
            yield OpenScreen(socket)

    return open_it
