"""Make a link that makes an account, or that gives an account a new password."""

from dataclasses import dataclass
from datetime import datetime, timedelta

from observers.models import Invitation, Person, Role
from observers.rules.secrets import new_secret, secret_sha256
from observers.selectors.access import access_coordinator

LIFETIME = timedelta(days=7)


@dataclass(frozen=True)
class Invited:
    """The secret of the link: shown once, never stored."""

    secret: str
    expires_at: datetime


def invite_person(
    actor: Person | None, *, role: Role, now: datetime, person: Person | None = None
) -> Invited:
    """Invite somebody new with a role, or let `person` choose a new password."""
    coordinator = access_coordinator(actor)
    return _invite(role, made_by=coordinator, person=person, now=now)


def invite_first_coordinator(*, now: datetime) -> Invited | None:
    """A link for the very first account; None when there is one already.

    Only whoever can start the server reads it. Older unused ones are void.
    """
    if Person.objects.filter(is_active=True).exists():
        return None
    Invitation.objects.filter(made_by=None, used_at=None).delete()
    return _invite(Role(Role.COORDINATOR), made_by=None, person=None, now=now)


def _invite(role: Role, *, made_by: Person | None, person: Person | None, now: datetime) -> Invited:
    secret = new_secret()
    invitation = Invitation.objects.create(
        token_sha256=secret_sha256(secret),
        role=role,
        person=person,
        made_by=made_by,
        made_at=now,
        expires_at=now + LIFETIME,
    )
    return Invited(secret, invitation.expires_at)
