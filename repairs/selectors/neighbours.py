"""What else is recorded near a location: here, on the other side, on sister aircraft.

Distances are true, between the nearest edges, on the aircraft's own variant. The same
few queries serve any number of records.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from typing import TypeVar

from django.db.models import F, Q, QuerySet
from django.db.models.functions import Coalesce, Greatest, Least

from fleet.location.geometry import Section as SectionGeometry
from fleet.location.geometry import geometry_from_toml
from fleet.models import Aircraft, Section, User
from repairs.models import Finding, Repair
from repairs.models.findings import ASIDE_STATES
from repairs.selectors.hidden import with_hiding

LONG_MM = 500.0
"""Longer places have an index of their own; its condition is repeated word for word."""

REACH_BAYS = 1
NEWEST_SHOWN = 50
GONE_STATES = ("removed", "superseded", "cancelled")

Item = Finding | Repair
Row = TypeVar("Row", Finding, Repair)


@dataclass(frozen=True)
class Patch:
    """A rectangle of one section [mm]; across is None where nothing is said of it."""

    x1_mm: float
    x2_mm: float
    s1_mm: float | None
    s2_mm: float | None

    def grown(self, along_mm: float, across_mm: float) -> Patch:
        """The patch with a margin all round."""
        s1, s2 = self.s1_mm, self.s2_mm
        return Patch(
            self.x1_mm - along_mm,
            self.x2_mm + along_mm,
            None if s1 is None else s1 - across_mm,
            None if s2 is None else s2 + across_mm,
        )

    def at_least(self, along_mm: float, across_mm: float) -> Patch:
        """The patch, grown about its middle where it is smaller than that."""
        along = max((along_mm - (self.x2_mm - self.x1_mm)) / 2, 0.0)
        across = 0.0
        if self.s1_mm is not None and self.s2_mm is not None:
            across = max((across_mm - (self.s2_mm - self.s1_mm)) / 2, 0.0)
        return self.grown(along, across)


@dataclass(frozen=True)
class Near:
    """A finding or repair nearby, with the gap between the two nearest edges [mm].

    ``along_mm`` is positive aft (outboard, up); ``across_mm`` is None where one of the
    two locations says nothing of the circumference.
    """

    item: Item
    along_mm: float
    across_mm: float | None

    @property
    def is_repair(self) -> bool:
        return isinstance(self.item, Repair)

    @property
    def distance_mm(self) -> float:
        """Straight over the skin; along only where across is not known."""
        return math.hypot(self.along_mm, self.across_mm or 0.0)


@dataclass(frozen=True)
class Neighbours:
    """What is near one location; the reach is measured over the skin."""

    reach_mm: float
    here: list[Near]
    opposite: list[Near]
    sisters: list[Item]


def neighbours(
    item: Item, *, user: User, reach_mm: float | None = None, opposite: bool = False
) -> Neighbours:
    """Findings and repairs near a placed finding or repair; at most seven queries.

    The reach is one bay unless given. ``opposite`` adds the same place on the other
    side of the aircraft. A location still to be placed has no neighbours.
    """
    section = section_geometry(item)
    if section is None:
        return Neighbours(reach_mm or 0.0, [], [], [])
    reach = reach_mm if reach_mm is not None else REACH_BAYS * section.frame_pitch_mm
    patch = patch_of(item)
    here = _near(item, section, patch, item.section, reach, user)
    named = {str(near.item) for near in here}
    mirrored = _opposite(item, section, patch, reach, user) if opposite else []
    return Neighbours(
        reach_mm=reach,
        here=here,
        opposite=[near for near in mirrored if str(near.item) not in named],
        sisters=sister_items(item, section, user=user),
    )


def section_geometry(item: Item) -> SectionGeometry | None:
    """The section's geometry as the location was read with it; None if unplaced."""
    if item.section is None or item.geometry is None:
        return None
    return geometry_from_toml(item.geometry.content).section(item.section.code)


def patch_of(item: Item) -> Patch:
    """The extent of a placed finding or repair; a repair is at least as large as its
    length and width say, about the middle of its place."""
    if item.x1_mm is None or item.x2_mm is None:
        raise ValueError(f"{item} is still to be placed; it has no extent.")
    patch = Patch(item.x1_mm, item.x2_mm, item.s1_mm, item.s2_mm)
    if isinstance(item, Finding):
        return patch
    return patch.at_least(item.length_mm or 0.0, item.width_mm or 0.0)


