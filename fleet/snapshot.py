"""Reading everything as it stood at one instant, while others go on writing."""

from __future__ import annotations

from collections.abc import Iterator
from contextlib import contextmanager

from django.db import connection, transaction


@contextmanager
def snapshot() -> Iterator[None]:
    """Queries inside see one state of the database and hold up no writer.

    Inside a transaction that is already open, that transaction is what they see.
    """
    if connection.in_atomic_block:
        yield
    elif connection.vendor == "postgresql":
        with transaction.atomic(), connection.cursor() as cursor:
            cursor.execute("SET TRANSACTION ISOLATION LEVEL REPEATABLE READ, READ ONLY")
            yield
    else:
        with connection.cursor() as cursor:
            # DEFERRED takes no write lock; the first query fixes the snapshot.
            cursor.execute("BEGIN DEFERRED")
            try:
                cursor.execute("SELECT COUNT(*) FROM fleet_historyhead")
                yield
            finally:
                cursor.execute("ROLLBACK")
