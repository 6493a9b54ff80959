"""Short write transactions, one after the other and first come first served on SQLite."""

import threading
from collections import deque
from collections.abc import Iterator
from contextlib import contextmanager

from django.db import connection, transaction


class Turnstile:
    """A lock that lets threads through in the order in which they came.

    SQLite lets its waiting writers retry at random, so some wait for seconds; a fair queue in
    front of it keeps the longest wait near the mean. The thread that holds it may enter again.
    """

    def __init__(self) -> None:
        self._guard = threading.Lock()
        self._waiting: deque[threading.Lock] = deque()
        self._holder: int | None = None
        self._depth = 0

    def enter(self) -> None:
        """Wait for one's turn."""
        me = threading.get_ident()
        with self._guard:
            if self._holder in (None, me):
                self._holder = me
                self._depth += 1
                return
            gate = threading.Lock()
            gate.acquire()
            self._waiting.append(gate)
        gate.acquire()
        with self._guard:
            self._holder = me

    def leave(self) -> None:
        """Let the next one through."""
        with self._guard:
            assert self._holder == threading.get_ident(), "only the holder leaves"
            self._depth -= 1
            if self._depth:
                return
            if self._waiting:
                # Handed over directly: whoever comes now queues behind.
                self._holder, self._depth = -1, 1
                self._waiting.popleft().release()
            else:
                self._holder = None


_turnstile = Turnstile()


@contextmanager
def write_transaction() -> Iterator[None]:
    """One atomic block; inside another one it simply belongs to it.

    Judge before, write inside, and keep it tiny: everybody else waits.
    """
    if connection.vendor != "sqlite":
        with transaction.atomic():
            yield
        return
    _turnstile.enter()
    try:
        with transaction.atomic():
            yield
    finally:
        _turnstile.leave()
