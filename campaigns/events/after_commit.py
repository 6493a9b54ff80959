"""Who wants to know that something was committed. Hints only: the database is the truth."""

from collections.abc import Callable
from typing import Literal

from django.db import transaction

Hint = Literal["events", "clock", "plan due"]
Listener = Callable[[str, Hint], None]

_listeners: list[Listener] = []


def register(listener: Listener) -> None:
    """Call `listener(campaign_id, hint)` after every commit; it must be quick and never block."""
    if listener not in _listeners:
        _listeners.append(listener)


def unregister(listener: Listener) -> None:
    """Stop calling a listener."""
    if listener in _listeners:
        _listeners.remove(listener)


def notify(campaign_id: str, hint: Hint) -> None:
    """Tell all listeners once the present transaction is committed; nothing on a rollback."""
    for listener in _listeners:
        # Robust: a listener that fails is logged; what was committed stays acknowledged.
        transaction.on_commit(lambda told=listener: told(campaign_id, hint), robust=True)
