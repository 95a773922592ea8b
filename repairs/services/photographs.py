"""Photographs of findings, repairs and their measurements."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from dataclasses import dataclass

from django.core.files.uploadedfile import UploadedFile

from fleet.models import User
from fleet.services.aircraft import stream_of
from fleet.services.documents import attachment_store
from fleet.services.history import Writing
from repairs.models import Finding, Photograph, Repair

Shown = Finding | Repair


@dataclass(frozen=True, slots=True)
class Photo:
    """A file as sent, what it shows, and in words."""

    upload: UploadedFile
    role: str
    caption: str = ""


def photographs_add(
    *,
    shown: Shown,
    photos: Sequence[Photo],
    actor: User | None,
    at: dt.datetime,
) -> list[Photograph]:
    """Further photographs of a record; ValidationError when a file is refused."""
    with Writing(
        actor=actor,
        action="photographs_add",
        at=at,
        operator=shown.aircraft.operator,
        stream=stream_of(shown.aircraft),
    ) as w:
        return photographs_write(w, shown=shown, photos=photos)


def photographs_write(
    w: Writing, *, shown: Shown, photos: Sequence[Photo]
) -> list[Photograph]:
    """Inside a writing: the files kept and tied to the record."""
    column = "finding" if isinstance(shown, Finding) else "repair"
    return [
        w.create(
            Photograph(
                attachment=attachment_store(
                    w,
                    operator=shown.aircraft.operator,
                    upload=photo.upload,
                    title=photo.caption,
                ),
                role=photo.role,
                caption=photo.caption,
                **{column: shown},
            )
        )
        for photo in photos
    ]
