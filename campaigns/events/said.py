"""One plain sentence for each event, made of public data only."""

from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

from campaigns.events import kinds


@dataclass(frozen=True)
class About:
    """Names that the sentence needs and the event does not hold."""

    observer: str = ""
    tile: int | None = None
    # Of a frame: taken before any light could have arrived.
    is_before_light: bool = False


def said(event: kinds.Happening, about: About) -> str:
    """Say what happened."""
    return _SENTENCES[event.kind](event, about)


def _count(number: int, word: str) -> str:
    return f"{number:,} {word}" if number == 1 else f"{number:,} {word}s"


def _share(fraction: float) -> str:
    return f"{100 * fraction:.1f} %"


def _opened(event: kinds.CampaignOpened, about: About) -> str:
    return "The campaign is live."


def _closed(event: kinds.CampaignClosed, about: About) -> str:
    return "The campaign is closed."


def _region(event: kinds.RegionRevised, about: About) -> str:
    region = event.region
    if region["change"] is not None:
        return f"Region, revision {region['revision']}: {region['change']['said']}"
    area = region["area_deg2"]["90"]
    return f"Region, revision {region['revision']}: 90 % within {area:,.0f} square degrees."


def _tiles(event: kinds.TilesLaid, about: About) -> str:
    first = next(iter(event.tiles.values()), None)
    size = f" of {first['width_deg']:.2f} by {first['height_deg']:.2f} degrees" if first else ""
    return f"{_count(len(event.tiles), 'tile')}{size} laid."


def _joined(event: kinds.ObserverJoined, about: About) -> str:
    count = _count(len(event.observer["instruments"]), "instrument")
    return f"{event.observer['name']} is in the network with {count}."


def _status(event: kinds.ObserverStatus, about: About) -> str:
    words = {"in": "is in", "clouded": "is clouded out", "out": "is out", "silent": "is silent"}
    return f"{about.observer} {words[event.status]}."


def _plan(event: kinds.PlanMade, about: About) -> str:
    plan = event.plan
    n_served = len({offer["observer"] for offer in event.offers})
    return (
        f"Plan: {_count(len(event.offers), 'tile')} offered to {n_served} of "
        f"{_count(plan['n_observers'], 'observer')}, "
        f"{_share(plan['searched_expected'])} searched expected."
    )


def _held(event: kinds.ClaimHeld, about: About) -> str:
    return f"{about.observer} took tile {event.claim['tile']}."


def _extended(event: kinds.ClaimExtended, about: About) -> str:
    return f"{about.observer} keeps tile {about.tile} until {event.until[11:16]} UTC."


def _met(event: kinds.ClaimMet, about: About) -> str:
    return f"{about.observer} has shot tile {about.tile}."


def _released(event: kinds.ClaimReleased, about: About) -> str:
    return f"{about.observer} gave tile {about.tile} back."


def _lapsed(event: kinds.ClaimLapsed, about: About) -> str:
    return f"The claim of {about.observer} on tile {about.tile} lapsed."


def _counted(event: kinds.FrameCounted, about: About) -> str:
    frame = event.frame
    tile = f" of tile {frame['tile']}" if frame["tile"] is not None else ""
    depth = f", limit {frame['limit_mag']:.1f}" if frame["limit_mag"] is not None else ""
    unseen = "" if frame["is_examined"] else ", not yet examined"
    early = " It is from before any light could have arrived." if about.is_before_light else ""
    return f"{about.observer} reported frame {event.number}{tile}{depth}{unseen}.{early}"


def _examined(event: kinds.FrameExamined, about: About) -> str:
    if not event.is_examined:
        return f"Frame {event.number} is no longer marked as examined."
    return f"Frame {event.number} was examined ({event.examined_way})."


def _corrected(event: kinds.FrameCorrected, about: About) -> str:
    return f"{about.observer} corrected frame {event.number}."


def _withdrawn(event: kinds.FrameWithdrawn, about: About) -> str:
    return f"Frame {event.number} was withdrawn."


_SENTENCES: dict[str, Callable[[Any, About], str]] = {
    "campaign.opened": _opened,
    "campaign.closed": _closed,
    "region.revised": _region,
    "tiles.laid": _tiles,
    "observer.joined": _joined,
    "observer.status": _status,
    "plan.made": _plan,
    "claim.held": _held,
    "claim.extended": _extended,
    "claim.met": _met,
    "claim.released": _released,
    "claim.lapsed": _lapsed,
    "frame.counted": _counted,
    "frame.examined": _examined,
    "frame.corrected": _corrected,
    "frame.withdrawn": _withdrawn,
}
