"""Which messages may be combined into one region, and what may be done with a constraint."""

from collections.abc import Iterable, Mapping, Sequence
from datetime import datetime, timedelta
from typing import Any, Protocol

from observers.rules.problem import Problem

# Messages of different detectors belong to one event when they fall within this; beyond it only
# a coordinator's word combines them.
APART = timedelta(seconds=10)
MOST_CONSTRAINTS = 100
REVISION_WAYS = ("add", "replace", "switch", "retract")
_SOURCES = ("upload", "alert", "constraints")


class HasUse(Protocol):
    """A constraint of a campaign, as far as its use is concerned."""

    position: int
    is_on: bool
    ending: str
    message_time: datetime | None


def apart_problems(
    new_times: Iterable[datetime | None],
    known_times: Iterable[datetime | None],
    *,
    is_confirmed: bool,
) -> list[Problem]:
    """Are new messages within 10 s of the event and of each other? Unknown times are no problem."""
    apart_s = largest_gap_s(new_times, known_times)
    if apart_s <= APART.total_seconds() or is_confirmed:
        return []
    detail = (
        f"The message is {apart_s:,.1f} s from the others; messages of one event "
        f"are at most {APART.total_seconds():.0f} s apart."
    )
    return [Problem("despite_time_apart", detail)]


def largest_gap_s(
    new_times: Iterable[datetime | None], known_times: Iterable[datetime | None]
) -> float:
    """Seconds between the new and the known times that are furthest apart; 0 without any."""
    known = [time for time in known_times if time is not None]
    new = [time for time in new_times if time is not None]
    gaps_s = [abs((one - other).total_seconds()) for one in new for other in (*known, *new)]
    return max(gaps_s, default=0.0)


def apart_notes(rows: Iterable[HasUse], *, event_time: datetime) -> list[str]:
    """A warning for each constraint in use whose message is too far from the event."""
    gaps_s = {
        row.position + 1: largest_gap_s([row.message_time], [event_time])
        for row in rows
        if row.is_on
    }
    return [
        f"Constraint {number} is from a message {apart_s:,.1f} s from the event, more than "
        f"{APART.total_seconds():.0f} s: it counts on a coordinator's word."
        for number, apart_s in gaps_s.items()
        if apart_s > APART.total_seconds()
    ]


def use_problems(
    rows: Sequence[HasUse], number: int, *, is_on: bool | None = None
) -> list[Problem]:
    """May constraint `number` be changed (or, with `is_on`, be switched so)?"""
    row = next((one for one in rows if one.position + 1 == number), None)
    if row is None:
        return [Problem("constraint", f"There is no constraint {number} here.")]
    if row.ending:
        return [Problem("constraint", f"Constraint {number} was {row.ending}, for good.")]
    if is_on is not None and row.is_on == is_on:
        word = "on" if is_on else "off"
        return [Problem("is_on", f"Constraint {number} is {word} already.")]
    return []


def revision_problems(values: Mapping[str, Any]) -> list[Problem]:
    """Does a wished change say all that its way needs, and nothing else?"""
    way = values["way"]
    n_sources = sum(bool(values.get(name)) for name in _SOURCES)
    problems = []
    if way in ("add", "replace") and n_sources != 1:
        problems.append(Problem("upload", "Give one of upload, alert and constraints."))
    if way in ("switch", "retract") and n_sources:
        problems.append(Problem("upload", f"To {way} takes no alert."))
    if way != "add" and values.get("constraint") is None:
        problems.append(Problem("constraint", f"Say which constraint to {way}."))
    if way == "add" and values.get("constraint") is not None:
        problems.append(Problem("constraint", "A constraint that is added has no number yet."))
    if (way == "switch") != (values.get("is_on") is not None):
        problems.append(Problem("is_on", "Only to switch takes is_on, true or false."))
    return problems


def remaining_problems(rows: Iterable[HasUse]) -> list[Problem]:
    """A region needs a constraint that is in use, and has not very many."""
    known = list(rows)
    if not any(row.is_on and not row.ending for row in known):
        return [Problem("constraint", "The last constraint in use must stay: add another first.")]
    if len(known) > MOST_CONSTRAINTS:
        return [Problem("constraint", f"A campaign has at most {MOST_CONSTRAINTS} constraints.")]
    return []
