"""An open screen: one WebSocket that follows a campaign by its events."""

from __future__ import annotations

import asyncio
from collections.abc import Callable
from dataclasses import dataclass, field
from typing import Any

import orjson
import websockets

from campaigns.events.apply import apply
from campaigns.events.state import State

Message = dict[str, Any]


class EventMissed(Exception):
    """A number was skipped: the screen must ask again from what it has."""


@dataclass
class Screen:
    """What one open screen knows. Only a screen that `keeps_state` applies the events."""

    name: str
    url: str
    token: str
    keeps_state: bool = False
    seq: int = -1
    state: State | None = None
    coverage: Message = field(default_factory=dict)
    n_events: int = 0
    n_gaps: int = 0
    n_offers: int = 0
    last_plan_seq: int = -1
    _changed: asyncio.Condition = field(default_factory=asyncio.Condition)

    async def follow(self) -> None:
        """Stay connected until cancelled, asking again after every fault."""
        while True:
            try:
                await self._listen()
            except EventMissed:
                self.n_gaps += 1
            except (OSError, websockets.WebSocketException):
                await asyncio.sleep(0.5)

    async def wait_until(self, is_reached: Callable[[Screen], bool], *, timeout_s: float) -> None:
        """Wait until what the screen has received fulfils a condition."""
        async with self._changed, asyncio.timeout(timeout_s):
            await self._changed.wait_for(lambda: is_reached(self))

    async def _listen(self) -> None:
        headers = {"Authorization": f"Bearer {self.token}"}
        address = self.url if self.seq < 0 else f"{self.url}?since={self.seq}"
        async with websockets.connect(
            address, additional_headers=headers, max_size=None, compression=None, proxy=None
        ) as socket:
            async for text in socket:
                message = orjson.loads(text)
                if message["type"] == "ask-again":
                    self.n_gaps += 1
                    return
                async with self._changed:
                    self._take(message)
                    self._changed.notify_all()

    def _take(self, message: Message) -> None:
        match message["type"]:
            case "snapshot":
                self._start_from(message)
            case "event":
                self._apply(message["event"])
            case "coverage":
                self.coverage = message

    def _start_from(self, snapshot: Message) -> None:
        self.seq = snapshot["seq"]
        self.n_offers = len(snapshot["state"]["offers"])
        self.state = snapshot["state"] if self.keeps_state else None

    def _apply(self, event: Message) -> None:
        if event["seq"] <= self.seq:
            return
        if event["seq"] != self.seq + 1:
            raise EventMissed(f"{self.seq} then {event['seq']}")
        self.seq = event["seq"]
        self.n_events += 1
        if event["kind"] == "plan.made":
            self.n_offers = len(event["payload"]["offers"])
            self.last_plan_seq = event["seq"]
        if self.state is not None:
            self.state = apply(self.state, event)
