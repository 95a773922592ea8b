"""Files kept beside the database: where they are, whole or not there at all."""

from __future__ import annotations

import hashlib
import os
import tempfile
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import IO

from django.conf import settings


def attachment_path(sha256: str) -> Path:
    """Where the bytes of that digest are kept."""
    return Path(settings.ATTACHMENTS) / sha256[:2] / sha256


def file_digest(path: Path) -> str:
    """SHA-256 of the file's bytes, hexadecimal."""
    with path.open("rb") as file:
        return hashlib.file_digest(file, "sha256").hexdigest()


@contextmanager
def written_whole(path: Path) -> Iterator[IO[bytes]]:
    """A file written beside its place, synced, and moved there when it is complete.

    It outlives a power cut as surely as the database row that tells of it.
    """
    if not path.parent.exists():
        path.parent.mkdir(parents=True, exist_ok=True)
        sync_folder(path.parent.parent)
    handle, temporary = tempfile.mkstemp(dir=path.parent, prefix=".writing-")
    try:
        with os.fdopen(handle, "w+b") as file:
            yield file
            file.flush()
            os.fsync(file.fileno())
        os.replace(temporary, path)
        sync_folder(path.parent)
    except BaseException:
        Path(temporary).unlink(missing_ok=True)
        raise


def sync_folder(folder: Path) -> None:
    """A file's name is on the disk only once its folder is."""
    handle = os.open(folder, os.O_RDONLY)
    try:
        os.fsync(handle)
    finally:
        os.close(handle)
