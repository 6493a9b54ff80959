"""What a reported frame may say."""

from collections.abc import Iterator, Mapping
from datetime import datetime, timedelta
from typing import Any, Protocol

from campaigns.rules.examination import LIMIT_KINDS, WAYS
from observers.rules.numbers import Range, number_problems, range_problems
from observers.rules.problem import Problem

# Clocks differ a little; local time for UT differs by half an hour at least.
CLOCK_SLACK = timedelta(minutes=5)
# Frames of the night before can serve as a look at what was there; older ones are a wrong date.
LONGEST_BEFORE_EVENT = timedelta(days=1)
# Nobody exposes (or stacks) for longer within one night: the number is in milliseconds.
MILLISECONDS_SUSPECTED_S = 4 * 3600.0


class FrameValues(Protocol):
    """What is judged: a row that is not saved yet."""

    ra_deg: float
    dec_deg: float
    mid_time: datetime
    duration_s: float
    band: str
    limit_mag: float | None
    limit_kind: str
    reference_mag: float | None
    is_examined: bool
    examined_way: str
    completeness: float | None
    saturation_mag: float | None


_SHAPE_RANGES: dict[str, Range] = {
    "ra_deg": (0.0, 360.0, "a right ascension from 0 to 360 degrees"),
    "dec_deg": (-90.0, 90.0, "a declination from -90 to 90 degrees"),
    "width_deg": (0.001, 60.0, "a frame width from 0.001 to 60 degrees"),
    "height_deg": (0.001, 60.0, "a frame height from 0.001 to 60 degrees"),
    "rotation_deg": (-360.0, 360.0, "a rotation from -360 to 360 degrees, east of north"),
}
_RANGES: dict[str, Range] = {
    "ra_deg": _SHAPE_RANGES["ra_deg"],
    "dec_deg": _SHAPE_RANGES["dec_deg"],
    "limit_mag": (-2.0, 30.0, "a limiting magnitude from -2 to 30"),
    "reference_mag": (-2.0, 30.0, "a reference depth from -2 to 30 magnitudes"),
    "saturation_mag": (-15.0, 25.0, "a saturation magnitude from -15 to 25"),
    "completeness": (0.0, 1.0, "a completeness from 0 to 1"),
}


def frame_problems(frame: FrameValues, *, event_time: datetime, now: datetime) -> list[Problem]:
    """Judge one frame at the time `now` of its campaign."""
    return [
        *number_problems(frame, _RANGES),
        *time_problems(frame.mid_time, event_time=event_time, now=now),
        *_duration_problems(frame.duration_s),
        *_word_problems(frame),
    ]


def typed_problems(values: Mapping[str, Any]) -> list[Problem]:
    """Judge a typed position, size, rotation and duration before a footprint is made of them."""
    typed = {name: values.get(name) for name in _SHAPE_RANGES}
    found = [
        problem
        for name, value in typed.items()
        if value is not None
        for problem in range_problems(name, value, allowed=_SHAPE_RANGES[name])
    ]
    duration_s = values.get("duration_s")
    return found if duration_s is None else [*found, *_duration_problems(duration_s)]


def examination_problems(*, is_examined: bool, examined_way: str) -> list[Problem]:
    """Who says that a frame was examined says how."""
    if is_examined and examined_way not in WAYS:
        ways = ", ".join(WAYS)
        return [Problem("examined_way", f"Say how the frame was examined: {ways}.")]
    return []


def time_problems(mid_time: datetime, *, event_time: datetime, now: datetime) -> list[Problem]:
    """Judge when a frame was taken."""
    if mid_time > now + CLOCK_SLACK:
        ahead = _hours_and_minutes(mid_time - now)
        words = f"The mid-time lies {ahead} in the future. Is it local time? Give UTC."
        return [Problem("mid_time", words)]
    if mid_time < event_time - LONGEST_BEFORE_EVENT:
        words = "The frame was taken more than a day before the event. Check its date."
        return [Problem("mid_time", words)]
    return []


def _duration_problems(duration_s: float) -> Iterator[Problem]:
    if not duration_s > 0.0:
        yield Problem("duration_s", "The duration must be above 0 seconds.")
    elif not duration_s <= MILLISECONDS_SUSPECTED_S:
        yield Problem(
            "duration_s",
            f"The duration is {duration_s:g} s, longer than 4 hours. "
            "Is it in milliseconds? Give seconds.",
        )


def _word_problems(frame: FrameValues) -> Iterator[Problem]:
    if not 0 < len(frame.band.strip()) <= 12:
        yield Problem("band", "Name the band in at most 12 letters, such as V, r or clear.")
    if frame.limit_kind not in LIMIT_KINDS:
        kinds = ", ".join(LIMIT_KINDS)
        yield Problem("limit_kind", f"Say what the limit means: {kinds}.")
    yield from examination_problems(is_examined=frame.is_examined, examined_way=frame.examined_way)


def _hours_and_minutes(span: timedelta) -> str:
    minutes = round(span.total_seconds() / 60)
    return f"{minutes // 60} h {minutes % 60} min" if minutes >= 60 else f"{minutes} min"
