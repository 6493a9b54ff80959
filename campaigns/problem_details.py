"""The one shape of every error (RFC 9457), for the API, the pages, the sockets and the commands."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from http import HTTPStatus
from typing import Any

from observers.errors import CampaignError
from skytiles.errors import SkytilesError

CONTENT_TYPE = "application/problem+json"
TYPE_PREFIX = "urn:quartersky:problem:"

# What to do when nothing more exact is known, by HTTP status.
ADVICE = {
    400: "Correct the request and send it again.",
    401: "Sign in, or send Authorization: Bearer with a token from My gear.",
    403: "Ask a coordinator for the right to do this.",
    404: "Check the address; the list of campaigns is on the first page.",
    405: "Look up the method in /api/schema/.",
    406: "Ask for application/json.",
    409: "Read the newest state, then decide again.",
    413: "Send a smaller body.",
    415: "Send application/json.",
    422: "Make a new Idempotency-Key for a new request.",
    429: "Wait, then try again.",
    500: "Try again; if it happens again, tell the people who run this server.",
    503: "Try again in a few seconds.",
}


@dataclass(frozen=True)
class Problem:
    """One refusal. `extra` are further public fields; they never overwrite the named ones."""

    code: str
    status: int
    title: str
    detail: str
    advice: str
    errors: Sequence[Mapping[str, str]] = ()
    extra: Mapping[str, Any] = field(default_factory=dict)

    def to_json(self) -> dict[str, Any]:
        """Fields in the order in which a person reads them."""
        body: dict[str, Any] = {
            "type": TYPE_PREFIX + self.code,
            "title": self.title,
            "status": self.status,
            "detail": self.detail,
            "code": self.code,
            "advice": self.advice,
        }
        if self.errors:
            body["errors"] = [dict(error) for error in self.errors]
        return {**self.extra, **body}


def problem_of(error: Exception) -> Problem | None:
    """The problem that one of our own errors stands for; None for anybody else's."""
    if isinstance(error, CampaignError):
        return Problem(
            code=error.code,
            status=error.status,
            title=error.title,
            detail=error.detail,
            advice=error.advice,
            errors=[{"field": one.field, "detail": one.detail} for one in error.problems],
            extra=error.extras,
        )
    if isinstance(error, SkytilesError):
        return Problem(
            code=error.code,
            status=400,
            title="The input cannot be used",
            detail=error.detail,
            advice=error.advice,
            extra={"given": error.given, "allowed": error.allowed},
        )
    return None


def problem_for_status(status: int, *, code: str = "", detail: str = "") -> Problem:
    """A problem when only the HTTP status (and perhaps a sentence) is known."""
    phrase = HTTPStatus(status).phrase
    return Problem(
        code=code or phrase.lower().replace(" ", "-"),
        status=status,
        title=phrase,
        detail=detail or f"{phrase}.",
        advice=ADVICE.get(status, ADVICE[400]),
    )
