"""Shared fixtures: nothing here reads the clock or the network."""

from __future__ import annotations

import datetime as dt

import pytest

from tests.open_data import open_data_wheel

__all__ = ["open_data_wheel"]

NOW = dt.datetime(2025, 1, 1, 9, 0, tzinfo=dt.UTC)


def pytest_addoption(parser: pytest.Parser) -> None:
    parser.addoption(
        "--record-outside",
        action="store_true",
        help="Write fixtures/outside_checks.json from this run.",
    )


@pytest.fixture(autouse=True)
def _quick_and_contained(tmp_path, settings):
    """Passwords hash fast, files stay in the test's own folder."""
    settings.PASSWORD_HASHERS = ["django.contrib.auth.hashers.MD5PasswordHasher"]
    settings.ATTACHMENTS = tmp_path / "attachments"
    settings.SEALS, settings.BACKUPS = tmp_path / "seals", tmp_path / "backups"
    settings.SEAL_KEY_FILE, settings.SEAL_KEY = tmp_path / "seal_key", ""


@pytest.fixture
def now() -> dt.datetime:
    return NOW
