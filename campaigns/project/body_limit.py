"""Refuse a body that is too large before it is read."""

from collections.abc import Awaitable, Callable
from typing import Any

import orjson

from campaigns.ingest.uploads import MOST_BYTES
from campaigns.problem_details import CONTENT_TYPE, Problem

# Sky maps are uploaded here and nowhere else: the file, and the form around it.
UPLOAD_PATH = "/api/v1/region"
UPLOAD_LIMIT = MOST_BYTES + 1_000_000
LIMIT = 2_500_000

Receive = Callable[[], Awaitable[dict[str, Any]]]
Send = Callable[[dict[str, Any]], Awaitable[None]]


class _TooLargeError(Exception):
    """More bytes came than are allowed."""


class BodyLimit:
    """ASGI middleware: the stated length is judged first, then every byte that comes is counted."""

    def __init__(self, application: Any) -> None:
        self.application = application

    async def __call__(self, scope: dict[str, Any], receive: Receive, send: Send) -> None:
        """Pass the request on, or answer 413."""
        limit = UPLOAD_LIMIT if scope["path"] == UPLOAD_PATH else LIMIT
        if _stated_length(scope) > limit:
            await _refuse(send, limit)
            return
        n_bytes = 0

        async def counted() -> dict[str, Any]:
            nonlocal n_bytes
            message = await receive()
            n_bytes += len(message.get("body", b""))
            if n_bytes > limit:
                raise _TooLargeError
            return message

        try:
            await self.application(scope, counted, send)
        except _TooLargeError:
            await _refuse(send, limit)


def _stated_length(scope: dict[str, Any]) -> int:
    text = dict(scope["headers"]).get(b"content-length", b"0")
    return int(text) if text.isdigit() else 0


def _file_problem() -> Problem:
    return Problem(
        code="upload-too-large",
        status=413,
        title="The file is too large",
        detail=f"The alert file has more than {MOST_BYTES // 1024**2} MB; it was not read.",
        advice="Send the multi-order version of the map, which is much smaller.",
    )


def _body_problem(limit: int) -> Problem:
    return Problem(
        code="body-too-large",
        status=413,
        title="The body is too large",
        detail=f"More than {limit:,} bytes were sent; they were not read.",
        advice="Send less; a large sky map belongs to POST /api/v1/region as a file.",
    )


async def _refuse(send: Send, limit: int) -> None:
    problem = _file_problem() if limit == UPLOAD_LIMIT else _body_problem(limit)
    body = orjson.dumps(problem.to_json())
    headers = [
        (b"content-type", CONTENT_TYPE.encode()),
        (b"content-length", str(len(body)).encode()),
        (b"connection", b"close"),
    ]
    await send({"type": "http.response.start", "status": problem.status, "headers": headers})
    await send({"type": "http.response.body", "body": body})
