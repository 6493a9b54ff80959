"""What hubs read from the database, always in threads of their own."""

import asyncio
import functools
from collections.abc import Callable, Iterable
from concurrent.futures import ThreadPoolExecutor
from dataclasses import dataclass
from datetime import datetime
from typing import ParamSpec, TypeVar

from django.db import connections
from django.utils import timezone

from campaigns.events.append import event_as_sent
from campaigns.events.iso_time import iso_time
from campaigns.live.messages import event_text, snapshot_text
from campaigns.models import Campaign, Event
from campaigns.selectors.snapshot import get_snapshot

P = ParamSpec("P")
R = TypeVar("R")


@dataclass(frozen=True)
class Head:
    """How far a campaign has come: its newest sequence number and its clock."""

    seq: int
    clock_now: datetime | None

    def now_text(self) -> str:
        """The campaign's time."""
        return iso_time(self.clock_now or timezone.now())


@dataclass(frozen=True)
class NumberedText:
    """A message that stands for everything up to one sequence number; `kind` of an event."""

    seq: int
    text: str
    kind: str = ""


class ReadingThreads:
    """A few threads with database connections of their own.

    What runs here only reads, and never inside atomic(): on SQLite our transactions begin
    IMMEDIATE, and readers would queue behind writers.
    """

    def __init__(self, *, n_threads: int = 3) -> None:
        self._pool = ThreadPoolExecutor(n_threads, thread_name_prefix="live-reading")

    async def run(self, function: Callable[P, R], *args: P.args, **kwargs: P.kwargs) -> R:
        """Run a blocking read away from the event loop."""
        work = functools.partial(_with_connections, function, *args, **kwargs)
        return await asyncio.get_running_loop().run_in_executor(self._pool, work)

    def close(self) -> None:
        """Let the threads end."""
        self._pool.shutdown(wait=False, cancel_futures=True)


def _with_connections(function: Callable[P, R], *args: P.args, **kwargs: P.kwargs) -> R:
    """A connection that failed is thrown away, not used again."""
    try:
        return function(*args, **kwargs)
    except BaseException:
        connections.close_all()
        raise


def read_heads(campaign_ids: Iterable[str]) -> dict[str, Head]:
    """The heads of all campaigns that somebody watches: one query."""
    rows = Campaign.objects.filter(pk__in=list(campaign_ids))
    heads = rows.values_list("pk", "seq", "clock_now")
    return {key: Head(seq, clock_now) for key, seq, clock_now in heads}


def read_events(campaign_id: str, *, after_seq: int, most: int) -> list[NumberedText]:
    """The next events in order, as messages."""
    rows = Event.objects.filter(campaign_id=campaign_id, seq__gt=after_seq).order_by("seq")
    return [NumberedText(row.seq, event_text(event_as_sent(row)), row.kind) for row in rows[:most]]


def read_snapshot_text(campaign_id: str) -> NumberedText:
    """The whole state as a message."""
    seq, state = get_snapshot(campaign_id)
    now = read_heads([campaign_id])[campaign_id].now_text()
    return NumberedText(seq, snapshot_text(seq=seq, now=now, state=state))
