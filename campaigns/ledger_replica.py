"""The ledger of a campaign as this process knows it: a projection of rows, never the truth.

A replica carries the sequence number it has counted through and catches up from the database
before it answers. It is dropped when the region or the source model change.
"""

import threading
from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass, field
from datetime import datetime
from typing import Any

import numpy as np
import numpy.typing as npt
from django.db.models import Q, QuerySet

import campaigns.bridge as bridge
from campaigns.events.iso_time import iso_time
from campaigns.ingest.placed_source import placed_source
from campaigns.models import Campaign, Claim, Event, Frame, RegionRevision, Tile
from campaigns.selectors.one_moment import one_moment
from skytiles.ledger.ledger import Ledger
from skytiles.planner.tiles_to_plan import PlannerTiles
from skytiles.tiling.pixels_under import covered_pixels

Floats = npt.NDArray[np.float64]
Ints = npt.NDArray[np.int64]

# Replicas kept in one process; the one that was asked for longest ago goes first.
MOST_REPLICAS = 8
_FRAME_EVENTS = ("frame.counted", "frame.examined", "frame.corrected", "frame.withdrawn")


@dataclass(frozen=True)
class Moment:
    """The two numbers after one event."""

    seq: int
    at: datetime
    imaged: float
    searched: float
    changed: Ints

    def to_json(self) -> dict[str, Any]:
        """One point of the history curve."""
        return {"at": iso_time(self.at), "imaged": self.imaged, "searched": self.searched}


@dataclass(frozen=True)
class Coverage:
    """What a replica answers. `detected` is D per pixel of the region, in its order."""

    # Of the region whose pixels these are.
    revision: int
    through_seq: int
    imaged: float
    searched: float
    residual_outside: float
    at: datetime | None
    detected: Floats
    history: tuple[Moment, ...]

    def changed_since(self, seq: int) -> Ints:
        """Pixel positions that changed after event `seq`, ascending."""
        parts = [moment.changed for moment in self.history if moment.seq > seq]
        return np.unique(np.concatenate(parts)) if parts else np.empty(0, np.int64)

    def around(self, seq: int) -> tuple[float, float, float]:
        """(imaged, searched) after event `seq`, and searched just before it."""
        imaged = searched = searched_before = 0.0
        for moment in self.history:
            if moment.seq > seq:
                break
            searched_before = searched if moment.seq == seq else moment.searched
            imaged, searched = moment.imaged, moment.searched
        return imaged, searched, searched_before


@dataclass
class LedgerReplica:
    """The ledger of one campaign in this process."""

    campaign_id: str
    base_seq: int
    region: RegionRevision
    ledger: Ledger
    through_seq: int = 0
    history: list[Moment] = field(default_factory=list)
    _tiles: PlannerTiles | None = None

    def fits(self, campaign: Campaign) -> bool:
        """Same region and source model, and not ahead of a database restored from a copy."""
        is_same_base = self.base_seq == campaign.ledger_base_seq
        return is_same_base and self.through_seq <= campaign.seq

    def count_event(self, event: Event, frame: Frame, *, event_time: datetime) -> None:
        """Bring one frame to where the event (and all later ones so far) left it."""
        changed = self._change(event, frame, event_time=event_time)
        self.history.append(
            Moment(
                seq=event.seq,
                at=event.at,
                imaged=float(self.ledger.imaged),
                searched=float(self.ledger.searched),
                changed=np.asarray(changed, dtype=np.int64),
            )
        )

    def _change(self, event: Event, frame: Frame, *, event_time: datetime) -> Ints:
        is_known = self.ledger.has(frame.number)
        if event.kind == "frame.withdrawn":
            return self.ledger.withdraw(frame.number) if is_known else np.empty(0, np.int64)
        indices, fractions = covered_pixels(
            bridge.footprint_of(frame), self.region.order, bridge.pixels_of(self.region)
        )
        counted = bridge.ledger_frame_of(frame, event_time=event_time)
        if is_known:
            return self.ledger.replace(counted, indices, fractions)
        return self.ledger.add(counted, indices, fractions)

    def planner_tiles(self) -> PlannerTiles:
        """The tiles that can be planned, and those that are held, with the pixels under each.

        Kept until one more grid is laid, or a tile that dropped out is held no more.
        """
        rows = list_tiles_to_plan(self.campaign_id)
        if self._tiles is None or self._tiles.n_tiles != rows.count():
            self._tiles = bridge.planner_tiles_of(list(rows), self.region)
        return self._tiles

    def coverage(self) -> Coverage:
        """A copy of the present numbers."""
        return Coverage(
            revision=self.region.revision,
            through_seq=self.through_seq,
            imaged=float(self.ledger.imaged),
            searched=float(self.ledger.searched),
            residual_outside=float(self.ledger.residual_outside),
            at=self.history[-1].at if self.history else None,
            detected=np.array(self.ledger.detected),
            history=tuple(self.history),
        )


