"""Values of a frame are set right."""

from collections.abc import Mapping
from dataclasses import fields
from datetime import datetime
from typing import Any

from django.db import IntegrityError, transaction

from campaigns.actions.answer_once import Answer
from campaigns.actions.examine_frame import refuse_withdrawn
from campaigns.actions.horizon_at_mid_time import refuse_field_below_horizon
from campaigns.actions.live_guard import refuse_unless_live
from campaigns.actions.report_frame import Depth, identity_sha256
from campaigns.errors import Conflict, refuse_problems
from campaigns.events.append import append_event
from campaigns.events.kinds import FrameCorrected
from campaigns.events.said import About
from campaigns.ingest.frame_report import ADVICE, shaped_footprint
from campaigns.models import Frame
from campaigns.rules.clock import campaign_now
from campaigns.rules.frame import frame_problems, typed_problems
from campaigns.selectors.shown import frame_shown
from observers.actions.write_transaction import write_transaction
from observers.models import Person

_PLAIN = ("mid_time", "duration_s", "band", *(field.name for field in fields(Depth)))
_PLACE = ("ra_deg", "dec_deg", "width_deg", "height_deg", "rotation_deg")


class SameFrame(Conflict):
    """The corrected frame would be one that counts already."""

    code = "same-frame"
    title = "That frame counts already"


def correct_frame(
    actor: Person, frame: Frame, *, changes: Mapping[str, Any], wall_now: datetime
) -> Answer:
    """Change the given values of a frame fetched by access_frame; it stays counted."""
    refuse_unless_live(frame.campaign)
    refuse_withdrawn(frame)
    now = campaign_now(frame.campaign, wall_now)
    refuse_problems(typed_problems(changes), advice=ADVICE)
    _set(frame, changes)
    problems = frame_problems(frame, event_time=frame.campaign.event_time, now=now)
    refuse_problems(problems, advice=ADVICE)
    refuse_field_below_horizon(frame, frame.instrument, now=now)
    with write_transaction():
        _save(frame)
        happening = FrameCorrected(number=frame.number, frame=frame_shown(frame))
        about = About(observer=actor.name)
        seq = append_event(frame.campaign_id, happening, at=now, about=about, only_while_live=True)
    return Answer(200, {"number": frame.number, "frame": frame_shown(frame), "seq": seq})


def _set(frame: Frame, changes: Mapping[str, Any]) -> None:
    for name in _PLAIN:
        if name in changes:
            setattr(frame, name, changes[name])
    place = {name: changes[name] for name in _PLACE if changes.get(name) is not None}
    if place:
        place = {"ra_deg": frame.ra_deg, "dec_deg": frame.dec_deg, **place}
        footprint = shaped_footprint(frame.instrument, **place)
        frame.footprint = footprint.to_json()
        frame.ra_deg = float(footprint.centre_ra_deg)
        frame.dec_deg = float(footprint.centre_dec_deg)
        frame.field_deg = float(footprint.smallest_side_deg)
    frame.identity_sha256 = identity_sha256(frame)


def _save(frame: Frame) -> None:
    try:
        with transaction.atomic():
            frame.save()
    except IntegrityError as error:
        raise SameFrame(
            "Another counted frame has the same footprint and time.",
            "Withdraw one of the two.",
        ) from error
