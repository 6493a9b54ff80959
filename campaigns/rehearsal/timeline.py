"""What happens in a rehearsal, in order of the campaign's clock."""

from __future__ import annotations

import heapq
from collections.abc import Awaitable, Callable
from dataclasses import dataclass, field

Happening = Callable[[], Awaitable[None]]


@dataclass
class Timeline:
    """Happenings by time, equal times in the order of entry: no clock but its own."""

    now_s: float = 0.0
    _queue: list[tuple[float, int, Happening]] = field(default_factory=list)
    _n_entered: int = 0

    def after(self, delay_s: float, happening: Happening) -> None:
        """Enter what happens `delay_s` from now, never in the past."""
        self.at(self.now_s + max(0.0, delay_s), happening)

    def at(self, time_s: float, happening: Happening) -> None:
        """Enter what happens at `time_s`, in whole seconds as the campaign's clock has them."""
        self._n_entered += 1
        time_s = float(round(max(time_s, self.now_s)))
        heapq.heappush(self._queue, (time_s, self._n_entered, happening))

    def take_next(self, until_s: float) -> Happening | None:
        """The next happening before `until_s`, with the clock moved on to it."""
        if not self._queue or self._queue[0][0] > until_s:
            return None
        self.now_s, _, happening = heapq.heappop(self._queue)
        return happening
