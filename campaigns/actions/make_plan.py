"""Plan a campaign: who is offered which tile when."""

import time
from collections.abc import Collection
from dataclasses import dataclass
from datetime import datetime

import campaigns.bridge as bridge
from campaigns.actions.live_guard import refuse_unless_live
from campaigns.events.append import append_event
from campaigns.events.kinds import PlanMade
from campaigns.events.state import UnassignedShown
from campaigns.ledger_replica import held_replica
from campaigns.models import Campaign, CampaignStatus, Claim, Offer, Plan, Tile
from campaigns.rules.clock import campaign_now
from campaigns.selectors.planning import Roster, get_roster, plan_problem
from campaigns.selectors.shown import offer_shown, plan_shown
from observers.actions.write_transaction import write_transaction
from skytiles.planner.make_plan import make_plan as run_planner
from skytiles.planner.plan_result import Assignment, PlanResult


@dataclass(frozen=True)
class Outcome:
    """What the planner found, for the state at one sequence number."""

    campaign: Campaign
    roster: Roster
    result: PlanResult
    seen_seq: int
    now: datetime


def make_plan(campaign_id: str, *, wall_now: datetime, at: datetime | None = None) -> Plan:
    """Plan, store plan and offers, and tell everybody. `at` plans for another moment.

    Level-triggered: the plan is for the newest state, and `planned_seq` says which; a request
    that was lost loses nothing, because planned_seq < seq shows that a plan is due.
    """
    campaign = Campaign.objects.get(pk=campaign_id)
    if campaign.status == CampaignStatus.CLOSED:
        refuse_unless_live(campaign)
    outcome = _run(campaign, now=at or campaign_now(campaign, wall_now))
    return _store(outcome)


def _run(campaign: Campaign, *, now: datetime) -> Outcome:
    started_s = time.perf_counter()
    with held_replica(campaign.pk) as replica:
        seen_seq = replica.through_seq
        roster = get_roster(campaign, now=now)
        problem = plan_problem(replica, campaign, roster, now=now)
        result = run_planner(problem)
    seconds = time.perf_counter() - started_s
    return Outcome(campaign, roster, result.timed(seconds), seen_seq, now)


def _store(outcome: Outcome) -> Plan:
    campaign = outcome.campaign
    with write_transaction():
        plan = _plan_row(outcome)
        plan.save(force_insert=True)
        offers = _offer_rows(outcome, plan)
        # Only the newest offers stand; older plans keep their numbers.
        Offer.objects.filter(plan__campaign=campaign).delete()
        Offer.objects.bulk_create(offers, batch_size=200)
        happening = PlanMade(plan=plan_shown(plan), offers=[offer_shown(offer) for offer in offers])
        seq = append_event(campaign.pk, happening, at=outcome.now)
        # Nothing else happened meanwhile: the plan's own event needs no further plan.
        planned_seq = seq if seq == outcome.seen_seq + 1 else outcome.seen_seq
        Campaign.objects.filter(pk=campaign.pk).update(planned_seq=planned_seq)
        Plan.objects.filter(pk=plan.pk).update(planned_seq=planned_seq)
    return plan


def _plan_row(outcome: Outcome) -> Plan:
    result, roster = outcome.result, outcome.roster
    served = {roster.person_of[one.observer_key] for one in result.assignments}
    return Plan(
        campaign=outcome.campaign,
        made_at=outcome.now,
        planned_seq=outcome.seen_seq,
        searched_expected=float(result.searched_expected),
        searched_bound=float(result.searched_bound),
        certificate=float(result.certificate),
        n_observers=len({roster.person_of[one.key] for one in roster.observers}),
        n_assignments=len(result.assignments),
        seconds=round(float(result.seconds), 3),
        unassigned=_unassigned(outcome, served),
    )


def _unassigned(outcome: Outcome, served: Collection[int]) -> list[UnassignedShown]:
    """One reason for each person; somebody with two sites is served by one of them."""
    person_of = outcome.roster.person_of
    reasons = dict(outcome.roster.absent)
    for one in outcome.result.unassigned:
        reasons.setdefault(person_of[one.observer_key], one.reason)
    return [
        {"observer": person_id, "reason": reason}
        for person_id, reason in sorted(reasons.items())
        if person_id not in served
    ]


def _offer_rows(outcome: Outcome, plan: Plan) -> list[Offer]:
    """The assignments, without tiles that somebody took while the planner ran."""
    assignments = outcome.result.assignments
    numbers = {one.tile_key for one in assignments}
    rows = Tile.objects.filter(campaign=outcome.campaign, number__in=numbers)
    tiles = {tile.number: tile for tile in rows}
    known = {claim.tile_key for claim in outcome.roster.claims}
    held = Claim.objects.filter(campaign=outcome.campaign, state=Claim.State.HELD)
    taken = set(held.values_list("tile__number", flat=True)) - known
    return [
        _offer_row(one, plan, outcome.roster, tile=tiles[one.tile_key])
        for one in assignments
        if one.tile_key not in taken
    ]


def _offer_row(one: Assignment, plan: Plan, roster: Roster, *, tile: Tile) -> Offer:
    return Offer(
        plan=plan,
        person_id=roster.person_of[one.observer_key],
        instrument_id=one.instrument_key,
        tile=tile,
        starts_at=bridge.time_of(one.start_mjd),
        ends_at=bridge.time_of(one.end_mjd),
        gain=float(one.gain),
    )
