"""The hunt for the one hidden source: does this examined frame show it?"""

from __future__ import annotations

from dataclasses import dataclass, field

import numpy as np

from campaigns.rehearsal.hidden_source import (
    Looks,
    SeenFrame,
    Sources,
    detection_chances,
    is_inside,
)


@dataclass(frozen=True)
class Catch:
    """When (seconds since the event) and in which frame the source was found."""

    seconds: float
    frame: int


@dataclass
class Hunt:
    """One hidden source and everything that has been looked at so far."""

    source: Sources
    rng: np.random.Generator
    event_s: float
    caught: Catch | None = None
    _looks: Looks = field(default_factory=Looks)
    _attention: list[float] = field(default_factory=list)

    def examine(self, frame: SeenFrame, *, now_s: float) -> bool:
        """Whether this frame is the first to catch the source. Two draws a frame at most."""
        look = self._looks.join(frame)
        if look == len(self._attention):
            # One pair of eyes a look: its attention is drawn once.
            self._attention.append(float(self.rng.random()))
        is_shown = self._is_shown(frame, float(self.rng.random()))
        if self.caught or not is_shown or self._attention[look] >= frame.completeness:
            return False
        self.caught = Catch(seconds=now_s - self.event_s, frame=frame.number)
        return True

    def _is_shown(self, frame: SeenFrame, draw: float) -> bool:
        if self.source.is_hopeless[0] or not is_inside(frame.footprint, self.source.vectors)[0]:
            return False
        return draw < float(detection_chances(frame, self.source.magnitudes)[0])
