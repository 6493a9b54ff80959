"""Brings the network onto the server: accounts, sites and instruments, over HTTP alone."""

from __future__ import annotations

from dataclasses import dataclass

import httpx
import numpy as np

from campaigns.rehearsal.board_client import BoardClient, join_by_link
from campaigns.rehearsal.demo_network import InventedObserver, Kit
from campaigns.rehearsal.stage import Say

COORDINATOR_NAME = "Rehearsal coordinator"
N_SAID_EVERY = 10


@dataclass(frozen=True)
class CastMember:
    """An invented observer with an account on the server and registered gear."""

    who: InventedObserver
    observer_id: int
    client: BoardClient
    instruments: tuple[tuple[int, Kit], ...]


def invent_password(keys: np.random.Generator) -> str:
    """A password nobody has to remember."""
    return keys.bytes(12).hex()


async def make_coordinator(
    http: httpx.AsyncClient, link_token: str, *, password: str, keys: np.random.Generator
) -> BoardClient:
    """The first coordinator, by the one-time link that `serve` prints."""
    _, token = await join_by_link(
        str(http.base_url), link_token, name=COORDINATOR_NAME, password=password, keys=keys
    )
    return BoardClient(http, keys, token)


async def gather_cast(
    coordinator: BoardClient, observers: tuple[InventedObserver, ...], *, say: Say
) -> list[CastMember]:
    """Invite everybody and let them join one after the other: ids in the same order each time."""
    members = []
    for number, who in enumerate(observers, start=1):
        members.append(await _join(coordinator, who))
        if number % N_SAID_EVERY == 0 or number == len(observers):
            say(f"{number} of {len(observers)} observers have accounts, sites and instruments")
    return members


async def _join(coordinator: BoardClient, who: InventedObserver) -> CastMember:
    invitation = await coordinator.post("invitations", {"role": "observer"})
    link_token = invitation["link"].rstrip("/").rsplit("/", 1)[-1]
    http, keys = coordinator.http, coordinator.keys
    observer_id, token = await join_by_link(
        str(http.base_url), link_token, name=who.name, password=invent_password(keys), keys=keys
    )
    client = BoardClient(http, keys, token)
    return CastMember(who, observer_id, client, await _register_gear(client, who))


async def _register_gear(client: BoardClient, who: InventedObserver) -> tuple[tuple[int, Kit], ...]:
    site = await client.post("sites", who.site)
    registered = []
    for kit in who.kits:
        entry = {"name": kit.name, "site": site["id"], **kit.registered}
        registered.append((int((await client.post("instruments", entry))["id"]), kit))
    return tuple(registered)
