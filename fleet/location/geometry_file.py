"""The geometry file of an aircraft type: TOML text to a checked TypeGeometry.

Every problem of the file is named at once: the item, what is wrong, how to mend it.
"""

from __future__ import annotations

import tomllib
from dataclasses import replace
from functools import lru_cache
from typing import Any

from fleet.location.parts import Panel, PanelMaterial, Variant
from fleet.location.parts_file import panel_from
from fleet.location.position_file import stations_of
from fleet.location.section_file import SectionFile
from fleet.location.sections import Section
from fleet.location.spectrum_file import WING_SEQUENCE, spectra_of
from fleet.location.table import Table
from fleet.location.typegeometry import (
    DetectableSize,
    Detection,
    FatiguePolicy,
    Pressures,
    RogueFlaw,
    Spectrum,
    TypeGeometry,
    Zone,
)

FORMAT = 1
FATIGUE_USES = ("stress_life", "growth_threshold", "growth_repeat")
LEVELS = ("any", "below", "above")

NO_SPECTRUM = "{where}: spectrum “{name}” is not in spectra; listed are: {listed}."
NOT_THERE = (
    "{where}: “{name}” is the standard wing sequence, which holds for the lower "
    "surface of a transport's wing only; name a spectrum of this place."
)
NOT_TOML = "the file is not valid TOML: {error}. Mend that line first."


class GeometryFileError(ValueError):
    """A geometry file with problems; `problems` names each one."""

    def __init__(self, problems: list[str]) -> None:
        super().__init__("\n".join(problems))
        self.problems = problems


@lru_cache(maxsize=16)
def geometry_from_toml(text: str) -> TypeGeometry:
    """The type described by the text of a geometry file, or GeometryFileError."""
    try:
        data = tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        raise GeometryFileError([NOT_TOML.format(error=error)]) from error
    problems: list[str] = []
    geometry = _type(Table(data, "file", problems))
    if problems:
        raise GeometryFileError(problems)
    return geometry


def _type(top: Table) -> TypeGeometry:
    if top.whole("format", least=1) != FORMAT:
        top.wrong(f"this program reads geometry format {FORMAT}.")
    head = top.table("type") or Table({}, "type", [])
    code, name = head.text("code"), head.text("name")
    unit = head.choice("unit", ("in", "mm"))
    ceiling = head.whole("ceiling_ft", optional=True, least=1)
    source = head.text("source")
    head.done()
    variants = _variants(top)
    materials = _materials(top)
    codes = tuple(v.code for v in variants)
    sections: list[Section] = []
    unread: set[str] = set()
    for table in top.tables("sections", "code"):
        read = _sections(table, unit, codes, materials)
        sections.extend(read)
        if not table.ok:
            unread |= _codes_within(table.data) - {s.code for s in read}
    _unique(top, "section", [s.code for s in sections])
    geometry = TypeGeometry(
        code=code,
        name=name,
        unit=unit,
        ceiling_ft=ceiling,
        source=source,
        variants=variants,
        sections=tuple(sections),
        zones=_zones(top, unit, sections, unread),
        pressures=_pressures(top),
        fatigue_policies=_fatigue(top),
        detectable_sizes=_detectable(top),
        rogue_flaws=_rogue(top),
        spectra=_spectra(top, sections),
    )
    top.done()
    return geometry


def _variants(top: Table) -> tuple[Variant, ...]:
    found = []
    for t in top.tables("variants", "code"):
        variant = Variant(
            code=t.text("code"),
            name=t.text("name"),
            design_service_goal_fc=t.whole(
                "design_service_goal_fc", optional=True, least=1
            ),
            limit_of_validity_fc=t.whole(
                "limit_of_validity_fc", optional=True, least=1
            ),
            limit_of_validity_fh=t.whole(
                "limit_of_validity_fh", optional=True, least=1
            ),
            source=t.text("source"),
        )
        if t.done():
            found.append(variant)
    if not top.data.get("variants"):
        top.wrong("no variant is given; add at least one [[variants]].")
    _unique(top, "variant", [v.code for v in found])
    return tuple(found)


