"""Files kept as evidence: judged by content, cleaned for showing, kept once."""

from __future__ import annotations

import hashlib
import io

import pytest
from django.core.exceptions import ValidationError
from django.core.files.uploadedfile import SimpleUploadedFile
from PIL import Image

from fleet.models import Attachment
from fleet.services import documents
from fleet.services.documents import (
    attachment_path,
    attachment_store,
    cleaned_copy,
    document_get_or_create,
)
from fleet.services.history import Writing
from tests.factories import NOW, operator_make

pytestmark = pytest.mark.django_db


def picture(kind: str = "JPEG", **saving: object) -> bytes:
    out = io.BytesIO()
    Image.new("RGB", (40, 20), "red").save(out, kind, **saving)
    return out.getvalue()


def store(operator, content: bytes, name: str = "dent.jpg") -> Attachment:
    with Writing(actor=None, action="attachment_store", at=NOW) as w:
        upload = SimpleUploadedFile(name, content)
        return attachment_store(w, operator=operator, upload=upload)


def test_the_original_bytes_and_the_cleaned_copy_are_kept_by_their_digest():
    content = picture(comment=b"taken by somebody")
    row = store(operator_make(), content)
    assert row.original_sha256 == hashlib.sha256(content).hexdigest()
    assert attachment_path(row.original_sha256).read_bytes() == content
    shown = attachment_path(row.sha256).read_bytes()
    assert b"taken by somebody" in content
    assert b"taken by somebody" not in shown
    assert hashlib.sha256(shown).hexdigest() == row.sha256
    assert (row.width_px, row.height_px, row.byte_count) == (40, 20, len(shown))


def test_where_it_was_taken_is_not_shown():
    exif = Image.Exif()
    exif.get_ifd(0x8825)[1] = "N"  # GPS position
    assert not Image.open(
        io.BytesIO(cleaned_copy(picture(exif=exif), "a.jpg").content)
    ).getexif()


def test_the_same_file_twice_is_one_attachment():
    operator = operator_make()
    assert store(operator, picture()) == store(operator, picture(), "again.jpg")
    other = operator_make("OTH", "Other Air")
    assert store(other, picture()).operator == other
    assert Attachment.objects.count() == 2


def test_a_report_is_kept_as_it_came():
    content = b"%PDF-1.7 report %%EOF"
    row = store(operator_make(), content, "report.pdf")
    assert row.media_type == "application/pdf"
    assert row.sha256 == row.original_sha256
    assert row.width_px is None


@pytest.mark.parametrize(
    ("content", "words"),
    [
        (b"", "is empty"),
        (b"<svg onload='x'/>", "not an image this program reads"),
        (b"GIF89a" + b"\x00" * 40, "not an image this program reads"),
        (picture()[:60], "or it is damaged"),
    ],
)
def test_what_cannot_be_read_is_refused_with_the_reason(content, words):
    with pytest.raises(ValidationError, match=words):
        store(operator_make(), content)
    assert not Attachment.objects.exists()


def test_limits_say_what_was_sent_and_what_is_kept(monkeypatch):
    monkeypatch.setattr(documents, "MAX_PIXELS", 500)
    with pytest.raises(ValidationError, match="40 by 20 pixels"):
        store(operator_make(), picture())
    monkeypatch.setattr(documents, "MAX_BYTES", 10)
    with pytest.raises(ValidationError, match="at most 0 MB"):
        store(operator_make("B", "B Air"), picture())


def test_a_name_with_folders_keeps_its_last_part():
    row = store(operator_make(), picture(), "../../etc/passwd.jpg")
    assert row.original_name == "passwd.jpg"


def test_a_document_is_recorded_once_per_revision():
    operator = operator_make()
    with Writing(actor=None, action="documents", at=NOW) as w:
        made = [
            document_get_or_create(
                w,
                operator=operator,
                kind="repair_manual",
                reference=reference,
                revision=revision,
            )
            for reference, revision in (("SRM", "14"), (" SRM ", "14"), ("SRM", "15"))
        ]
    assert made[0] == made[1]
    assert made[2] != made[0]
