"""Doing things at the same moment, each in a thread with a connection of its own."""

from __future__ import annotations

from collections.abc import Callable
from concurrent.futures import ThreadPoolExecutor
from threading import Barrier
from typing import Any

from django.db import connections


def at_once(*deeds: Callable[[], Any]) -> list[Any]:
    """What each gave, or the exception it ended with."""
    ready = Barrier(len(deeds), timeout=30)

    def one(deed: Callable[[], Any]) -> Any:
        try:
            connections["default"].ensure_connection()
            ready.wait()
            return deed()
        except Exception as error:
            return error
        finally:
            connections.close_all()

    with ThreadPoolExecutor(len(deeds)) as threads:
        return list(threads.map(one, deeds))
