"""A database of its own for a measurement, made before Django starts, gone after it."""

from __future__ import annotations

import os
import subprocess
import sys
import tempfile
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from urllib.parse import urlsplit, urlunsplit

ROOT = Path(__file__).parents[2]


@contextmanager
def throwaway(server: str = "", suffix: str = "") -> Iterator[Path]:
    """Migrated, and named by the environment; yields its data folder.

    `server` is the address of any database of a PostgreSQL server; without it SQLite
    is used, in the data folder.
    """
    with tempfile.TemporaryDirectory() as folder:
        os.environ["FRAMEBAY_DATA"] = folder
        os.environ["DJANGO_SETTINGS_MODULE"] = "fleet.site.settings"
        os.environ.pop("DATABASE_URL", None)
        name = f"framebay_bench_{os.getpid()}{suffix}"
        if server:
            command(server, f"CREATE DATABASE {name}")
            os.environ["DATABASE_URL"] = urlunsplit(
                urlsplit(server)._replace(path=name)
            )
        try:
            subprocess.run(
                [sys.executable, "manage.py", "migrate", "--verbosity=0"],
                cwd=ROOT,
                check=True,
            )
            yield Path(folder)
        finally:
            if server:
                close()
                command(server, f"DROP DATABASE IF EXISTS {name} WITH (FORCE)")


def command(server: str, sql: str) -> None:
    import psycopg

    with psycopg.connect(server, autocommit=True) as connection:
        connection.execute(sql)  # type: ignore[call-overload]


def close() -> None:
    from django.db import connections

    connections.close_all()
