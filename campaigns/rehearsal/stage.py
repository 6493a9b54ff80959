"""What everybody in a rehearsal shares: the campaign, its clock, the hunt and the tally."""

from __future__ import annotations

from collections import Counter
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from datetime import datetime, timedelta
from typing import Any

from campaigns.events.iso_time import iso_time, read_iso_time
from campaigns.rehearsal.board_client import Refusal
from campaigns.rehearsal.hidden_source import SeenFrame
from campaigns.rehearsal.hunt import Hunt
from campaigns.rehearsal.timeline import Timeline

Say = Callable[[str], None]
# Refusals of one code that are printed; the tally counts them all.
N_REFUSALS_SAID = 3
# A race for a tile that somebody else won is part of the game.
EXPECTED_REFUSALS = frozenset({"tile-taken"})


@dataclass
class Stage:
    """The running campaign as its driver sees it; times are seconds since the launch."""

    campaign: str
    launched_at: datetime
    scenario: dict[str, Any]
    timeline: Timeline
    hunt: Hunt
    say: Say
    # The tiles as an open screen has them.
    tiles: Mapping[str, Any] = field(default_factory=dict)
    examined: list[SeenFrame] = field(default_factory=list)
    tally: Counter[str] = field(default_factory=Counter)
    refusals: Counter[str] = field(default_factory=Counter)
    imaged: float = 0.0
    searched: float = 0.0

    @property
    def now_s(self) -> float:
        """The campaign's clock."""
        return self.timeline.now_s

    def time_at(self, time_s: float) -> datetime:
        """The moment `time_s` after the launch."""
        return self.launched_at + timedelta(seconds=time_s)

    def iso_at(self, time_s: float) -> str:
        """The same moment as it is written in JSON."""
        return iso_time(self.time_at(time_s))

    def seconds_at(self, text: str) -> float:
        """Seconds since the launch of a moment written in JSON."""
        return (read_iso_time(text) - self.launched_at).total_seconds()

    def note_refusal(self, who: str, refusal: Refusal) -> None:
        """Count a refusal and say the first few of each code."""
        self.refusals[refusal.code] += 1
        is_news = self.refusals[refusal.code] <= N_REFUSALS_SAID
        if is_news and refusal.code not in EXPECTED_REFUSALS:
            self.say(f"{who} was refused: {refusal}")

    def note_numbers(self, answer: dict[str, Any]) -> None:
        """Keep the newest imaged and searched."""
        self.imaged, self.searched = float(answer["imaged"]), float(answer["searched"])

    def examine(self, frame: SeenFrame) -> None:
        """Look at a frame; say so when the hidden source is in it."""
        self.examined.append(frame)
        if self.hunt.examine(frame, now_s=self.now_s):
            self.say(f"the hidden source is found in frame {frame.number}")
