"""A number that a source model assumes, so that it can be shown and changed."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from typing import Any

from skytiles.errors import SourceError


@dataclass(frozen=True)
class Assumption:
    """One assumed number: what it is, its value and unit, where it comes from, its bounds."""

    name: str
    label: str
    value: float
    unit: str
    source: str
    lowest: float = -1.0e6
    highest: float = 1.0e6

    def to_json(self) -> dict[str, Any]:
        """As it is shown.

        Returns
        -------
        dict    name, label, value, unit, source
        """
        return {
            "name": self.name,
            "label": self.label,
            "value": self.value,
            "unit": self.unit,
            "source": self.source,
        }


def filled_in(assumptions: Iterable[Assumption], given: Mapping[str, float]) -> dict[str, float]:
    """The assumed numbers, with those that somebody has changed.

    Parameters
    ----------
    assumptions : iterable of Assumption
    given : mapping    name to number

    Returns
    -------
    dict    name to number, of all assumptions

    Raises
    ------
    SourceError    for a name that is no assumption or a number out of bounds

    Source: our own.
    """
    known = {one.name: one for one in assumptions}
    unknown = sorted(set(given) - set(known))
    if unknown:
        raise SourceError(
            f"assumptions {', '.join(unknown)}", ", ".join(known), "leave out the others"
        )
    values = {name: float(given.get(name, one.value)) for name, one in known.items()}
    for name, value in values.items():
        lowest, highest = known[name].lowest, known[name].highest
        # Written so that a value that is no number fails too.
        if not lowest <= value <= highest:
            raise SourceError(
                f"{known[name].label} ({name}) = {value:g}",
                f"{lowest:g} to {highest:g} {known[name].unit}".strip(),
                "correct this number",
            )
    return values
