"""What a rule finds: one field and one sentence."""

from dataclasses import dataclass


@dataclass(frozen=True)
class Problem:
    """One broken rule. `field` is the JSON name, "" when it concerns the whole."""

    field: str
    detail: str
