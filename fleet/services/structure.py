"""A type's geometry from its file, and the place columns read against it."""

from __future__ import annotations

import datetime as dt
from typing import Any, TypeVar

from django.core.exceptions import ValidationError
from django.db import models

from fleet.canonical import digest
from fleet.location import READER_VERSION, LocationRefused, Place
from fleet.location.geometry import (
    Detection,
    GeometryFileError,
    TypeGeometry,
    geometry_from_toml,
)
from fleet.models import (
    Aircraft,
    AircraftType,
    DetectableSize,
    FatiguePolicy,
    GeometryRevision,
    Material,
    Section,
    User,
    Variant,
    Zone,
)
from fleet.models.materials import DETECTION
from fleet.selectors.structure import NO_GEOMETRY, geometry_in_force
from fleet.services.history import Writing
from fleet.services.structure_rows import (
    Named,
    lines_create,
    openings_create,
    panel_row,
    spectra_create,
)

Row = TypeVar("Row", bound=models.Model)

MATERIAL_MISSING = (
    "Panel material “{name}” of the geometry file is not recorded; load the materials "
    "first, or correct its name, temper or form in the file."
)
SHAPE_CHANGED = (
    "Section {code} has reference size {new:.3f} mm in the file and {old:.3f} mm in "
    "the record; places would move. Give the changed section a code of its own."
)
NOT_DRAFT = "Only a draft is published; revision {number} is {state}."


def geometry_load(
    *, content: str, actor: User | None, at: dt.datetime
) -> GeometryRevision:
    """A draft revision from the text of a geometry file.

    The type, its variants, sections and zones are made or brought up to date. The text
    of the newest revision loads to that revision again. ValidationError lists every
    problem of the file.
    """
    try:
        geometry = geometry_from_toml(content)
    except GeometryFileError as error:
        raise ValidationError(error.problems) from error
    newest = GeometryRevision.objects.filter(aircraft_type__code=geometry.code).last()
    if newest is not None and newest.content == content:
        return newest
    materials = _materials(geometry)
    with Writing(actor=actor, action="geometry_load", at=at) as w:
        aircraft_type = _type(w, geometry)
        revision = w.create(
            GeometryRevision(
                aircraft_type=aircraft_type,
                number=newest.number + 1 if newest else 1,
                state=GeometryRevision.State.DRAFT,
                source=geometry.source,
                content=content,
                file_digest=digest(content),
            )
        )
        variants = _variants(w, aircraft_type, geometry)
        sections = _sections(w, aircraft_type, geometry)
        zones = _zones(w, aircraft_type, geometry)
        _policies(w, aircraft_type, geometry)
        named = Named(materials, zones, spectra_create(w, geometry))
        for section in geometry.sections:
            row = sections[section.code]
            if not section.parent:
                lines_create(w, revision, row, section, variants)
            openings_create(w, revision, row, section, sections)
            w.create_many(
                [
                    panel_row(revision, row, geometry, section, panel, named)
                    for panel in section.panels
                ]
            )
    return revision


def geometry_publish(
    *, revision: GeometryRevision, actor: User | None, at: dt.datetime, on: dt.date
) -> GeometryRevision:
    """Put a draft in force; the revision before it is superseded.

    Places keep the revision they were read with.
    """
    if revision.state != GeometryRevision.State.DRAFT:
        raise ValidationError(
            NOT_DRAFT.format(number=revision.number, state=revision.state)
        )
    with Writing(actor=actor, action="geometry_publish", at=at) as w:
        before = geometry_in_force(revision.aircraft_type)
        if before is not None:
            w.change(before, state=GeometryRevision.State.SUPERSEDED)
        w.change(revision, state=GeometryRevision.State.PUBLISHED, published_on=on)
    return revision


def place_columns(aircraft: Aircraft, found: Place) -> dict[str, Any]:
    """The place columns of a record on this aircraft: the only writer of them.

    Rows are those of the geometry in force; four queries.
    """
    aircraft_type = aircraft.variant.aircraft_type
    revision = geometry_in_force(aircraft_type)
    if revision is None:
        raise LocationRefused(
            "E_NO_GEOMETRY", NO_GEOMETRY.format(code=aircraft_type.code)
        )
    section = aircraft_type.sections.get(code=found.section)
    panel = (
        revision.panels.get(section=section, label=found.panel) if found.panel else None
    )
    zone = aircraft_type.zones.get(code=found.zone) if found.zone else None
    return {
        "section": section,
        "geometry": revision,
        "place_entered": found.entered,
        "place_text": found.canonical,
        "place_codes": " ".join(found.codes),
        "reader_version": READER_VERSION,
        "x1_mm": found.x1_mm,
        "x2_mm": found.x2_mm,
        "map_mm": found.map_mm,
        "s1_mm": found.s1_mm,
        "s2_mm": found.s2_mm,
        "bl_mm": found.bl_mm,
        "wl_mm": found.wl_mm,
        "along_half": found.along_half,
        "around_half": found.around_half,
        "surface": found.surface,
        "panel": panel,
        "zone": zone,
    }


def _put(w: Writing, row: Row, found: Row | None, *columns: str) -> Row:
    """Create the row, or give the found one the row's columns."""
    if found is None:
        return w.create(row)
    w.change(found, **{name: getattr(row, name) for name in columns})
    return found


