"""The Idempotency-Key of a request."""

import hashlib
import json
from datetime import datetime
from uuid import UUID

from rest_framework.request import Request
from rest_framework.response import Response

from campaigns.actions.answer_once import Answer, Once
from campaigns.errors import InvalidInput
from observers.models import Person
from observers.rules.problem import Problem


def once_of(request: Request, person: Person, *, operation: str, wall_now: datetime) -> Once | None:
    """The keyed request, or None when the client sent no key. `operation` names what and where."""
    text = request.headers.get("Idempotency-Key")
    if not text:
        return None
    return Once(
        person=person,
        # The column is short; the hash keeps one campaign's keys apart from another's.
        operation=hashlib.sha256(operation.encode()).hexdigest()[:40],
        key=_key(text),
        body_sha256=_body_sha256(request),
        wall_now=wall_now,
    )


def response_of(answer: Answer) -> Response:
    """The answer as it goes out; a repeat says so in a header."""
    headers = {"Idempotency-Replayed": "true"} if answer.is_repeat else {}
    return Response(answer.body, status=answer.status, headers=headers)


def _key(text: str) -> UUID:
    try:
        return UUID(text.strip())
    except ValueError as error:
        raise InvalidInput(
            "The Idempotency-Key is no UUID.",
            "Make a random UUID for each new request.",
            problems=[Problem("Idempotency-Key", "Give a UUID.")],
        ) from error


def _body_sha256(request: Request) -> str:
    body = json.dumps(request.data, sort_keys=True, default=str)
    return hashlib.sha256(body.encode()).hexdigest()
