"""Sign in by name and password."""

from typing import Any

from django.contrib.auth.backends import ModelBackend
from django.contrib.auth.hashers import make_password
from django.http import HttpRequest

from observers.models import Person


class NameBackend(ModelBackend):
    """Django's password check, with the name in any case."""

    def authenticate(
        self,
        request: HttpRequest | None,
        username: str | None = None,
        password: str | None = None,
        **other: Any,
    ) -> Person | None:
        """The active person of that name and password, else None, in equal time."""
        if username is None or password is None:
            return None
        person = Person.objects.filter(name__iexact=username.strip()).first()
        if person is None:
            # The same work as a real check: the answer's delay does not tell who has an account.
            make_password(password)
            return None
        is_right = person.check_password(password)
        return person if is_right and person.is_active else None
