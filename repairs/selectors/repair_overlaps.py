"""Repair over repair: extents that meet, what was said of them, and who gave way."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from django.db.models import Q

from fleet.models import Aircraft
from repairs.described import APART, OVER, read_apart
from repairs.models import Repair, RepairState
from repairs.selectors.edges import stated_extent
from repairs.selectors.neighbours import section_geometry

MEETS = (RepairState.EMBODIED, RepairState.IN_WORK, RepairState.PLANNED)
SHOWN = (*MEETS, RepairState.SUPERSEDED)

SUPERSEDES, SUPERSEDED = "supersedes it", "superseded by it"
LIES_OVER, LIES_UNDER = "lies over it", "lies under it"
DOES_NOT_TOUCH, NOT_SAID = "does not touch it", "how they lie is not said"

Span = tuple[float, float]


@dataclass(frozen=True)
class Overlap:
    """Another repair whose extent meets this one's, and how the two lie."""

    repair: Repair
    how: str

    @property
    def is_said(self) -> bool:
        return self.how != NOT_SAID


def overlaps_of(repair: Repair) -> list[Overlap]:
    """Repairs on the aircraft that this one meets, the oldest first; one query."""
    section = section_geometry(repair)
    if section is None:
        return []
    rows = repair.aircraft.repairs.filter(
        Q(section=repair.section_id, state__in=SHOWN) | Q(superseded_by=repair)
    ).exclude(pk=repair.pk)
    met = [row for row in rows if _meet(repair, row, section.wrap_mm)]
    met.sort(key=lambda row: (str(row.released_on or "9999"), row.pk))
    told = [Overlap(row, _how(repair, row)) for row in met]
    return [
        one for one in told if one.is_said or one.repair.state != RepairState.SUPERSEDED
    ]


def repairs_met(
    aircraft: Aircraft, drawn: Repair, *, but: Iterable[Repair] = ()
) -> list[Repair]:
    """Embodied repairs that a repair not saved yet would meet; `drawn` is its place."""
    section = section_geometry(drawn)
    if section is None:
        return []
    rows = aircraft.repairs.filter(
        section=drawn.section_id, state=RepairState.EMBODIED
    ).exclude(pk__in=[row.pk for row in but])
    return [row for row in rows.order_by("pk") if _meet(drawn, row, section.wrap_mm)]


def chain_of(repair: Repair) -> Sequence[Repair]:
    """The repair with all that gave way to it and all it gave way to, oldest first.

    Empty for one that stands alone; one query.
    """
    rows = repair.aircraft.repairs.filter(
        Q(superseded_by__isnull=False) | Q(supersedes__isnull=False)
    ).distinct()
    by_key = {row.pk: row for row in rows}
    found = {repair.pk}
    while True:
        more = {
            pk
            for pk, row in by_key.items()
            if row.superseded_by_id in found
            or any(by_key[f].superseded_by_id == pk for f in found if f in by_key)
        }
        if more <= found:
            break
        found |= more
    if len(found) < 2:
        return []
    chain = [by_key[pk] for pk in found if pk in by_key]
    return sorted(chain, key=lambda row: (str(row.released_on or "9999"), row.pk))


def _how(repair: Repair, other: Repair) -> str:
    if other.superseded_by_id == repair.pk:
        return SUPERSEDES
    if repair.superseded_by_id == other.pk:
        return SUPERSEDED
    own = read_apart(repair.description).lies.get(other.number)
    if own is not None:
        return {OVER: LIES_OVER, APART: DOES_NOT_TOUCH}[own]
    theirs = read_apart(other.description).lies.get(repair.number)
    if theirs is not None:
        return {OVER: LIES_UNDER, APART: DOES_NOT_TOUCH}[theirs]
    return NOT_SAID


def _meet(one: Repair, two: Repair, wrap_mm: float | None) -> bool:
    """Whether both extents share a point; where nothing is said across, not known."""
    along = (
        stated_extent(one.x1_mm, one.x2_mm, one.length_mm),
        stated_extent(two.x1_mm, two.x2_mm, two.length_mm),
    )
    across = (
        stated_extent(one.s1_mm, one.s2_mm, one.width_mm),
        stated_extent(two.s1_mm, two.s2_mm, two.width_mm),
    )
    return _share(*along, None) and _share(*across, wrap_mm)


def _share(one: Span | None, two: Span | None, wrap_mm: float | None) -> bool:
    if one is None or two is None:
        return False
    turns = (-wrap_mm, 0.0, wrap_mm) if wrap_mm else (0.0,)
    return any(one[0] <= two[1] + t and two[0] + t <= one[1] for t in turns)
