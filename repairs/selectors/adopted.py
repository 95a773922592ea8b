"""Adopted values, each with its words and how it stands."""

from __future__ import annotations

from dataclasses import dataclass

from fleet.models import AdoptedValue, User


@dataclass(frozen=True)
class AdoptedLine:
    """One adopted value; the newest confirmed one of a quantity is what counts."""

    row: AdoptedValue
    counts: bool

    @property
    def awaits(self) -> bool:
        return self.row.second_person is None


def adopted_lines(user: User) -> list[AdoptedLine]:
    """Every adopted value the user may see, by quantity, newest first; one query."""
    rows = (
        AdoptedValue.objects.visible_to(user)
        .select_related("operator", "material", "person", "second_person")
        .order_by("quantity", "-pk")
    )
    counted: set[tuple[object, ...]] = set()
    lines = []
    for row in rows:
        what = (row.operator_id, row.material_id, row.quantity)
        counts = row.second_person_id is not None and what not in counted
        if counts:
            counted.add(what)
        lines.append(AdoptedLine(row, counts))
    return lines
