"""Hostile files: each is refused with what is accepted, or kept where it does nothing.

ISO 32000-1 for PDF; V12: OWASP Application Security Verification Standard 4.0.3, files.
"""

from __future__ import annotations

import io
import struct
import time
import zlib

import pytest
from django.core.exceptions import ValidationError
from django.core.files.uploadedfile import SimpleUploadedFile
from PIL import Image

from fleet import file_checks
from fleet.file_checks import name_plain, pdf_problem
from fleet.models import Attachment
from fleet.services.documents import attachment_store, cleaned_copy
from fleet.services.history import Writing
from tests.factories import NOW, operator_make

pytestmark = pytest.mark.django_db


def picture(kind: str = "PNG", size: tuple[int, int] = (32, 24)) -> bytes:
    drawn = io.BytesIO()
    Image.new("RGB", size, "white").save(drawn, kind)
    return drawn.getvalue()


def pdf(body: bytes = b"", end: bytes = b"%%EOF\n") -> bytes:
    return b"%PDF-1.7\n1 0 obj\n<< /Type /Catalog " + body + b" >>\nendobj\n" + end


def packed(objects: bytes) -> bytes:
    """A stream of objects, as ISO 32000-1, 7.5.7 packs them."""
    stream = zlib.compress(objects)
    head = b"5 0 obj\n<< /Type /ObjStm /N 1 /First 4 /Filter /FlateDecode >>\nstream\n"
    return pdf(end=head + stream + b"\nendstream\nendobj\n%%EOF\n")


def png_claiming(width: int, height: int) -> bytes:
    """A few bytes that say they are a picture of that size."""

    def chunk(kind: bytes, data: bytes) -> bytes:
        check = struct.pack(">I", zlib.crc32(kind + data))
        return struct.pack(">I", len(data)) + kind + data + check

    head = struct.pack(">IIBBBBB", width, height, 8, 2, 0, 0, 0)
    body = zlib.compress(b"\x00" * 64)
    return (
        b"\x89PNG\r\n\x1a\n"
        + chunk(b"IHDR", head)
        + chunk(b"IDAT", body)
        + chunk(b"IEND", b"")
    )


def store(content: bytes, name: str = "dent.jpg") -> Attachment:
    operator = operator_make()
    with Writing(actor=None, action="attachment_store", at=NOW) as w:
        upload = SimpleUploadedFile(name, content)
        return attachment_store(w, operator=operator, upload=upload)


HTML = b"<!doctype html><script>alert(1)</script>"
SVG = b'<?xml version="1.0"?><svg xmlns="http://www.w3.org/2000/svg" onload="x()"/>'


@pytest.mark.parametrize(
    ("content", "name"),
    [
        (HTML, "dent.jpg"),
        (SVG, "dent.png"),
        (b"GIF89a" + HTML, "dent.gif"),
        (b"BM" + b"\x00" * 60, "dent.bmp"),
        (b"PK\x03\x04" + b"\x00" * 60, "report.docx"),
        (b"MZ" + b"\x00" * 60, "dent.png"),
        (b"%!PS-Adobe-3.0\n/x", "dent.pdf"),
        (HTML + b"%PDF-1.7\n%%EOF", "report.pdf"),
        (b"\xff\xd8\xff\xe0" + b"\x00" * 60, "dent.jpg"),
        (picture()[:50], "dent.png"),
    ],
    ids=["html", "svg", "gif", "bmp", "zip", "exe", "ps", "later", "junk", "cut"],
)
def test_what_is_neither_picture_nor_pdf_is_refused_and_told_what_is_accepted(
    content, name
):
    """V12.2.1: by content, not by the name or what the browser says of it."""
    with pytest.raises(ValidationError, match=r"JPEG, PNG, WebP, TIFF\) nor a PDF"):
        store(content, name)
    assert not Attachment.objects.exists()


@pytest.mark.parametrize("kind", ["JPEG", "PNG", "WEBP", "TIFF"])
def test_what_is_accepted_is_drawn_anew(kind):
    row = store(picture(kind), "anything.exe")
    assert row.media_type in ("image/jpeg", "image/png")
    assert (row.width_px, row.height_px) == (32, 24)


