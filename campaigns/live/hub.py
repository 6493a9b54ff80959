"""All open screens of one campaign in this process, and the end of its event log."""

import asyncio
import logging
from collections import deque

from campaigns.live.coverage import CoverageTeller
from campaigns.live.messages import clock_text, heartbeat_text
from campaigns.live.reading import (
    Head,
    NumberedText,
    ReadingThreads,
    read_events,
    read_heads,
    read_snapshot_text,
)
from campaigns.live.screen import Screen

logger = logging.getLogger(__name__)

# Events kept in memory for screens that come (back); older ones are read again.
LOG_LENGTH = 2000
# A screen that missed more than this gets a snapshot instead.
LONGEST_REPLAY = 1000
# Told in one breath: far less than a queue holds, so that a burst drops nobody who keeps up.
BATCH = 200


class CampaignHub:
    """Follows one campaign's events and tells every screen, each exactly once, in order.

    The database is the truth and everything else a hint: whoever wakes the hub, it reads the
    events after the last one it told. A screen joins at a stated sequence number and is given
    the log from there in the same breath in which it is added: there is no moment between.
    """

    def __init__(
        self,
        campaign_id: str,
        threads: ReadingThreads,
        *,
        queue_length: int,
        coverage_every_s: float,
    ) -> None:
        self.campaign_id = campaign_id
        self.screens: set[Screen] = set()
        # Screens on their way in: the hub stays for them.
        self.n_expected = 0
        self.n_faults = 0
        self._threads = threads
        self._queue_length = queue_length
        self._head: Head | None = None
        self._log: deque[NumberedText] = deque(maxlen=LOG_LENGTH)
        self._reading = asyncio.Lock()
        self._woken = asyncio.Event()
        self._snapshot: asyncio.Task[NumberedText] | None = None
        self._coverage = CoverageTeller(
            campaign_id, threads, self.broadcast, every_s=coverage_every_s
        )
        self._tasks = [asyncio.create_task(self._follow())]

    @property
    def seq(self) -> int:
        """The newest event that was told."""
        return self._head.seq if self._head else -1

    # --- screens --------------------------------------------------------------------------

    async def join(self, *, since: int | None) -> Screen:
        """Add a screen: a snapshot, or the events after `since`, then all that come."""
        await self.catch_up()
        screen = Screen(queue_length=self._queue_length)
        first = [] if self._can_replay(since) else [await self._snapshot_now()]
        position = first[-1].seq if first else int(since or 0)
        if position > self.seq:
            await self.catch_up()
        first += await self._read_up_to_log(position)
        # From here to the end nothing is awaited.
        position = first[-1].seq if first else position
        first += [told for told in self._log if told.seq > position]
        screen.start_with(told.text for told in first)
        screen.give(self._heartbeat())
        if self._coverage.latest_text:
            screen.give(self._coverage.latest_text)
        self.screens.add(screen)
        return screen

    def leave(self, screen: Screen) -> None:
        """Forget a screen."""
        self.screens.discard(screen)

    def broadcast(self, text: str) -> None:
        """Give one message to every screen."""
        for screen in self.screens:
            screen.give(text)

    def beat(self) -> None:
        """Tell every screen that this process lives, and the newest sequence number."""
        self.broadcast(self._heartbeat())

    # --- what happened --------------------------------------------------------------------

    def wake(self) -> None:
        """Somebody says that there may be something new."""
        self._woken.set()

    def see_head(self, head: Head) -> None:
        """What the database says of the campaign: newer events, or a moved clock."""
        if self._head is None:
            return
        if head.clock_now != self._head.clock_now:
            self._head = Head(self._head.seq, head.clock_now)
            self.broadcast(clock_text(now=head.now_text()))
        if head.seq > self.seq:
            self.wake()
        elif head.seq < self.seq:
            self._start_over(head)

    async def catch_up(self) -> None:
        """Read and tell what is new. One reader at a time keeps the order."""
        async with self._reading:
            if self._head is None:
                await self._read_head()
            while await self._tell_next_batch():
                pass

    def close(self) -> None:
        """Stop following."""
        self._coverage.close()
        for task in [*self._tasks, *([self._snapshot] if self._snapshot else [])]:
            task.cancel()

    async def _follow(self) -> None:
        while True:
            await self._woken.wait()
            self._woken.clear()
            try:
                await self.catch_up()
            except Exception:  # outermost loop: the next hint or poll tries again
                self.n_faults += 1
                logger.exception("the hub of %s cannot read events", self.campaign_id)

    async def _read_head(self) -> None:
        heads = await self._threads.run(read_heads, [self.campaign_id])
        self._head = heads[self.campaign_id]
        self._coverage.start_over()

    async def _tell_next_batch(self) -> bool:
        news = await self._threads.run(
            read_events, self.campaign_id, after_seq=self.seq, most=BATCH
        )
        for told in news:
            self._tell(told)
        # Let every screen send before the next ones come.
        await asyncio.sleep(0)
        return len(news) == BATCH

    def _tell(self, told: NumberedText) -> None:
        assert self._head is not None
        if told.seq != self.seq + 1:
            # The log has a hole (rows were removed by hand): nobody may go on as if it had none.
            self._ask_all_again()
        self._head = Head(told.seq, self._head.clock_now)
        self._log.append(told)
        self.broadcast(told.text)
        self._coverage.hear(told.kind)

    def _start_over(self, head: Head) -> None:
        """The database went back (an older copy was restored)."""
        self._ask_all_again()
        self._head = head
        self._coverage.start_over()

    def _ask_all_again(self) -> None:
        self._log.clear()
        for screen in self.screens:
            screen.ask_again()
        self.screens.clear()

    def _heartbeat(self) -> str:
        assert self._head is not None
        return heartbeat_text(seq=self.seq, now=self._head.now_text())

    # --- the past -------------------------------------------------------------------------

    def _can_replay(self, since: int | None) -> bool:
        return since is not None and self.seq - LONGEST_REPLAY <= since <= self.seq

    async def _snapshot_now(self) -> NumberedText:
        """A snapshot that is not older than the log; screens that come together share it."""
        if self._snapshot is None or self._is_stale(self._snapshot):
            self._snapshot = asyncio.create_task(
                self._threads.run(read_snapshot_text, self.campaign_id)
            )
        return await asyncio.shield(self._snapshot)

    def _is_stale(self, snapshot: "asyncio.Task[NumberedText]") -> bool:
        if not snapshot.done():
            return False
        is_bad = snapshot.cancelled() or snapshot.exception() is not None
        return is_bad or snapshot.result().seq != self.seq

    async def _read_up_to_log(self, position: int) -> list[NumberedText]:
        """Events between `position` and the first one in memory."""
        past: list[NumberedText] = []
        while position < self._seq_before_log():
            batch = await self._threads.run(
                read_events, self.campaign_id, after_seq=position, most=BATCH
            )
            # What is newer than the start of the log comes from there, once.
            batch = [told for told in batch if told.seq <= self._seq_before_log()]
            if not batch:
                break
            past += batch
            position = batch[-1].seq
        return past

    def _seq_before_log(self) -> int:
        return self._log[0].seq - 1 if self._log else self.seq
