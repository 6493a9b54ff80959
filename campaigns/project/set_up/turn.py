"""One set-up at a time: a second run waits and says so."""

import contextlib
from collections.abc import Iterator

from campaigns.project.set_up.places import CACHE, SetUpError, say

try:
    import fcntl
except ImportError:  # Windows proper
    fcntl = None  # type: ignore[assignment]


@contextlib.contextmanager
def one_at_a_time() -> Iterator[None]:
    """Hold the set-up lock; the system drops it when the process ends, however it ends."""
    if fcntl is None:
        raise SetUpError("Quartersky runs on Linux and macOS; on Windows use WSL.")
    CACHE.mkdir(exist_ok=True)
    with open(CACHE / "set-up.lock", "w") as lock:
        try:
            fcntl.flock(lock, fcntl.LOCK_EX | fcntl.LOCK_NB)
        except BlockingIOError:
            say("another set-up is running in this folder: waiting for it")
            fcntl.flock(lock, fcntl.LOCK_EX)
        yield
