"""Parts of a section, in mm: frames, stringers, panels, cut-outs, joints, planes."""

from __future__ import annotations

from dataclasses import dataclass

TINY_MM = 1e-6  # a point nearer to a line than this is on it


@dataclass(frozen=True)
class Variant:
    """One length of the type, with its design service goal and limit of validity."""

    code: str
    name: str
    design_service_goal_fc: int | None
    limit_of_validity_fc: int | None
    limit_of_validity_fh: int | None
    source: str


@dataclass(frozen=True)
class Plug:
    """A stretch of the map axis that only some variants have."""

    map_mm: float
    length_mm: float
    variants: tuple[str, ...]

    @property
    def end_mm(self) -> float:
        return self.map_mm + self.length_mm


@dataclass(frozen=True)
class Frame:
    """A frame or rib: the name painted on it and where it stands on each variant."""

    label: str
    station_label: str
    ordinal: int
    map_mm: float
    x_by_variant: tuple[tuple[str, float], ...]
    plug: bool

    def x_mm(self, variant: str) -> float | None:
        """True distance from the datum; None if the variant has no such frame."""
        for code, x_mm in self.x_by_variant:
            if code == variant:
                return x_mm
        return None


@dataclass(frozen=True)
class Stringer:
    """A stringer line; `side` is L, R or '' on the centreline and on open surfaces."""

    label: str
    number: int
    side: str
    s_mm: float
    ordinal: int


@dataclass(frozen=True)
class Box:
    """A rectangle of the unrolled section; s2 may pass the keel, half the wrap."""

    map1_mm: float
    map2_mm: float
    s1_mm: float
    s2_mm: float

    def holds(
        self, map_mm: float, s_mm: float, wrap_mm: float | None, grow_mm: float = 0.0
    ) -> bool:
        """Whether the point lies inside or on the edge of the box grown all round."""
        grow_mm += TINY_MM
        if not self.map1_mm - grow_mm <= map_mm <= self.map2_mm + grow_mm:
            return False
        across = s_mm - self.s1_mm + grow_mm
        if wrap_mm:
            across %= wrap_mm
        return 0.0 <= across <= self.s2_mm - self.s1_mm + 2.0 * grow_mm


@dataclass(frozen=True)
class PanelMaterial:
    """Material of a panel by the name, temper and form of the materials file.

    `in_materials` is false for one of which that file holds no properties.
    """

    name: str
    temper: str
    form: str
    clad: bool
    in_materials: bool
    clad_mm_per_side: float | None


@dataclass(frozen=True)
class Panel:
    """One skin part with material, thickness, stresses and criticality.

    None means not recorded: nothing may be computed from it.
    """

    label: str
    surface: str
    box: Box
    thickness_mm: float
    material: PanelMaterial
    radius_mm: float | None
    pressurised: bool
    criticality: str
    criticality_source: str
    bending_1g_mpa: float | None
    bending_limit_mpa: float | None
    ultimate_running_load_n_per_mm: float | None
    source: str
    spectrum: str = ""
    """Name of its load spectrum; '' if none is recorded."""
    load_kind: str = ""


@dataclass(frozen=True)
class Cutout:
    """An opening in the skin: door, window; with the thicker surround about it."""

    label: str
    kind: str
    box: Box
    corner_radius_mm: float
    surround_thickness_mm: float
    surround_width_mm: float
    filled_by: str
    """Code of the door section in it; '' if nothing of its own structure fills it."""


@dataclass(frozen=True)
class Joint:
    """A row of fasteners joining two panels: lap (along) or butt (around)."""

    label: str
    kind: str
    box: Box


@dataclass(frozen=True)
class Plane:
    """Internal structure: floor, seat track, keel beam, bulkhead, spar.

    Lengths are None where the plane has no such bound.
    """

    label: str
    kind: str
    map1_mm: float
    map2_mm: float
    bl_mm: float | None
    half_width_mm: float | None
    wl_mm: float | None
    s_mm: float | None
