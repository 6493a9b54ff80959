"""What started a campaign."""

from dataclasses import dataclass
from typing import Literal

from skytiles.region.constraints import AnyConstraint

Role = Literal["observation", "test"]


@dataclass(frozen=True)
class Alert:
    """Event time, kind, role, and one or more constraints on the direction."""

    identifier: str
    event_mjd: float
    kind: str
    role: Role
    constraints: tuple[AnyConstraint, ...]
    # What the reader took for granted, in plain sentences.
    notes: tuple[str, ...] = ()
