"""The rows of a geometry revision, section by section, from its file."""

from __future__ import annotations

from dataclasses import dataclass

from fleet.canonical import canonical, digest, plain
from fleet.location.geometry import Panel as FilePanel
from fleet.location.geometry import Section as FileSection
from fleet.location.geometry import TypeGeometry
from fleet.models import (
    Cutout,
    Frame,
    FrameStation,
    GeometryRevision,
    Joint,
    Material,
    Panel,
    Section,
    Spectrum,
    Stringer,
    Variant,
    Zone,
)
from fleet.services.history import Writing

_PANEL_COLUMNS = (
    "thickness_mm", "clad_mm", "radius_mm", "limit_stress_mpa", "mean_stress_mpa",
    "ultimate_load_n_per_mm", "material_id", "criticality", "pressurised",
)  # fmt: skip
_LATER_COLUMNS = ("spectrum_id", "load_kind")
"""Digested only where they say something: older panels keep their digests."""


def lines_create(
    w: Writing,
    revision: GeometryRevision,
    row: Section,
    section: FileSection,
    variants: dict[str, Variant],
) -> None:
    frames = w.create_many(
        [
            Frame(
                geometry=revision,
                section=row,
                label=frame.label,
                station_label=frame.station_label,
                map_mm=frame.map_mm,
                ordinal=frame.ordinal,
                plug=frame.plug,
                area_mm2=section.frame_area_mm2,
            )
            for frame in section.frames
        ]
    )
    w.create_many(
        [
            FrameStation(frame=made, variant=variants[code], x_mm=x_mm)
            for made, frame in zip(frames, section.frames, strict=True)
            for code, x_mm in frame.x_by_variant
        ]
    )
    w.create_many(
        [
            Stringer(
                geometry=revision,
                section=row,
                label=stringer.label,
                s_mm=stringer.s_mm,
                ordinal=stringer.ordinal,
                area_mm2=section.stringer_area_mm2,
            )
            for stringer in section.stringers
        ]
    )


def openings_create(
    w: Writing,
    revision: GeometryRevision,
    row: Section,
    section: FileSection,
    sections: dict[str, Section],
) -> None:
    w.create_many(
        [
            Cutout(
                geometry=revision,
                section=row,
                label=cutout.label,
                kind=cutout.kind,
                surround_thickness_mm=cutout.surround_thickness_mm,
                surround_width_mm=cutout.surround_width_mm,
                door_section=sections.get(cutout.filled_by),
                **vars(cutout.box),
            )
            for cutout in section.cutouts
        ]
    )
    w.create_many(
        [
            Joint(
                geometry=revision,
                section=row,
                label=joint.label,
                kind=joint.kind,
                **vars(joint.box),
            )
            for joint in section.joints
        ]
    )


def spectra_create(w: Writing, geometry: TypeGeometry) -> dict[str, Spectrum]:
    """The file's spectra by name; one that reads otherwise is revised."""
    found = {}
    for given in geometry.spectra:
        last = Spectrum.objects.filter(name=given.name).last()
        same = last and (last.content, last.source) == (given.content, given.source)
        found[given.name] = (
            last
            if last and same
            else w.create(
                Spectrum(
                    name=given.name,
                    revision=last.revision + 1 if last else 1,
                    content=given.content,
                    content_digest=digest(given.content),
                    source=given.source,
                    replaces=last,
                )
            )
        )
    return found


@dataclass(frozen=True, slots=True)
class Named:
    """Rows that panels name: materials by name, temper and form, zones, spectra."""

    materials: dict[tuple[str, str, str], Material]
    zones: dict[str, Zone]
    spectra: dict[str, Spectrum]


def panel_row(
    revision: GeometryRevision,
    row: Section,
    geometry: TypeGeometry,
    section: FileSection,
    panel: FilePanel,
    named: Named,
) -> Panel:
    box, material = panel.box, panel.material
    zone = geometry.zone_of_skin(
        section, (box.map1_mm + box.map2_mm) / 2.0, (box.s1_mm + box.s2_mm) / 2.0
    )
    made = Panel(
        geometry=revision,
        section=row,
        label=panel.label,
        material=named.materials.get((material.name, material.temper, material.form)),
        thickness_mm=panel.thickness_mm,
        clad_mm=material.clad_mm_per_side if material.clad else 0.0,
        radius_mm=panel.radius_mm,
        spectrum=named.spectra.get(panel.spectrum),
        load_kind=panel.load_kind,
        limit_stress_mpa=panel.bending_limit_mpa,
        mean_stress_mpa=panel.bending_1g_mpa,
        ultimate_load_n_per_mm=panel.ultimate_running_load_n_per_mm,
        load_source=panel.source,
        criticality=panel.criticality,
        criticality_source=panel.criticality_source,
        zone=named.zones[zone.code] if zone else None,
        pressurised=panel.pressurised,
        source=panel.source,
        **vars(box),
    )
    names = [*_PANEL_COLUMNS, *(c for c in _LATER_COLUMNS if getattr(made, c))]
    made.content_digest = digest(
        canonical({name: plain(getattr(made, name)) for name in names})
    )
    return made
