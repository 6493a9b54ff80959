"""Asks the server over HTTP, as a browser with a session or a program with a token would."""

from __future__ import annotations

import uuid
from dataclasses import dataclass, field
from typing import Any

import httpx
import numpy as np
import orjson

# A request that finds its connection closed is sent again with the same key: once is enough.
N_TRIES = 3


class Refusal(Exception):
    """The server said no: a problem document with a status and a stable code."""

    def __init__(self, status: int, problem: dict[str, Any]) -> None:
        self.status = status
        self.problem = problem
        self.code = str(problem.get("code", "no-code"))
        detail = problem.get("detail") or problem.get("title") or ""
        super().__init__(f"{status} {self.code}: {detail} {problem.get('advice', '')}".strip())


class ServerFault(Exception):
    """The server broke down over a request: never part of a night, the rehearsal ends."""


@dataclass
class BoardClient:
    """One account's way to the server. `keys` draws the idempotency keys."""

    http: httpx.AsyncClient
    keys: np.random.Generator
    token: str = ""
    headers: dict[str, str] = field(default_factory=dict)

    async def get(self, path: str, **params: Any) -> Any:
        """The JSON answer to a GET."""
        return await self._ask("GET", path, params=params)

    async def post(self, path: str, body: dict[str, Any] | None = None) -> Any:
        """The JSON answer to a POST with an idempotency key of its own."""
        return await self._ask("POST", path, json_body=body or {}, headers=self._new_key())

    async def post_file(self, path: str, name: str, content: bytes) -> Any:
        """The JSON answer to an upload."""
        files = {"file": (name, content, "application/octet-stream")}
        return await self._ask("POST", path, files=files, headers=self._new_key())

    def _new_key(self) -> dict[str, str]:
        return {"Idempotency-Key": str(uuid.UUID(bytes=self.keys.bytes(16), version=4))}

    async def _ask(
        self,
        method: str,
        path: str,
        *,
        headers: dict[str, str] | None = None,
        json_body: dict[str, Any] | None = None,
        **rest: Any,
    ) -> Any:
        headers = {**self.headers, **(headers or {})}
        if self.token:
            headers["Authorization"] = f"Bearer {self.token}"
        if json_body is not None:
            headers["Content-Type"] = "application/json"
            rest["content"] = orjson.dumps(json_body)
        answer = await self._send(method, f"/api/v1/{path}", headers=headers, **rest)
        return _read(answer)

    async def _send(self, method: str, path: str, **rest: Any) -> httpx.Response:
        for n_left in reversed(range(N_TRIES)):
            try:
                return await self.http.request(method, path, **rest)
            except (httpx.RemoteProtocolError, httpx.ReadError, httpx.WriteError):
                if not n_left:
                    raise
        raise AssertionError("the last try either answers or raises")


def _read(answer: httpx.Response) -> Any:
    document = orjson.loads(answer.content) if answer.content else {}
    if answer.is_success:
        return document
    if answer.is_server_error:
        raise ServerFault(f"{answer.request.method} {answer.request.url.path}: {answer.text[:500]}")
    raise Refusal(answer.status_code, document if isinstance(document, dict) else {})


def new_http(url: str) -> httpx.AsyncClient:
    """A client with a cookie jar of its own."""
    return httpx.AsyncClient(base_url=url, timeout=60.0, trust_env=False)


async def join_by_link(
    url: str, link_token: str, *, name: str, password: str, keys: np.random.Generator
) -> tuple[int, str]:
    """Accept an invitation as a person would, then make a token: (observer id, token)."""
    async with new_http(url) as http:
        person = BoardClient(http, keys)
        await person.get("session")
        person.headers = _csrf_header(http)
        acceptance = {"token": link_token, "name": name, "password": password}
        await person.post("invitations/accept", acceptance)
        session = await person.get("session")
        # Signing in changes the CSRF secret.
        person.headers = _csrf_header(http)
        made = await person.post("tokens", {"label": "rehearsal"})
        return int(session["observer"]["id"]), str(made["token"])


def _csrf_header(http: httpx.AsyncClient) -> dict[str, str]:
    # By the cookie's ending: its prefix is the server's own business.
    found = [value for name, value in http.cookies.items() if name.endswith(("csrf", "csrftoken"))]
    return {"X-CSRFToken": found[0]} if found else {}
