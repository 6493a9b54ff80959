"""Use a link: a new account, or a new password for an old one."""

from datetime import datetime

from django.contrib.auth.password_validation import validate_password
from django.core.exceptions import ValidationError
from django.db import IntegrityError, transaction

from observers.errors import Conflict, NotFound, refuse_problems
from observers.models import Invitation, Person, Role
from observers.rules.person import person_name_problems
from observers.rules.problem import Problem
from observers.selectors.invitations import access_invitation


class NameTaken(Conflict):
    """Another account has this name."""

    code = "name-taken"
    title = "The name is taken"


def accept_invitation(secret: str, *, name: str, password: str, now: datetime) -> Person:
    """Make the account of the link (or set the password of its person) and use the link up.

    A refusal leaves the link as it was.
    """
    invitation = access_invitation(secret, now=now)
    person = invitation.person or Person(name=name, role=Role(invitation.role), created_at=now)
    problems = [] if invitation.person else person_name_problems(name)
    problems += _password_problems(password, person)
    refuse_problems(problems, advice="Choose another name or password; the link stays good.")
    person.set_password(password)
    _use_up(invitation, person, now=now)
    return person


def _use_up(invitation: Invitation, person: Person, *, now: datetime) -> None:
    """Write first: of two that use one link at the same moment, one finds it used."""
    is_new = person.pk is None
    try:
        with transaction.atomic():
            unused = Invitation.objects.filter(pk=invitation.pk, used_at=None)
            if not unused.update(used_at=now):
                raise NotFound("This link was used before.", "Sign in with your name.")
            person.save()
    except IntegrityError as error:
        if not is_new:
            raise
        raise NameTaken(
            f"Somebody is already called {person.name}.",
            "Choose another name; the link stays good.",
        ) from error


def _password_problems(password: str, person: Person) -> list[Problem]:
    try:
        validate_password(password, person)
    except ValidationError as error:
        return [Problem("password", message) for message in error.messages]
    return []
