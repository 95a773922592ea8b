"""A copy of the test database that threads share, each by a connection of its own.

The tables that are never changed cannot be emptied after a test, so the copy is thrown
away with them. On SQLite it is a file with the settings of the real one; on
PostgreSQL a database made from the template of the test database.
"""

from __future__ import annotations

import sqlite3
from collections.abc import Iterator
from pathlib import Path

import pytest
from django.db import connections
from django.test import override_settings

from tests.record_rows import World, world_make

QUICK = ["django.contrib.auth.hashers.MD5PasswordHasher"]


@pytest.fixture(scope="module")
def shared_database(
    django_db_setup, django_db_blocker, tmp_path_factory
) -> Iterator[None]:
    with django_db_blocker.unblock():
        kept = connections["default"]
        kept.ensure_connection()
        copy = _file if kept.vendor == "sqlite" else _database
        with copy(kept, tmp_path_factory.mktemp("together")) as name:
            held, settings = kept.settings_dict["NAME"], kept.settings_dict
            connections["default"] = kept.copy()
            settings["NAME"] = connections["default"].settings_dict["NAME"] = name
            try:
                yield
            finally:
                connections["default"].close()
                settings["NAME"] = held
                connections["default"] = kept


@pytest.fixture
def _django_db_helper(shared_database) -> None:
    """In place of pytest-django's: no transaction around a test, which would hold the
    other threads off, and no emptying of tables after it."""


class _file:
    def __init__(self, kept, folder: Path) -> None:
        self.path = folder / "together.sqlite3"
        with sqlite3.connect(self.path) as target:
            kept.connection.backup(target)
        target.close()

    def __enter__(self) -> str:
        return str(self.path)

    def __exit__(self, *error: object) -> None:
        self.path.unlink()


class _database:
    def __init__(self, kept, folder: Path) -> None:
        self.kept, template = kept, kept.settings_dict["NAME"]
        self.name = f"{template}_together"
        kept.close()
        with kept._nodb_cursor() as cursor:
            cursor.execute(f'DROP DATABASE IF EXISTS "{self.name}"')
            cursor.execute(f'CREATE DATABASE "{self.name}" TEMPLATE "{template}"')
            # Thrown away afterwards: who waits for whom is the same without the disk.
            cursor.execute(f'ALTER DATABASE "{self.name}" SET synchronous_commit = off')

    def __enter__(self) -> str:
        return self.name

    def __exit__(self, *error: object) -> None:
        with self.kept._nodb_cursor() as cursor:
            cursor.execute(f'DROP DATABASE "{self.name}" WITH (FORCE)')


@pytest.fixture(scope="module")
def world(shared_database) -> World:
    with override_settings(PASSWORD_HASHERS=QUICK):
        return world_make()
