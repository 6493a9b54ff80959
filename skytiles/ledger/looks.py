"""Frames joined into looks: those of one instrument at one place within an hour."""

from __future__ import annotations

import math
from bisect import bisect_left, insort
from dataclasses import dataclass, field

from skytiles.ledger.ledger_frame import LedgerFrame

LOOK_SPAN_D = 60.0 / 1440.0
# A tenth of a millisecond and a few microarcseconds: rounding must not part a look.
_TIME_SLACK_D = 1e-9
_PLACE_SLACK_DEG = 1e-9

Look = tuple[int, ...]
_Moment = tuple[float, int]


@dataclass
class InstrumentLooks:
    """The looks of one instrument. Frames join in time order whatever the order of arrival."""

    frames: dict[int, LedgerFrame] = field(default_factory=dict)
    looks: dict[int, Look] = field(default_factory=dict)
    _moments: list[_Moment] = field(default_factory=list)
    _look_of: dict[int, int] = field(default_factory=dict)

    def add(self, frame: LedgerFrame) -> tuple[set[Look], set[Look]]:
        """Join one frame; later frames may change their look.

        Parameters
        ----------
        frame : LedgerFrame    examined, with a limit, not yet here

        Returns
        -------
        set, set    the looks (keys of their frames in time order) that ended and that are new
        """
        moment = (frame.t_d, frame.key)
        self.frames[frame.key] = frame
        insort(self._moments, moment)
        return self._join_again(moment)

    def remove(self, key: int) -> tuple[set[Look], set[Look]]:
        """Take one frame out; later frames may change their look.

        Parameters
        ----------
        key : int    of a frame that is here

        Returns
        -------
        set, set    the looks that ended and that are new
        """
        moment = (self.frames[key].t_d, key)
        del self._moments[bisect_left(self._moments, moment)]
        changes = self._join_again(moment, gone=key)
        del self.frames[key]
        return changes

    def _join_again(self, start: _Moment, gone: int | None = None) -> tuple[set[Look], set[Look]]:
        """Join the frames from `start` on anew, as far as the change can reach."""
        before: dict[int, Look] = {}
        if gone is not None:
            self._move(gone, None, before)
        horizon_d = start[0] + LOOK_SPAN_D
        for t_d, key in self._moments[bisect_left(self._moments, start) :]:
            if t_d > horizon_d + _TIME_SLACK_D:
                break
            was_first = self._look_of.get(key) == key
            self._move(key, self._first_for(key), before)
            if was_first != (self._look_of[key] == key):
                horizon_d = max(horizon_d, t_d + LOOK_SPAN_D)
        after = {first: self.looks[first] for first in before if first in self.looks}
        ended = set(before.values()) - set(after.values()) - {()}
        return ended, set(after.values()) - set(before.values())

    def _move(self, key: int, first: int | None, before: dict[int, Look]) -> None:
        """Put a frame into the look that `first` opened, or nowhere; note what it was before."""
        old_first = self._look_of.pop(key, None)
        if old_first is not None and old_first != first:
            before.setdefault(old_first, self.looks[old_first])
            self._set_look(old_first, [k for k in self.looks[old_first] if k != key])
        if first is None:
            return
        self._look_of[key] = first
        if old_first != first:
            before.setdefault(first, self.looks.get(first, ()))
            self._set_look(first, [*self.looks.get(first, ()), key])

    def _set_look(self, first: int, keys: list[int]) -> None:
        if keys:
            self.looks[first] = tuple(sorted(keys, key=lambda k: (self.frames[k].t_d, k)))
        else:
            self.looks.pop(first, None)

    def _first_for(self, key: int) -> int:
        frame = self.frames[key]
        return next((f for f in self._open_looks(frame) if self._fits(f, frame)), key)

    def _open_looks(self, frame: LedgerFrame) -> list[int]:
        """First frames of the looks that began within the hour before `frame`, oldest first."""
        since = bisect_left(self._moments, (frame.t_d - LOOK_SPAN_D - _TIME_SLACK_D, -math.inf))
        until = bisect_left(self._moments, (frame.t_d, frame.key))
        return [key for _, key in self._moments[since:until] if self._look_of.get(key) == key]

    def _fits(self, first: int, frame: LedgerFrame) -> bool:
        start = self.frames[first]
        reach_deg = start.field_deg / 2.0 + _PLACE_SLACK_DEG
        return separation_deg(start, frame) <= reach_deg


def separation_deg(one: LedgerFrame, other: LedgerFrame) -> float:
    """Angle between the centres of two frames.

    Parameters
    ----------
    one, other : LedgerFrame

    Returns
    -------
    float    degrees

    Source: haversine form, exact for small angles.
    """
    dec_1, dec_2 = math.radians(one.dec_deg), math.radians(other.dec_deg)
    half_ra = math.radians(one.ra_deg - other.ra_deg) / 2.0
    along = math.sin((dec_1 - dec_2) / 2.0) ** 2
    haversine = along + math.cos(dec_1) * math.cos(dec_2) * math.sin(half_ra) ** 2
    return math.degrees(2.0 * math.asin(min(1.0, math.sqrt(haversine))))
