"""Whoever can start commands on the server acts for its coordinators."""

from datetime import datetime

from observers.models import Person, Role

NAME = "this server"


def operator_account(*, now: datetime) -> Person:
    """The first coordinator; on a server without one an account that nobody can sign in to.

    That account is saved with the first thing that it makes, so that a refusal leaves nothing.
    """
    coordinator = (
        Person.objects.filter(role=Role.COORDINATOR, is_active=True).order_by("id").first()
    )
    return coordinator or Person.objects.filter(name=NAME).first() or _nobody(now)


def _nobody(now: datetime) -> Person:
    person = Person(name=NAME, role=Role.COORDINATOR, is_active=False, created_at=now)
    person.set_unusable_password()
    return person