def in_patch(patch: Patch, wrap_mm: float | None) -> Q:
    """Rows whose extent meets the patch, round a shell too.

    Rows without a statement across count as all round.
    """
    low, high = patch.x1_mm, patch.x2_mm
    along = Q(x1_mm__gte=low - LONG_MM, x1_mm__lte=high, x2_mm__gte=low) | Q(
        x1_mm__lt=low - LONG_MM, x2_mm__gt=F("x1_mm") + LONG_MM, x2_mm__gte=low
    )
    return along & _meets_across(patch, wrap_mm, "s1_mm", "s2_mm")


def repairs_in_patch(
    rows: QuerySet[Repair], patch: Patch, wrap_mm: float | None
) -> QuerySet[Repair]:
    """Repairs whose extent meets the patch, by place and by stated length and width."""
    edges = {
        name: edge(F(of), (F(f"{axis}1_mm") + F(f"{axis}2_mm") + sign * size) / 2.0)
        for axis, size in (
            ("x", Coalesce(F("length_mm"), 0.0)),
            ("s", Coalesce(F("width_mm"), 0.0)),
        )
        for name, of, edge, sign in (
            (f"{axis}_low", f"{axis}1_mm", Least, -1.0),
            (f"{axis}_high", f"{axis}2_mm", Greatest, 1.0),
        )
    }
    met = Q(x_low__lte=patch.x2_mm, x_high__gte=patch.x1_mm)
    across = _meets_across(patch, wrap_mm, "s_low", "s_high")
    return rows.alias(**edges).filter(met & across)


def _meets_across(patch: Patch, wrap_mm: float | None, low: str, high: str) -> Q:
    if patch.s1_mm is None or patch.s2_mm is None:
        return Q()
    if wrap_mm is not None and patch.s2_mm - patch.s1_mm >= wrap_mm:
        return Q()
    across = Q(s1_mm__isnull=True)
    for turn in (-1, 0, 1) if wrap_mm else (0,):
        shift = turn * (wrap_mm or 0.0)
        across |= Q(
            **{
                f"{low}__lte": patch.s2_mm + shift,
                f"{high}__gte": patch.s1_mm + shift,
            }
        )
    return across


def findings_shown(rows: QuerySet[Finding]) -> QuerySet[Finding]:
    """Findings that stand in the record: no duplicates, none voided, none corrected."""
    corrected = Finding.objects.filter(replaces__isnull=False).values("replaces")
    return rows.exclude(state__in=ASIDE_STATES).exclude(pk__in=corrected)


def repairs_shown(rows: QuerySet[Repair]) -> QuerySet[Repair]:
    """Repairs that are on the aircraft or under way."""
    return rows.exclude(state__in=GONE_STATES)


def near_within(item: Item, reach_mm: float) -> list[Near]:
    """All that is recorded within reach of a placed item, whoever asks; two queries."""
    section = section_geometry(item)
    if section is None:
        return []
    return _near(item, section, patch_of(item), item.section, reach_mm, None)


def items_in(
    aircraft: Aircraft, section: Section, patch: Patch, *, user: User | None
) -> tuple[list[Finding], list[Repair]]:
    """Findings and repairs of one aircraft that meet the patch; two queries.

    Those the user may see; without a user all of them.
    """
    wrap = section.wrap_mm

    def of(rows: QuerySet[Row]) -> list[Row]:
        mine = rows.filter(aircraft=aircraft, section=section)
        return list(mine.select_related("aircraft", "section").order_by("x1_mm", "pk"))

    findings, repairs = Finding.objects.all(), Repair.objects.all()
    if user is not None:
        findings, repairs = findings.visible_to(user), repairs.visible_to(user)
    return (
        of(findings_shown(findings).filter(in_patch(patch, wrap))),
        of(with_hiding(repairs_in_patch(repairs_shown(repairs), patch, wrap))),
    )


