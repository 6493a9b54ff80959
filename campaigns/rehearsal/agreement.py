"""At the end: do two open screens and the server say the same?"""

from __future__ import annotations

import asyncio
from collections.abc import Iterator, Sequence
from typing import Any

from campaigns.rehearsal.board_client import BoardClient
from campaigns.rehearsal.screen import Screen

CONVERGE_S = 5.0
N_TRIES = 6
NUMBERS_AGREE_TO = 1e-9


class Disagreement(RuntimeError):
    """Screens and server differ: the law of events is broken somewhere."""


async def check_agreement(
    client: BoardClient, campaign: str, screens: Sequence[Screen]
) -> tuple[dict[str, Any], dict[str, Any]]:
    """(snapshot, coverage) once every screen agrees with both, within five seconds a try."""
    problems: list[str] = ["nothing was compared"]
    for _ in range(N_TRIES):
        snapshot = await client.get(f"campaigns/{campaign}")
        coverage = await client.get(f"campaigns/{campaign}/coverage")
        await _let_converge(screens, snapshot["seq"])
        problems = list(agreement_problems(snapshot, coverage, screens))
        if not problems:
            return snapshot, coverage
        # The server may have written one more event between the two answers.
        await asyncio.sleep(1.0)
    raise Disagreement("; ".join(problems))


async def _let_converge(screens: Sequence[Screen], seq: int) -> None:
    for screen in screens:
        try:
            await screen.wait_until(lambda one: one.seq >= seq, timeout_s=CONVERGE_S)
        except TimeoutError:
            # Judged with the others: agreement_problems names the screen.
            continue


def agreement_problems(
    snapshot: dict[str, Any], coverage: dict[str, Any], screens: Sequence[Screen]
) -> Iterator[str]:
    """What differs between the server's answers and what each screen made of its events."""
    for screen in screens:
        if screen.seq != snapshot["seq"]:
            yield f"{screen.name} is at event {screen.seq}, the server at {snapshot['seq']}"
        elif screen.state is not None:
            yield from _state_problems(screen, snapshot["state"])
        for number in ("imaged", "searched"):
            shown = screen.coverage.get(number)
            if shown is not None and abs(shown - coverage[number]) > NUMBERS_AGREE_TO:
                yield f"{screen.name} shows {number} {shown}, the server {coverage[number]}"


def _state_problems(screen: Screen, state: dict[str, Any]) -> Iterator[str]:
    shown: dict[str, Any] = dict(screen.state or {})
    for part in sorted(state.keys() | shown.keys()):
        if shown.get(part) != state.get(part):
            yield f"{screen.name} and the server differ in {part}"
