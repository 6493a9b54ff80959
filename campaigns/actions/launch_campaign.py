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
from campaigns.ingest.alert_file import KeptAlert
from campaigns.models import (
    Campaign,
    CampaignStatus,
    Constraint,
    Membership,
    RegionRevision,
    Tile,
)
from campaigns.rules.campaign import launch_problems, role_problems
from campaigns.selectors.shown import observer_shown, region_shown, tile_shown
from observers.models import Instrument, Person
from observers.selectors.gear import list_network
from skytiles.region.make_region import make_region
from skytiles.region.region import Region
from skytiles.source.source_json import source_from_json, source_to_json

_ID_LETTERS = "23456789abcdefghjkmnpqrstuvwxyz"
Network = Mapping[Person, Sequence[Instrument]]


@dataclass(frozen=True)
class LaunchWish:
    """What the coordinator chose."""

    title: str
    source: str | Mapping[str, Any] = "steady"
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
    return answer_once(
        once,
        judge=lambda: prepare_launch(actor, kept, wish=wish, wall_now=wall_now, rng=rng),
        write=_write,
    )


def prepare_launch(
    actor: Person, kept: KeptAlert, *, wish: LaunchWish, wall_now: datetime, rng: random.Random
) -> Launch:
    """Judge the wish and compute region and tiles: seconds of work before the transaction."""
    _refuse(kept, wish)
    now = wish.clock_now or wall_now
    network = list_network()
    instruments = [one for owned in network.values() for one in owned]
    region = region_of_alert(kept, instruments)
    campaign = _campaign_row(actor, kept, wish=wish, now=now, rng=rng)
    return Launch(
        campaign=campaign,
        constraints=_constraint_rows(campaign, kept),
        region=bridge.region_row(region, campaign=campaign, made_at=now),
        tiles=grids_rows(campaign, region, sizes=sizes_of(instruments)),
        network=network,
        now=now,
    )


def region_of_alert(kept: KeptAlert, instruments: Sequence[Instrument]) -> Region:
    """The working region: fine enough for the smallest frame of the network."""
    sides_deg = [min(one.width_deg, one.height_deg) for one in instruments]
    return make_region(
        kept.alert.constraints, smallest_side_deg=min(sides_deg) if sides_deg else None
    )


def _refuse(kept: KeptAlert, wish: LaunchWish) -> None:
    if role_problems(kept.alert.role, is_rehearsal=wish.is_rehearsal):
        raise TestAlertRefused(
            "This alert is marked as a test.",
            "A test can only become a rehearsal: launch it as one.",
        )
    problems = launch_problems(
        wish.title, clock_is_set=wish.clock_now is not None, is_rehearsal=wish.is_rehearsal
    )
    refuse_problems(list(problems), advice="Correct the named fields.")


def _campaign_row(
    actor: Person, kept: KeptAlert, *, wish: LaunchWish, now: datetime, rng: random.Random
) -> Campaign:
    return Campaign(
        id=new_campaign_id(wish.title, rng),
        title=wish.title.strip(),
        status=CampaignStatus.DRAFT if wish.is_draft else CampaignStatus.LIVE,
        is_rehearsal=wish.is_rehearsal,
        is_public=wish.is_public,
        alert_id=kept.alert.identifier[:120],
        kind=kept.alert.kind[:80],
        event_time=kept.event_time,
        source_model=source_to_json(source_from_json(wish.source)),
        clock_now=wish.clock_now,
        made_by=actor,
        made_at=now,
        opened_at=None if wish.is_draft else now,
    )


def new_campaign_id(title: str, rng: random.Random) -> str:
    """A short text that can be read aloud: words of the title and four letters."""
    words = re.sub(r"[^a-z0-9]+", "-", title.lower()).strip("-")[:24].strip("-")
    return f"{words or 'campaign'}-{''.join(rng.choices(_ID_LETTERS, k=4))}"


def _constraint_rows(campaign: Campaign, kept: KeptAlert) -> list[Constraint]:
    return [
        Constraint(
            campaign=campaign,
            position=position,
            kind=constraint.kind,
            parameters=constraint.to_json(),
            upload_sha256=kept.upload_of(constraint),
        )
        for position, constraint in enumerate(kept.alert.constraints)
    ]


def _write(launch: Launch) -> Answer:
    campaign = launch.campaign
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
    happenings.append(RegionRevised(region=region_shown(launch.region)))
    if launch.tiles:
        tiles = {str(tile.number): tile_shown(tile) for tile in launch.tiles}
        happenings.append(TilesLaid(tiles=tiles))
    if launch.campaign.opened_at is not None:
        happenings.append(CampaignOpened(opened_at=iso_time(launch.campaign.opened_at)))
    return [(happening, About()) for happening in happenings]
