"""Somebody becomes part of a campaign, or shows changed gear."""

from datetime import datetime

from campaigns.events.append import append_event
from campaigns.events.kinds import ObserverJoined
from campaigns.models import Campaign, Membership
from campaigns.rules.clock import campaign_now
from campaigns.selectors.shown import observer_shown
from observers.actions.write_transaction import write_transaction
from observers.models import Person
from observers.selectors.gear import list_instruments_in_use


def is_member(campaign: Campaign, person: Person) -> bool:
    """Whether the person takes part already."""
    return Membership.objects.filter(campaign=campaign, person=person).exists()


def join_campaign(campaign: Campaign, person: Person, *, wall_now: datetime) -> Membership:
    """Make the person a member if they are none; says nothing when they are one already."""
    member = Membership.objects.filter(campaign=campaign, person=person).first()
    return member or announce_observer(campaign, person, wall_now=wall_now)


def announce_observer(campaign: Campaign, person: Person, *, wall_now: datetime) -> Membership:
    """Write the membership and tell everybody what the person observes with."""
    now = campaign_now(campaign, wall_now)
    with write_transaction():
        member, _ = Membership.objects.get_or_create(
            campaign=campaign, person=person, defaults={"joined_at": now}
        )
        observer = observer_shown(
            person.name, member.status, instruments=list_instruments_in_use([person.pk])
        )
        append_event(campaign.pk, ObserverJoined(id=person.pk, observer=observer), at=now)
    return member
