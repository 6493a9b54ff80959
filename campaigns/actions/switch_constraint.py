"""Switch a constraint off or on again, or take it out for good."""

from datetime import datetime

from campaigns.actions.add_constraints import ADVICE
from campaigns.actions.answer_once import Answer, Once
from campaigns.actions.revise_region import Edit, Standing, revise_region
from campaigns.errors import refuse_problems
from campaigns.models import Campaign, Constraint
from campaigns.rules.combination import use_problems
from observers.models import Person


def switch_constraint(
    actor: Person,
    campaign: Campaign,
    *,
    number: int,
    is_on: bool,
    wall_now: datetime,
    once: Once | None = None,
) -> Answer:
    """The region with or without it; it can be switched again at any time."""

    def edit(standing: Standing) -> Edit:
        refuse_problems(use_problems(standing.constraints, number, is_on=is_on), advice=ADVICE)
        row = standing.constraints[number - 1]
        row.is_on = is_on
        words = f"Constraint {number} ({row.kind}) switched {'on' if is_on else 'off'}"
        return Edit("switched on" if is_on else "switched off", words, changed=[row])

    return revise_region(actor, campaign, edit, wall_now=wall_now, once=once)


def retract_constraint(
    actor: Person,
    campaign: Campaign,
    *,
    number: int,
    wall_now: datetime,
    once: Once | None = None,
) -> Answer:
    """Its sender took it back: it stays in the record and counts no more, for good."""

    def edit(standing: Standing) -> Edit:
        refuse_problems(use_problems(standing.constraints, number), advice=ADVICE)
        row = standing.constraints[number - 1]
        row.is_on, row.ending, row.ended_at = False, Constraint.Ending.RETRACTED, standing.now
        return Edit("retracted", f"Constraint {number} ({row.kind}) retracted", changed=[row])

    return revise_region(actor, campaign, edit, wall_now=wall_now, once=once)
