"""What happens because time passes: claims lapse, plans fall due, old keys are forgotten."""

import logging
import threading
from collections.abc import Callable
from datetime import datetime, timedelta

from django.db import close_old_connections
from django.utils import timezone

from campaigns.actions.answer_once import forget_old_keys
from campaigns.actions.lapse_claims import lapse_all_claims
from campaigns.background import ask_for_due_plans

logger = logging.getLogger(__name__)

PERIOD_S = 1.0
DAY = timedelta(days=1)


class Ticker:
    """A thread that looks once a second. Every tick is complete in itself: none can be lost."""

    def __init__(
        self, *, period_s: float = PERIOD_S, clock: Callable[[], datetime] = timezone.now
    ) -> None:
        self.n_faults = 0
        self._period_s = period_s
        self._clock = clock
        self._next_daily: datetime | None = None
        self._is_stopped = threading.Event()
        self._thread = threading.Thread(target=self._run, name="ticker", daemon=True)

    def start(self) -> None:
        """Begin."""
        self._thread.start()

    def stop(self) -> None:
        """End after the present tick."""
        self._is_stopped.set()
        self._thread.join()

    def look(self, *, wall_now: datetime) -> None:
        """A tick, and at the start and then once a day what can wait so long."""
        tick(wall_now=wall_now)
        if self._next_daily is None or wall_now >= self._next_daily:
            forget_old_keys(wall_now=wall_now)
            self._next_daily = wall_now + DAY

    def _run(self) -> None:
        while not self._is_stopped.wait(self._period_s):
            try:
                self.look(wall_now=self._clock())
            except Exception:  # outermost loop: the next tick tries again
                self.n_faults += 1
                logger.exception("a tick failed")
            finally:
                close_old_connections()


def tick(*, wall_now: datetime) -> None:
    """One look at everything that time alone changes."""
    lapse_all_claims(wall_now=wall_now)
    ask_for_due_plans(wall_now=wall_now)