def _type(w: Writing, geometry: TypeGeometry) -> AircraftType:
    pressures = geometry.pressures
    row = AircraftType(
        code=geometry.code,
        name=geometry.name,
        entry_unit=geometry.unit,
        normal_differential_mpa=pressures.normal_mpa if pressures else None,
        relief_differential_mpa=pressures.relief_mpa if pressures else None,
        external_suction_mpa=pressures.suction_mpa if pressures else None,
        ceiling_ft=geometry.ceiling_ft,
        pressures_source=pressures.source if pressures else "",
    )
    return _put(
        w, row, AircraftType.objects.filter(code=geometry.code).first(),
        "name", "entry_unit", "normal_differential_mpa", "relief_differential_mpa",
        "external_suction_mpa", "ceiling_ft", "pressures_source",
    )  # fmt: skip


def _variants(
    w: Writing, aircraft_type: AircraftType, geometry: TypeGeometry
) -> dict[str, Variant]:
    found = {v.code: v for v in aircraft_type.variants.all()}
    for variant in geometry.variants:
        hours = variant.limit_of_validity_fh
        row = Variant(
            aircraft_type=aircraft_type,
            code=variant.code,
            name=variant.name,
            design_goal_cycles=variant.design_service_goal_fc,
            validity_cycles=variant.limit_of_validity_fc,
            validity_minutes=None if hours is None else hours * 60,
            source=variant.source,
        )
        found[variant.code] = _put(
            w, row, found.get(variant.code),
            "name", "design_goal_cycles", "validity_cycles", "validity_minutes",
            "source",
        )  # fmt: skip
    return found


def _sections(
    w: Writing, aircraft_type: AircraftType, geometry: TypeGeometry
) -> dict[str, Section]:
    found = {s.code: s for s in aircraft_type.sections.all()}
    for section in geometry.sections:
        before = found.get(section.code)
        old = before.reference_radius_mm if before else None
        if old is not None and abs(old - section.reference_mm) > 1e-6:
            raise ValidationError(
                SHAPE_CHANGED.format(
                    code=section.code, new=section.reference_mm, old=old
                )
            )
        row = Section(
            aircraft_type=aircraft_type,
            code=section.code,
            name=section.title,
            kind=section.kind,
            side=section.side,
            datum_text=section.datum_text,
            reference_radius_mm=section.reference_mm,
            wrap_mm=section.wrap_mm,
        )
        found[section.code] = _put(w, row, before, "name", "side", "datum_text")
    return found


def _zones(
    w: Writing, aircraft_type: AircraftType, geometry: TypeGeometry
) -> dict[str, Zone]:
    found = {z.code: z for z in aircraft_type.zones.all()}
    for zone in geometry.zones:
        row = Zone(aircraft_type=aircraft_type, code=zone.code, title=zone.title)
        found[zone.code] = _put(w, row, found.get(zone.code), "title")
    return found


def _policies(w: Writing, aircraft_type: AircraftType, geometry: TypeGeometry) -> None:
    """Fatigue policies and detectable sizes the record does not yet hold."""
    for policy in geometry.fatigue_policies:
        row = FatiguePolicy(
            aircraft_type=aircraft_type,
            name=policy.use,
            factor=policy.factor,
            multiplies=policy.multiplies,
            log_life_deviation=policy.log_life_s,
            specimens=policy.specimens,
            reliability=policy.survival,
            confidence=policy.confidence,
            spectrum_severity_inside=policy.spectrum_severity_inside,
            source=policy.source,
            grade="adopted",
        )
        _revise(
            w, row, aircraft_type.fatigue_policies.filter(name=policy.use).last(),
            "factor", "multiplies", "log_life_deviation", "specimens", "reliability",
            "confidence", "spectrum_severity_inside", "source",
        )  # fmt: skip
    for size in geometry.detectable_sizes:
        rows = aircraft_type.detectable_sizes.filter(
            method=size.method, detail=size.detail
        )
        new = DetectableSize(
            aircraft_type=aircraft_type,
            method=size.method,
            detail=size.detail,
            length_mm=size.size_mm,
            hidden_mm=size.hidden_mm,
            source=size.source,
            grade="adopted",
            **_curve(size.detection),
        )
        columns = ("length_mm", "hidden_mm", "source", "curve_link", *DETECTION)
        _revise(w, new, rows.last(), *columns)


def _curve(detection: Detection | None) -> dict[str, Any]:
    """Columns of a detection curve; none where the file has none."""
    if detection is None:
        return {}
    return {
        "curve_link": detection.link,
        "half_found_mm": detection.half_found_mm,
        "curve_deviation": detection.deviation,
        "smallest_tried_mm": detection.smallest_mm,
        "largest_tried_mm": detection.largest_mm,
        "flaws_tried": detection.flaws,
        "done_share": detection.done,
        "never_share": detection.never,
    }


def _revise(
    w: Writing,
    row: FatiguePolicy | DetectableSize,
    before: FatiguePolicy | DetectableSize | None,
    *columns: str,
) -> None:
    """A first row, or a new revision if the file says something else than the last."""
    if before is None:
        w.create(row)
    elif any(getattr(row, name) != getattr(before, name) for name in columns):
        row.revision = before.revision + 1
        row.replaces_id = before.pk
        w.create(row)


def _materials(geometry: TypeGeometry) -> dict[tuple[str, str, str], Material]:
    """The current revision of each material the panels name."""
    found = {
        (m.name, m.temper, m.form): m
        for m in Material.objects.filter(replaced_by__isnull=True)
    }
    wanted = {
        (panel.material.name, panel.material.temper, panel.material.form)
        for section in geometry.sections
        for panel in section.panels
        if panel.material.in_materials
    }
    missing = sorted(wanted - found.keys())
    if missing:
        raise ValidationError(
            [MATERIAL_MISSING.format(name=" ".join(key).strip()) for key in missing]
        )
    return found
