"""What started a campaign."""

from dataclasses import dataclass
from typing import Any, Literal, get_args

from skytiles.region.constraints import AnyConstraint, Directional
from skytiles.region.targets import TargetListConstraint

# What the sender says the message is about: something seen, an exercise, something foretold, or
# the working of the sender's own system (IVOA VOEvent 2.0, section 3.1.2).
Role = Literal["observation", "test", "prediction", "utility"]
Cite = Literal["followup", "supersedes", "retraction"]
ROLES: tuple[Role, ...] = get_args(Role)
CITES: tuple[Cite, ...] = get_args(Cite)


@dataclass(frozen=True)
class Citation:
    """An earlier message, and what this one does to it."""

    identifier: str
    cite: Cite

    def to_json(self) -> dict[str, Any]:
        """The citation as in an alert file."""
        return {"id": self.identifier, "cite": self.cite}


@dataclass(frozen=True)
class Link:
    """An address that the message names: text to show, never fetched."""

    uri: str
    name: str = ""

    def to_json(self) -> dict[str, Any]:
        """The link as in an alert file."""
        return {"uri": self.uri, "name": self.name}


@dataclass(frozen=True)
class Alert:
    """Event time, kind, role, and constraints on the direction.

    A message that only retracts or follows up an earlier one may have no constraint at all.
    """

    identifier: str
    event_mjd: float
    kind: str
    role: Role
    constraints: tuple[AnyConstraint, ...]
    # What the reader took for granted, in plain sentences, and what else the message says.
    notes: tuple[str, ...] = ()
    citations: tuple[Citation, ...] = ()
    # The sender's opinion, 0..1.
    importance: float | None = None
    links: tuple[Link, ...] = ()
    # Whether the message itself says when it happened; else another time was taken, and noted.
    is_dated: bool = True

    @property
    def has_direction(self) -> bool:
        """Whether anything in it says where the source is."""
        return any(isinstance(c, Directional | TargetListConstraint) for c in self.constraints)

    @property
    def retracted(self) -> tuple[str, ...]:
        """Identifiers of the messages that this one takes back."""
        return tuple(c.identifier for c in self.citations if c.cite == "retraction")

    @property
    def superseded(self) -> tuple[str, ...]:
        """Identifiers of the messages that this one replaces."""
        return tuple(c.identifier for c in self.citations if c.cite == "supersedes")
