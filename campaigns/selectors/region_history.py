"""Every revision of a campaign's region and every constraint that ever was."""

from typing import Any, TypedDict

from campaigns.events.iso_time import iso_time
from campaigns.events.state import RegionShown
from campaigns.models import Campaign, Constraint, RegionRevision
from campaigns.selectors.shown import region_shown


class ConstraintShown(TypedDict):
    """One piece of direction information, numbered from 1."""

    number: int
    kind: str
    label: str
    is_on: bool
    ending: str
    added_at: str | None
    ended_at: str | None
    message_time: str | None
    is_apart_confirmed: bool
    parameters: dict[str, Any]


class RevisionShown(RegionShown):
    """One revision of the region; `constraints_on` are the numbers of those in use."""

    made_at: str
    constraints_on: list[int]


class RegionHistory(TypedDict):
    """Newest revision first, constraints by number."""

    revisions: list[RevisionShown]
    constraints: list[ConstraintShown]


def get_region_history(campaign: Campaign) -> RegionHistory:
    """Two questions to the database, without the pixels' probabilities."""
    revisions = RegionRevision.objects.filter(campaign=campaign).order_by("-revision")
    constraints = Constraint.objects.filter(campaign=campaign).order_by("position")
    return {
        "revisions": [_revision_shown(row) for row in revisions.defer("probabilities")],
        "constraints": [_constraint_shown(row) for row in constraints],
    }


def _revision_shown(row: RegionRevision) -> RevisionShown:
    return {
        **region_shown(row),
        "made_at": iso_time(row.made_at),
        "constraints_on": [position + 1 for position in row.constraints_on],
    }


def _constraint_shown(row: Constraint) -> ConstraintShown:
    return {
        "number": row.position + 1,
        "kind": row.kind,
        "label": row.label,
        "is_on": row.is_on,
        "ending": row.ending,
        "added_at": iso_time(row.added_at),
        "ended_at": iso_time(row.ended_at),
        "message_time": iso_time(row.message_time),
        "is_apart_confirmed": row.is_apart_confirmed,
        "parameters": row.parameters,
    }
