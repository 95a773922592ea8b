"""The text of a seal: what the end of the history was, signed with an Ed25519 key.

A seal is a few lines that anybody can read and any Ed25519 tool can check: the
statement, an empty line, and the signature over the statement's bytes.
"""

from __future__ import annotations

import base64
import binascii
import datetime as dt
from dataclasses import dataclass

from cryptography.exceptions import InvalidSignature, UnsupportedAlgorithm
from cryptography.hazmat.primitives import serialization
from cryptography.hazmat.primitives.asymmetric.ed25519 import (
    Ed25519PrivateKey,
    Ed25519PublicKey,
)

from fleet.canonical import plain

TITLE = "Framebay history seal"
LINES = ("database", "entry", "digest", "sealed at", "published in", "public key")
SIGNATURE = "signature"
NOT_A_SEAL = (
    "{where} is not a seal: read {read}, expected the line “{expected}”. "
    "Use the file as it was written, unchanged."
)


class NotASeal(ValueError):
    """The text could not be read as a seal."""


@dataclass(frozen=True)
class Seal:
    """What one seal says. `database` is the digest of the history's first entry, which
    every copy of that history shares; `public_key` is base64 of its DER form."""

    database: str
    sequence: int
    digest: str
    sealed_at: str
    where_published: str
    public_key: str
    signature: str = ""

    @property
    def statement(self) -> str:
        """The signed lines, each ended by a line feed."""
        said = (
            self.database,
            str(self.sequence),
            self.digest,
            self.sealed_at,
            self.where_published,
            self.public_key,
        )
        lines = [f"{name}: {value}" for name, value in zip(LINES, said, strict=True)]
        return "\n".join([TITLE, *lines]) + "\n"

    @property
    def text(self) -> str:
        """The whole seal, as it is printed and mailed."""
        return f"{self.statement}\n{SIGNATURE}: {self.signature}\n"

    @property
    def is_genuine(self) -> bool:
        """Whether the signature is that key's over this very statement."""
        try:
            key = serialization.load_der_public_key(_bytes(self.public_key))
            if not isinstance(key, Ed25519PublicKey):
                return False
            key.verify(_bytes(self.signature), self.statement.encode())
        except (InvalidSignature, UnsupportedAlgorithm, ValueError):
            return False
        return True


def key_new() -> Ed25519PrivateKey:
    return Ed25519PrivateKey.generate()


def key_text(key: Ed25519PrivateKey) -> str:
    """The private key as base64 of its 32 bytes, as the key file holds it."""
    return base64.b64encode(key.private_bytes_raw()).decode()


def key_read(text: str) -> Ed25519PrivateKey:
    """The key of such a text; ValueError if it is none."""
    return Ed25519PrivateKey.from_private_bytes(_bytes(text.strip()))


def public_text(key: Ed25519PrivateKey) -> str:
    return base64.b64encode(
        key.public_key().public_bytes(
            serialization.Encoding.DER,
            serialization.PublicFormat.SubjectPublicKeyInfo,
        )
    ).decode()


def seal_sign(
    key: Ed25519PrivateKey,
    *,
    database: str,
    sequence: int,
    digest: str,
    at: dt.datetime,
    where_published: str,
) -> Seal:
    """A seal of that head by that key."""
    said = (database, sequence, digest, plain(at), where_published, public_text(key))
    signature = key.sign(Seal(*said).statement.encode())
    return Seal(*said, base64.b64encode(signature).decode())


def seal_read(text: str, where: str) -> Seal:
    """The seal of such a text; NotASeal says which line is not as expected."""
    lines = text.replace("\r\n", "\n").rstrip("\n").split("\n")
    names = [TITLE, *(f"{name}: " for name in LINES), "", f"{SIGNATURE}: "]
    for number, expected in enumerate(names):
        read = lines[number] if number < len(lines) else "nothing"
        fits = read.startswith(expected) if expected.endswith(" ") else read == expected
        if not fits:
            raise NotASeal(
                NOT_A_SEAL.format(
                    where=where, read=f"“{read}”", expected=expected.strip() or "empty"
                )
            )
    said = [lines[n + 1].removeprefix(f"{name}: ") for n, name in enumerate(LINES)]
    if not said[1].isdecimal():
        raise NotASeal(
            NOT_A_SEAL.format(where=where, read=f"“{lines[2]}”", expected="entry: 123")
        )
    signature = lines[len(LINES) + 2].removeprefix(f"{SIGNATURE}: ")
    database, sequence, digest, sealed_at, published, key = said
    return Seal(database, int(sequence), digest, sealed_at, published, key, signature)


def _bytes(text: str) -> bytes:
    try:
        return base64.b64decode(text, validate=True)
    except binascii.Error as error:
        raise ValueError(str(error)) from error
