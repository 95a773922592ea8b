"""What was last measured of a finding, or of the finding a repair answers."""

from __future__ import annotations

from dataclasses import dataclass, field

from repairs.models import Finding, MeasuredValue, Repair


@dataclass(frozen=True, slots=True)
class Latest:
    """The finding whose measurements speak for a subject, with the latest of them."""

    finding: Finding | None
    values: dict[str, MeasuredValue] = field(default_factory=dict)

    def word(self, quantity: str) -> str:
        """A measured word, or '' where none is known."""
        row = self.values.get(quantity)
        return row.word if row else ""


def measured_of(subject: Finding | Repair) -> Latest:
    """What was measured of a finding, or of the first finding a repair answers."""
    if isinstance(subject, Finding):
        return Latest(subject, _latest_values(subject))
    row = subject.finding_rows.select_related("finding").order_by("pk").first()
    return Latest(row.finding, _latest_values(row.finding)) if row else Latest(None)


def _latest_values(finding: Finding) -> dict[str, MeasuredValue]:
    """What was last measured of each dimension; one query."""
    rows = (
        MeasuredValue.objects.filter(
            measurement__finding=finding,
            measurement__replaced_by__isnull=True,
            status="known",
        )
        .select_related("measurement")
        .order_by("pk")
    )
    ordered = sorted(rows, key=lambda row: (row.measurement.number, row.pk))
    return {row.quantity: row for row in ordered}