def test_a_page_hidden_behind_a_picture_is_not_in_what_is_shown():
    """Two kinds of file in one: the copy that is shown holds the picture only."""
    both = picture("JPEG") + HTML
    assert b"<script>" not in cleaned_copy(both, "dent.jpg").content


@pytest.mark.filterwarnings("ignore::PIL.Image.DecompressionBombWarning")
@pytest.mark.parametrize("size", [(10_000, 10_000), (65_000, 65_000)])
def test_a_picture_that_unpacks_beyond_measure_is_refused_unread(size):
    """V12.1.2: a file of two hundred bytes that would fill the memory."""
    bomb = png_claiming(*size)
    assert len(bomb) < 300
    began = time.monotonic()
    with pytest.raises(ValidationError, match=r"60 million"):
        store(bomb, "dent.png")
    assert time.monotonic() - began < 1


@pytest.mark.parametrize(
    ("content", "word"),
    [
        (pdf(b"/OpenAction << /S /JavaScript /JS (app.alert\\(1\\)) >>"), "a script"),
        (pdf(b"/OpenAction << /S /J#61vaScript >>"), "a script"),
        (pdf(b"/AA << /O << /S /Launch /F (calc.exe) >> >>"), "starts a program"),
        (pdf(b"/AcroForm << /XFA 7 0 R >>"), "a form with a program"),
        (pdf(b"/Annots [ << /Subtype /RichMedia >> ]"), "media that play"),
        (packed(b"9 0 << /S /JavaScript /JS (x) >>"), "a script"),
        (pdf(end=b""), "no end mark"),
    ],
    ids=["script", "escaped", "launch", "form", "media", "packed", "cut"],
)
def test_a_pdf_that_would_do_something_is_refused_and_says_what(content, word):
    """ISO 32000-1: 12.6.4 actions, 7.3.5 escaped names, 7.5.7 packed objects."""
    with pytest.raises(ValidationError, match=word):
        store(content, "report.pdf")


@pytest.mark.parametrize(
    "content",
    [
        pdf(),
        pdf(b"/Title (How /JavaScripting was banned)"),
        packed(b"9 0 << /Type /Page /Contents 3 0 R >>"),
        pdf(end=b"3 0 obj <<>> stream\n/JS /Launch in a picture\nendstream\n%%EOF"),
    ],
    ids=["plain", "word", "packed", "picture"],
)
def test_a_pdf_to_be_read_is_kept_as_it_came(content):
    row = store(content, "report.pdf")
    assert row.media_type == "application/pdf"
    assert row.sha256 == row.original_sha256


def test_a_pdf_that_packs_beyond_measure_is_refused(monkeypatch):
    monkeypatch.setattr(file_checks, "UNPACKED_BYTES", 10_000)
    assert "packs more objects" in pdf_problem(packed(b" " * 1_000_000))


def test_a_pdf_made_to_be_slow_is_judged_in_one_pass():
    began = time.monotonic()
    pdf_problem(pdf(b"<<" * 1_000_000 + b"stream" * 100_000))
    assert time.monotonic() - began < 2


@pytest.mark.parametrize(
    ("sent", "kept"),
    [
        ("../../etc/passwd.jpg", "passwd.jpg"),
        ("C:\\Users\\robin\\dent.jpg", "dent.jpg"),
        ("dent\r\nSet-Cookie: a=b.jpg", "dentSet-Cookie: a=b.jpg"),
        ("de\x00nt.jpg", "dent.jpg"),
        ("gnp.\u202etned.jpg", "gnp.tned.jpg"),
        ("x" * 300 + ".jpg", "x" * 116 + ".jpg"),
        ("..", "file"),
        ("", "file"),
        (None, "file"),
    ],
)
def test_a_name_is_kept_without_folders_and_signs_that_hide(sent, kept):
    """V12.3.1, V12.3.2; the sign that turns the direction of writing included."""
    assert name_plain(sent) == kept
