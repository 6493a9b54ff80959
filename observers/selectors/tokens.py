"""Tokens of programs."""

from observers.models import ApiToken, Person
from observers.rules.secrets import secret_sha256


def find_token(secret: str) -> ApiToken | None:
    """The valid token that a program sent, with its owner; None when unknown or revoked."""
    rows = ApiToken.objects.select_related("owner")
    return rows.filter(
        token_sha256=secret_sha256(secret), revoked_at=None, owner__is_active=True
    ).first()


def list_tokens(owner: Person) -> list[ApiToken]:
    """All tokens that somebody made, the revoked ones too."""
    return list(ApiToken.objects.filter(owner=owner))
