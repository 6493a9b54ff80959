"""The rehearsal's own server: `serve` in a process of its own, with a database of its own."""

from __future__ import annotations

import os
import re
import signal
import subprocess
import sys
import threading
import time
from dataclasses import dataclass, field
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
URL = re.compile(r"http://(?:127\.0\.0\.1|localhost):\d+")
LINK = re.compile(r"/join/([A-Za-z0-9_\-]+)")
START_TIMEOUT_S = 90.0
STOP_TIMEOUT_S = 15.0


class ServerFailed(RuntimeError):
    """The server did not start, or stopped when it should not have."""


@dataclass
class RehearsalServer:
    """A running `serve`: where it listens, and the link that makes the first coordinator."""

    process: subprocess.Popen[str]
    lines: list[str] = field(default_factory=list)
    url: str = ""
    link_token: str = ""
    listener: threading.Thread = field(init=False)
    _heard: threading.Condition = field(default_factory=threading.Condition)
    _has_ended: bool = False

    def __post_init__(self) -> None:
        self.listener = threading.Thread(target=self._listen, daemon=True)
        self.listener.start()

    @property
    def is_running(self) -> bool:
        """Whether the process lives."""
        return self.process.poll() is None

    def wait_until_ready(self) -> None:
        """Wait for the address and the one-time link that `serve` prints."""
        with self._heard:
            self._heard.wait_for(self._is_ready_or_over, timeout=START_TIMEOUT_S)
        if not (self.url and self.link_token):
            self.stop()
            raise ServerFailed("the server did not start; it said:\n" + "\n".join(self.lines[-20:]))

    def stop(self) -> None:
        """Ask it to stop (its worker stops with it); insist when it does not."""
        if self.is_running:
            self.process.send_signal(signal.SIGTERM)
        try:
            self.process.wait(STOP_TIMEOUT_S)
        except subprocess.TimeoutExpired:
            self.process.kill()
            self.process.wait()
        # Its last words are heard before the pipe is closed.
        self.listener.join(STOP_TIMEOUT_S)

    def _is_ready_or_over(self) -> bool:
        return bool(self.url and self.link_token) or self._has_ended

    def _listen(self) -> None:
        assert self.process.stdout is not None
        with self.process.stdout as spoken:
            for line in spoken:
                with self._heard:
                    self._note(line.rstrip())
                    self._heard.notify_all()
        with self._heard:
            self._has_ended = True
            self._heard.notify_all()

    def _note(self, line: str) -> None:
        self.lines.append(line)
        if not self.url and (url := URL.search(line)):
            self.url = url.group(0)
        if not self.link_token and (link := LINK.search(line)):
            self.link_token = link.group(1)


def start_server(folder: Path, *, port: int = 0) -> RehearsalServer:
    """Start `serve` on a new database in `folder`; it migrates first."""
    environment = {
        **os.environ,
        "QUARTERSKY_DATA": str(folder),
        "DATABASE_URL": f"sqlite:///{folder / 'rehearsal.sqlite3'}",
        # A rehearsal is one server: it never joins the hub of a real one.
        "REDIS_URL": "",
        "PYTHONUNBUFFERED": "1",
    }
    process = subprocess.Popen(
        [*_manage(), "serve", "--host", "127.0.0.1", "--port", str(port)],
        env=environment,
        cwd=ROOT,
        stdin=subprocess.DEVNULL,
        stdout=subprocess.PIPE,
        stderr=subprocess.STDOUT,
        text=True,
        # Ctrl-C reaches the driver alone, which then stops the server in order.
        start_new_session=True,
    )
    server = RehearsalServer(process)
    server.wait_until_ready()
    return server


def new_folder(rehearsals: Path, *, seed: int) -> Path:
    """A folder for one rehearsal's database, never one that exists."""
    rehearsals.mkdir(parents=True, exist_ok=True)
    stamp = time.strftime("%Y%m%dT%H%M%S", time.gmtime())
    for number in range(1000):
        folder = rehearsals / f"{stamp}-seed{seed}-{number}"
        try:
            folder.mkdir()
        except FileExistsError:
            continue
        return folder
    raise ServerFailed(f"no new folder could be made in {rehearsals}")


def _manage() -> list[str]:
    return [sys.executable, str(ROOT / "manage.py")]
