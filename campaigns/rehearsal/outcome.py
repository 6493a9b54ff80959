"""What a rehearsal found out."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from campaigns.rehearsal.hunt import Catch


@dataclass(frozen=True)
class Outcome:
    """The numbers of a finished rehearsal; shares are fractions 0..1."""

    campaign: str
    imaged: float
    searched: float
    n_frames: int
    found: Catch | None
    seconds_to_first_tile: float
    certificate: float | None
    n_observers: int
    n_claims: int
    n_events: int
    # Share of many more hidden sources that the same frames would have caught: holds `searched`
    # against an account that was written apart from the ledger.
    many_sources_found: float
    tally: dict[str, int]
    refusals: dict[str, int]
    # Of the coordinator, for whoever wants to go on with the rehearsal's board.
    password: str

    def to_json(self) -> dict[str, Any]:
        """What `rehearse --json` prints."""
        found = self.found and {"seconds": self.found.seconds, "frame": self.found.frame}
        return {
            "campaign": self.campaign,
            "imaged": self.imaged,
            "searched": self.searched,
            "n_frames": self.n_frames,
            "found": found,
            "seconds_to_first_tile": round(self.seconds_to_first_tile, 3),
            "certificate": self.certificate,
            "n_observers": self.n_observers,
            "n_claims": self.n_claims,
            "n_events": self.n_events,
            "many_sources_found": self.many_sources_found,
            "refusals": self.refusals,
        }

    def in_words(self) -> str:
        """What `rehearse` prints for people."""
        return "\n".join(
            (self._searched_in_words(), self._check_in_words(), self._found_in_words())
        )

    def _searched_in_words(self) -> str:
        frames = f"{self.n_frames} frames of {self.n_observers} observers"
        return f"imaged {self.imaged:.1%}, searched {self.searched:.1%} by {frames}"

    def _check_in_words(self) -> str:
        share = f"{self.many_sources_found:.1%}"
        return f"of many sources hidden afterwards the same frames would have caught {share}"

    def _found_in_words(self) -> str:
        if self.found is None:
            return "the hidden source was not found"
        hours = self.found.seconds / 3600.0
        where = f"frame {self.found.frame}"
        return f"the hidden source was found in {where}, {hours:.1f} h after the event"
