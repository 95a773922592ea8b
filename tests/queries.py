"""The number of queries a page costs must not grow with its rows."""

from __future__ import annotations

from collections.abc import Callable

from django.db import connection
from django.test import Client
from django.test.utils import CaptureQueriesContext

CEILING = 40


def assert_same_queries(
    client: Client, url: str, grow: Callable[[], object], *, ceiling: int = CEILING
) -> None:
    """The page asks as often after `grow` has added rows as before, and not too often.

    Growing must change what the page says; a page that shows none of the new rows
    would prove nothing.
    """
    before, text = _asked(client, url)
    grow()
    after, grown = _asked(client, url)
    assert grown != text, f"{url} looks the same after its rows grew"
    extra = "\n".join(sorted(set(after) - set(before)))
    assert len(after) == len(before), (
        f"{url} sent {len(before)} queries, then {len(after)}; new ones:\n{extra}"
    )
    assert len(after) <= ceiling, f"{url} sent {len(after)} queries:\n" + "\n".join(
        after
    )


def _asked(client: Client, url: str) -> tuple[list[str], str]:
    client.get(url)  # what is read once a process, such as a geometry, is read here
    with CaptureQueriesContext(connection) as asked:
        response = client.get(url)
    assert response.status_code == 200, f"{url} answered {response.status_code}"
    return [query["sql"] for query in asked], response.content.decode()