def _materials(top: Table) -> dict[str, PanelMaterial]:
    found = {}
    for t in top.tables("panel_materials", "key"):
        key = t.text("key")
        material = PanelMaterial(
            name=t.text("name"),
            temper=t.text("temper", optional=True),
            form=t.text("form"),
            clad=t.flag("clad"),
            in_materials=t.flag("in_materials", default=True),
            clad_mm_per_side=t.measure_or_none("clad_per_side", least=0.0),
        )
        if t.done():
            found[key] = material
    return found


def _sections(
    table: Table,
    unit: str,
    variants: tuple[str, ...],
    materials: dict[str, PanelMaterial],
) -> list[Section]:
    """The section, its mirror copies, and the door sections that fill its cut-outs."""
    file = SectionFile(table, unit, variants, materials)
    if not table.ok:
        return []
    section = file.build()
    found = [section]
    for copy in table.tables("copies", "code"):
        other = replace(
            section,
            code=copy.text("code"),
            title=copy.text("title"),
            side=copy.choice("side", ("L", "R")) if "side" in copy.data else "",
            words=copy.texts("words", optional=True),
        )
        if copy.done():
            found.append(other)
    for t in table.tables("cutouts"):
        door = t.table("door", optional=True)
        box = next((c.box for c in section.cutouts if c.label == t.text("label")), None)
        if door is None or box is None:
            continue
        code, title = door.text("section"), door.text("title")
        ata = door.text("ata_chapter", optional=True)
        skin = door.table("skin") or Table({}, door.where, [])
        skin.data.setdefault("label", f"{code} SKIN")
        panel = panel_from(skin, file.lines, box)
        if skin.done() and door.done():
            found.append(
                replace(
                    section, code=code, title=title, ata=ata, parent=section.code,
                    words=(), map1_mm=box.map1_mm, map2_mm=box.map2_mm,
                    s1_mm=box.s1_mm, s2_mm=box.s2_mm, panels=(panel,), cutouts=(),
                    joints=(), planes=(), side="L" if box.s2_mm <= 0.0 else "R",
                )
            )  # fmt: skip
    table.done()
    return found


def _codes_within(data: dict[str, Any]) -> set[str]:
    """Codes of the sections that a table would have given, had it been right."""
    rows = [data, *_dicts(data.get("copies"))]
    doors = [c.get("door") for c in _dicts(data.get("cutouts"))]
    codes = [row.get("code") for row in rows]
    codes += [door.get("section") for door in _dicts(doors)]
    return {code for code in codes if isinstance(code, str)}


def _dicts(rows: Any) -> list[dict[str, Any]]:
    return [r for r in rows if isinstance(r, dict)] if isinstance(rows, list) else []


def _zones(
    top: Table, unit: str, sections: list[Section], unread: set[str]
) -> tuple[Zone, ...]:
    by_code = {s.code: s for s in sections}
    found = []
    for t in top.tables("zones", "code"):
        name = t.text("section")
        section = by_code.get(name)
        if section is None:
            if name and name not in unread:
                t.wrong(f"section “{name}” is not listed; use {', '.join(by_code)}.")
            continue
        start, end = section.map1_mm, section.map2_mm
        if "stations" in t.data:
            start, end = stations_of(section, unit, t)
        level = t.choice("level", LEVELS, default="any")
        zone = Zone(
            code=t.text("code"),
            title=t.text("title"),
            section=section.code,
            map1_mm=start,
            map2_mm=end,
            level="" if level == "any" else level,
            side=t.choice("side", ("L", "R")) if "side" in t.data else "",
        )
        if t.done():
            found.append(zone)
    _unique(top, "zone", [z.code for z in found])
    return tuple(found)


def _pressures(top: Table) -> Pressures | None:
    t = top.table("pressures", optional=True)
    if t is None:
        return None
    found = Pressures(
        normal_mpa=t.measure("normal", "stress", above=0.0),
        relief_mpa=t.measure("relief", "stress", above=0.0),
        suction_mpa=t.measure("suction", "stress", least=0.0),
        source=t.text("source"),
    )
    if t.done() and found.relief_mpa < found.normal_mpa:
        t.wrong("the relief pressure is below the normal one; exchange or correct.")
    return found


