"""The skin and the planes of a section: panels, joints, cut-outs, inner structure."""

from __future__ import annotations

import itertools
from dataclasses import dataclass, replace

from fleet.location.parts import Box, Cutout, Joint, Panel, PanelMaterial, Plane
from fleet.location.position_file import across_of, box_of, stations_of
from fleet.location.sections import Section
from fleet.location.table import Table

EACH_PANEL = ("bending_", "thickness_", "clad_per_side_", "spectrum")
"""Beginnings of the keys of a row that may list one value for each panel."""
CRITICALITIES = ("principal", "fatigue_critical", "secondary", "unknown")
PLANE_KINDS = ("floor", "seat_track", "keel_beam", "bulkhead", "spar")
LOAD_KINDS = ("tension", "compression", "shear", "bending", "torsion", "pressure")
CUTOUT_KINDS = ("door", "cargo_door", "window", "hatch", "access")


@dataclass(frozen=True)
class Lines:
    """A section with its frames and stringers, by which the rest is placed."""

    table: Table
    section: Section
    unit: str
    materials: dict[str, PanelMaterial]

    def box(self, t: Table) -> Box:
        """Where an item lies."""
        return box_of(self.section, self.unit, t)


def panels_of(file: Lines) -> tuple[Panel, ...]:
    found: list[Panel] = []
    for t in file.table.tables("panels"):
        panel = panel_from(t, file, file.box(t))
        if t.done():
            found.append(panel)
    for grid in file.table.tables("panel_grids"):
        found.extend(_grid(file, grid))
    _unique(file, "panel", [p.label for p in found])
    return tuple(found)


def _grid(file: Lines, grid: Table) -> list[Panel]:
    """Panels of rows between every two stations of the grid."""
    found: list[Panel] = []
    grid.text("label")
    edges = grid.raw("stations", "a list of stations")
    if not isinstance(edges, list) or len(edges) < 2:
        grid.wrong("“stations” must list two edges or more.")
        return found
    for row in grid.tables("rows"):
        for number, (a, b) in enumerate(itertools.pairwise(edges)):
            data = {
                key: value[number]
                if key.startswith(EACH_PANEL)
                and isinstance(value, list)
                and len(value) == len(edges) - 1
                else value
                for key, value in row.data.items()
            }
            data["stations"] = [a, b]
            data["label"] = f"{row.data.get('label', '')} {a}-{b}".strip()
            one = Table(data, f"{row.where} {a}-{b}", row.problems)
            panel = panel_from(one, file, file.box(one))
            if one.done():
                found.append(panel)
    grid.done()
    return found


def joints_of(file: Lines) -> tuple[Joint, ...]:
    found = []
    for t in file.table.tables("joints"):
        joint = Joint(t.text("label"), t.choice("kind", ("lap", "butt")), file.box(t))
        if t.done():
            found.append(joint)
    _unique(file, "joint", [j.label for j in found])
    return tuple(found)


def cutouts_of(file: Lines) -> tuple[Cutout, ...]:
    found = []
    for t in file.table.tables("cutouts"):
        cutout = _cutout(t, t.text("label"), file.box(t))
        t.raw("door", "a table", optional=True)
        if t.done():
            found.append(cutout)
    for t in file.table.tables("cutout_rows"):
        found.extend(_cutout_row(file, t))
    _unique(file, "cut-out", [c.label for c in found])
    return tuple(found)


def _cutout(t: Table, label: str, box: Box) -> Cutout:
    door = t.data.get("door")
    return Cutout(
        label=label,
        kind=t.choice("kind", CUTOUT_KINDS),
        box=box,
        corner_radius_mm=t.measure("corner_radius", least=0.0),
        surround_thickness_mm=t.measure("surround_thickness", above=0.0),
        surround_width_mm=t.measure("surround_width", least=0.0),
        filled_by=str(door.get("section", "")) if isinstance(door, dict) else "",
    )


