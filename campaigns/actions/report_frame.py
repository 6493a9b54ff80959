"""Somebody reports a frame."""

import hashlib
import json
from collections.abc import Mapping
from dataclasses import dataclass
from datetime import datetime
from typing import Any

from django.db import IntegrityError, connection, transaction
from django.db.models import Max

from campaigns.actions.answer_once import Answer, Once, answer_once
from campaigns.actions.horizon_at_mid_time import refuse_field_below_horizon
from campaigns.actions.join_campaign import join_campaign
from campaigns.actions.live_guard import refuse_unless_live
from campaigns.errors import refuse_problems
from campaigns.events.append import append_events
from campaigns.events.iso_time import iso_time
from campaigns.events.kinds import ClaimMet, FrameCounted, Happening
from campaigns.events.said import About
from campaigns.ingest.frame_report import ADVICE, FrameReport
from campaigns.models import Campaign, Claim, Event, Frame
from campaigns.rules.clock import campaign_now
from campaigns.rules.first_light import is_before_light
from campaigns.rules.frame import frame_problems
from campaigns.selectors.claim_of_frame import find_claim
from campaigns.selectors.shown import frame_shown
from observers.models import Instrument, Person


@dataclass(frozen=True)
class Depth:
    """How deep the frame is, and who has looked at it how."""

    limit_mag: float | None = None
    limit_kind: str = "5 sigma"
    reference_mag: float | None = None
    is_examined: bool = False
    examined_way: str = ""
    completeness: float | None = None
    saturation_mag: float | None = None
    masks_saturated: bool = False


def report_frame(
    actor: Person,
    campaign: Campaign,
    *,
    instrument: Instrument,
    report: FrameReport,
    depth: Depth,
    claim: Claim | None = None,
    wall_now: datetime,
    once: Once | None = None,
) -> Answer:
    """Count a frame; it meets the claim that it was taken for. The same frame twice is one."""

    def judge() -> Frame:
        refuse_unless_live(campaign)
        now = campaign_now(campaign, wall_now)
        frame = frame_row(actor, campaign, instrument, report=report, depth=depth, now=now)
        problems = frame_problems(frame, event_time=campaign.event_time, now=now)
        refuse_problems(problems, advice=ADVICE)
        refuse_field_below_horizon(frame, instrument, now=now)
        frame.claim = claim or find_claim(campaign, instrument, footprint=report.footprint)
        return frame

    return answer_once(once, judge=judge, write=lambda frame: _count(frame, wall_now=wall_now))


def frame_row(
    actor: Person,
    campaign: Campaign,
    instrument: Instrument,
    *,
    report: FrameReport,
    depth: Depth,
    now: datetime,
) -> Frame:
    """The row, not saved and not judged yet."""
    footprint = report.footprint
    frame = Frame(
        campaign=campaign,
        person=actor,
        instrument=instrument,
        footprint=footprint.to_json(),
        ra_deg=float(footprint.centre_ra_deg),
        dec_deg=float(footprint.centre_dec_deg),
        field_deg=float(footprint.smallest_side_deg),
        mid_time=report.mid_time,
        duration_s=report.duration_s,
        band=report.band,
        origin=report.origin,
        header=dict(report.header),
        reported_at=now,
        **vars(depth),
    )
    frame.identity_sha256 = identity_sha256(frame)
    return frame


def identity_sha256(frame: Frame) -> str:
    """Hash of what makes a frame this frame: footprint, mid-time, duration, band, instrument."""
    parts = {
        "footprint": _rounded(frame.footprint),
        "mid_time": iso_time(frame.mid_time),
        "duration_s": round(frame.duration_s, 3),
        "band": frame.band,
        "instrument": frame.instrument_id,
    }
    return hashlib.sha256(json.dumps(parts, sort_keys=True).encode()).hexdigest()


def _rounded(value: Any) -> Any:
    """A hair's breadth (0.4 milliarcsec) of rounding must not make it another frame."""
    if isinstance(value, float):
        return round(value, 7)
    if isinstance(value, Mapping):
        return {key: _rounded(item) for key, item in value.items()}
    return [_rounded(item) for item in value] if isinstance(value, list) else value


def _count(frame: Frame, *, wall_now: datetime) -> Answer:
    _take_turn(frame.campaign_id)
    if not _insert(frame):
        return _counted_before(frame)
    # A frame that is refused makes nobody a member.
    join_campaign(frame.campaign, frame.person, wall_now=wall_now)
    about = About(
        observer=frame.person.name,
        tile=frame.claim.tile.number if frame.claim else None,
        is_before_light=is_before_light(
            frame.mid_time,
            source_model=frame.campaign.source_model,
            event_time=frame.campaign.event_time,
        ),
    )
    counted = FrameCounted(number=frame.number, frame=frame_shown(frame))
    happenings: list[tuple[Happening, About]] = [(counted, about)]
    if frame.claim is not None and _meet(frame.claim, now=frame.reported_at):
        met = ClaimMet(id=frame.claim.pk, ended_at=iso_time(frame.reported_at))
        happenings.append((met, about))
    last = append_events(frame.campaign_id, happenings, at=frame.reported_at, only_while_live=True)
    return _answer(frame, status=201, seq=last - len(happenings) + 1)


def _take_turn(campaign_id: str) -> None:
    """Frame numbers are given one after the other; SQLite has one writer anyhow."""
    if connection.vendor != "sqlite":
        Campaign.objects.select_for_update().only("pk").get(pk=campaign_id)


def _insert(frame: Frame) -> bool:
    rows = Frame.objects.filter(campaign_id=frame.campaign_id)
    frame.number = (rows.aggregate(newest=Max("number"))["newest"] or 0) + 1
    try:
        with transaction.atomic():
            frame.save(force_insert=True)
    except IntegrityError:
        return False
    return True


def _meet(claim: Claim, *, now: datetime) -> bool:
    rows = Claim.objects.filter(pk=claim.pk, state=Claim.State.HELD)
    return bool(rows.update(state=Claim.State.MET, ended_at=now))


def _counted_before(frame: Frame) -> Answer:
    rows = Frame.objects.filter(campaign_id=frame.campaign_id, state=Frame.State.COUNTED)
    before = rows.select_related("claim__tile").get(identity_sha256=frame.identity_sha256)
    events = Event.objects.filter(campaign_id=frame.campaign_id, kind="frame.counted")
    seq = events.filter(payload__number=before.number).values_list("seq", flat=True).get()
    return _answer(before, status=200, seq=seq)


def _answer(frame: Frame, *, status: int, seq: int) -> Answer:
    return Answer(status, {"number": frame.number, "frame": frame_shown(frame), "seq": seq})
