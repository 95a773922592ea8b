"""Documents that records cite, and the files kept as evidence.

A file's bytes are kept as they came, named by their SHA-256, outside the web root. Of
an image a cleaned copy is shown: turned upright, drawn anew, without the metadata that
may tell where and by whom it was taken.
"""

from __future__ import annotations

import datetime as dt
import hashlib
import io
from dataclasses import dataclass

from django.core.exceptions import ValidationError
from django.core.files.uploadedfile import UploadedFile
from PIL import Image, ImageOps, UnidentifiedImageError

from fleet.file_checks import is_pdf, name_plain, pdf_problem
from fleet.kept_files import attachment_path, written_whole
from fleet.models import Attachment, Document, Operator
from fleet.services.history import Writing

MAX_BYTES = 20 * 1024 * 1024
MAX_PIXELS = 60_000_000
IMAGES = {"JPEG": "JPEG", "MPO": "JPEG", "PNG": "PNG", "WEBP": "JPEG", "TIFF": "JPEG"}
"""Formats read, and the format of the copy that is shown."""
READERS = [name for name in IMAGES if name != "MPO"]
"""An MPO is a JPEG with further pictures behind it, and is read as one."""
MEDIA_TYPES = {"JPEG": "image/jpeg", "PNG": "image/png"}
PDF = "application/pdf"

EMPTY = "“{name}” is empty; choose the file again."
TOO_BIG = "“{name}” is {size:.1f} MB; at most {most} MB are kept. Send a smaller copy."
TOO_MANY_PIXELS = (
    "“{name}” is {width} by {height} pixels; at most {most} million are read. "
    "Send a smaller copy."
)
FAR_TOO_MANY = (
    "“{name}” unpacks to far more than the {most} million pixels that are read. Send a "
    "smaller copy."
)
PDF_REFUSED = "“{name}” is not kept: {problem}."
NOT_READABLE = (
    "“{name}” is not an image this program reads (JPEG, PNG, WebP, TIFF) nor a PDF, "
    "or it is damaged. Its content is judged, not its name."
)


@dataclass(frozen=True, slots=True)
class Cleaned:
    """The copy that is shown of a file."""

    content: bytes
    media_type: str
    width_px: int | None = None
    height_px: int | None = None


def document_get_or_create(
    w: Writing,
    *,
    operator: Operator,
    kind: str,
    reference: str,
    revision: str = "",
    title: str = "",
    issued_on: dt.date | None = None,
) -> Document:
    """The operator's document of that reference and revision; recorded if it is new."""
    found = operator.documents.filter(
        reference=reference.strip(), revision=revision.strip()
    ).first()
    if found is not None:
        return found
    return w.create(
        Document(
            operator=operator,
            kind=kind,
            reference=reference.strip(),
            revision=revision.strip(),
            title=title,
            issued_on=issued_on,
        )
    )


def attachment_store(
    w: Writing,
    *,
    operator: Operator,
    upload: UploadedFile,
    kind: str = Attachment.Kind.PHOTOGRAPH,
    title: str = "",
    page: str = "",
    document: Document | None = None,
) -> Attachment:
    """Keep a file and the copy to show; ValidationError says why it is refused.

    The same file sent twice by one operator is one attachment.
    """
    name = name_plain(upload.name)
    content = _bytes_of(upload, name)
    original = hashlib.sha256(content).hexdigest()
    found = operator.attachments.filter(original_sha256=original).first()
    if found is not None:
        return found
    cleaned = cleaned_copy(content, name)
    _keep(content)
    return w.create(
        Attachment(
            operator=operator,
            kind=kind,
            title=title,
            page=page,
            document=document,
            sha256=_keep(cleaned.content),
            original_sha256=original,
            media_type=cleaned.media_type,
            byte_count=len(cleaned.content),
            original_name=name,
            width_px=cleaned.width_px,
            height_px=cleaned.height_px,
            added_by=w.actor,
            added_at=w.at,
        )
    )


def cleaned_copy(content: bytes, name: str) -> Cleaned:
    """The upright image without metadata; a PDF is shown as it came."""
    if is_pdf(content):
        if problem := pdf_problem(content):
            raise ValidationError(PDF_REFUSED.format(name=name, problem=problem))
        return Cleaned(content, PDF)
    try:
        with Image.open(io.BytesIO(content), formats=READERS) as image:
            width, height = image.size
            if width * height > MAX_PIXELS:
                raise ValidationError(
                    TOO_MANY_PIXELS.format(
                        name=name,
                        width=width,
                        height=height,
                        most=MAX_PIXELS // 1_000_000,
                    )
                )
            return _drawn_anew(image, IMAGES[image.format or ""])
    except (UnidentifiedImageError, OSError, ValueError, SyntaxError) as error:
        raise ValidationError(NOT_READABLE.format(name=name)) from error
    except Image.DecompressionBombError as error:
        most = MAX_PIXELS // 1_000_000
        raise ValidationError(FAR_TOO_MANY.format(name=name, most=most)) from error


def _drawn_anew(image: Image.Image, shown_as: str) -> Cleaned:
    upright = ImageOps.exif_transpose(image)
    mode = "RGBA" if shown_as == "PNG" and "A" in upright.getbands() else "RGB"
    bare = Image.new(mode, upright.size)
    bare.paste(upright.convert(mode))
    out = io.BytesIO()
    bare.save(out, format=shown_as, quality=90)
    return Cleaned(out.getvalue(), MEDIA_TYPES[shown_as], *bare.size)


def _bytes_of(upload: UploadedFile, name: str) -> bytes:
    if not upload.size:
        raise ValidationError(EMPTY.format(name=name))
    if upload.size > MAX_BYTES:
        raise ValidationError(
            TOO_BIG.format(
                name=name, size=upload.size / 1_048_576, most=MAX_BYTES // 1_048_576
            )
        )
    upload.seek(0)
    return upload.read()


def _keep(content: bytes) -> str:
    """Write the bytes under their digest, whole or not at all; returns the digest."""
    digest = hashlib.sha256(content).hexdigest()
    path = attachment_path(digest)
    if not path.exists():
        with written_whole(path) as file:
            file.write(content)
    return digest
