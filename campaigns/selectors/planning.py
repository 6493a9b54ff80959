"""What the planner needs of a campaign: who could look, what they hold, how reliable they are."""

from collections import Counter
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from datetime import datetime, timedelta

import campaigns.bridge as bridge
from campaigns.ledger_replica import LedgerReplica
from campaigns.models import Campaign, Claim, Frame, Membership
from observers.bridge import planner_instrument_of, planner_observer_of
from observers.models import Instrument, Site
from observers.selectors.gear import list_instruments_in_use
from skytiles.planner.observers_to_plan import (
    HeldClaim,
    PlannerInstrument,
    PlannerObserver,
    RecentPointing,
)
from skytiles.planner.plan_problem import PlanProblem
from skytiles.planner.problem import build_problem

# A plan looks one night ahead for everybody on the globe.
PLAN_HOURS = 24.0
# Start slots of a plan: a larger network gets a coarser grid of starts; the
# certificate holds for the stated starts.
_SLOT_MINUTES = ((100, 10.0), (400, 20.0))
_COARSEST_SLOT_MINUTES = 30.0
# Tiles of one night count against an instrument's habit.
_NIGHT = timedelta(hours=12)
# Frames of one instrument within an hour share a look.
_LOOK = timedelta(hours=1)
# Of those who have no record yet four in five meet their claims (assumption); a record of five
# claims weighs as much as that.
_PRIOR_MET, _PRIOR_CLAIMS = 4.0, 5.0
# Whoever says "in" sees a clear sky (assumption: nine times in ten it lasts).
_CLEAR_WHEN_IN = 0.9

WHY_ABSENT = {
    Membership.Status.CLOUDED: "says: clouded",
    Membership.Status.OUT: "says: out",
}


@dataclass(frozen=True)
class Roster:
    """Everybody who may be planned for, and what is promised already."""

    observers: Sequence[PlannerObserver]
    claims: Sequence[HeldClaim]
    # Whose site a planner's key is.
    person_of: Mapping[int, int]
    # Members who cannot be planned for: person and reason.
    absent: Sequence[tuple[int, str]]


def get_roster(campaign: Campaign, *, now: datetime, only_person: int | None = None) -> Roster:
    """Read everything about the members; with `only_person` nobody else is planned for."""
    members = {member.person_id: member for member in Membership.objects.filter(campaign=campaign)}
    claims = _held_claims(campaign, now=now)
    holders = {claim.person_id for claim in claims}
    wanted = set(members) if only_person is None else {only_person} | holders
    instruments = list_instruments_in_use(sorted(wanted))
    present = [one for one in instruments if _why_absent(members.get(one.owner_id)) is None]
    record = _Record.read(campaign, now=now)
    return Roster(
        observers=_observers(present, members, record, now=now),
        claims=[bridge.held_claim_of(claim) for claim in claims],
        person_of={one.site_id: one.owner_id for one in instruments},
        absent=_absent(members, instruments),
    )


def plan_problem(
    replica: LedgerReplica,
    campaign: Campaign,
    roster: Roster,
    *,
    now: datetime,
    hours: float = PLAN_HOURS,
    only_key: int | None = None,
) -> PlanProblem:
    """The stated problem from the live ledger; hold the replica's lock."""
    return build_problem(
        replica.ledger,
        replica.planner_tiles(),
        roster.observers,
        event_mjd=bridge.mjd_of(campaign.event_time),
        now_mjd=bridge.mjd_of(now),
        hours=hours,
        held_claims=roster.claims,
        slot_minutes=_slot_minutes(1 if only_key is not None else len(roster.observers)),
        plan_for=None if only_key is None else {only_key},
    )


def _slot_minutes(n_observers: int) -> float:
    for most, minutes in _SLOT_MINUTES:
        if n_observers <= most:
            return minutes
    return _COARSEST_SLOT_MINUTES


@dataclass(frozen=True)
class _Record:
    """What the members have done: claims met of claims ended, tiles tonight, frames just now."""

    met: Counter[int]
    ended: Counter[int]
    tonight: Counter[int]
    recent: Mapping[int, list[RecentPointing]]

    @classmethod
    def read(cls, campaign: Campaign, *, now: datetime) -> "_Record":
        rows = Claim.objects.filter(campaign=campaign).values_list(
            "person_id", "instrument_id", "state", "held_at"
        )
        met: Counter[int] = Counter()
        ended: Counter[int] = Counter()
        tonight: Counter[int] = Counter()
        for person_id, instrument_id, state, held_at in rows:
            met[person_id] += state == Claim.State.MET
            ended[person_id] += state != Claim.State.HELD
            is_tonight = held_at > now - _NIGHT
            tonight[instrument_id] += is_tonight and state in (Claim.State.HELD, Claim.State.MET)
        return cls(met, ended, tonight, _recent(campaign, now=now))

    def met_chance(self, person_id: int) -> float:
        met, ended = self.met[person_id], self.ended[person_id]
        return (met + _PRIOR_MET) / (ended + _PRIOR_CLAIMS)


def _recent(campaign: Campaign, *, now: datetime) -> dict[int, list[RecentPointing]]:
    frames = Frame.objects.filter(
        campaign=campaign, state=Frame.State.COUNTED, mid_time__gt=now - _LOOK
    ).select_related("instrument")
    recent: dict[int, list[RecentPointing]] = {}
    for frame in frames:
        pointing = bridge.recent_pointing_of(frame)
        recent.setdefault(frame.instrument.site_id, []).append(pointing)
    return recent


def _held_claims(campaign: Campaign, *, now: datetime) -> list[Claim]:
    rows = Claim.objects.filter(campaign=campaign, state=Claim.State.HELD, until__gt=now)
    return list(rows.select_related("tile", "instrument").order_by("id"))


def _observers(
    instruments: Iterable[Instrument],
    members: Mapping[int, Membership],
    record: _Record,
    *,
    now: datetime,
) -> list[PlannerObserver]:
    by_site: dict[Site, list[Instrument]] = {}
    for instrument in instruments:
        by_site.setdefault(instrument.site, []).append(instrument)
    return [
        planner_observer_of(
            site,
            [_planned(instrument, record) for instrument in owned],
            from_mjd=bridge.mjd_of(now),
            until_mjd=bridge.mjd_of(now) + PLAN_HOURS / 24.0,
            met_chance=record.met_chance(site.owner_id),
            clear_chance=_clear_chance(site, members.get(site.owner_id)),
            recent=record.recent.get(site.pk, []),
        )
        for site, owned in sorted(by_site.items(), key=lambda item: item[0].pk)
    ]


def _planned(instrument: Instrument, record: _Record) -> PlannerInstrument:
    left = instrument.tiles_per_night - record.tonight[instrument.pk]
    return planner_instrument_of(instrument, n_tiles_left=max(0, left))


def _clear_chance(site: Site, member: Membership | None) -> float:
    if member is not None and member.status == Membership.Status.IN:
        return max(site.clear_chance, _CLEAR_WHEN_IN)
    return site.clear_chance


def _why_absent(member: Membership | None) -> str | None:
    return WHY_ABSENT.get(Membership.Status(member.status)) if member else None


def _absent(
    members: Mapping[int, Membership], instruments: Iterable[Instrument]
) -> list[tuple[int, str]]:
    owners = {one.owner_id for one in instruments}
    reasons = [
        (person_id, _why_absent(member) or _no_gear(person_id, owners))
        for person_id, member in sorted(members.items())
    ]
    return [(person_id, reason) for person_id, reason in reasons if reason]


def _no_gear(person_id: int, owners: set[int]) -> str:
    return "" if person_id in owners else "no instrument in use"
