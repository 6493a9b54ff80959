"""Every kind of event, typed. An event holds only what an onlooker may see."""

from dataclasses import asdict, dataclass, fields
from typing import Any, ClassVar

from campaigns.events.shape import dataclass_problems
from campaigns.events.state import (
    ClaimShown,
    FrameShown,
    MemberStatus,
    ObserverShown,
    OfferShown,
    PlanShown,
    RegionShown,
    TileMoved,
    TileShown,
)


@dataclass(frozen=True)
class Happening:
    """What all events share: a kind, and fields of a declared shape."""

    kind: ClassVar[str]

    def __post_init__(self) -> None:
        problems = list(dataclass_problems(self))
        if problems:
            raise ValueError(f"{self.kind}: {'; '.join(problems[:5])}")

    def payload(self) -> dict[str, Any]:
        """The fields as plain JSON values."""
        return asdict(self)


@dataclass(frozen=True)
class CampaignOpened(Happening):
    """The campaign went live."""

    kind = "campaign.opened"
    opened_at: str


@dataclass(frozen=True)
class CampaignClosed(Happening):
    """The campaign takes nothing more."""

    kind = "campaign.closed"
    closed_at: str


@dataclass(frozen=True)
class RegionRevised(Happening):
    """A new revision of the region, and what it makes of the tiles that were there before.

    Pixels come by GET campaigns/<id>/region.
    """

    kind = "region.revised"
    region: RegionShown
    tiles: dict[str, TileMoved]


@dataclass(frozen=True)
class TilesLaid(Happening):
    """Tiles of one more grid."""

    kind = "tiles.laid"
    tiles: dict[str, TileShown]


@dataclass(frozen=True)
class ObserverJoined(Happening):
    """A new member, or an old one whose gear changed."""

    kind = "observer.joined"
    id: int
    observer: ObserverShown


@dataclass(frozen=True)
class ObserverStatus(Happening):
    """Somebody said in, clouded or out."""

    kind = "observer.status"
    observer: int
    status: MemberStatus


@dataclass(frozen=True)
class PlanMade(Happening):
    """A new plan; its offers replace all older ones."""

    kind = "plan.made"
    plan: PlanShown
    offers: list[OfferShown]


@dataclass(frozen=True)
class ClaimHeld(Happening):
    """Somebody promised a tile; the offer of that tile to that observer is used up."""

    kind = "claim.held"
    id: int
    claim: ClaimShown


@dataclass(frozen=True)
class ClaimExtended(Happening):
    """The lease runs longer."""

    kind = "claim.extended"
    id: int
    until: str


@dataclass(frozen=True)
class ClaimMet(Happening):
    """A frame was reported for the claim."""

    kind = "claim.met"
    id: int
    ended_at: str


@dataclass(frozen=True)
class ClaimReleased(Happening):
    """The tile was given back."""

    kind = "claim.released"
    id: int
    ended_at: str


@dataclass(frozen=True)
class ClaimLapsed(Happening):
    """The lease ran out."""

    kind = "claim.lapsed"
    id: int
    ended_at: str


@dataclass(frozen=True)
class FrameCounted(Happening):
    """A frame was reported."""

    kind = "frame.counted"
    number: int
    frame: FrameShown


@dataclass(frozen=True)
class FrameExamined(Happening):
    """Somebody or something has looked at the frame for new sources."""

    kind = "frame.examined"
    number: int
    is_examined: bool
    examined_way: str
    m_eff: float | None


@dataclass(frozen=True)
class FrameCorrected(Happening):
    """Values of a frame were set right."""

    kind = "frame.corrected"
    number: int
    frame: FrameShown


@dataclass(frozen=True)
class FrameWithdrawn(Happening):
    """A frame counts no longer."""

    kind = "frame.withdrawn"
    number: int


KINDS: dict[str, type[Happening]] = {
    kind.kind: kind
    for kind in (
        CampaignOpened,
        CampaignClosed,
        RegionRevised,
        TilesLaid,
        ObserverJoined,
        ObserverStatus,
        PlanMade,
        ClaimHeld,
        ClaimExtended,
        ClaimMet,
        ClaimReleased,
        ClaimLapsed,
        FrameCounted,
        FrameExamined,
        FrameCorrected,
        FrameWithdrawn,
    )
}


def read_happening(kind: str, payload: dict[str, Any]) -> Happening:
    """Make the typed event; ValueError for an unknown kind or an unknown or missing field."""
    if kind not in KINDS:
        raise ValueError(f"unknown event kind {kind!r}")
    names = {field.name for field in fields(KINDS[kind])}
    if payload.keys() != names:
        raise ValueError(f"{kind}: fields {sorted(payload)}, declared {sorted(names)}")
    return KINDS[kind](**payload)
