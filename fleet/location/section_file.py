"""One section of a geometry file: its lines, panels, cut-outs, joints and planes."""

from __future__ import annotations

import itertools
import math
import re
from collections.abc import Iterable
from dataclasses import replace
from typing import Any

from fleet.location.sections import (
    TINY_MM,
    Box,
    Cutout,
    Frame,
    Joint,
    Panel,
    PanelMaterial,
    Plane,
    Plug,
    Section,
    Stringer,
)
from fleet.location.table import Table, is_number
from fleet.units import FACTORS, canonical, number_write

CRITICALITIES = ("principal", "fatigue_critical", "secondary", "unknown")
SKINS = ("outer", "upper lower", "left right")
PLANE_KINDS = ("floor", "seat_track", "keel_beam", "bulkhead", "spar")
CUTOUT_KINDS = ("door", "cargo_door", "window", "hatch", "access")


class SectionFile:
    """Builds one Section; holds the lines read so far, by which the rest is placed."""

    def __init__(
        self,
        table: Table,
        unit: str,
        variants: tuple[str, ...],
        materials: dict[str, PanelMaterial],
    ) -> None:
        self.table = table
        self.unit = unit
        self.variants = variants
        self.materials = materials
        self.section: Section = self._axes()

    # -- axes and lines -------------------------------------------------------

    def _axes(self) -> Section:
        t = self.table
        kind = t.choice("kind", ("shell", "surface"))
        skins = t.choice("skins", SKINS, default="outer")
        reference = t.measure("reference", above=0.0)
        reach = math.pi * reference if kind == "shell" else reference
        start, end = t.measure("start"), t.measure("end")
        if t.ok and end <= start:
            t.wrong("“end” is not aft of “start”; exchange or correct them.")
        code = t.text("code")
        return Section(
            code=code,
            title=t.text("title"),
            kind=kind,
            side=t.choice("side", ("L", "R")) if "side" in t.data else "",
            ata=t.text("ata_chapter", optional=True),
            words=t.texts("words", optional=True),
            station_words=t.texts("station_words"),
            frame_prefix="", frame_words=(), stringer_prefix="", stringer_words=(),
            stringer_origin="",
            negative_stations=t.flag("negative_stations", default=False),
            map1_mm=start,
            map2_mm=end,
            s1_mm=-reach if kind == "shell" or skins == "left right" else 0.0,
            s2_mm=reach,
            skins=tuple(skins.split()),
            datum_text=t.text("datum"),
            reference_mm=reference,
            profile=self._profile(reference, start, end),
            axis_wl_mm=t.measure_or_none("axis_wl"),
            parent="",
            frame_pitch_mm=0.0,
            frame_area_mm2=t.measure_or_none("frame_area", "area", above=0.0),
            stringer_area_mm2=t.measure_or_none("stringer_area", "area", above=0.0),
        )  # fmt: skip

    def _profile(
        self, reference: float, start: float, end: float
    ) -> tuple[tuple[float, float], ...]:
        t = self.table
        key = t.unit_key("profile", "length", optional=True)
        if not key:
            return ((start, reference), (end, reference))
        rows = t.data[key]
        if not isinstance(rows, list) or not all(_is_pair(row) for row in rows):
            t.wrong(f"“{key}” must be a list of pairs [station, radius or chord].")
            return ((start, reference), (end, reference))
        unit = key.removeprefix("profile_")
        points = [(canonical(a, unit), canonical(b, unit)) for a, b in rows]
        if any(b[0] <= a[0] for a, b in itertools.pairwise(points)):
            t.wrong(f"“{key}”: the stations must rise from pair to pair.")
        if any(size <= 0.0 for _, size in points):
            t.wrong(f"“{key}”: each radius or chord must be more than 0.")
        if points and (points[0][0] > start or points[-1][0] < end):
            t.wrong(f"“{key}” must reach from “start” to “end”.")
        return tuple(points)

    def build(self) -> Section:
        """The whole section; problems are in the table's list."""
        self._frames()
        self._stringers()
        self._lengthen()
        self._planes()
        self._panels()
        self._joints()
        self._cutouts()
        self.table.raw("copies", "a list of tables", optional=True)
        return self.section

    def _set(self, **parts: Any) -> None:
        self.section = replace(self.section, **parts)

    def _frames(self) -> None:
        t = self.table.table("frames", optional=True)
        if t is None:
            return
        prefix, words = t.text("prefix"), t.texts("words")
        first, count = t.whole("first_number") or 0, t.whole("count", least=1) or 1
        start, pitch = t.measure("first_station"), t.measure("pitch", above=0.0)
        if not t.done():
            return
        plugs = self._plug_frames()
        frames: list[Frame] = []
        for number in range(first, first + count):
            station = start + pitch * (number - first)
            shown = number_write(station / self._unit_mm, 3)
            frames.append(self._frame(str(number), shown, station, None))
            frames.extend(plugs.pop(str(number), ()))
        for after in plugs:
            self.table.wrong(
                f"a plug frame stands after frame {after}, which is not listed; "
                f"name a frame from {first} to {first + count - 1}."
            )
        self._set(
            frame_prefix=prefix,
            frame_words=words,
            frame_pitch_mm=pitch,
            frames=tuple(frames),
        )
        self._number_frames()

    @property
    def _unit_mm(self) -> float:
        return float(FACTORS["length"][self.unit])

    def _plug_frames(self) -> dict[str, list[Frame]]:
        """Plug frames by the frame they follow; `map_mm` is yet the distance to it."""
        found: dict[str, list[Frame]] = {}
        for t in self.table.tables("plug_frames"):
            after, distance = t.text("after"), t.measure("distance", above=0.0)
            names = t.texts("variants")
            for name in names:
                if name not in self.variants:
                    t.wrong(
                        f"variant “{name}” is not listed; "
                        f"name one of {', '.join(self.variants)}."
                    )
            frame = self._frame(t.text("label"), t.text("station"), distance, names)
            if t.done():
                found.setdefault(after, []).append(frame)
        return found

    def _frame(
        self,
        label: str,
        station: str,
        map_mm: float,
        variants: Iterable[str] | None,
    ) -> Frame:
        having = self.variants if variants is None else variants
        return Frame(
            label=label,
            station_label=station,
            ordinal=0,
            map_mm=map_mm,
            x_by_variant=tuple((v, 0.0) for v in having),
            plug=variants is not None,
        )

    def _number_frames(self) -> None:
        """Place every frame on the map axis and on each variant."""
        plugs: list[Plug] = []
        placed: list[Frame] = []
        base = 0.0
        for frame in self.section.frames:
            if frame.plug:
                map_mm = base + frame.map_mm
                variants = tuple(v for v, _ in frame.x_by_variant)
                plugs = _extended(plugs, Plug(base, frame.map_mm, variants))
            else:
                map_mm = base = frame.map_mm + sum(p.length_mm for p in plugs)
            placed.append(replace(frame, map_mm=map_mm))
        self._set(plugs=tuple(plugs))
        numbered = []
        for ordinal, frame in enumerate(placed, 1):
            places = tuple(
                (v, x)
                for v, _ in frame.x_by_variant
                if (x := self.section.x_of(frame.map_mm, v)) is not None
            )
            numbered.append(replace(frame, ordinal=ordinal, x_by_variant=places))
        self._set(frames=tuple(numbered))

    def _lengthen(self) -> None:
        """Move the section's end and profile aft of the plugs."""
        section = self.section
        if section.plugs:
            self._set(
                map1_mm=self._plugged(section.map1_mm),
                map2_mm=self._plugged(section.map2_mm),
                profile=tuple((self._plugged(a), b) for a, b in section.profile),
            )

    def _plugged(self, station_mm: float) -> float:
        return self.section.map_of(station_mm, "")

    def _stringers(self) -> None:
        t = self.table.table("stringers", optional=True)
        if t is None:
            return
        prefix, words = t.text("prefix"), t.texts("words")
        count = t.whole("count", least=1) or 1
        if self.section.is_shell:
            origin = t.choice("origin", ("crown",))
            if count % 2:
                t.wrong(
                    "“count” must be even: the lines stand in pairs, left and right."
                )
            lines = self._around(prefix, count)
        else:
            origin = t.choice("origin", ("front", "rear"))
            lines = self._between(
                prefix, count, t.numbers("between_percent"), origin == "rear"
            )
        if t.done():
            self._set(
                stringer_prefix=prefix,
                stringer_words=words,
                stringer_origin=origin,
                stringers=lines,
            )

    def _around(self, prefix: str, count: int) -> tuple[Stringer, ...]:
        """Lines once round from the crown: 1, 2R ... nR, keel, nL ... 2L."""
        half, lines = count // 2, []
        wrap = self.section.wrap_mm or 0.0
        for turn in range(count):
            number = turn + 1 if turn <= half else count - turn + 1
            side = "" if turn in (0, half) else "R" if turn < half else "L"
            s_mm = wrap * turn / count if turn < half else wrap * (turn - count) / count
            lines.append(Stringer(f"{prefix}{number}{side}", number, side, s_mm, turn))
        return tuple(lines)

    def _between(
        self, prefix: str, count: int, between: list[float], from_rear: bool
    ) -> tuple[Stringer, ...]:
        """Lines evenly between two shares of the chord, on both skins of a fin."""
        if len(between) != 2:
            self.table.wrong("stringers: “between_percent” must name two shares.")
            return ()
        low, high = between
        shares = [low + (high - low) * k / (count + 1) for k in range(1, count + 1)]
        numbers = [*range(count, 0, -1)] if from_rear else [*range(1, count + 1)]
        reference = self.section.reference_mm
        rows = [
            (n, "", share / 100.0 * reference)
            for n, share in zip(numbers, shares, strict=True)
        ]
        if self.section.skins == ("left", "right"):
            right = [(n, "R", s) for n, _, s in rows]
            rows = [(n, "L", -s) for n, _, s in reversed(rows)] + right
        return tuple(
            Stringer(f"{prefix}{n}{side}", n, side, s, ordinal)
            for ordinal, (n, side, s) in enumerate(rows, 1)
        )

    # -- positions ------------------------------------------------------------

    def _across(self, t: Table) -> tuple[float, float]:
        """s range by stringer lines, degrees from the crown or per cent of chord."""
        section = self.section
        keys = [
            k for k in ("stringers", "degrees", "chord_percent", "all") if k in t.data
        ]
        if len(keys) != 1:
            t.wrong(
                "give its reach across by just one of stringers = [from, to], "
                "degrees = [from, to], chord_percent = [from, to], all = true."
            )
        key = keys[0] if keys else "all"
        value = t.raw(key, "two values [from, to]", optional=True)
        if key == "all":
            return section.s1_mm, section.s2_mm
        if not isinstance(value, list) or len(value) != 2:
            t.wrong(f"“{key}” is {value!r}; give two values, [from, to].")
            return section.s1_mm, section.s2_mm
        first, last = (self._one_across(t, key, v) for v in value)
        if last < first and section.wrap_mm:
            last += section.wrap_mm
        if last < first:
            t.wrong(f"“{key}”: the second lies before the first; exchange them.")
        return first, last

    def _one_across(self, t: Table, key: str, value: Any) -> float:
        if key == "stringers":
            line = self.section.stringer(str(value))
            if line is None:
                names = ", ".join(x.label for x in self.section.stringers[:3])
                t.wrong(f"no stringer is called {value!r}; they are {names}, ...")
            return line.s_mm if line else 0.0
        if not is_number(value):
            t.wrong(f"“{key}” holds {value!r}, which is not a number.")
            return 0.0
        reference = self.section.reference_mm
        if key == "degrees":
            return float(math.radians(value) * reference)
        return float(value) / 100.0 * reference

    def _box(self, t: Table) -> Box:
        return Box(*stations_of(self.section, self.unit, t), *self._across(t))

    # -- panels, joints, cut-outs, planes -------------------------------------

    def _panels(self) -> None:
        found: list[Panel] = []
        for t in self.table.tables("panels"):
            panel = panel_from(t, self, self._box(t))
            if t.done():
                found.append(panel)
        for grid in self.table.tables("panel_grids"):
            found.extend(self._grid(grid))
        self._unique("panel", [p.label for p in found])
        self._set(panels=tuple(found))

    def _grid(self, grid: Table) -> list[Panel]:
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
                    if key.startswith(("bending_", "thickness_", "clad_mm"))
                    and isinstance(value, list)
                    and len(value) == len(edges) - 1
                    else value
                    for key, value in row.data.items()
                }
                data["stations"] = [a, b]
                data["label"] = f"{row.data.get('label', '')} {a}-{b}".strip()
                one = Table(data, f"{row.where} {a}-{b}", row.problems)
                panel = panel_from(one, self, self._box(one))
                if one.done():
                    found.append(panel)
        grid.done()
        return found

    def _joints(self) -> None:
        found = []
        for t in self.table.tables("joints"):
            joint = Joint(
                t.text("label"), t.choice("kind", ("lap", "butt")), self._box(t)
            )
            if t.done():
                found.append(joint)
        self._unique("joint", [j.label for j in found])
        self._set(joints=tuple(found))

    def _cutouts(self) -> None:
        found = []
        for t in self.table.tables("cutouts"):
            cutout = self._cutout(t, t.text("label"), self._box(t))
            t.raw("door", "a table", optional=True)
            if t.done():
                found.append(cutout)
        for t in self.table.tables("cutout_rows"):
            found.extend(self._cutout_row(t))
        self._unique("cut-out", [c.label for c in found])
        self._set(cutouts=tuple(found))

    def _cutout(self, t: Table, label: str, box: Box) -> Cutout:
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

    def _cutout_row(self, t: Table) -> list[Cutout]:
        """One like cut-out in the middle of each frame bay between two frames."""
        names = t.texts("frames")
        ends = [self.section.frame(name) for name in names]
        s1, s2 = self._across(t)
        label, width = t.text("label"), t.measure("width", above=0.0)
        model = self._cutout(t, label, Box(0.0, 0.0, s1, s2))
        if len(ends) != 2 or None in ends:
            t.wrong("“frames” must name the first and the last frame of the row.")
        if not t.done() or ends[0] is None or ends[1] is None:
            return []
        row = self.section.frames[ends[0].ordinal - 1 : ends[1].ordinal]
        found = []
        for ahead, behind in itertools.pairwise(row):
            middle = (ahead.map_mm + behind.map_mm) / 2.0
            box = Box(middle - width / 2.0, middle + width / 2.0, s1, s2)
            name = f"{label} {ahead.label}-{behind.label}"
            found.append(replace(model, label=name, box=box))
        return found

    def _planes(self) -> None:
        found = []
        for t in self.table.tables("planes"):
            first, last = stations_of(self.section, self.unit, t)
            share = t.number("chord_percent", optional=True)
            plane = Plane(
                label=t.text("label"),
                kind=t.choice("kind", PLANE_KINDS),
                map1_mm=first,
                map2_mm=last,
                bl_mm=t.measure_or_none("bl", least=0.0),
                half_width_mm=t.measure_or_none("half_width", above=0.0),
                wl_mm=t.measure_or_none("wl"),
                s_mm=None
                if share is None
                else share / 100.0 * self.section.reference_mm,
            )
            if t.done():
                found.append(plane)
        self._unique("plane", [p.label for p in found])
        self._set(planes=tuple(found))

    def _unique(self, kind: str, labels: list[str]) -> None:
        for label in sorted({x for x in labels if labels.count(x) > 1}):
            self.table.wrong(f"{kind} “{label}” is listed twice; give each its name.")


