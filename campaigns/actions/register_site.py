"""Somebody adds or changes a site; campaigns that run see it at once, rounded."""

from collections.abc import Mapping
from datetime import datetime
from typing import Any

from campaigns.actions.answer_once import Answer, Once, answer_once
from campaigns.actions.join_campaign import announce_observer
from campaigns.models import CampaignStatus, Membership
from observers.actions.add_site import add_site
from observers.actions.change_site import change_site
from observers.models import Person, Site
from observers.selectors.gear import site_as_owned


def register_site(
    actor: Person, *, values: Mapping[str, Any], wall_now: datetime, once: Once | None = None
) -> Answer:
    """Add a site; campaigns hear of it with its first instrument."""

    def write(_: None) -> Answer:
        return Answer(201, site_as_owned(add_site(actor, values, now=wall_now)))

    return answer_once(once, judge=lambda: None, write=write)


def alter_site(site: Site, values: Mapping[str, Any], *, wall_now: datetime) -> Answer:
    """Change a site fetched by access_site; where its owner is a member it is shown anew."""
    changed = change_site(site, values)
    memberships = Membership.objects.filter(person=changed.owner).select_related("campaign")
    for member in memberships.exclude(campaign__status=CampaignStatus.CLOSED):
        announce_observer(member.campaign, changed.owner, wall_now=wall_now)
    return Answer(200, site_as_owned(changed))
