"""What the socket says: each message is made once, as text, however many screens hear it."""

import base64
from collections.abc import Mapping
from typing import Any

import numpy as np
import orjson


def _text(message: dict[str, Any]) -> str:
    return orjson.dumps(message).decode()


def snapshot_text(*, seq: int, now: str, state: Mapping[str, Any]) -> str:
    """Everything that an onlooker may see, at one sequence number."""
    return _text({"type": "snapshot", "seq": seq, "now": now, "state": state})


def event_text(event: dict[str, Any]) -> str:
    """One event."""
    return _text({"type": "event", "event": event})


def clock_text(*, now: str) -> str:
    """The campaign's clock was moved."""
    return _text({"type": "clock", "now": now})


def heartbeat_text(*, seq: int, now: str) -> str:
    """Alive; the newest sequence number lets a screen find out that it missed something."""
    return _text({"type": "heartbeat", "seq": seq, "now": now})


def coverage_text(
    *,
    since_seq: int,
    through_seq: int,
    imaged: float,
    searched: float,
    residual_outside: float,
    at: str | None,
    indices: np.ndarray,
    detected: np.ndarray,
) -> str:
    """The two numbers and the pixels that changed after `since_seq`.

    `indices` count the region's pixels (uint32), `detected` is D in 255 steps (uint8). A screen
    whose own coverage is older than `since_seq` reads it anew by REST.
    """
    changed = {
        "indices_b64": _base64(indices.astype("<u4")),
        "detected_b64": _base64(detected.astype("u1")),
    }
    return _text(
        {
            "type": "coverage",
            "since_seq": since_seq,
            "through_seq": through_seq,
            "imaged": imaged,
            "searched": searched,
            "residual_outside": residual_outside,
            "at": at,
            "changed": changed,
        }
    )


def problem_text(problem: dict[str, Any]) -> str:
    """Why this socket is closed at once."""
    return _text({"type": "problem", "problem": problem})


ASK_AGAIN = _text({"type": "ask-again"})


def _base64(array: np.ndarray) -> str:
    return base64.b64encode(array.tobytes()).decode()
