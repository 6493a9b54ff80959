"""Add the constraints of an alert to a campaign's region, or put them in the place of another."""

from collections.abc import Sequence
from datetime import datetime

from campaigns.actions.answer_once import Answer, Once
from campaigns.actions.revise_region import Edit, Standing, revise_region
from campaigns.errors import MessagesApart, TestAlertRefused, refuse_problems
from campaigns.ingest.alert_file import KeptAlert, refuse_message
from campaigns.ingest.kept_constraint import constraint_rows
from campaigns.models import Campaign, Constraint
from campaigns.rules.campaign import role_problems
from campaigns.rules.combination import apart_problems, use_problems
from observers.models import Person

ADVICE = "Look at the list of constraints on the Board."


def add_constraints(
    actor: Person,
    campaign: Campaign,
    kept: KeptAlert,
    *,
    despite_time_apart: bool,
    wall_now: datetime,
    once: Once | None = None,
) -> Answer:
    """Multiply the region with everything that the alert says."""

    def edit(standing: Standing) -> Edit:
        added = _new_rows(standing, kept, is_confirmed=despite_time_apart)
        return Edit("added", f"Added: {_named(added)}", added=added)

    return revise_region(actor, campaign, edit, wall_now=wall_now, once=once)


def replace_constraint(
    actor: Person,
    campaign: Campaign,
    kept: KeptAlert,
    *,
    number: int,
    despite_time_apart: bool,
    wall_now: datetime,
    once: Once | None = None,
) -> Answer:
    """What the alert says takes the place of one constraint, which is kept but counts no more."""

    def edit(standing: Standing) -> Edit:
        refuse_problems(use_problems(standing.constraints, number), advice=ADVICE)
        old = standing.constraints[number - 1]
        old.is_on, old.ending, old.ended_at = False, Constraint.Ending.REPLACED, standing.now
        added = _new_rows(standing, kept, is_confirmed=despite_time_apart)
        words = f"Constraint {number} replaced by {_named(added)}"
        return Edit("replaced", words, changed=[old], added=added)

    return revise_region(actor, campaign, edit, wall_now=wall_now, once=once)


def _new_rows(standing: Standing, kept: KeptAlert, *, is_confirmed: bool) -> list[Constraint]:
    campaign = standing.campaign
    if not kept.alert.constraints:
        refuse_message(kept)
    for problem in role_problems(kept.alert.role, is_rehearsal=campaign.is_rehearsal):
        raise TestAlertRefused(problem.detail, "It can only be added to a rehearsal.")
    rows = constraint_rows(
        campaign,
        kept,
        first_position=len(standing.constraints),
        added_at=standing.now,
        is_apart_confirmed=is_confirmed,
    )
    _refuse_apart(standing, rows, is_confirmed=is_confirmed)
    kept.keep_files()
    return rows


def _refuse_apart(standing: Standing, rows: Sequence[Constraint], *, is_confirmed: bool) -> None:
    known = [row.message_time for row in standing.constraints if row.is_on]
    problems = apart_problems(
        [row.message_time for row in rows],
        [standing.campaign.event_time, *known],
        is_confirmed=is_confirmed,
    )
    if problems:
        raise MessagesApart(
            " ".join(problem.detail for problem in problems),
            "If you know that they belong to one event, say so and send it again.",
            problems=problems,
        )


def _named(rows: Sequence[Constraint]) -> str:
    """In plain words: constraint 2 (cone of invented-2)."""
    return ", ".join(f"constraint {row.position + 1} ({row.kind} of {row.label})" for row in rows)
