"""Whoever can start commands on the server acts for its coordinators."""

from datetime import datetime

from observers.actions.write_transaction import write_transaction
from observers.models import Person, Role

NAME = "this server"


def operator_account(*, now: datetime) -> Person:
    """The first coordinator; on a server without one an account that nobody can sign in to."""
    coordinator = (
        Person.objects.filter(role=Role.COORDINATOR, is_active=True).order_by("id").first()
    )
    return coordinator or _nobody(now)


def _nobody(now: datetime) -> Person:
    with write_transaction():
        person, is_new = Person.objects.get_or_create(
            name=NAME,
            defaults={"role": Role.COORDINATOR, "is_active": False, "created_at": now},
        )
        if is_new:
            person.set_unusable_password()
            person.save(update_fields=["password"])
    return person
