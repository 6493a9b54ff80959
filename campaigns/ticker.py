"""What happens because time passes: claims lapse, plans fall due."""

import logging
import threading

from django.db import close_old_connections
from django.utils import timezone

from campaigns.actions.lapse_claims import lapse_all_claims
from campaigns.background import ask_for_due_plans

logger = logging.getLogger(__name__)

PERIOD_S = 1.0


class Ticker:
    """A thread that looks once a second. Every tick is complete in itself: none can be lost."""

    def __init__(self, *, period_s: float = PERIOD_S) -> None:
        self.n_faults = 0
        self._period_s = period_s
        self._is_stopped = threading.Event()
        self._thread = threading.Thread(target=self._run, name="ticker", daemon=True)

    def start(self) -> None:
        """Begin."""
        self._thread.start()

    def stop(self) -> None:
        """End after the present tick."""
        self._is_stopped.set()
        self._thread.join()

    def _run(self) -> None:
        while not self._is_stopped.wait(self._period_s):
            try:
                tick()
            except Exception:  # outermost loop: the next tick tries again
                self.n_faults += 1
                logger.exception("a tick failed")
            finally:
                close_old_connections()


def tick() -> None:
    """One look at everything that time alone changes."""
    now = timezone.now()
    lapse_all_claims(wall_now=now)
    ask_for_due_plans(wall_now=now)
