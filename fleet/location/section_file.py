"""One section of a geometry file: its lines, panels, cut-outs, joints and planes."""

from __future__ import annotations

import itertools
import math
from collections.abc import Iterable
from dataclasses import replace
from typing import Any

from fleet.location.parts import Frame, PanelMaterial, Plug, Stringer
from fleet.location.parts_file import (
    Lines,
    cutouts_of,
    joints_of,
    panels_of,
    planes_of,
)
from fleet.location.sections import Section
from fleet.location.table import Table, is_number
from fleet.units import FACTORS, canonical, number_write

SKINS = ("outer", "upper lower", "left right")


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
        lines = self.lines
        self._set(
            planes=planes_of(lines),
            panels=panels_of(lines),
            joints=joints_of(lines),
            cutouts=cutouts_of(lines),
        )
        self.table.raw("copies", "a list of tables", optional=True)
        return self.section

    @property
    def lines(self) -> Lines:
        """The section as far as it was read, to place other items by."""
        return Lines(self.table, self.section, self.unit, self.materials)

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
            origin = t.choice("origin", ("crown", "keel"))
            if count % 2:
                t.wrong(
                    "“count” must be even: the lines stand in pairs, left and right."
                )
            lines = self._around(prefix, count, origin == "keel")
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

    def _around(self, prefix: str, count: int, from_keel: bool) -> tuple[Stringer, ...]:
        """Lines once round from the crown: 1, 2R ... nR, keel, nL ... 2L.

        Numbers rise from the crown, or from the keel where the type counts so.
        """
        half, lines = count // 2, []
        wrap = self.section.wrap_mm or 0.0
        for turn in range(count):
            number = turn + 1 if turn <= half else count - turn + 1
            if from_keel:
                number = half + 2 - number
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


def _is_pair(row: Any) -> bool:
    return isinstance(row, list) and len(row) == 2 and all(map(is_number, row))


def _extended(plugs: list[Plug], plug: Plug) -> list[Plug]:
    """The plugs with one more, or with the one of the same start made longer."""
    if plugs and plugs[-1].map_mm == plug.map_mm:
        return [*plugs[:-1], plug]
    return [*plugs, plug]
