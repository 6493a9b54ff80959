"""Rows: fields, constraints and a name each; what is done with them stands in actions."""

from observers.models.api_token import ApiToken
from observers.models.instrument import FieldShape, Instrument, InstrumentKind
from observers.models.invitation import Invitation
from observers.models.person import Person, Role
from observers.models.site import Site

__all__ = [
    "ApiToken",
    "FieldShape",
    "Instrument",
    "InstrumentKind",
    "Invitation",
    "Person",
    "Role",
    "Site",
]
