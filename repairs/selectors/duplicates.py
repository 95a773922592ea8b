"""Earlier findings that may be the same damage: shown and asked, never merged.

Candidates are of the same aircraft and damage type, within 6 in along and one bay
across, with a size within a factor of two where both are known.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from repairs.measurements import SIZE_ORDER
from repairs.models import Finding, MeasuredValue
from repairs.selectors.neighbours import (
    findings_shown,
    in_patch,
    patch_of,
    section_geometry,
)

ALONG_MM = 6 * 25.4
SIZE_FACTOR = 2.0
MOST_SHOWN = 8


@dataclass(frozen=True, slots=True)
class Candidate:
    """An earlier finding, how far it lies along, and how alike it is, 0 to 1."""

    finding: Finding
    along_mm: float
    score: float
    size_mm: float | None


def duplicate_candidates(finding: Finding, sizes: dict[str, float]) -> list[Candidate]:
    """The likeliest first, for a finding not yet saved or saved before; two queries.

    A finding to be placed is compared with others of its type that are to be placed.
    """
    rows = findings_shown(
        Finding.objects.filter(
            aircraft=finding.aircraft_id, damage_type=finding.damage_type
        )
    )
    if finding.pk is not None:
        rows = rows.filter(pk__lt=finding.pk)
    section = section_geometry(finding)
    if section is None or finding.section is None:
        near = rows.filter(section__isnull=True)
    else:
        bay = (section.wrap_mm or 0.0) / max(len(section.stringers), 1)
        patch = patch_of(finding).grown(ALONG_MM, bay)
        near = rows.filter(
            in_patch(patch, finding.section.wrap_mm), section=finding.section_id
        )
    found = list(near.select_related("aircraft").order_by("-found_on", "-pk"))
    known = _sizes([row.pk for row in found])
    candidates = [
        _candidate(finding, row, sizes, known.get(row.pk, {})) for row in found
    ]
    alike = [one for one in candidates if one is not None]
    return sorted(alike, key=lambda one: (-one.score, one.finding.pk))[:MOST_SHOWN]


def _candidate(
    finding: Finding, row: Finding, sizes: dict[str, float], theirs: dict[str, float]
) -> Candidate | None:
    quantity = next((q for q in SIZE_ORDER if q in sizes and q in theirs), None)
    ratio = 1.0
    if quantity is not None and sizes[quantity] and theirs[quantity]:
        ratio = sizes[quantity] / theirs[quantity]
    closeness = min(ratio, 1 / ratio)
    if closeness < 1 / SIZE_FACTOR:
        return None
    along = abs(_middle(finding) - _middle(row))
    score = closeness * (1 - 0.5 * min(along / ALONG_MM, 1.0))
    return Candidate(row, along, score, theirs.get("length_mm"))


def _middle(row: Finding) -> float:
    if row.x1_mm is None or row.x2_mm is None:
        return 0.0
    return (row.x1_mm + row.x2_mm) / 2


def _sizes(keys: Iterable[int]) -> dict[int, dict[str, float]]:
    """The sizes last measured, by finding."""
    found: dict[int, dict[str, float]] = {}
    rows = (
        MeasuredValue.objects.filter(
            measurement__finding__in=list(keys), value__isnull=False
        )
        .order_by("measurement__number")
        .values_list("measurement__finding_id", "quantity", "value")
    )
    for key, quantity, value in rows:
        found.setdefault(key, {})[quantity] = value
    return found
