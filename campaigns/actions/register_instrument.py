"""Somebody adds or changes an instrument; campaigns that run see it at once."""

from collections.abc import Mapping
from datetime import datetime
from typing import Any

from campaigns.actions.answer_once import Answer, Once, answer_once
from campaigns.actions.lay_grids import show_instrument
from observers.actions.add_instrument import add_instrument
from observers.actions.change_instrument import change_instrument
from observers.models import Instrument, Person, Site
from observers.selectors.gear import instrument_as_owned


def register_instrument(
    actor: Person,
    site: Site,
    *,
    values: Mapping[str, Any],
    wall_now: datetime,
    once: Once | None = None,
) -> Answer:
    """Add an instrument, lay its grid in every campaign that is not closed, and tell them."""

    def write(_: None) -> Answer:
        instrument = add_instrument(actor, site, values=values, now=wall_now)
        return Answer(201, instrument_as_owned(instrument))

    answer = answer_once(once, judge=lambda: None, write=write)
    if not answer.is_repeat:
        instrument = Instrument.objects.select_related("site", "owner").get(pk=answer.body["id"])
        show_instrument(instrument, wall_now=wall_now)
    return answer


def alter_instrument(
    instrument: Instrument, values: Mapping[str, Any], *, wall_now: datetime
) -> Answer:
    """Change an instrument fetched by access_own_instrument and show it anew."""
    changed = change_instrument(instrument, values)
    show_instrument(changed, wall_now=wall_now)
    return Answer(200, instrument_as_owned(changed))
