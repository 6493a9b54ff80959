"""The owner sets an instrument right, or puts it out of use."""

from collections.abc import Mapping
from typing import Any

from observers.actions.add_instrument import ADVICE, same_name_problems, site_owner_problems
from observers.actions.write_transaction import write_transaction
from observers.errors import refuse_problems
from observers.models import Instrument
from observers.rules.instrument import instrument_problems


def change_instrument(instrument: Instrument, values: Mapping[str, Any]) -> Instrument:
    """Change the given fields of an instrument fetched by access_own_instrument."""
    for field, value in values.items():
        setattr(instrument, field, value)
    problems = [*instrument_problems(instrument), *site_owner_problems(instrument)]
    refuse_problems(problems, advice=ADVICE)
    with write_transaction():
        refuse_problems(same_name_problems(instrument), advice=ADVICE)
        instrument.save(update_fields=list(values))
    return instrument
