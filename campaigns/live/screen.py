"""One open screen: what waits to be sent to it."""

import asyncio
from collections import deque
from collections.abc import Iterable

from campaigns.live.messages import ASK_AGAIN


class Screen:
    """A bounded queue of messages.

    A screen that does not keep up is told to ask again and hears nothing more: what it would
    have missed it gets as a replay, and nobody else waits for it.
    """

    def __init__(self, *, queue_length: int) -> None:
        self._queue_length = queue_length
        self._waiting: deque[str] = deque()
        self._is_ready = asyncio.Event()
        self._is_over = False

    @property
    def is_over(self) -> bool:
        """True when nothing more will be added."""
        return self._is_over

    def start_with(self, texts: Iterable[str]) -> None:
        """Queue what the screen asked for, however long, before it hears the others."""
        self._waiting.extend(texts)
        self._is_ready.set()

    def give(self, text: str) -> None:
        """Queue one message, or give up on a screen whose queue is full."""
        if self._is_over:
            return
        if len(self._waiting) >= self._queue_length:
            self.ask_again()
            return
        self._waiting.append(text)
        self._is_ready.set()

    def ask_again(self) -> None:
        """Forget what waits; the last message says that the screen has a hole."""
        self._waiting.clear()
        self.end_with(ASK_AGAIN)

    def end_with(self, text: str) -> None:
        """Queue a last message."""
        self._waiting.append(text)
        self._is_over = True
        self._is_ready.set()

    async def next_text(self) -> str | None:
        """Wait for the next message; None after the last one."""
        while not self._waiting:
            if self._is_over:
                return None
            self._is_ready.clear()
            await self._is_ready.wait()
        return self._waiting.popleft()