def panel_from(t: Table, file: SectionFile, box: Box) -> Panel:
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
    )


def stations_of(section: Section, unit: str, t: Table) -> tuple[float, float]:
    """Map positions of the two stations of an item."""
    value = t.raw("stations", "two stations [from, to]")
    if not isinstance(value, list) or len(value) != 2:
        if value is not None:
            t.wrong(f"“stations” is {value!r}; give two of them, [from, to].")
        return section.map1_mm, section.map2_mm
    first, last = (_station(section, unit, t, v) for v in value)
    if last < first:
        t.wrong(f"“stations” {value}: the second lies ahead of the first; exchange.")
    elif first < section.map1_mm - TINY_MM or last > section.map2_mm + TINY_MM:
        t.wrong(f"“stations” {value} reach outside section {section.code}.")
    return first, last


def _station(section: Section, unit: str, t: Table, value: Any) -> float:
    """Map position of a station: a number of the plug-free variant or a label."""
    if is_number(value):
        return section.map_of(canonical(value, unit), "")
    if isinstance(value, str):
        found = re.fullmatch(r"([\w.]+?)(?:\+(\d+(?:\.\d+)?))?", value.strip())
        for frame in section.frames:
            if found and frame.station_label == found[1]:
                return frame.map_mm + canonical(found[2] or 0, unit)
    t.wrong(
        f"station {value!r} is neither a number nor the label of a listed frame; "
        "write it as 560 or, in a plug, as “560A” or “560A+4”."
    )
    return section.map1_mm


def _largest_radius(section: Section, box: Box) -> float:
    """The greatest radius over the panel: hoop stress is proportional to it."""
    inside = [r for m, r in section.profile if box.map1_mm <= m <= box.map2_mm]
    return max(section.size_at(box.map1_mm), section.size_at(box.map2_mm), *inside)


def _is_pair(row: Any) -> bool:
    return isinstance(row, list) and len(row) == 2 and all(map(is_number, row))


def _extended(plugs: list[Plug], plug: Plug) -> list[Plug]:
    """The plugs with one more, or with the one of the same start made longer."""
    if plugs and plugs[-1].map_mm == plug.map_mm:
        return [*plugs[:-1], plug]
    return [*plugs, plug]
