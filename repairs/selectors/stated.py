"""Inputs that an engineer stated for one finding or repair."""

from __future__ import annotations

from django.db.models import Q, QuerySet

from repairs.models import Finding, Repair, StatedInput


def stated_inputs(subject: Finding | Repair) -> QuerySet[StatedInput]:
    """Those that hold: not replaced and not taken back; one query."""
    held = "finding" if isinstance(subject, Finding) else "repair"
    taken_back = Q(value__isnull=True, word="", spectrum__isnull=True)
    rows = StatedInput.objects.filter(**{held: subject}, replaced_by__isnull=True)
    return rows.exclude(taken_back).select_related("person", "spectrum")


def stated_rows(subject: Finding | Repair, name: str) -> QuerySet[StatedInput]:
    """All that was stated of one input, also what was replaced or taken back."""
    held = "finding" if isinstance(subject, Finding) else "repair"
    return StatedInput.objects.filter(**{held: subject}, name=name)


def stated_source(row: StatedInput) -> str:
    """Who stated it when, and from which page of which document."""
    where = ", ".join(
        part
        for part in (
            row.document,
            f"rev {row.revision}" if row.revision else "",
            f"page {row.page}" if row.page else "",
        )
        if part
    )
    return f"{where}; stated by {row.person} on {row.stated_on}"