def _fatigue(top: Table) -> tuple[FatiguePolicy, ...]:
    found = []
    for t in top.tables("fatigue_policies", "use"):
        policy = FatiguePolicy(
            use=t.choice("use", FATIGUE_USES),
            factor=t.number("factor") or 0.0,
            multiplies=t.text("multiplies"),
            log_life_s=t.number("log_life_s", optional=True),
            specimens=t.whole("specimens", optional=True, least=1),
            survival=t.number("survival", optional=True),
            confidence=t.number("confidence", optional=True),
            spectrum_severity_inside=t.flag("spectrum_severity_inside"),
            source=t.text("source"),
        )
        if policy.factor < 1.0:
            t.wrong("“factor” is below 1; it divides a life and may not lengthen it.")
        if t.done():
            found.append(policy)
    _unique(top, "fatigue policy", [p.use for p in found])
    return tuple(found)


def _detectable(top: Table) -> tuple[DetectableSize, ...]:
    found = []
    for t in top.tables("detectable_sizes", "method"):
        size = DetectableSize(
            method=t.text("method"),
            detail=t.text("detail"),
            size_mm=t.measure("size", above=0.0),
            hidden_mm=t.measure("hidden", least=0.0),
            source=t.text("source"),
            detection=_detection(t),
        )
        if t.done():
            found.append(size)
    _unique(top, "detectable size", [f"{d.method}, {d.detail}" for d in found])
    return tuple(found)


def _detection(size: Table) -> Detection | None:
    t = size.table("detection", optional=True)
    if t is None:
        return None
    found = Detection(
        link=t.choice("link", ("normal", "logistic")),
        half_found_mm=t.measure("half_found", above=0.0),
        deviation=t.number("deviation") or 0.0,
        smallest_mm=t.measure("smallest", above=0.0),
        largest_mm=t.measure("largest", above=0.0),
        flaws=t.whole("flaws", least=1) or 0,
        done=t.number("done") or 0.0,
        never=t.number("never") or 0.0,
    )
    if not found.deviation > 0:
        t.wrong("“deviation” is the spread of ln length; it is above 0.")
    if not found.smallest_mm < found.largest_mm:
        t.wrong("“smallest” is not below “largest”, the lengths that were tried.")
    if not (0 <= found.done <= 1 and 0 <= found.never <= 1):
        t.wrong("“done” and “never” are shares from 0 to 1.")
    return found if t.done() else None


def _rogue(top: Table) -> tuple[RogueFlaw, ...]:
    found = []
    for t in top.tables("rogue_flaws", "where"):
        flaw = RogueFlaw(
            where=t.text("where"),
            shape=t.text("shape"),
            size_mm=t.measure("size", above=0.0),
            source=t.text("source"),
        )
        if t.done():
            found.append(flaw)
    _unique(top, "rogue flaw", [r.where for r in found])
    return tuple(found)


def _spectra(top: Table, sections: list[Section]) -> tuple[Spectrum, ...]:
    """The file's spectra, each panel's held against them."""
    found = spectra_of(top)
    _unique(top, "spectrum", [s.name for s in found])
    listed = [
        row.get("name") for row in _dicts(top.data.get("spectra")) if row.get("name")
    ]
    wings = {s.name for s in found if s.kind == WING_SEQUENCE}
    for section in sections:
        for panel in section.panels:
            where = f"panel “{panel.label}” of section “{section.code}”"
            if panel.spectrum and panel.spectrum not in listed:
                names = ", ".join(map(str, listed)) or "none"
                top.wrong(NO_SPECTRUM.format(
                    where=where, name=panel.spectrum, listed=names
                ))  # fmt: skip
            elif panel.spectrum in wings and not _wing_lower(section, panel):
                top.wrong(NOT_THERE.format(where=where, name=panel.spectrum))
    return found


def _wing_lower(section: Section, panel: Panel) -> bool:
    return panel.surface == "lower" and "wing" in section.words


def _unique(top: Table, kind: str, names: list[Any]) -> None:
    for name in sorted({n for n in names if names.count(n) > 1}):
        top.wrong(f"{kind} “{name}” is listed twice; give each its own code.")
