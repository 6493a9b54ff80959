"""A frame of a field that was not up has a wrong clock: local time for UT is the commonest."""

from datetime import datetime, timedelta

import campaigns.bridge as bridge
from campaigns.errors import InvalidInput
from campaigns.models import Frame
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


def refuse_field_below_horizon(frame: Frame, instrument: Instrument) -> None:
    """Refuse, and name the whole-hour shifts of the clock that would fit."""
    now_deg, *shifted_deg = _altitudes_deg(frame, instrument, hours=[0, *_HOURS])
    if now_deg + frame.field_deg / 2.0 >= _LOWEST_DEG:
        return
    fitting = [hours for hours, high in zip(_HOURS, shifted_deg, strict=True) if high >= 15.0]
    detail = f"At the stated mid-time the field was {-now_deg:.0f} degrees below the horizon."
    raise FieldWasDown(
        detail,
        "Give the mid-time in UTC; is it local time?",
        problems=[Problem("mid_time", detail)],
        extras={"fitting_shifts_h": fitting},
    )


def _altitudes_deg(frame: Frame, instrument: Instrument, *, hours: list[int]) -> list[float]:
    times: list[datetime] = [frame.mid_time + timedelta(hours=shift) for shift in hours]
    mjds = [bridge.mjd_of(moment) for moment in times]
    places = [place_of(instrument.site)]
    return [float(a) for a in altitudes_deg(places, [frame.ra_deg], [frame.dec_deg], mjds)[0, 0]]
