"""Record numbers: per operator and kind, given in the transaction, never reused."""

from __future__ import annotations

from fleet.models import Operator, RecordNumber
from fleet.services.history import Writing


def number_next(w: Writing, *, operator: Operator, kind: str) -> str:
    """The next number, as F-0231; two writers at once get different ones."""
    return numbers_next(w, operator=operator, kind=kind, count=1)[0]


def numbers_next(w: Writing, *, operator: Operator, kind: str, count: int) -> list[str]:
    """Several next numbers in order."""
    row, _ = RecordNumber.objects.select_for_update().get_or_create(
        operator=operator, kind=kind
    )
    first = row.last + 1
    row.last += count
    row.save(update_fields=["last"])
    return [f"{kind}-{number:04d}" for number in range(first, first + count)]
