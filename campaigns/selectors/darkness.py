"""Who is in darkness over the next hours."""

from datetime import datetime
from typing import TypedDict

import campaigns.bridge as bridge
from campaigns.events.iso_time import iso_time
from campaigns.models import Campaign, Membership
from observers.bridge import place_of
from observers.models import Site
from skytiles.night.twilight import dark_intervals

LONGEST_HOURS = 48.0


class DarkSite(TypedDict):
    """One bar of the dark strip. The place stays private: names only."""

    site: str
    observer: int
    status: str
    intervals: list[list[str]]


def list_darkness(campaign: Campaign, *, now: datetime, hours: float) -> list[DarkSite]:
    """Dark intervals of every site of the members, by longitude from the date line."""
    members = dict(Membership.objects.filter(campaign=campaign).values_list("person_id", "status"))
    rows = Site.objects.filter(owner_id__in=members, instruments__is_in_use=True).distinct()
    return [
        {
            "site": site.name,
            "observer": site.owner_id,
            "status": members[site.owner_id],
            "intervals": _intervals(site, now=now, hours=hours),
        }
        for site in rows.order_by("-longitude_deg", "id")
    ]


def _intervals(site: Site, *, now: datetime, hours: float) -> list[list[str]]:
    dark = dark_intervals(
        place_of(site), start_mjd=bridge.mjd_of(now), hours=min(hours, LONGEST_HOURS)
    )
    return [[iso_time(bridge.time_of(start)), iso_time(bridge.time_of(end))] for start, end in dark]