def _near(
    item: Item,
    section: SectionGeometry,
    patch: Patch,
    row: Section | None,
    reach: float,
    user: User | None,
) -> list[Near]:
    """Those within reach, nearest first, the item itself left out."""
    if row is None:
        return []
    narrowest = min(size for _, size in section.profile) / section.reference_mm
    wide = patch.grown(reach, reach / narrowest)
    findings, repairs = items_in(item.aircraft, row, wide, user=user)
    found = []
    others: list[Item] = [*findings, *repairs]
    for other in others:
        if type(other) is type(item) and other.pk == item.pk:
            continue
        near = _gaps(patch, other, section)
        if near.distance_mm <= reach:
            found.append(near)
    return sorted(found, key=lambda near: (near.distance_mm, near.item.number))


def _gaps(patch: Patch, other: Item, section: SectionGeometry) -> Near:
    theirs = patch_of(other)
    middle = other.map_mm if other.map_mm is not None else theirs.x1_mm
    return Near(other, *gap_between(patch, theirs, section, middle))


def gap_between(
    patch: Patch, theirs: Patch, section: SectionGeometry, map_mm: float
) -> tuple[float, float | None]:
    """True gap between the nearest edges, along and across [mm]."""
    aft, fore = theirs.x1_mm - patch.x2_mm, patch.x1_mm - theirs.x2_mm
    along = aft if aft > 0 else -max(fore, 0.0)
    across = None
    if None not in (patch.s1_mm, patch.s2_mm, theirs.s1_mm, theirs.s2_mm):
        gap = _across_gap(patch, theirs, section.wrap_mm)
        across = gap * section.scale_at(map_mm)
    return along, across


def true_x(section: SectionGeometry, map_mm: float, variant: str) -> float:
    """True distance of a map position; in a plug the variant lacks, its seam's."""
    found = section.x_of(map_mm, variant)
    if found is not None:
        return found
    seam = max(plug.map_mm for plug in section.plugs if plug.map_mm <= map_mm)
    return section.x_of(seam, variant) or seam


def _across_gap(one: Patch, two: Patch, wrap: float | None) -> float:
    """Gap across at the reference size, the shorter way round; 0 if they overlap."""
    a1, a2 = one.s1_mm or 0.0, one.s2_mm or 0.0
    b1, b2 = two.s1_mm or 0.0, two.s2_mm or 0.0
    shifts = (-1, 0, 1) if wrap else (0,)
    turned = [(b1 + n * (wrap or 0.0), b2 + n * (wrap or 0.0)) for n in shifts]
    return min(max(start - a2, a1 - end, 0.0) for start, end in turned)


def _opposite(
    item: Item, section: SectionGeometry, patch: Patch, reach: float, user: User
) -> list[Near]:
    """Those near the mirrored place: across the crown line, or on the other wing."""
    if patch.s1_mm is None or patch.s2_mm is None:
        return []
    mirrored = replace(patch, s1_mm=-patch.s2_mm, s2_mm=-patch.s1_mm)
    row = item.section
    if section.side and row is not None:
        other = "R" if section.side == "L" else "L"
        row = Section.objects.filter(
            aircraft_type_id=row.aircraft_type_id,
            side=other,
            code=row.code.removesuffix(section.side) + other,
        ).first()
        if not section.is_shell:
            mirrored = patch
    return _near(item, section, mirrored, row, reach, user)


def sister_items(item: Item, section: SectionGeometry, *, user: User) -> list[Item]:
    """Newest findings and repairs in the same and next bays on sister aircraft.

    By the half-bays that all variants share, so that a plug does not shift the place.
    Two queries.
    """
    if item.along_half is None:
        return []
    cells = Q(along_half__range=(item.along_half - 2, item.along_half + 2))
    if item.around_half is not None:
        near = range(item.around_half - 2, item.around_half + 3)
        halves = 2 * len(section.stringers)
        around = [k % halves for k in near] if section.wrap_mm and halves else near
        cells &= Q(around_half__in=list(around)) | Q(around_half__isnull=True)
    findings = findings_shown(Finding.objects.visible_to(user))
    repairs = repairs_shown(Repair.objects.visible_to(user))
    found: list[Item] = []
    for rows in (findings.order_by("-found_on", "-pk"), repairs.order_by("-pk")):
        others = (
            rows.filter(cells, section=item.section)
            .exclude(aircraft=item.aircraft_id)
            .filter(aircraft__operator=item.aircraft.operator_id)
        )
        found += others.select_related("aircraft", "section")[:NEWEST_SHOWN]
    return found
