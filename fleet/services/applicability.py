"""Recording for which variants and serials a document says that it holds."""

from __future__ import annotations

import datetime as dt

from django.core.exceptions import ValidationError

from fleet.models import Document, DocumentApplicability, User, Variant
from fleet.serials import in_range, serial_pieces
from fleet.services.history import Writing

PAGE_NEEDED = "Name the page or paragraph where the document says so."
TURNED = "The range runs from {first} to {last}, so no serial lies in it."
NO_SERIAL = "“{text}” has no letter or number; write the serial as on the data plate."


def document_applicability_record(
    *,
    document: Document,
    page: str,
    actor: User | None,
    at: dt.datetime,
    variant: Variant | None = None,
    first_serial: str = "",
    last_serial: str = "",
) -> DocumentApplicability:
    """One range of a document; several are read as "or". Empty ends are open."""
    first, last = first_serial.strip(), last_serial.strip()
    problems = {}
    if not page.strip():
        problems["page"] = PAGE_NEEDED
    for name, text in (("first_serial", first), ("last_serial", last)):
        if text and not serial_pieces(text):
            problems[name] = NO_SERIAL.format(text=text)
    if not problems and first and last and not in_range(first, first, last):
        problems["last_serial"] = TURNED.format(first=first, last=last)
    if problems:
        raise ValidationError(problems)
    with Writing(
        actor=actor,
        action="document_applicability_record",
        at=at,
        operator=document.operator,
    ) as w:
        return w.create(
            DocumentApplicability(
                document=document,
                variant=variant,
                first_serial=first,
                last_serial=last,
                page=page.strip(),
            )
        )
