"""Frames that were taken before any light could have arrived."""

from collections.abc import Mapping
from datetime import datetime, timedelta
from typing import Any

_DAY = timedelta(days=1)
_LONG_AGO_D = -1000.0
# Later than any campaign, and still a date.
_NEVER_D = 36_500.0


def first_light_at(source_model: Mapping[str, Any], event_time: datetime) -> datetime | None:
    """The earliest moment at which the source model shows light; None: it always shone."""
    first_light_d = source_model.get("first_light_d")
    if first_light_d is None or first_light_d < _LONG_AGO_D:
        return None
    return event_time + min(first_light_d, _NEVER_D) * _DAY


def is_before_light(
    mid_time: datetime, *, source_model: Mapping[str, Any], event_time: datetime
) -> bool:
    """Whether a frame of that mid-time can show nothing under the source model."""
    first = first_light_at(source_model, event_time)
    return first is not None and mid_time < first


def light_notes(
    mid_time: datetime, *, source_model: Mapping[str, Any], event_time: datetime
) -> list[str]:
    """What somebody who reports a frame should know about its time."""
    if not is_before_light(mid_time, source_model=source_model, event_time=event_time):
        return []
    why = "This frame is from before any light could have arrived under the campaign's source model"
    return [f"{why}: it counts as imaged and adds nothing to searched."]
