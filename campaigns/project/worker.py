"""The worker as a child: started with the server, restarted when it dies, stopped with it."""

import logging
import os
import subprocess
import sys
import threading
import time

from django.conf import settings

logger = logging.getLogger(__name__)

_STOP_WAIT_S = 10.0
_RESTART_WAIT_S = 2.0


class WorkerProcess:
    """`manage.py work` in a process of its own.

    It reads from a pipe that only we hold: when this process ends in whatever way, the pipe
    closes and the worker ends too.
    """

    def __init__(self) -> None:
        self._is_wanted = True
        self._process = _start()
        threading.Thread(target=self._watch, name="worker-watch", daemon=True).start()

    @property
    def pid(self) -> int:
        """The id of the present process."""
        return self._process.pid

    def stop(self) -> None:
        """Ask it to end; insist when it does not."""
        self._is_wanted = False
        process = self._process
        if process.stdin:
            process.stdin.close()
        process.terminate()
        try:
            process.wait(_STOP_WAIT_S)
        except subprocess.TimeoutExpired:
            process.kill()
            process.wait()

    def _watch(self) -> None:
        while self._is_wanted:
            status = self._process.wait()
            if not self._is_wanted:
                return
            logger.error("the worker ended with status %s; starting another", status)
            time.sleep(_RESTART_WAIT_S)
            if self._is_wanted:
                self._process = _start()


def _start() -> "subprocess.Popen[bytes]":
    paths = [str(settings.ROOT), os.environ.get("PYTHONPATH", "")]
    environment = {
        **os.environ,
        "PYTHONPATH": os.pathsep.join(path for path in paths if path),
        "DJANGO_SETTINGS_MODULE": "campaigns.project.settings",
    }
    command = [sys.executable, "-m", "django", "work", "--with-stdin"]
    return subprocess.Popen(
        command,
        env=environment,
        stdin=subprocess.PIPE,
        stdout=sys.stderr.fileno() if _has_stderr() else subprocess.DEVNULL,
        # Ctrl-C reaches the server alone, which then stops the worker in order.
        start_new_session=True,
    )


def _has_stderr() -> bool:
    try:
        sys.stderr.fileno()
    except (OSError, ValueError):
        return False
    return True
