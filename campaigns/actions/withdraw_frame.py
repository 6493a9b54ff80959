"""A frame counts no longer."""

from datetime import datetime

from campaigns.actions.answer_once import Answer
from campaigns.actions.live_guard import refuse_unless_live
from campaigns.events.append import append_event
from campaigns.events.kinds import FrameWithdrawn
from campaigns.models import Frame
from campaigns.rules.clock import campaign_now
from campaigns.selectors.events import get_seq
from campaigns.selectors.shown import frame_shown
from observers.actions.write_transaction import write_transaction


def withdraw_frame(frame: Frame, *, wall_now: datetime) -> Answer:
    """Withdraw a frame fetched by access_frame; a repeat is no error."""
    refuse_unless_live(frame.campaign)
    now = campaign_now(frame.campaign, wall_now)
    with write_transaction():
        rows = Frame.objects.filter(pk=frame.pk, state=Frame.State.COUNTED)
        if rows.update(state=Frame.State.WITHDRAWN):
            happening = FrameWithdrawn(number=frame.number)
            seq = append_event(frame.campaign_id, happening, at=now, only_while_live=True)
        else:
            seq = get_seq(frame.campaign_id)
    frame.state = Frame.State.WITHDRAWN
    return Answer(200, {"number": frame.number, "frame": frame_shown(frame), "seq": seq})
