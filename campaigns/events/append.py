"""Write events: number, row and hint, inside the transaction of the change itself."""

from collections.abc import Sequence
from datetime import datetime
from typing import Any

from django.db import connection

from campaigns.errors import CampaignClosed
from campaigns.events.after_commit import notify
from campaigns.events.iso_time import iso_time
from campaigns.events.kinds import Happening
from campaigns.events.said import About, said
from campaigns.models import Event


def append_event(
    campaign_id: str,
    happening: Happening,
    *,
    at: datetime,
    about: About | None = None,
    only_while_live: bool = False,
) -> int:
    """Append one event and return its sequence number. Call it as late as possible."""
    pair = (happening, about or About())
    return append_events(campaign_id, [pair], at=at, only_while_live=only_while_live)


def append_events(
    campaign_id: str,
    happenings: Sequence[tuple[Happening, About]],
    *,
    at: datetime,
    only_while_live: bool = False,
) -> int:
    """Append events in order and return the last sequence number.

    The counter is moved in the same transaction: a rollback returns the numbers, and on
    PostgreSQL its row lock makes the order of commits the order of the numbers.
    `only_while_live` refuses, by the same statement, what a closing campaign overtook.
    """
    assert connection.in_atomic_block, "events belong to the transaction of their change"
    last = _move_counter(campaign_id, len(happenings), only_while_live=only_while_live)
    first = last - len(happenings) + 1
    Event.objects.bulk_create(
        Event(
            campaign_id=campaign_id,
            seq=first + index,
            kind=happening.kind,
            at=at,
            payload={**happening.payload(), "said": said(happening, about)},
        )
        for index, (happening, about) in enumerate(happenings)
    )
    notify(campaign_id, "events")
    return last


def _move_counter(campaign_id: str, n_events: int, *, only_while_live: bool) -> int:
    """One statement: the counter is moved, read and (on PostgreSQL) locked."""
    live = " AND status = 'live'" if only_while_live else ""
    with connection.cursor() as cursor:
        cursor.execute(
            f"UPDATE campaigns_campaign SET seq = seq + %s WHERE id = %s{live} RETURNING seq",
            [n_events, campaign_id],
        )
        row = cursor.fetchone()
    if row is None:
        raise CampaignClosed("The campaign is not live any more.", "See the list of campaigns.")
    return int(row[0])


def event_as_sent(event: Event) -> dict[str, Any]:
    """The event as snapshots, polling and sockets carry it."""
    payload = dict(event.payload)
    sentence = payload.pop("said", "")
    return {
        "seq": event.seq,
        "kind": event.kind,
        "at": iso_time(event.at),
        "said": sentence,
        "payload": payload,
    }
