"""The head of a survey's sheet: which aircraft, what was looked at, when, by whom."""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass, field

from django.core.files.uploadedfile import UploadedFile

from fleet.due import Counters
from fleet.location import LocationRefused
from fleet.models import Aircraft, Attachment, Document, Person
from fleet.services.documents import attachment_store, document_get_or_create
from fleet.services.history import Writing
from repairs.selectors.surveys import area_read

NO_AREA = (
    "Say what was looked at: “whole aircraft”, a section, or a range of locations."
)
BAD_AREA = (
    "“{area}” is not an area: write “whole aircraft”, a section ({sections}), or a "
    "range of locations such as STA 500 to 700, S-4L to S-8L. {why}"
)
IN_FUTURE = "{day} lies after today, {today}; record the survey when it is made."
DOCUMENT_FIRST = "Give the reference of the sheet that the file is a copy of."


@dataclass(frozen=True, slots=True)
class SurveyEntry:
    """One look at the aircraft, as the sheet's head has it."""

    aircraft: Aircraft
    area: str
    surveyed_on: dt.date
    surveyed_by: Person
    at: Counters = field(default_factory=Counters)
    document_reference: str = ""
    document_revision: str = ""
    upload: UploadedFile | None = None


def entry_problems(entry: SurveyEntry, today: dt.date) -> dict[str, str]:
    problems = {}
    if not entry.area.strip():
        problems["area"] = NO_AREA
    else:
        try:
            area_read(entry.aircraft, entry.area)
        except LocationRefused as refused:
            names = entry.aircraft.variant.aircraft_type.sections.values_list(
                "name", flat=True
            )
            problems["area"] = BAD_AREA.format(
                area=entry.area, sections=", ".join(names), why=refused.message
            )
    if entry.surveyed_on > today:
        problems["surveyed_on"] = IN_FUTURE.format(day=entry.surveyed_on, today=today)
    if entry.upload is not None and not entry.document_reference.strip():
        problems["document_reference"] = DOCUMENT_FIRST
    return problems


def sheet_keep(w: Writing, entry: SurveyEntry) -> Document | None:
    """The document that the signed sheet is, with its copy if one was sent."""
    if not entry.document_reference.strip():
        return None
    operator = entry.aircraft.operator
    document = document_get_or_create(
        w,
        operator=operator,
        kind=Document.Kind.OTHER,
        reference=entry.document_reference,
        revision=entry.document_revision,
    )
    if entry.upload is not None:
        attachment_store(
            w,
            operator=operator,
            upload=entry.upload,
            kind=Attachment.Kind.SCAN,
            title=str(document),
            document=document,
        )
    return document
