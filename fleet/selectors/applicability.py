"""For which aircraft a document holds, as it says itself; said nowhere is unknown."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from django.db.models import QuerySet

from fleet.models import Aircraft, Document, DocumentApplicability, Operator, User
from fleet.serials import in_range

NOT_FOR_SERIAL = (
    "{document} does not hold for {aircraft}, {variant}, serial {serial}: it says "
    "{ranges}. Cite data that hold for this serial, or correct the applicability "
    "recorded for the document."
)
YES, NO, NOT_RECORDED = "applies", "does not apply", "not recorded"


@dataclass(frozen=True)
class Applies:
    """The answer for one document and one aircraft, and what it rests on."""

    document: Document
    aircraft: Aircraft
    rows: Sequence[DocumentApplicability]

    @property
    def answer(self) -> str:
        if not self.rows:
            return NOT_RECORDED
        return YES if any(_holds(row, self.aircraft) for row in self.rows) else NO

    @property
    def known(self) -> bool:
        return bool(self.rows)

    @property
    def refused(self) -> bool:
        return self.answer == NO

    @property
    def ranges(self) -> str:
        """What the document says, row by row, with the page."""
        return " or ".join(range_words(row) for row in self.rows)

    @property
    def refusal(self) -> str:
        """Why it may not be cited here; empty if nothing recorded is against it."""
        if not self.refused:
            return ""
        return NOT_FOR_SERIAL.format(
            document=self.document,
            aircraft=self.aircraft,
            variant=self.aircraft.variant,
            serial=self.aircraft.serial_number,
            ranges=self.ranges,
        )


def applies_to(document: Document, aircraft: Aircraft) -> Applies:
    """Whether the document holds for the aircraft; one query unless prefetched."""
    return Applies(document, aircraft, list(document.applicability.all()))


def document_refusals(
    operator: Operator, aircraft: Aircraft, reference: str, revision: str
) -> list[str]:
    """What the recorded applicability says against citing a document, if it is known
    by that reference and revision."""
    found = (
        operator.documents.filter(
            reference=reference.strip(), revision=revision.strip()
        )
        .prefetch_related("applicability__variant")
        .first()
    )
    refusal = applies_to(found, aircraft).refusal if found else ""
    return [refusal] if refusal else []


def documents_listed(user: User) -> QuerySet[Document]:
    """Documents of the user's operators with their applicability; two queries."""
    return (
        Document.objects.visible_to(user)
        .select_related("operator")
        .prefetch_related("applicability__variant")
        .order_by("reference", "revision", "pk")
    )


def range_words(row: DocumentApplicability) -> str:
    words = f"{row.variant}, {row}" if row.variant else str(row)
    return f"{words} ({row.page})"


def _holds(row: DocumentApplicability, aircraft: Aircraft) -> bool:
    if row.variant_id is not None and row.variant_id != aircraft.variant_id:
        return False
    return in_range(aircraft.serial_number, row.first_serial, row.last_serial)
