import asyncio

import orjson
import pytest

from campaigns.project.body_limit import LIMIT, UPLOAD_LIMIT, BodyLimit


async def _reader(scope, receive, send):
    n_bytes = 0
    while True:
        message = await receive()
        n_bytes += len(message.get("body", b""))
        if not message.get("more_body"):
            break
    body = str(n_bytes).encode()
    await send({"type": "http.response.start", "status": 200, "headers": []})
    await send({"type": "http.response.body", "body": body})


def _send(path, *, stated=None, chunks=()):
    """(status, body, number of chunks that were read)."""
    headers = [] if stated is None else [(b"content-length", str(stated).encode())]
    scope = {"type": "http", "path": path, "headers": headers}
    waiting, sent = list(chunks), []

    async def receive():
        body = waiting.pop(0) if waiting else b""
        return {"type": "http.request", "body": body, "more_body": bool(waiting)}

    async def send(message):
        sent.append(message)

    asyncio.run(BodyLimit(_reader)(scope, receive, send))
    return sent[0]["status"], sent[1]["body"], len(chunks) - len(waiting)


@pytest.mark.parametrize(
    ("path", "stated", "code"),
    [
        ("/api/v1/session", LIMIT + 1, "body-too-large"),
        ("/api/v1/region", UPLOAD_LIMIT + 1, "upload-too-large"),
        ("/", 10**15, "body-too-large"),
    ],
)
def test_a_body_that_says_it_is_too_large_is_not_read(path, stated, code):
    status, body, n_read = _send(path, stated=stated, chunks=[b"x"])
    assert (status, n_read) == (413, 0)
    problem = orjson.loads(body)
    assert problem["code"] == code
    assert problem["advice"]


def test_a_body_that_says_nothing_is_counted():
    status, _, n_read = _send("/api/v1/session", chunks=[b"x" * 1_000_000] * 10)
    assert (status, n_read) == (413, 3)


def test_an_alert_file_may_be_large():
    status, body, _ = _send("/api/v1/region", chunks=[b"x" * 1_000_000] * 10)
    assert (status, body) == (200, b"10000000")


def test_a_small_body_passes():
    assert _send("/api/v1/session", stated=5, chunks=[b"12345"])[:2] == (200, b"5")
