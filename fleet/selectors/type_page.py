"""Everything recorded of an aircraft type, each number with its unit and source."""

from __future__ import annotations

from dataclasses import dataclass

from fleet.location.geometry import Frame, Section, TypeGeometry, geometry_from_toml
from fleet.models import (
    AircraftType,
    DetectableSize,
    FatiguePolicy,
    GeometryRevision,
    Material,
    MaterialProperty,
    Variant,
)
from fleet.selectors.structure import geometry_in_force

# The unit at the end of a quantity's name, as it is written.
UNITS = (
    ("_mpa_root_mm", "MPa√mm"),
    ("_kg_per_m3", "kg/m³"),
    ("_mpa", "MPa"),
    ("_mm", "mm"),
)


@dataclass(frozen=True)
class PropertyLine:
    """One number of a material with its unit, range, basis, source and grade."""

    row: MaterialProperty

    @property
    def words(self) -> str:
        return self._split()[0]

    @property
    def unit(self) -> str:
        return self._split()[1]

    @property
    def value(self) -> str:
        return f"{self.row.value:,.6g}".replace("-", "−")

    @property
    def unread(self) -> bool:
        """From memory: it bars a calculation from approval."""
        return self.row.seen == "memory"

    def _split(self) -> tuple[str, str]:
        name = self.row.quantity
        for ending, unit in UNITS:
            if name.endswith(ending):
                return name.removesuffix(ending).replace("_", " "), unit
        return name.replace("_", " "), ""


@dataclass(frozen=True)
class MaterialLines:
    material: Material
    lines: list[PropertyLine]


@dataclass(frozen=True)
class TypePage:
    """The page of a type, with one of its sections opened."""

    row: AircraftType
    revision: GeometryRevision | None
    geometry: TypeGeometry | None
    section: Section | None
    variants: list[Variant]
    policies: list[FatiguePolicy]
    sizes: list[DetectableSize]
    materials: list[MaterialLines]

    @property
    def length_unit(self) -> str:
        return self.row.entry_unit

    @property
    def pressure_unit(self) -> str:
        return "psi" if self.row.entry_unit == "in" else "kpa"

    @property
    def area_unit(self) -> str:
        return f"{self.row.entry_unit}2"

    @property
    def frame_lines(self) -> list[tuple[Frame, list[float | None]]]:
        """Each frame of the section with where it stands on every variant."""
        if self.geometry is None or self.section is None:
            return []
        codes = [variant.code for variant in self.geometry.variants]
        return [(f, [f.x_mm(code) for code in codes]) for f in self.section.frames]


def type_page(aircraft_type: AircraftType, *, section: str = "") -> TypePage:
    """Seven queries, whatever the size of the type."""
    revision = geometry_in_force(aircraft_type)
    geometry = geometry_from_toml(revision.content) if revision else None
    return TypePage(
        row=aircraft_type,
        revision=revision,
        geometry=geometry,
        section=_section(geometry, section),
        variants=list(aircraft_type.variants.all()),
        policies=list(aircraft_type.fatigue_policies.filter(replaced_by__isnull=True)),
        sizes=list(aircraft_type.detectable_sizes.filter(replaced_by__isnull=True)),
        materials=_materials(revision),
    )


def _section(geometry: TypeGeometry | None, code: str) -> Section | None:
    """The section of this code, else the first."""
    sections = geometry.sections if geometry else ()
    named = (section for section in sections if section.code == code)
    return next(named, sections[0] if sections else None)


def _materials(revision: GeometryRevision | None) -> list[MaterialLines]:
    """Materials that the panels of the geometry are made of, with their numbers."""
    if revision is None:
        return []
    materials = Material.objects.filter(panels__geometry=revision).distinct()
    return [
        MaterialLines(
            material, [PropertyLine(row) for row in material.properties.all()]
        )
        for material in materials.prefetch_related("properties")
    ]
