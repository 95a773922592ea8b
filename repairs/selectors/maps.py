"""Structure maps filled from the record: of one finding, repair, aircraft or type."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from django.urls import reverse

from fleet.drawing.sheet import Sheet, Window
from fleet.drawing.structure_map import (
    MapMark,
    MapRepair,
    Span,
    StructureMap,
    structure_map_svg,
)
from fleet.location.geometry import Section as SectionGeometry
from fleet.location.geometry import TypeGeometry, geometry_from_toml
from fleet.models import Aircraft, Section, User
from fleet.selectors.aircraft import aircraft_visible
from fleet.selectors.structure import geometry_of
from repairs.models import Finding, MeasuredValue, Repair
from repairs.selectors.hidden import with_hiding
from repairs.selectors.neighbours import (
    Item,
    Patch,
    findings_shown,
    items_in,
    patch_of,
    repairs_shown,
)

BAYS_ALONG, BAYS_ACROSS = 5, 6.5
NARROW = 760.0
NO_LONGER = ("rectified", "closed")
UNDER_WAY = ("planned", "in_work")
HIDES = "over damage not shown to be removed"


def finding_map_svg(finding: Finding, *, user: User) -> str:
    """The surroundings of a finding with all that is recorded there; empty if unplaced.

    Three queries, and more if section and geometry are not selected with the row.
    """
    return item_map_svg(finding, user=user)


def item_map_svg(item: Item, *, user: User) -> str:
    """The surroundings of a finding or repair; empty if it is to be placed."""
    if item.section is None or item.geometry is None:
        return ""
    geometry = geometry_from_toml(item.geometry.content)
    section = geometry.section(item.section.code)
    skin = item.surface if item.surface in section.skins else ""
    sheet = Sheet(
        section,
        item.aircraft.variant.code,
        skin=skin,
        window=_surroundings(section, patch_of(item)),
        width=NARROW,
    )
    shown = sheet.shown
    patch = Patch(shown.along1_mm, shown.along2_mm, shown.across1_mm, shown.across2_mm)
    findings, repairs = items_in(item.aircraft, item.section, patch, user=user)
    return structure_map_svg(
        StructureMap(
            title=f"{item.number} on {item.aircraft.registration}, {section.title}",
            sheet=sheet,
            unit=geometry.unit,
            marks=marks_of(_on_skin(findings, skin), focus=item),
            repairs=repairs_of(_on_skin(repairs, skin), focus=item),
        )
    )


def _surroundings(section: SectionGeometry, patch: Patch) -> Window:
    """A window of some bays each way, wide enough for the place itself."""
    along = BAYS_ALONG * section.frame_pitch_mm
    ends = [section.map1_mm, section.map2_mm]
    low = max(patch.x1_mm - along, min(ends))
    high = min(patch.x2_mm + along, max(ends))
    if not section.is_shell or not section.stringers or patch.s1_mm is None:
        return Window(low, high, section.s1_mm, section.s2_mm)
    across = BAYS_ACROSS * (section.wrap_mm or 0.0) / len(section.stringers)
    start, end = patch.s1_mm - across, (patch.s2_mm or patch.s1_mm) + across
    if end - start >= section.s2_mm - section.s1_mm:
        return Window(low, high, section.s1_mm, section.s2_mm)
    return Window(low, high, start, end)


def aircraft_map(
    aircraft: Aircraft,
    section: Section,
    geometry: TypeGeometry,
    *,
    user: User,
    skin: str = "",
) -> StructureMap:
    """A whole section of one aircraft with its findings and repairs; three queries."""
    shape = geometry.section(section.code)
    findings = findings_shown(Finding.objects.visible_to(user))
    repairs = with_hiding(repairs_shown(Repair.objects.visible_to(user)))
    own = {"aircraft": aircraft, "section": section}
    return StructureMap(
        title=f"{aircraft.registration}, {shape.title}",
        sheet=Sheet(shape, aircraft.variant.code, skin=skin),
        unit=geometry.unit,
        marks=marks_of(_on_skin(findings.filter(**own), skin)),
        repairs=repairs_of(_on_skin(repairs.filter(**own), skin)),
    )


def type_map(
    section: Section, geometry: TypeGeometry, *, skin: str = ""
) -> StructureMap:
    """A whole section of the type, without any record; no query."""
    shape = geometry.section(section.code)
    return StructureMap(
        title=f"{geometry.name}, {shape.title}",
        sheet=Sheet(shape, skin=skin),
        unit=geometry.unit,
    )


def _on_skin(rows: Iterable[Finding] | Iterable[Repair], skin: str) -> list[Item]:
    """Those on the skin looked at, and those whose surface is not stated."""
    return [row for row in rows if not skin or row.surface in ("", skin)]


def marks_of(findings: Sequence[Item], *, focus: Item | None = None) -> list[MapMark]:
    """Findings as marks at their measured size; one query for the sizes."""
    placed = [
        row for row in findings if isinstance(row, Finding) and row.x1_mm is not None
    ]
    sizes = measured_sizes(placed)
    return [
        MapMark(
            label=row.number,
            kind=row.damage_type,
            kind_words=row.get_damage_type_display(),
            title=_title(row, row.get_damage_type_display(), row.get_state_display()),
            href=reverse("finding", args=[row.pk]),
            along=_grown(_along(row), sizes[row.pk][0]),
            across=_wide(row, sizes[row.pk][1]),
            focus=isinstance(focus, Finding) and row.pk == focus.pk,
            faded=row.state in NO_LONGER,
        )
        for row in placed
    ]


def measured_sizes(
    findings: Sequence[Finding],
) -> dict[int, tuple[float | None, float | None]]:
    """Size along and across by the latest measuring that states it; one query.

    Where no direction is recorded the length is taken both ways.
    """
    values = MeasuredValue.objects.filter(
        measurement__finding__in=findings,
        quantity__in=("length_mm", "width_mm", "direction"),
        status="known",
    ).order_by("measurement__number", "pk")
    known: dict[int, dict[str, Any]] = {row.pk: {} for row in findings}
    rows = values.values_list("measurement__finding", "quantity", "value", "word")
    for pk, quantity, value, word in rows:
        known[pk][quantity] = word or value
    return {pk: _sizes(size) for pk, size in known.items()}


def _sizes(known: Mapping[str, Any]) -> tuple[float | None, float | None]:
    length, width = known.get("length_mm"), known.get("width_mm")
    direction = known.get("direction", "")
    if direction == "longitudinal":
        return length, width
    if direction == "circumferential":
        return width, length
    return length, length


def repairs_of(
    repairs: Sequence[Item], *, focus: Item | None = None
) -> list[MapRepair]:
    """Repairs as outlines, at their recorded size where the place is a point."""
    return [
        MapRepair(
            label=row.number,
            title=_repair_title(row),
            href=reverse("repair", args=[row.pk]),
            along=_grown(_along(row), row.length_mm),
            across=_wide(row, row.width_mm),
            focus=isinstance(focus, Repair) and row.pk == focus.pk,
            planned=row.state in UNDER_WAY,
            hides=row.state not in UNDER_WAY and getattr(row, "hides_damage", False),
        )
        for row in repairs
        if isinstance(row, Repair) and row.x1_mm is not None
    ]


def _repair_title(row: Repair) -> str:
    title = _title(row, row.get_kind_display(), row.get_state_display())
    hides = row.state not in UNDER_WAY and getattr(row, "hides_damage", False)
    return f"{title}, {HIDES}" if hides else title


def _title(row: Item, what: str, state: str) -> str:
    return f"{row.number} {what}, {row.place_text}, {state}"


def _along(row: Item) -> Span:
    patch = patch_of(row)
    return patch.x1_mm, patch.x2_mm


def _across(row: Item) -> Span | None:
    if row.s1_mm is None or row.s2_mm is None:
        return None
    return row.s1_mm, row.s2_mm


def _wide(row: Item, size_mm: float | None) -> Span | None:
    across = _across(row)
    return None if across is None else _grown(across, size_mm)


def _grown(span: Span, size_mm: float | None) -> Span:
    """The span, or one of the recorded size about its middle if that is larger."""
    if size_mm is None or span[1] - span[0] >= size_mm:
        return span
    middle = (span[0] + span[1]) / 2
    return middle - size_mm / 2, middle + size_mm / 2


@dataclass(frozen=True)
class MapPage:
    """The page of one section: of a type, or of one of its aircraft."""

    section: Section
    sections: Sequence[Section]
    aircraft: Aircraft | None
    choices: Sequence[Aircraft]
    skins: Sequence[str]
    skin: str
    map: StructureMap | None

    @property
    def svg(self) -> str:
        """The drawing; empty without a geometry in force."""
        return structure_map_svg(self.map) if self.map else ""

    @property
    def items(self) -> list[MapMark | MapRepair]:
        """All that the map names, whether there was room to draw it or not."""
        return [*self.map.marks, *self.map.repairs] if self.map else []


def map_page(
    section: Section, *, user: User, aircraft: Aircraft | None, skin: str
) -> MapPage:
    """The structure map of a section; six queries, whatever is on it.

    A surface with two skins shows one of them, the upper one first.
    """
    geometry = geometry_of(section.aircraft_type)
    shape = geometry.section(section.code) if geometry else None
    skins = shape.skins if shape and shape.skins == ("upper", "lower") else ()
    skin = skin if skin in skins else "".join(skins[:1])
    drawn = None
    if geometry and aircraft:
        drawn = aircraft_map(aircraft, section, geometry, user=user, skin=skin)
    elif geometry:
        drawn = type_map(section, geometry, skin=skin)
    choices = aircraft_visible(user).filter(
        variant__aircraft_type=section.aircraft_type
    )
    return MapPage(
        section=section,
        sections=list(section.aircraft_type.sections.all()),
        aircraft=aircraft,
        choices=list(choices),
        skins=skins,
        skin=skin,
        map=drawn,
    )
