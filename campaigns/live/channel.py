"""The ASGI application behind /live/campaigns/<id>/ and the hubs of this process."""

import asyncio
import contextlib
import logging
from collections.abc import Awaitable, Callable
from typing import Any
from urllib.parse import parse_qs

from django.conf import settings

from campaigns.events import after_commit
from campaigns.live.hub import CampaignHub
from campaigns.live.messages import problem_text
from campaigns.live.reading import ReadingThreads, read_heads
from campaigns.live.screen import Screen
from campaigns.live.visitor import (
    Visitor,
    check_may_watch,
    is_own_origin,
    read_headers,
    visitor_of,
)
from campaigns.problem_details import problem_of
from observers.errors import CampaignError

logger = logging.getLogger(__name__)

Receive = Callable[[], Awaitable[dict[str, Any]]]
Send = Callable[[dict[str, Any]], Awaitable[None]]


class LiveChannel:
    """Sockets come in here; hubs are made for the first screen and dropped after the last."""

    def __init__(self) -> None:
        self.hubs: dict[str, CampaignHub] = {}
        self.n_faults = 0
        self._visitors: dict[Screen, Visitor] = {}
        self._threads = ReadingThreads()
        self._loop: asyncio.AbstractEventLoop | None = None
        self._tasks: list[asyncio.Task[None]] = []
        after_commit.register(self.hear)

    async def __call__(self, scope: dict[str, Any], receive: Receive, send: Send) -> None:
        """One socket, from its opening to its end."""
        self._start()
        await receive()
        headers = read_headers(scope)
        if not is_own_origin(headers):
            await send({"type": "websocket.close", "code": 4403})
            return
        campaign_id = scope["url_route"]["kwargs"]["campaign_id"]
        visitor = visitor_of(headers)
        await send({"type": "websocket.accept"})
        try:
            await self._threads.run(check_may_watch, visitor, campaign_id)
        except CampaignError as error:
            await _refuse(send, error)
            return
        await self._serve(campaign_id, visitor, _since(scope), receive, send)

    def hear(self, campaign_id: str, hint: str) -> None:
        """Something was committed (called in any thread, never blocks)."""
        loop = self._loop
        if loop is not None and not loop.is_closed():
            loop.call_soon_threadsafe(self._on_hint, campaign_id, hint)

    async def close(self) -> None:
        """The process stops."""
        after_commit.unregister(self.hear)
        for task in self._tasks:
            task.cancel()
        for hub in self.hubs.values():
            hub.close()
        self._threads.close()

    # --- one socket -----------------------------------------------------------------------

    async def _serve(
        self, campaign_id: str, visitor: Visitor, since: int | None, receive: Receive, send: Send
    ) -> None:
        hub = self._hub(campaign_id)
        hub.n_expected += 1
        try:
            screen = await hub.join(since=since)
        finally:
            hub.n_expected -= 1
        self._visitors[screen] = visitor
        try:
            await _send_until_gone(screen, receive, send)
        finally:
            hub.leave(screen)
            del self._visitors[screen]
            self._drop_if_empty(hub)

    def _hub(self, campaign_id: str) -> CampaignHub:
        if campaign_id not in self.hubs:
            self.hubs[campaign_id] = CampaignHub(
                campaign_id,
                self._threads,
                queue_length=settings.LIVE_QUEUE_LENGTH,
                coverage_every_s=settings.LIVE_COVERAGE_EVERY_S,
            )
        return self.hubs[campaign_id]

    def _drop_if_empty(self, hub: CampaignHub) -> None:
        if not hub.screens and not hub.n_expected:
            hub.close()
            self.hubs.pop(hub.campaign_id, None)

    # --- all hubs -------------------------------------------------------------------------

    def _start(self) -> None:
        """The event loop is known only when the first socket comes."""
        if self._loop is None:
            self._loop = asyncio.get_running_loop()
            self._tasks = [
                asyncio.create_task(self._every(settings.LIVE_POLL_S, self._poll)),
                asyncio.create_task(self._every(settings.LIVE_HEARTBEAT_S, self._beat)),
            ]

    async def _every(self, period_s: float, work: Callable[[], Awaitable[None]]) -> None:
        while True:
            await asyncio.sleep(period_s)
            try:
                await work()
            except Exception:  # outermost loop: the next turn tries again
                self.n_faults += 1
                logger.exception("the live channel has missed a turn")

    def _on_hint(self, campaign_id: str, hint: str) -> None:
        hub = self.hubs.get(campaign_id)
        if hub is None:
            return
        if hint == "clock":
            task = asyncio.create_task(self._poll())
            self._tasks.append(task)
            task.add_done_callback(self._tasks.remove)
        else:
            hub.wake()

    async def _poll(self) -> None:
        """What other processes wrote: one query for all campaigns that are watched."""
        if not self.hubs:
            return
        heads = await self._threads.run(read_heads, list(self.hubs))
        for campaign_id, head in heads.items():
            if hub := self.hubs.get(campaign_id):
                hub.see_head(head)

    async def _beat(self) -> None:
        for hub in list(self.hubs.values()):
            await self._show_out(hub)
            hub.beat()

    async def _show_out(self, hub: CampaignHub) -> None:
        """Signed out, token revoked, campaign no longer public: the socket ends too."""
        visitors = {self._visitors[screen] for screen in hub.screens if screen in self._visitors}
        refusals = await self._threads.run(_list_refusals, visitors, hub.campaign_id)
        for screen in list(hub.screens):
            error = refusals.get(self._visitors.get(screen, Visitor()))
            if error is not None:
                screen.end_with(_problem_text(error))
                hub.leave(screen)


async def _send_until_gone(screen: Screen, receive: Receive, send: Send) -> None:
    """Send what waits until the screen goes, or until it has heard its last message."""
    listening = asyncio.create_task(_until_disconnected(receive))
    sending = asyncio.create_task(_send_all(screen, send))
    try:
        await asyncio.wait({listening, sending}, return_when=asyncio.FIRST_COMPLETED)
    finally:
        for task in (listening, sending):
            task.cancel()
        # A connection that broke while something was being sent is simply gone.
        with contextlib.suppress(OSError, asyncio.CancelledError):
            await sending


async def _send_all(screen: Screen, send: Send) -> None:
    while (text := await screen.next_text()) is not None:
        await send({"type": "websocket.send", "text": text})
    # 1013: try again later, with ?since=.
    await send({"type": "websocket.close", "code": 1013})


async def _until_disconnected(receive: Receive) -> None:
    """What screens say is not needed; the end of the connection is."""
    while (await receive())["type"] != "websocket.disconnect":
        pass


async def _refuse(send: Send, error: CampaignError) -> None:
    """Browsers do not show why a handshake failed: say it on the open socket, then close."""
    problem = problem_of(error)
    assert problem is not None
    await send({"type": "websocket.send", "text": _problem_text(error)})
    await send({"type": "websocket.close", "code": 4000 + problem.status})


def _problem_text(error: CampaignError) -> str:
    problem = problem_of(error)
    assert problem is not None
    return problem_text(problem.to_json())


def _list_refusals(visitors: set[Visitor], campaign_id: str) -> dict[Visitor, CampaignError]:
    refusals = {}
    for visitor in visitors:
        try:
            check_may_watch(visitor, campaign_id)
        except CampaignError as error:
            refusals[visitor] = error
    return refusals


def _since(scope: dict[str, Any]) -> int | None:
    """The number in ?since=; anything else means: from the start."""
    values = parse_qs(scope.get("query_string", b"").decode("latin-1")).get("since", [""])
    return int(values[0]) if values[0].isascii() and values[0].isdecimal() else None