class ReplicaShelf:
    """All replicas of this process; each is caught up under a lock of its own."""

    def __init__(self) -> None:
        self._guard = threading.Lock()
        self._locks: dict[str, threading.RLock] = {}
        self._replicas: dict[str, LedgerReplica] = {}

    def lock_of(self, campaign_id: str) -> threading.RLock:
        """The lock under which the replica of a campaign is used."""
        with self._guard:
            return self._locks.setdefault(campaign_id, threading.RLock())

    def caught_up(self, campaign_id: str) -> LedgerReplica:
        """The replica, counted through the newest event; hold its lock while using it."""
        with one_moment():
            campaign = Campaign.objects.get(pk=campaign_id)
            replica = self._replicas.get(campaign_id)
            if replica is None or not replica.fits(campaign):
                replica = _empty_replica(campaign)
            _catch_up(replica, campaign)
        self._keep(replica)
        return replica

    def drop_all(self) -> None:
        """Forget all replicas; the next question rebuilds."""
        with self._guard:
            self._replicas.clear()

    def _keep(self, replica: LedgerReplica) -> None:
        with self._guard:
            self._replicas.pop(replica.campaign_id, None)
            self._replicas[replica.campaign_id] = replica
            while len(self._replicas) > MOST_REPLICAS:
                self._replicas.pop(next(iter(self._replicas)))


_shelf = ReplicaShelf()


def list_tiles_to_plan(campaign_id: str) -> QuerySet[Tile]:
    """Tiles of the region, and dropped ones that somebody still holds."""
    held = Claim.objects.filter(campaign_id=campaign_id, state=Claim.State.HELD)
    is_wanted = Q(is_dropped=False) | Q(pk__in=held.values("tile_id"))
    return Tile.objects.filter(is_wanted, campaign_id=campaign_id)


def get_coverage(campaign_id: str) -> Coverage:
    """The two numbers and D per pixel, through the newest event."""
    with _shelf.lock_of(campaign_id):
        return _shelf.caught_up(campaign_id).coverage()


@contextmanager
def held_replica(campaign_id: str) -> Iterator[LedgerReplica]:
    """The caught-up replica itself, for reading; others wait, so be quick. Never write inside."""
    with _shelf.lock_of(campaign_id):
        yield _shelf.caught_up(campaign_id)


def drop_replicas() -> None:
    """Forget what this process knows: after a restored database, and between tests."""
    _shelf.drop_all()


def rebuilt_coverage(campaign_id: str) -> Coverage:
    """The same numbers from the rows alone, leaving the kept replica as it is."""
    return _rebuilt(campaign_id).coverage()


def _rebuilt(campaign_id: str) -> LedgerReplica:
    with one_moment():
        campaign = Campaign.objects.get(pk=campaign_id)
        replica = _empty_replica(campaign)
        _catch_up(replica, campaign)
    return replica


def _empty_replica(campaign: Campaign) -> LedgerReplica:
    region = RegionRevision.objects.filter(campaign=campaign).latest("revision")
    return LedgerReplica(
        campaign_id=campaign.pk,
        base_seq=campaign.ledger_base_seq,
        region=region,
        ledger=bridge.empty_ledger(campaign, region, placed=placed_source(campaign, region)),
    )


def _catch_up(replica: LedgerReplica, campaign: Campaign) -> None:
    if campaign.seq == replica.through_seq:
        return
    events = list(
        Event.objects.filter(
            campaign=campaign, seq__gt=replica.through_seq, kind__in=_FRAME_EVENTS
        ).order_by("seq")
    )
    numbers = {event.payload["number"] for event in events}
    frames = Frame.objects.filter(campaign=campaign, number__in=numbers)
    by_number = {frame.number: frame for frame in frames}
    for event in events:
        frame = by_number[event.payload["number"]]
        replica.count_event(event, frame, event_time=campaign.event_time)
    replica.through_seq = campaign.seq
