"""A whole aircraft type: sections, zones and the values recorded for the type."""

from __future__ import annotations

import math
from dataclasses import dataclass

from fleet.location.parts import Panel, Variant
from fleet.location.sections import Section


@dataclass(frozen=True)
class Zone:
    """A 3-digit maintenance zone of a section, optionally split by floor and side."""

    code: str
    title: str
    section: str
    map1_mm: float
    map2_mm: float
    level: str
    side: str


@dataclass(frozen=True)
class Pressures:
    """Cabin pressures of the type."""

    normal_mpa: float
    relief_mpa: float
    suction_mpa: float
    source: str


@dataclass(frozen=True)
class FatiguePolicy:
    """A scatter factor with what it multiplies and the statistics behind it."""

    use: str
    factor: float
    multiplies: str
    log_life_s: float | None
    specimens: int | None
    survival: float | None
    confidence: float | None
    spectrum_severity_inside: bool
    source: str


@dataclass(frozen=True)
class Detection:
    """Chance of finding a visible length, what was tried, how surely it is used."""

    link: str
    half_found_mm: float
    deviation: float
    smallest_mm: float
    largest_mm: float
    flaws: int
    done: float
    never: float


@dataclass(frozen=True)
class DetectableSize:
    """The crack length an inspection method finds, and the part that is hidden."""

    method: str
    detail: str
    size_mm: float
    hidden_mm: float
    source: str
    detection: Detection | None = None


@dataclass(frozen=True)
class RogueFlaw:
    """The initial flaw assumed at a kind of location."""

    where: str
    shape: str
    size_mm: float
    source: str


@dataclass(frozen=True)
class Spectrum:
    """A load spectrum that panels name: its content as canonical text, its source."""

    name: str
    kind: str
    content: str
    source: str


@dataclass(frozen=True)
class TypeGeometry:
    """An aircraft type as its geometry file describes it, in mm and MPa."""

    code: str
    name: str
    unit: str
    ceiling_ft: int | None
    source: str
    variants: tuple[Variant, ...]
    sections: tuple[Section, ...]
    zones: tuple[Zone, ...]
    pressures: Pressures | None
    fatigue_policies: tuple[FatiguePolicy, ...]
    detectable_sizes: tuple[DetectableSize, ...]
    rogue_flaws: tuple[RogueFlaw, ...]
    spectra: tuple[Spectrum, ...] = ()

    def section(self, code: str) -> Section:
        """The section of this code; KeyError if the type has none."""
        for section in self.sections:
            if section.code == code:
                return section
        raise KeyError(code)

    def variant(self, code: str) -> Variant:
        """The variant of this code; KeyError if the type has none."""
        for variant in self.variants:
            if variant.code == code:
                return variant
        raise KeyError(code)

    def panel(self, section: str, label: str) -> Panel:
        """The panel of this label; KeyError if the section has none."""
        for panel in self.section(section).panels:
            if panel.label == label:
                return panel
        raise KeyError(label)

    def fatigue_policy(self, use: str) -> FatiguePolicy | None:
        """The policy recorded for a use; None if there is none."""
        return next((p for p in self.fatigue_policies if p.use == use), None)

    def detectable_size(self, method: str, detail: str) -> DetectableSize | None:
        """The detectable size of a method at a kind of place; None if there is none."""
        wanted = (method, detail)
        rows = (d for d in self.detectable_sizes if (d.method, d.detail) == wanted)
        return next(rows, None)

    def rogue_flaw(self, where: str) -> RogueFlaw | None:
        """The rogue flaw of a kind of location; None if there is none."""
        return next((r for r in self.rogue_flaws if r.where == where), None)

    def floor_wl_mm(self, section: Section) -> float | None:
        """Water line of the section's floor."""
        floors = (p.wl_mm for p in section.planes if p.kind == "floor")
        return next(floors, None)

    def zone_at(
        self,
        section: Section,
        map_mm: float,
        *,
        side: str = "",
        wl_mm: float | None = None,
    ) -> Zone | None:
        """The zone of a point; None if the point does not say enough to tell.

        The floor line itself counts as above, the centreline as right.
        """
        floor = self.floor_wl_mm(section)
        for zone in self.zones:
            if zone.section != section.code:
                continue
            if (
                not zone.map1_mm
                <= map_mm
                < zone.map2_mm + 1e-6 * (zone.map2_mm >= section.map2_mm)
            ):
                continue
            if zone.side and zone.side != side:
                continue
            if zone.level and (wl_mm is None or floor is None):
                continue
            if zone.level and (zone.level == "above") != (
                wl_mm is not None and floor is not None and wl_mm >= floor
            ):
                continue
            return zone
        return None

    def zone_of_skin(self, section: Section, map_mm: float, s_mm: float) -> Zone | None:
        """The zone of a point on the skin, or, on a surface, of its station."""
        if not section.is_shell:
            side = section.side or ("L" if s_mm < 0.0 else "R")
            return self.zone_at(section, map_mm, side=side)
        right = math.sin(s_mm / section.reference_mm) >= -1e-12
        return self.zone_at(
            section,
            map_mm,
            side="R" if right else "L",
            wl_mm=section.wl_of(map_mm, s_mm),
        )
