"""Somebody or something has looked at a frame for new sources."""

from datetime import datetime

import campaigns.bridge as bridge
from campaigns.actions.answer_once import Answer
from campaigns.actions.live_guard import refuse_unless_live
from campaigns.errors import Conflict, refuse_problems
from campaigns.events.append import append_event
from campaigns.events.kinds import FrameExamined
from campaigns.models import Frame
from campaigns.rules.clock import campaign_now
from campaigns.rules.examination import completeness_of
from campaigns.rules.frame import examination_problems
from campaigns.selectors.shown import frame_shown
from observers.actions.write_transaction import write_transaction


class FrameWithdrawnBefore(Conflict):
    """A withdrawn frame stays withdrawn."""

    code = "frame-withdrawn"
    title = "The frame was withdrawn"


def refuse_withdrawn(frame: Frame) -> None:
    """Only counted frames change."""
    if frame.state != Frame.State.COUNTED:
        raise FrameWithdrawnBefore(
            f"Frame {frame.number} was withdrawn.", "Report the frame again if it counts after all."
        )


def examine_frame(
    frame: Frame, *, is_examined: bool, examined_way: str, wall_now: datetime
) -> Answer:
    """Note the examination of a frame fetched by access_frame."""
    refuse_unless_live(frame.campaign)
    refuse_withdrawn(frame)
    problems = examination_problems(is_examined=is_examined, examined_way=examined_way)
    refuse_problems(problems, advice="Say how it was examined.")
    now = campaign_now(frame.campaign, wall_now)
    frame.is_examined, frame.examined_way = is_examined, examined_way if is_examined else ""
    frame.completeness = completeness_of(examined_way) if is_examined else None
    with write_transaction():
        frame.save(update_fields=["is_examined", "examined_way", "completeness"])
        happening = FrameExamined(
            number=frame.number,
            is_examined=frame.is_examined,
            examined_way=frame.examined_way,
            m_eff=bridge.m_eff_of(frame),
        )
        seq = append_event(frame.campaign_id, happening, at=now, only_while_live=True)
    return Answer(200, {"number": frame.number, "frame": frame_shown(frame), "seq": seq})
