"""Invitations by the secret in their link."""

from datetime import datetime

from observers.errors import NotFound
from observers.models import Invitation
from observers.rules.secrets import secret_sha256

_ADVICE = "Ask a coordinator for a new link."


def access_invitation(secret: str, *, now: datetime) -> Invitation:
    """The invitation of a link that can still be used; NotFound says why it cannot."""
    rows = Invitation.objects.select_related("person")
    invitation = rows.filter(token_sha256=secret_sha256(secret)).first()
    if invitation is None:
        raise NotFound("This link leads nowhere.", _ADVICE)
    if invitation.used_at is not None:
        raise NotFound("This link was used before.", f"Sign in with your name. {_ADVICE}")
    if invitation.expires_at <= now:
        raise NotFound("This link has expired.", _ADVICE)
    return invitation
