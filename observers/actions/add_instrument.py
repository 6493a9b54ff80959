"""Somebody tells what they observe with."""

from collections.abc import Mapping
from datetime import datetime
from typing import Any

from observers.actions.write_transaction import write_transaction
from observers.errors import refuse_problems
from observers.models import Instrument, Person, Site
from observers.rules.instrument import instrument_problems
from observers.rules.problem import Problem

ADVICE = "Correct the named fields."


def add_instrument(
    actor: Person, site: Site, *, values: Mapping[str, Any], now: datetime
) -> Instrument:
    """Add an instrument of the person who acts at one of their sites."""
    instrument = Instrument(owner=actor, site=site, created_at=now, **values)
    refuse_problems(_problems(instrument), advice=ADVICE)
    with write_transaction():
        refuse_problems(same_name_problems(instrument), advice=ADVICE)
        instrument.save(force_insert=True)
    return instrument


def same_name_problems(instrument: Instrument) -> list[Problem]:
    """The name is unique among the instruments of one owner; the database guarantees it."""
    rows = Instrument.objects.filter(owner_id=instrument.owner_id, name=instrument.name)
    if rows.exclude(pk=instrument.pk).exists():
        return [Problem("name", f"You have an instrument named {instrument.name!r} already.")]
    return []


def site_owner_problems(instrument: Instrument) -> list[Problem]:
    """An instrument stands at a site of its owner."""
    if instrument.site.owner_id != instrument.owner_id:
        return [Problem("site", "The site belongs to somebody else; add one of your own.")]
    return []


def _problems(instrument: Instrument) -> list[Problem]:
    return [*instrument_problems(instrument), *site_owner_problems(instrument)]
