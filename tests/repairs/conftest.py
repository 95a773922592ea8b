"""One small operator for all tests of a module; each test's own rows are undone."""

from __future__ import annotations

from collections.abc import Iterator

import pytest
from django.db import transaction
from django.test import override_settings

from tests.record_rows import World, world_make

QUICK = ["django.contrib.auth.hashers.MD5PasswordHasher"]


@pytest.fixture(scope="module")
def world(django_db_setup, django_db_blocker) -> Iterator[World]:
    """Made once a module, in a transaction that the tests' own ones nest in."""
    with django_db_blocker.unblock(), transaction.atomic():
        with override_settings(PASSWORD_HASHERS=QUICK):
            made = world_make()
        yield made
        transaction.set_rollback(True)
