"""Numbers in the query string."""

import math

from rest_framework.request import Request

from campaigns.errors import InvalidInput
from observers.rules.problem import Problem


def int_of(request: Request, name: str) -> int:
    """A whole number from 0."""
    text = request.query_params.get(name, "")
    if not text.isascii() or not text.isdigit() or len(text) > 18:
        raise _bad(name, "a whole number")
    return int(text)


def float_of(
    request: Request, name: str, *, default: float, lowest: float, highest: float
) -> float:
    """A number within bounds; the default when it is not given."""
    text = request.query_params.get(name)
    if text is None:
        return default
    try:
        value = float(text)
    except ValueError:
        value = math.nan
    if not lowest <= value <= highest:
        raise _bad(name, f"a number from {lowest:g} to {highest:g}")
    return value


def _bad(name: str, allowed: str) -> InvalidInput:
    detail = f"?{name}= must be {allowed}."
    return InvalidInput(detail, "Correct the address.", problems=[Problem(name, detail)])
