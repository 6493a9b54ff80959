"""Read several tables as they were at one moment."""

from collections.abc import Iterator
from contextlib import contextmanager

from django.db import connection, transaction


@contextmanager
def one_moment() -> Iterator[None]:
    """All reads inside see one commit; nobody waits and nobody is made to wait.

    Inside a transaction it adds nothing: that one already decides what is seen. On SQLite
    atomic() would take the writers' lock (transaction_mode IMMEDIATE), hence the plain BEGIN.
    """
    if connection.in_atomic_block:
        yield
    elif connection.vendor == "sqlite":
        with _deferred():
            yield
    else:
        with transaction.atomic():
            with connection.cursor() as cursor:
                cursor.execute("SET TRANSACTION ISOLATION LEVEL REPEATABLE READ, READ ONLY")
            yield


@contextmanager
def _deferred() -> Iterator[None]:
    with connection.cursor() as cursor:
        cursor.execute("BEGIN DEFERRED")
    try:
        yield
    finally:
        with connection.cursor() as cursor:
            cursor.execute("ROLLBACK")
