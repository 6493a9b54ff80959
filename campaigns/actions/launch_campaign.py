"""From an alert to a campaign: region, tiles, members, and the doors open."""

import random
import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from datetime import datetime
from typing import Any

import campaigns.bridge as bridge
from campaigns.actions.answer_once import Answer, Once, answer_once
from campaigns.actions.lay_grids import grids_rows, sizes_of
from campaigns.actions.source_to_launch import source_to_launch
from campaigns.actions.working_region import working_region
from campaigns.errors import TestAlertRefused, refuse_problems
from campaigns.events.append import append_events
from campaigns.events.iso_time import iso_time
from campaigns.events.kinds import (
    CampaignOpened,
    Happening,
    ObserverJoined,
    RegionRevised,
    TilesLaid,
)
from campaigns.events.said import About
from campaigns.ingest.alert_file import KeptAlert, refuse_message
from campaigns.ingest.kept_constraint import constraint_rows
from campaigns.models import (
    Campaign,
    CampaignStatus,
    Constraint,
    Membership,
    RegionRevision,
    Tile,
)
from campaigns.rules.campaign import launch_problems, role_problems
from campaigns.rules.combination import apart_notes
from campaigns.selectors.shown import observer_shown, region_shown, tile_shown
from observers.models import Instrument, Person
from observers.selectors.gear import list_network
from skytiles.region.region import Region

_ID_LETTERS = "23456789abcdefghjkmnpqrstuvwxyz"
Network = Mapping[Person, Sequence[Instrument]]


@dataclass(frozen=True)
class LaunchWish:
    """What the coordinator chose."""

    title: str
    source: str | Mapping[str, Any] = "steady"
    # "flat" or "galactic"; empty: what suits the source model.
    prior: str = ""
    is_draft: bool = False
    is_public: bool = False
    is_rehearsal: bool = False
    clock_now: datetime | None = None


@dataclass(frozen=True)
class Launch:
    """Everything computed and judged, nothing written yet."""

    campaign: Campaign
    constraints: list[Constraint]
    region: RegionRevision
    tiles: list[Tile]
    network: Network
    now: datetime


def launch_campaign(
    actor: Person,
    kept: KeptAlert,
    *,
    wish: LaunchWish,
    wall_now: datetime,
    rng: random.Random,
    once: Once | None = None,
) -> Answer:
    """Make a campaign; live at once unless it is to stay a draft. Nothing is half written."""

    def judge() -> Launch:
        launch = prepare_launch(actor, kept, wish=wish, wall_now=wall_now, rng=rng)
        kept.keep_files()
        return launch

    return answer_once(once, judge=judge, write=_write)


def prepare_launch(
    actor: Person, kept: KeptAlert, *, wish: LaunchWish, wall_now: datetime, rng: random.Random
) -> Launch:
    """Judge the wish and compute region and tiles: seconds of work before the transaction."""
    _refuse(kept, wish)
    now = wish.clock_now or wall_now
    network = list_network()
    instruments = [one for owned in network.values() for one in owned]
    campaign = _campaign_row(actor, kept, wish=wish, now=now, rng=rng)
    galaxy = bridge.prior_of(campaign)
    region = working_region(kept.alert.constraints, instruments, galaxy=galaxy)
    constraints = constraint_rows(campaign, kept, first_position=0, added_at=now)
    return Launch(
        campaign=campaign,
        constraints=constraints,
        region=_region_row(actor, region, constraints, now=now),
        tiles=grids_rows(campaign, region, sizes=sizes_of(instruments)),
        network=network,
        now=now,
    )


def _refuse(kept: KeptAlert, wish: LaunchWish) -> None:
    refuse_message(kept)
    for problem in role_problems(kept.alert.role, is_rehearsal=wish.is_rehearsal):
        raise TestAlertRefused(problem.detail, "It can only become a rehearsal: launch it as one.")
    problems = launch_problems(
        wish.title, clock_is_set=wish.clock_now is not None, is_rehearsal=wish.is_rehearsal
    )
    refuse_problems(list(problems), advice="Correct the named fields.")


def _campaign_row(
    actor: Person, kept: KeptAlert, *, wish: LaunchWish, now: datetime, rng: random.Random
) -> Campaign:
    constraints = kept.alert.constraints
    return Campaign(
        id=new_campaign_id(wish.title, rng),
        title=wish.title.strip(),
        status=CampaignStatus.DRAFT if wish.is_draft else CampaignStatus.LIVE,
        is_rehearsal=wish.is_rehearsal,
        is_public=wish.is_public,
        alert_id=kept.alert.identifier[:120],
        kind=kept.alert.kind[:80],
        event_time=kept.event_time,
        source_model=source_to_launch(wish.source, prior=wish.prior, constraints=constraints),
        clock_now=wish.clock_now,
        made_by=actor,
        made_at=now,
        opened_at=None if wish.is_draft else now,
    )


def new_campaign_id(title: str, rng: random.Random) -> str:
    """A short text that can be read aloud: words of the title and four letters."""
    words = re.sub(r"[^a-z0-9]+", "-", title.lower()).strip("-")[:24].strip("-")
    return f"{words or 'campaign'}-{''.join(rng.choices(_ID_LETTERS, k=4))}"


def _region_row(
    actor: Person, region: Region, constraints: Sequence[Constraint], *, now: datetime
) -> RegionRevision:
    """The first revision, with a warning for messages that are far from the event."""
    campaign = constraints[0].campaign
    row = bridge.region_row(region, campaign=campaign, made_at=now)
    row.made_by = actor
    row.constraints_on = [one.position for one in constraints]
    row.notes += apart_notes(constraints, event_time=campaign.event_time)
    return row


def _write(launch: Launch) -> Answer:
    campaign = launch.campaign
    if campaign.made_by.pk is None:
        campaign.made_by.save()
    campaign.save(force_insert=True)
    Constraint.objects.bulk_create(launch.constraints)
    launch.region.save(force_insert=True)
    Tile.objects.bulk_create(launch.tiles, batch_size=200)
    Membership.objects.bulk_create(
        Membership(campaign=campaign, person=person, joined_at=launch.now)
        for person in launch.network
    )
    append_events(campaign.pk, _happenings(launch), at=launch.now)
    return Answer(
        201,
        {
            "campaign": campaign.pk,
            "url": f"/c/{campaign.pk}/",
            "area_deg2": launch.region.area_deg2,
            "n_tiles": len(launch.tiles),
        },
    )


def _happenings(launch: Launch) -> list[tuple[Happening, About]]:
    happenings: list[Happening] = [
        ObserverJoined(
            id=person.pk,
            observer=observer_shown(person.name, "silent", instruments=instruments),
        )
        for person, instruments in launch.network.items()
    ]
    happenings.append(RegionRevised(region=region_shown(launch.region), tiles={}))
    if launch.tiles:
        tiles = {str(tile.number): tile_shown(tile) for tile in launch.tiles}
        happenings.append(TilesLaid(tiles=tiles))
    if launch.campaign.opened_at is not None:
        happenings.append(CampaignOpened(opened_at=iso_time(launch.campaign.opened_at)))
    return [(happening, About()) for happening in happenings]
