"""Slow down guessing: failed sign-ins are counted per address and name, and per address."""

import hashlib

from django.core.cache import cache
from rest_framework.exceptions import Throttled

WINDOW_S = 300
PER_NAME = 5
PER_ADDRESS = 100


def refuse_too_many(address: str, name: str) -> None:
    """Raise Throttled (429) when too many sign-ins failed lately. Successes never count."""
    for key, most in _counters(address, name):
        if cache.get(key, 0) >= most:
            raise Throttled(wait=WINDOW_S, detail="Too many sign-ins failed.")


def count_failure(address: str, name: str) -> None:
    """Remember one failed sign-in for the length of the window."""
    for key, _ in _counters(address, name):
        cache.add(key, 0, timeout=WINDOW_S)
        cache.incr(key)


def forget_failures(address: str, name: str) -> None:
    """After a success the name starts afresh; the address does not."""
    cache.delete(_counters(address, name)[0][0])


def _counters(address: str, name: str) -> list[tuple[str, int]]:
    both = hashlib.sha256(f"{address}\n{name.strip().lower()}".encode()).hexdigest()
    alone = hashlib.sha256(address.encode()).hexdigest()
    return [(f"sign-in:name:{both}", PER_NAME), (f"sign-in:address:{alone}", PER_ADDRESS)]
