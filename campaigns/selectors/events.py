"""Events after a sequence number."""

from typing import Any

from campaigns.events.append import event_as_sent
from campaigns.models import Campaign, Event
from campaigns.selectors.one_moment import one_moment

# Whoever is further behind fetches the state, which is smaller.
MOST_AT_ONCE = 500


def list_events_since(campaign_id: str, since_seq: int) -> tuple[int, list[dict[str, Any]] | None]:
    """(newest number, events after `since_seq` in order).

    None instead of a list when they are too many, or when `since_seq` lies in the future (a
    database restored from a copy): fetch the state then.
    """
    with one_moment():
        newest = get_seq(campaign_id)
        if since_seq > newest or newest - since_seq > MOST_AT_ONCE:
            return newest, None
        rows = Event.objects.filter(campaign_id=campaign_id, seq__gt=since_seq)
        return newest, [event_as_sent(event) for event in rows.order_by("seq")]


def get_seq(campaign_id: str) -> int:
    """The number of the newest event."""
    return int(Campaign.objects.values_list("seq", flat=True).get(pk=campaign_id))
