"""Numbers of a JSON object, judged as they are read."""

from collections.abc import Mapping
from typing import Any

from skytiles.errors import AlertError


def number_from(
    fields: Mapping[str, Any],
    name: str,
    *,
    least: float,
    most: float,
    default: float | None = None,
) -> float:
    """A number of a JSON object within bounds.

    Parameters
    ----------
    fields : dict    the object
    name : str    which number
    least, most : float    bounds, included
    default : float or None    when it is missing; None: it must be there

    Returns
    -------
    float    AlertError when it is missing, no number or out of bounds

    Source: our own.
    """
    value = fields.get(name, default)
    is_number = isinstance(value, (int, float)) and not isinstance(value, bool)
    if not is_number or not least <= value <= most:
        raise AlertError(
            given=f"its {name} is {value!r}"[:300] if name in fields else f"it has no {name}",
            allowed=f"a number from {least:g} to {most:g}",
            advice=f"correct {name}; all angles are in degrees",
        )
    return float(value)
