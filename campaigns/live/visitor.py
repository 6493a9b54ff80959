"""Who opens a socket, and may they watch this campaign?"""

from collections.abc import Mapping
from dataclasses import dataclass
from http.cookies import CookieError, SimpleCookie
from importlib import import_module
from typing import Any
from urllib.parse import urlsplit

from django.conf import settings
from django.contrib.auth import get_user
from django.http import HttpRequest
from django.http.request import split_domain_port, validate_host

from campaigns.selectors.access import access_campaign
from observers.errors import NotSignedIn
from observers.models import Person
from observers.selectors.tokens import find_token


@dataclass(frozen=True)
class Visitor:
    """What a socket brought along: a program's secret or a browser's session key, or neither."""

    bearer: str = ""
    session_key: str = ""


def read_headers(scope: Mapping[str, Any]) -> dict[str, str]:
    """The headers of an ASGI scope by lower-case name."""
    return {name.decode("latin-1"): value.decode("latin-1") for name, value in scope["headers"]}


def visitor_of(headers: Mapping[str, str]) -> Visitor:
    """Read the Authorization header, else the session cookie."""
    scheme, _, secret = headers.get("authorization", "").strip().partition(" ")
    if scheme.lower() == "bearer":
        return Visitor(bearer=secret.strip())
    return Visitor(session_key=_session_key(headers.get("cookie", "")))


def is_own_origin(headers: Mapping[str, str]) -> bool:
    """False when a page of another site opens the socket, or the host is not ours.

    Browsers always send Origin, and cookies go along with it; programs send none.
    """
    host = headers.get("host", "")
    if not validate_host(split_domain_port(host)[0], settings.ALLOWED_HOSTS):
        return False
    origin = headers.get("origin")
    return origin is None or urlsplit(origin).netloc.lower() == host.lower()


def check_may_watch(visitor: Visitor, campaign_id: str) -> bool:
    """Raise a refusal unless the visitor may watch; True when somebody is signed in."""
    person = _person(visitor)
    access_campaign(person, campaign_id)
    return person is not None


def _person(visitor: Visitor) -> Person | None:
    if visitor.bearer:
        token = find_token(visitor.bearer)
        if token is None:
            raise NotSignedIn("This token is unknown or was revoked.", "Make a new one on My gear.")
        return token.owner
    return _session_person(visitor.session_key) if visitor.session_key else None


def _session_person(session_key: str) -> Person | None:
    """The person of a session, by Django's own rules (a new password ends old sessions)."""
    request = HttpRequest()
    request.session = import_module(settings.SESSION_ENGINE).SessionStore(session_key)
    user = get_user(request)
    return user if isinstance(user, Person) and user.is_active else None


def _session_key(cookie_header: str) -> str:
    try:
        morsel = SimpleCookie(cookie_header).get(settings.SESSION_COOKIE_NAME)
    except CookieError:
        return ""
    return morsel.value if morsel else ""
