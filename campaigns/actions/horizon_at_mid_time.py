"""A frame of a field that was not up has a wrong clock: local time for UT is the commonest."""

from datetime import datetime, timedelta

import campaigns.bridge as bridge
from campaigns.errors import InvalidInput
from campaigns.models import Frame
from campaigns.rules.frame import time_problems
from observers.bridge import place_of
from observers.models import Instrument
from observers.rules.problem import Problem
from skytiles.night.altitude import altitudes_deg

# Refraction at the horizon and a large field's half.
_LOWEST_DEG = -1.0
_HOURS = [hours for hours in range(-14, 15) if hours]


class FieldWasDown(InvalidInput):
    """The field was below the horizon at the stated mid-time."""

    code = "field-was-down"
    status = 422
    title = "The field was below the horizon then"


def refuse_field_below_horizon(frame: Frame, instrument: Instrument, *, now: datetime) -> None:
    """Refuse, and name the whole-hour shifts of the clock that would fit."""
    possible = _possible_shifts_h(frame, now=now)
    stated_deg, *shifted_deg = _altitudes_deg(frame, instrument, hours=[0, *possible])
    if stated_deg + frame.field_deg / 2.0 >= _LOWEST_DEG:
        return
    fitting = [hours for hours, high in zip(possible, shifted_deg, strict=True) if high >= 15.0]
    detail = f"At the stated mid-time the field was {-stated_deg:.0f} degrees below the horizon."
    raise FieldWasDown(
        detail,
        "Give the mid-time in UTC; is it local time?",
        problems=[Problem("mid_time", detail)],
        extras={"fitting_shifts_h": fitting},
    )


def _possible_shifts_h(frame: Frame, *, now: datetime) -> list[int]:
    """The shifts whose mid-time would be taken: neither in the future nor long before the event."""
    event_time = frame.campaign.event_time
    return [
        hours
        for hours in _HOURS
        if not time_problems(
            frame.mid_time + timedelta(hours=hours), event_time=event_time, now=now
        )
    ]


def _altitudes_deg(frame: Frame, instrument: Instrument, *, hours: list[int]) -> list[float]:
    times: list[datetime] = [frame.mid_time + timedelta(hours=shift) for shift in hours]
    mjds = [bridge.mjd_of(moment) for moment in times]
    places = [place_of(instrument.site)]
    return [float(a) for a in altitudes_deg(places, [frame.ra_deg], [frame.dec_deg], mjds)[0, 0]]
