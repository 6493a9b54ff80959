"""A new revision of the region: constraints change, numbers are computed anew, frames stay."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from datetime import datetime

from django.db import IntegrityError, transaction

import campaigns.bridge as bridge
from campaigns.actions.answer_once import Answer, Once, answer_once
from campaigns.actions.lay_grids import sizes_of
from campaigns.actions.relay_tiles import Relaid, relaid_tiles, write_tiles
from campaigns.actions.working_region import working_region
from campaigns.errors import CampaignClosed, RegionMoved, refuse_problems
from campaigns.events.after_commit import notify
from campaigns.events.append import append_events
from campaigns.events.change_said import change_said
from campaigns.events.kinds import Happening, RegionRevised, TilesLaid
from campaigns.events.said import About
from campaigns.events.state import ChangeShown, ChangeWay, TileMoved
from campaigns.ingest.kept_constraint import constraints_of
from campaigns.models import Campaign, CampaignStatus, Constraint, RegionRevision, Tile
from campaigns.rules.clock import campaign_now
from campaigns.rules.combination import apart_notes, remaining_problems
from campaigns.selectors.shown import region_shown, tile_shown
from observers.models import Person
from observers.selectors.gear import list_network

# A revision that another one overtook is judged anew, so often.
_TRIES = 4


@dataclass(frozen=True)
class Standing:
    """What a change is made to: the constraints (all that ever were) and the newest region."""

    campaign: Campaign
    constraints: Sequence[Constraint]
    region: RegionRevision
    now: datetime


@dataclass(frozen=True)
class Edit:
    """What is to be done with the constraints, in rows and in words."""

    way: ChangeWay
    words: str
    # Rows that were there before, changed in memory.
    changed: Sequence[Constraint] = ()
    added: Sequence[Constraint] = ()


Editor = Callable[[Standing], Edit]


@dataclass(frozen=True)
class _Revision:
    """Everything computed and judged, nothing written yet."""

    standing: Standing
    edit: Edit
    region: RegionRevision
    relaid: Relaid


def revise_region(
    actor: Person,
    campaign: Campaign,
    editor: Editor,
    *,
    wall_now: datetime,
    once: Once | None = None,
) -> Answer:
    """Carry out a change of constraints; all revisions are kept.

    The region is computed before the transaction. Whoever comes second finds the number of the
    revision taken (a unique constraint) and is judged anew, on top of the first.
    """
    for _ in range(_TRIES - 1):
        try:
            return _revise_once(actor, campaign, editor, wall_now=wall_now, once=once)
        except RegionMoved:
            continue
    return _revise_once(actor, campaign, editor, wall_now=wall_now, once=once)


def _revise_once(
    actor: Person, campaign: Campaign, editor: Editor, *, wall_now: datetime, once: Once | None
) -> Answer:
    return answer_once(
        once,
        judge=lambda: _judge(actor, campaign.pk, editor, wall_now=wall_now),
        write=_write,
    )


def _judge(actor: Person, campaign_id: str, editor: Editor, *, wall_now: datetime) -> _Revision:
    standing = _standing(campaign_id, wall_now=wall_now)
    edit = editor(standing)
    after = [*standing.constraints, *edit.added]
    refuse_problems(
        remaining_problems(after), advice="Look at the list of constraints on the Board."
    )
    in_use = [row for row in after if row.is_on]
    instruments = [one for owned in list_network().values() for one in owned]
    galaxy = bridge.prior_of(standing.campaign)
    region = working_region(constraints_of(in_use), instruments, galaxy=galaxy)
    row = bridge.region_row(
        region,
        campaign=standing.campaign,
        made_at=standing.now,
        revision=standing.region.revision + 1,
    )
    relaid = relaid_tiles(standing.campaign, region, sizes=sizes_of(instruments))
    row.made_by = actor
    row.constraints_on = [one.position for one in in_use]
    row.notes += apart_notes(in_use, event_time=standing.campaign.event_time)
    row.change = dict(_change_shown(edit, standing.region, row, relaid))
    return _Revision(standing, edit, row, relaid)


def _standing(campaign_id: str, *, wall_now: datetime) -> Standing:
    campaign = Campaign.objects.get(pk=campaign_id)
    _refuse_closed(campaign)
    # The revision first: whatever changes after this makes its next number taken.
    region = RegionRevision.objects.filter(campaign=campaign).latest("revision")
    constraints = list(Constraint.objects.filter(campaign=campaign).order_by("position"))
    return Standing(campaign, constraints, region, campaign_now(campaign, wall_now))


def _refuse_closed(campaign: Campaign) -> None:
    if campaign.status == CampaignStatus.CLOSED:
        raise CampaignClosed(
            "The region of a closed campaign stays as it is.", "See the list of campaigns."
        )


def _change_shown(
    edit: Edit, before: RegionRevision, row: RegionRevision, relaid: Relaid
) -> ChangeShown:
    said = change_said(
        edit.words,
        area_before_deg2=before.area_deg2,
        area_deg2=row.area_deg2,
        n_dropped=len(relaid.dropped),
        n_back=len(relaid.back),
        n_new=len(relaid.new),
    )
    contradictions = [note for note in row.notes if "contradict" in note]
    return {
        "way": edit.way,
        "said": " ".join([said, *contradictions]),
        "area_before_deg2": before.area_deg2,
        "n_tiles_new": len(relaid.new),
        "tiles_dropped": list(relaid.dropped),
        "tiles_back": list(relaid.back),
    }


def _write(revision: _Revision) -> Answer:
    standing, row = revision.standing, revision.region
    _save_region(revision)
    for constraint in revision.edit.changed:
        constraint.save(force_update=True)
    Constraint.objects.bulk_create(revision.edit.added)
    _save_tiles(revision.relaid)
    happenings = _happenings(revision)
    last_seq = append_events(
        standing.campaign.pk,
        [(happening, About()) for happening in happenings],
        at=standing.now,
        only_while_live=standing.campaign.status == CampaignStatus.LIVE,
    )
    # Asked last: the events hold the campaign's row, so no grid is laid after this.
    _refuse_new_tiles(revision)
    # Every ledger that was counted on the old pixels is void from the revision's event on.
    revised_seq = last_seq - len(happenings) + 1
    Campaign.objects.filter(pk=standing.campaign.pk).update(ledger_base_seq=revised_seq)
    if standing.campaign.status == CampaignStatus.LIVE and not standing.campaign.is_rehearsal:
        notify(standing.campaign.pk, "plan due")
    return Answer(201, _answer(row, revision.relaid))


def _save_region(revision: _Revision) -> None:
    """Write first: the number of a revision is given once."""
    try:
        # A savepoint: on PostgreSQL a refused INSERT would spoil the whole transaction.
        with transaction.atomic():
            revision.region.save(force_insert=True)
    except IntegrityError as error:
        raise _moved() from error


def _save_tiles(relaid: Relaid) -> None:
    """A grid that was laid meanwhile may have taken the numbers of the new tiles."""
    try:
        with transaction.atomic():
            write_tiles(relaid)
    except IntegrityError as error:
        raise _moved() from error


def _refuse_new_tiles(revision: _Revision) -> None:
    """A grid that was laid meanwhile knows nothing of the new region."""
    n_tiles = Tile.objects.filter(campaign=revision.standing.campaign).count()
    if n_tiles != len(revision.relaid.moved) + len(revision.relaid.new):
        raise _moved()


def _moved() -> RegionMoved:
    return RegionMoved(
        "Somebody else changed the region or its tiles a moment ago.",
        "Look at the newest revision, and ask again if the change is still wanted.",
    )


def _happenings(revision: _Revision) -> list[Happening]:
    relaid = revision.relaid
    moved: dict[str, TileMoved] = {
        str(tile.number): {"probability": tile.probability, "is_dropped": tile.is_dropped}
        for tile in relaid.moved
    }
    revised = RegionRevised(region=region_shown(revision.region), tiles=moved)
    if not relaid.new:
        return [revised]
    return [revised, TilesLaid(tiles={str(tile.number): tile_shown(tile) for tile in relaid.new})]


def _answer(row: RegionRevision, relaid: Relaid) -> dict[str, object]:
    change = row.change or {}
    return {
        "revision": row.revision,
        "said": change.get("said", ""),
        "area_deg2": row.area_deg2,
        "area_before_deg2": change.get("area_before_deg2", {}),
        "overlap": row.overlap,
        "n_tiles_new": len(relaid.new),
        "tiles_dropped": list(relaid.dropped),
        "tiles_back": list(relaid.back),
        "notes": row.notes,
    }
