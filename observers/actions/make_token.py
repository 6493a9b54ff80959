"""Tokens for programs: made, and revoked."""

from datetime import datetime

from observers.errors import NotFound, refuse_problems
from observers.models import ApiToken, Person
from observers.rules.problem import Problem
from observers.rules.secrets import new_secret, secret_sha256
from observers.selectors.access import access_account

LONGEST_LABEL = 80


def make_token(actor: Person | None, *, label: str, now: datetime) -> tuple[ApiToken, str]:
    """Make a token; its secret is returned once and never stored."""
    owner = access_account(actor)
    label = label.strip()
    problems = []
    if not 1 <= len(label) <= LONGEST_LABEL:
        problems.append(Problem("label", f"A label has 1 to {LONGEST_LABEL} characters."))
    refuse_problems(problems, advice="Name the program that will use the token.")
    secret = new_secret()
    token = ApiToken.objects.create(
        owner=owner, label=label, token_sha256=secret_sha256(secret), made_at=now
    )
    return token, secret


def revoke_token(actor: Person | None, token_id: int, *, now: datetime) -> None:
    """Revoke one's own token: from this moment it opens nothing. Twice is once."""
    owner = access_account(actor)
    own = ApiToken.objects.filter(owner=owner, pk=token_id)
    if not own.exists():
        raise NotFound(f"There is no token {token_id} of yours.", "See your tokens on My gear.")
    own.filter(revoked_at=None).update(revoked_at=now)
