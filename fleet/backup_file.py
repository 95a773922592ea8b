"""A backup: one zip file that can be read without this program.

`tables/<table>.jsonl` holds a table: the first line its columns, then a line a row, as
JSON arrays. `attachments/<sha256>` are the kept files, `seals/` the seals with the list
of public keys. `manifest.json` names every file with its SHA-256 and says where the
history ended. The keys that are secret stay out: sessions and seals get new ones.
"""

from __future__ import annotations

import datetime as dt
import hashlib
import json
import zipfile
import zlib
from collections.abc import Callable, Iterable, Iterator
from dataclasses import asdict, dataclass, field
from pathlib import Path
from typing import IO, Any, Self

from fleet.canonical import digest

FORMAT = 1
MANIFEST = "manifest.json"
TABLES, ATTACHMENTS, SEALS = "tables/", "attachments/", "seals/"
BLOCK = 1 << 20
LEFT_OUT = (
    "the secret key of sessions and the private key of seals",
    "sign-in sessions and attempts",
)
READ_ME = """\
A backup of Framebay's records, made {at} UTC, up to history entry {sequence}.

tables/NAME.jsonl   a table: columns in the first line, then a row a line (JSON arrays)
attachments/SHA256  the kept files: originals as received and the copies that are shown
seals/              seals of the history's end and the public keys that made them
manifest.json       SHA-256, size and rows of every file here

`manage.py restore FILE` puts it back. It holds password digests and the keys of second
factors: keep it as safe as the database.
"""

NOT_A_BACKUP = (
    "{path} is not a whole backup: {error}. It was cut short, altered, or is another "
    "kind of file; take another copy. Nothing was restored."
)
NO_MANIFEST = "it holds no manifest.json"
OTHER_FORMAT = "its manifest says format {read}, expected {expected}"
NOT_LISTED = "{name} is not in its manifest"
NOT_THERE = "{name} is in its manifest and missing"
ALTERED = "{name} was altered: its SHA-256 is not the one in the manifest"
BROKEN = "{name} cannot be read ({error})"


class NotABackup(ValueError):
    """The file is no whole, unaltered backup."""


@dataclass(frozen=True)
class Member:
    """One file inside the backup; `rows` of a table."""

    sha256: str
    byte_count: int
    rows: int | None = None


@dataclass
class Manifest:
    """What a backup holds. `database` is the digest of the first history entry."""

    made_at: str
    database: str
    sequence: int
    head: str
    migrations: list[list[str]]
    files: dict[str, Member] = field(default_factory=dict)
    lost: list[str] = field(default_factory=list)
    left_out: tuple[str, ...] = LEFT_OUT
    format: int = FORMAT

    @property
    def text(self) -> str:
        return json.dumps(asdict(self), indent=1, ensure_ascii=False) + "\n"

    @property
    def digest(self) -> str:
        return digest(self.text)

    @property
    def rows(self) -> int:
        return sum(member.rows or 0 for member in self.files.values())

    @property
    def attachments(self) -> list[str]:
        return [name for name in self.files if name.startswith(ATTACHMENTS)]


