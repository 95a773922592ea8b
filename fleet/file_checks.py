"""What a file that somebody sends may be: judged by its bytes, never by its name.

A PDF is kept as it came and only ever downloaded, so what is looked for here is what it
says openly that it would do; a reader should treat it as any file from outside.
"""

from __future__ import annotations

import re
import zlib
from collections.abc import Iterator
from pathlib import PureWindowsPath

NAME_LENGTH = 120
UNPACKED_BYTES = 32 * 1024 * 1024
"""As much as is unpacked of all streams of objects together; a file that packs more is
no document that anybody made to be read."""
DICTIONARY = 2048
"""Bytes before a stream in which its dictionary stands."""
END_WITHIN = 1024
"""Bytes from the end in which the end mark stands: ISO 32000-1, annex H, note 18."""

STARTS = re.compile(rb"%PDF-[12]\.\d")
ESCAPED = re.compile(rb"#([0-9A-Fa-f]{2})")
ACTIVE = {
    b"JavaScript": "a script",
    b"JS": "a script",
    b"Launch": "an action that starts a program",
    b"RichMedia": "embedded media that play",
    b"XFA": "a form with a program in it",
}
ACTIVE_NAME = re.compile(rb"/(" + b"|".join(ACTIVE) + rb")(?![A-Za-z0-9_])")

TRUNCATED = "it has no end mark: it was cut off on its way"
PACKED = "it packs more objects than a document to be read does"
HOLDS = "it holds {what}; print it to a plain PDF"


def name_plain(name: str | None) -> str:
    """The file's own name without folders, signs that do not print, and excess."""
    last = PureWindowsPath((name or "").replace("\x00", "")).name
    shown = "".join(sign for sign in last if sign.isprintable()).strip(". ")
    return shown[-NAME_LENGTH:] or "file"


def is_pdf(content: bytes) -> bool:
    return STARTS.match(content) is not None


def pdf_problem(content: bytes) -> str:
    """Why a PDF is not kept; empty: nothing speaks against it."""
    if b"%%EOF" not in content[-END_WITHIN:]:
        return TRUNCATED
    left = UNPACKED_BYTES
    for openly, stream in _pieces(content):
        read = [openly]
        if b"ObjStm" in _unescaped(openly[-DICTIONARY:]):
            read.append(_inflated(stream, left))
            left -= len(read[1])
            if left <= 0:
                return PACKED
        for part in read:
            if named := ACTIVE_NAME.search(_unescaped(part)):
                return HOLDS.format(what=ACTIVE[named[1]])
    return ""


def _pieces(content: bytes) -> Iterator[tuple[bytes, bytes]]:
    """What stands openly before each stream, and the stream; in one pass."""
    begin = 0
    while (word := content.find(b"stream", begin)) >= 0:
        end = content.find(b"endstream", word)
        end = len(content) if end < 0 else end
        stream = content[word + len(b"stream") : end].lstrip(b"\r\n")
        yield content[begin:word], stream
        begin = end + len(b"endstream")
    yield content[begin:], b""


def _unescaped(content: bytes) -> bytes:
    """Names as they are meant: /J#61vaScript is /JavaScript (ISO 32000-1, 7.3.5)."""
    return ESCAPED.sub(lambda found: bytes([int(found[1], 16)]), content)


def _inflated(stream: bytes, most: int) -> bytes:
    """The unpacked stream, at most so many bytes of it; nothing if it is no deflate."""
    try:
        return zlib.decompressobj().decompress(stream, most)
    except zlib.error:
        return b""
