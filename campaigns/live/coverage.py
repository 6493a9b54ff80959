"""Tell the screens how the two numbers move: at once, then at most so many times a second."""

import asyncio
import logging
from collections.abc import Callable

import numpy as np

from campaigns.events.iso_time import iso_time
from campaigns.ledger_replica import Coverage, get_coverage
from campaigns.live.messages import coverage_text
from campaigns.live.reading import ReadingThreads

logger = logging.getLogger(__name__)

_NOTHING = np.zeros(0, dtype=np.uint32)


class CoverageTeller:
    """Makes coverage messages of the ledger replica, with the changed pixels only.

    Coverage is derivable from the events, so it stands outside the sequence: a message that holds
    less than a screen needs (`since_seq` newer than what it has) makes it read coverage anew.
    """

    def __init__(
        self,
        campaign_id: str,
        threads: ReadingThreads,
        tell: Callable[[str], None],
        *,
        every_s: float,
    ) -> None:
        # The numbers alone, for a screen that comes.
        self.latest_text = ""
        self.n_faults = 0
        self._campaign_id = campaign_id
        self._threads = threads
        self._tell = tell
        self._every_s = every_s
        self._told: Coverage | None = None
        self._changed = asyncio.Event()
        self._task = asyncio.create_task(self._follow())

    def hear(self, kind: str) -> None:
        """An event came: does it move the numbers?"""
        if kind.startswith("frame."):
            self._changed.set()
        elif kind == "region.revised":
            self.start_over()

    def start_over(self) -> None:
        """The pixels that the screens know mean nothing any more."""
        self._told = None
        self._changed.set()

    def close(self) -> None:
        """Stop telling."""
        self._task.cancel()

    async def _follow(self) -> None:
        while True:
            await self._changed.wait()
            self._changed.clear()
            try:
                await self._tell_news()
            except Exception:  # outermost loop: the next change tries again
                self.n_faults += 1
                logger.exception("the coverage of %s cannot be told", self._campaign_id)
            # Leading edge: the first change went at once; the next waits its turn.
            await asyncio.sleep(self._every_s)

    async def _tell_news(self) -> None:
        old = self._told
        new = await self._threads.run(get_coverage, self._campaign_id)
        if self._told is not old:
            # Something started over meanwhile; it has also asked for another round.
            return
        self.latest_text = _text(new, since_seq=new.through_seq, indices=_NOTHING)
        if old is None:
            self._told = new
            self._tell(self.latest_text)
        elif not _is_same(old, new):
            # What is the same is not told, and the next message goes on from what was.
            self._told = new
            indices = np.flatnonzero(_steps(old) != _steps(new))
            self._tell(_text(new, since_seq=old.through_seq, indices=indices))


def _text(coverage: Coverage, *, since_seq: int, indices: np.ndarray) -> str:
    return coverage_text(
        since_seq=since_seq,
        through_seq=coverage.through_seq,
        imaged=coverage.imaged,
        searched=coverage.searched,
        residual_outside=coverage.residual_outside,
        at=iso_time(coverage.at),
        indices=indices,
        detected=_steps(coverage)[indices],
    )


def _steps(coverage: Coverage) -> np.ndarray:
    """D in 255 steps, as screens draw it."""
    return np.rint(255.0 * coverage.detected).astype(np.uint8)


def _is_same(old: Coverage, new: Coverage) -> bool:
    return (old.imaged, old.searched) == (new.imaged, new.searched) and np.array_equal(
        old.detected, new.detected
    )
