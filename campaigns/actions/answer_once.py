"""A keyed request is carried out once; whoever repeats it gets the same answer."""

from collections.abc import Callable
from dataclasses import dataclass
from datetime import datetime, timedelta
from typing import Any, TypeVar
from uuid import UUID

from django.db import IntegrityError, transaction

from campaigns.errors import CampaignError, KeyUsedOtherwise
from campaigns.models import IdempotencyKey
from observers.actions.write_transaction import write_transaction
from observers.models import Person

KEPT_FOR = timedelta(days=30)

Judged = TypeVar("Judged")


@dataclass(frozen=True)
class Answer:
    """What the client hears: HTTP status and JSON body."""

    status: int
    body: dict[str, Any]
    # The same request came before; nothing was done this time.
    is_repeat: bool = False


@dataclass(frozen=True)
class Once:
    """One keyed request: who, what, the client's key, and the hash of the body."""

    person: Person
    operation: str
    key: UUID
    body_sha256: str
    wall_now: datetime


def answer_once(
    once: Once | None,
    *,
    judge: Callable[[], Judged],
    write: Callable[[Judged], Answer],
) -> Answer:
    """Judge outside, write inside one transaction, and keep the answer in that transaction.

    A request with the same key that is still in flight is waited for. Refusals are not kept:
    the same key may be tried again when the cause is gone.
    """
    kept = _kept_answer(once)
    if kept is not None:
        return kept
    try:
        judged = judge()
        with write_transaction():
            kept = _reserve(once)
            return kept or _store(once, write(judged))
    except CampaignError:
        # Perhaps refused only because the same request succeeded a moment ago.
        kept = _kept_answer(once)
        if kept is not None:
            return kept
        raise


def forget_old_keys(*, wall_now: datetime) -> int:
    """Delete keys older than 30 days; returns how many."""
    with write_transaction():
        n_deleted, _ = IdempotencyKey.objects.filter(made_at__lt=wall_now - KEPT_FOR).delete()
    return n_deleted


def _rows(once: Once) -> Any:
    return IdempotencyKey.objects.filter(person=once.person, operation=once.operation, key=once.key)


def _kept_answer(once: Once | None) -> Answer | None:
    row = _rows(once).first() if once else None
    if row is None or once is None:
        return None
    if row.body_sha256 != once.body_sha256:
        raise KeyUsedOtherwise(
            "This Idempotency-Key came before with another body.",
            "Make a new key for a new request.",
        )
    return Answer(row.status, row.answer, is_repeat=True)


def _reserve(once: Once | None) -> Answer | None:
    """Write the key first: on PostgreSQL this waits for a twin that is still in flight."""
    if once is None:
        return None
    try:
        with transaction.atomic():
            IdempotencyKey.objects.create(
                person=once.person,
                operation=once.operation,
                key=once.key,
                body_sha256=once.body_sha256,
                status=0,
                answer={},
                made_at=once.wall_now,
            )
    except IntegrityError:
        return _kept_answer(once)
    return None


def _store(once: Once | None, answer: Answer) -> Answer:
    if once is not None:
        _rows(once).update(status=answer.status, answer=answer.body)
    return answer
