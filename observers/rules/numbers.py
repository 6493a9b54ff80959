"""Is every number finite and in its range? One sentence for each that is not."""

import math
from collections.abc import Iterator, Mapping

from observers.rules.problem import Problem

# lowest, highest, what is allowed in words
Range = tuple[float, float, str]


def number_problems(values: object, ranges: Mapping[str, Range]) -> Iterator[Problem]:
    """Judge the named attributes; an attribute that is None is not judged."""
    for field, allowed in ranges.items():
        value = getattr(values, field)
        if value is not None:
            yield from range_problems(field, value, allowed=allowed)


def range_problems(field: str, value: float, *, allowed: Range) -> Iterator[Problem]:
    """Judge one number."""
    lowest, highest, words = allowed
    if not math.isfinite(value) or not lowest <= value <= highest:
        yield Problem(field, f"{field} is {value:g}; give {words}.")