class BackupWriter:
    """Puts members into the zip and their digests into the manifest."""

    def __init__(self, file: IO[bytes], manifest: Manifest, at: dt.datetime) -> None:
        self.zip = zipfile.ZipFile(file, "w", zipfile.ZIP_DEFLATED)
        self.manifest, self._when = manifest, at.timetuple()[:6]

    def table(self, name: str, columns: list[str], rows: Iterable[Any]) -> None:
        """`rows` are sequences of what JSON can hold."""
        count = 0

        def lines() -> Iterator[bytes]:
            nonlocal count
            yield _line(columns)
            for row in rows:
                count += 1
                yield _line(row)

        path = f"{TABLES}{name}.jsonl"
        member = self._put(path, lines(), zipfile.ZIP_DEFLATED)
        self.manifest.files[path] = Member(member.sha256, member.byte_count, count)

    def file(self, name: str, source: Path) -> str:
        """A file as it is; returns the SHA-256 of what was read."""
        with source.open("rb") as file:
            blocks = iter(lambda: file.read(BLOCK), b"")
            member = self._put(name, blocks, zipfile.ZIP_STORED)
        self.manifest.files[name] = member
        return member.sha256

    def __enter__(self) -> Self:
        return self

    def __exit__(self, kind: type[BaseException] | None, *_: object) -> None:
        """End the zip; of a whole one, with how to read it and the manifest."""
        with self.zip:
            if kind is None:
                self._end()

    def _end(self) -> None:
        about = READ_ME.format(
            at=self.manifest.made_at[:19], sequence=self.manifest.sequence
        ).encode()
        self.manifest.files["README.txt"] = self._put(
            "README.txt", [about], zipfile.ZIP_DEFLATED
        )
        self._put(MANIFEST, [self.manifest.text.encode()], zipfile.ZIP_DEFLATED)

    def _put(self, name: str, blocks: Iterable[bytes], packed: int) -> Member:
        info = zipfile.ZipInfo(name, self._when)
        info.compress_type = packed
        content, size = hashlib.sha256(), 0
        with self.zip.open(info, "w", force_zip64=True) as member:
            for block in blocks:
                content.update(block)
                size += len(block)
                member.write(block)
        return Member(content.hexdigest(), size)


class BackupReader:
    """A backup whose every byte was held against its manifest."""

    def __init__(self, path: Path, say: Callable[[str], None] | None = None) -> None:
        self.path = path
        try:
            self.zip = zipfile.ZipFile(path)
            self.manifest = self._manifest()
        except (OSError, zipfile.BadZipFile) as error:
            raise self._refused(str(error)) from error
        self._check(say or (lambda _: None))

    def columns(self, table: str) -> list[str]:
        return next(self._lines(table))

    def rows(self, table: str) -> Iterator[list[Any]]:
        lines = self._lines(table)
        next(lines)
        return lines

    @property
    def tables(self) -> list[str]:
        named = (name for name in self.manifest.files if name.startswith(TABLES))
        return [name.removeprefix(TABLES).removesuffix(".jsonl") for name in named]

    def blocks(self, name: str) -> Iterator[bytes]:
        with self.zip.open(name) as member:
            yield from iter(lambda: member.read(BLOCK), b"")

    def _lines(self, table: str) -> Iterator[list[Any]]:
        with self.zip.open(f"{TABLES}{table}.jsonl") as member:
            for line in member:
                yield json.loads(line)

    def _manifest(self) -> Manifest:
        if MANIFEST not in self.zip.namelist():
            raise self._refused(NO_MANIFEST)
        try:
            read = json.loads(self.zip.read(MANIFEST))
            if read["format"] != FORMAT:
                words = OTHER_FORMAT.format(read=read["format"], expected=FORMAT)
                raise self._refused(words)
            files = {name: Member(**each) for name, each in read.pop("files").items()}
            read["left_out"] = tuple(read["left_out"])
            return Manifest(**read, files=files)
        except (ValueError, KeyError, TypeError, zlib.error) as error:
            if isinstance(error, NotABackup):
                raise
            words = BROKEN.format(name=MANIFEST, error=error)
            raise self._refused(words) from error

    def _check(self, say: Callable[[str], None]) -> None:
        """Every member is listed and every listed one is here, byte for byte."""
        here, listed = set(self.zip.namelist()) - {MANIFEST}, set(self.manifest.files)
        for words, names in ((NOT_LISTED, here - listed), (NOT_THERE, listed - here)):
            if names:
                raise self._refused(words.format(name=min(names)))
        say(f"checking {len(listed):,} files of the backup")
        for name, member in self.manifest.files.items():
            content = hashlib.sha256()
            try:
                for block in self.blocks(name):
                    content.update(block)
            except (OSError, zipfile.BadZipFile, zlib.error) as error:
                words = BROKEN.format(name=name, error=error)
                raise self._refused(words) from error
            if content.hexdigest() != member.sha256:
                raise self._refused(ALTERED.format(name=name))

    def _refused(self, error: str) -> NotABackup:
        return NotABackup(NOT_A_BACKUP.format(path=self.path, error=error.rstrip(".")))


def _line(row: Iterable[Any]) -> bytes:
    text = json.dumps(list(row), separators=(",", ":"), ensure_ascii=False)
    return text.encode() + b"\n"