def _cutout_row(file: Lines, t: Table) -> list[Cutout]:
    """One like cut-out in the middle of each frame bay between two frames."""
    names = t.texts("frames")
    ends = [file.section.frame(name) for name in names]
    s1, s2 = across_of(file.section, t)
    label, width = t.text("label"), t.measure("width", above=0.0)
    model = _cutout(t, label, Box(0.0, 0.0, s1, s2))
    if len(ends) != 2 or None in ends:
        t.wrong("“frames” must name the first and the last frame of the row.")
    if not t.done() or ends[0] is None or ends[1] is None:
        return []
    row = file.section.frames[ends[0].ordinal - 1 : ends[1].ordinal]
    found = []
    for ahead, behind in itertools.pairwise(row):
        middle = (ahead.map_mm + behind.map_mm) / 2.0
        box = Box(middle - width / 2.0, middle + width / 2.0, s1, s2)
        name = f"{label} {ahead.label}-{behind.label}"
        found.append(replace(model, label=name, box=box))
    return found


def planes_of(file: Lines) -> tuple[Plane, ...]:
    found = []
    for t in file.table.tables("planes"):
        first, last = stations_of(file.section, file.unit, t)
        share = t.number("chord_percent", optional=True)
        plane = Plane(
            label=t.text("label"),
            kind=t.choice("kind", PLANE_KINDS),
            map1_mm=first,
            map2_mm=last,
            bl_mm=t.measure_or_none("bl", least=0.0),
            half_width_mm=t.measure_or_none("half_width", above=0.0),
            wl_mm=t.measure_or_none("wl"),
            s_mm=None if share is None else share / 100.0 * file.section.reference_mm,
        )
        if t.done():
            found.append(plane)
    _unique(file, "plane", [p.label for p in found])
    return tuple(found)


def _unique(file: Lines, kind: str, labels: list[str]) -> None:
    for label in sorted({x for x in labels if labels.count(x) > 1}):
        file.table.wrong(f"{kind} “{label}” is listed twice; give each its name.")


def panel_from(t: Table, file: Lines, box: Box) -> Panel:
    """A panel's engineering columns from its table."""
    name = t.text("material")
    material = file.materials.get(name)
    if material is None and name:
        listed = ", ".join(sorted(file.materials)) or "none"
        t.wrong(f"material “{name}” is not in panel_materials; listed are: {listed}.")
    clad = t.measure_or_none("clad_per_side", least=0.0)
    if material and clad is not None:
        if not material.clad:
            t.wrong(f"a clad thickness is given, but material “{name}” is not clad.")
        material = replace(material, clad_mm_per_side=clad)
    shell = file.section.is_shell
    return Panel(
        label=t.text("label"),
        surface=t.choice("surface", ("outer", "upper", "lower"), default="outer"),
        box=box,
        thickness_mm=t.measure("thickness", above=0.0),
        material=material or PanelMaterial(name, "", "", False, False, None),
        radius_mm=t.measure_or_none("radius", above=0.0)
        or (_largest_radius(file.section, box) if shell else None),
        pressurised=t.flag("pressurised", default=False),
        criticality=t.choice("criticality", CRITICALITIES),
        criticality_source=t.text("criticality_source"),
        bending_1g_mpa=t.measure_or_none("bending_1g", "stress", least=0.0),
        bending_limit_mpa=t.measure_or_none("bending_limit", "stress", least=0.0),
        ultimate_running_load_n_per_mm=t.measure_or_none(
            "ultimate_running_load", "running_load", above=0.0
        ),
        source=t.text("source"),
        spectrum=t.text("spectrum", optional=True),
        load_kind=t.choice("load_kind", LOAD_KINDS) if "load_kind" in t.data else "",
    )


def _largest_radius(section: Section, box: Box) -> float:
    """The greatest radius over the panel: hoop stress is proportional to it."""
    inside = [r for m, r in section.profile if box.map1_mm <= m <= box.map2_mm]
    return max(section.size_at(box.map1_mm), section.size_at(box.map2_mm), *inside)
