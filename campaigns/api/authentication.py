"""Who asks: a program with a bearer token, or a browser with a session."""

from rest_framework import authentication, exceptions
from rest_framework.request import Request

from observers.models import ApiToken, Person
from observers.selectors.tokens import find_token

NOT_A_TOKEN = "This token is unknown or was revoked."


class BearerAuthentication(authentication.BaseAuthentication):
    """`Authorization: Bearer <token>`; a token in a URL is never read."""

    def authenticate(self, request: Request) -> tuple[Person, ApiToken] | None:
        """The owner of the token, or None when the request carries none."""
        secret = bearer_secret(request.META.get("HTTP_AUTHORIZATION", ""))
        if secret is None:
            return None
        token = find_token(secret)
        if token is None:
            raise exceptions.AuthenticationFailed(NOT_A_TOKEN, code="bad-token")
        return token.owner, token

    def authenticate_header(self, request: Request) -> str:
        """Makes the answer without any sign-in a 401."""
        return 'Bearer realm="Quartersky"'


class SessionAuthentication(authentication.SessionAuthentication):
    """The session cookie, with the CSRF token on everything that writes."""


def bearer_secret(header: str) -> str | None:
    """The token of an Authorization header; None when it is of another kind."""
    scheme, _, secret = header.strip().partition(" ")
    return secret.strip() if scheme.lower() == "bearer" else None
