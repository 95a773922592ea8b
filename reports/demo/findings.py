"""Everyday damage of the demo fleet: dents, scratches, fasteners, birds, lightning."""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterator
from dataclasses import dataclass, replace

from reports.demo.airframe import degrees_of, in_opening, skin_thickness_mm
from reports.demo.extremities import off_fuselage_place
from reports.demo.fleet import FLEET, DemoAircraft
from reports.demo.places import (
    SPOT_STATIONS,
    Written,
    fuselage_text,
    plain,
    ramp_place,
)
from reports.demo.records import DemoEvent, DemoFinding, Dimension
from reports.demo.stream import Stream
from reports.demo.usage import Counters, Logbook

FINDINGS_PER_CYCLE = 4.75 / 1_000
SUMMER = range(5, 10)
KIND_WEIGHTS = {
    "dent": 44.0,
    "scratch": 16.0,
    "fastener": 6.0,
    "lightning": 6.0,
    "disbond": 3.0,
    "bird_strike": 2.0,
    "hole": 1.0,
}
SUMMER_LIGHTNING, WINTER_LIGHTNING = 1.44, 0.686
"""60 % of the strikes in five months of twelve: 0.6 / (5/12) and 0.4 / (7/12)."""
LINE_CREW = ("line_1", "line_2", "line_3", "recorder", "hangar_1", "hangar_2")
METHODS = {
    "dent": "general_visual",
    "scratch": "detailed_visual",
    "fastener": "detailed_visual",
    "lightning": "detailed_visual",
    "disbond": "tap",
    "bird_strike": "general_visual",
    "hole": "general_visual",
}
CAUSES = {
    "dent": "accidental",
    "scratch": "accidental",
    "fastener": "wear",
    "lightning": "accidental",
    "disbond": "wear",
    "bird_strike": "accidental",
    "hole": "accidental",
}
NAMES = {
    "dent": "Dent",
    "scratch": "Scratch",
    "fastener": "Loose fastener",
    "lightning": "Lightning mark",
    "disbond": "Disbond found by tap test",
    "bird_strike": "Bird strike dent",
    "hole": "Puncture by ground equipment",
}


@dataclass(frozen=True, slots=True)
class Spotted:
    """When something was found and by whom."""

    on: dt.date
    at: Counters
    reporter: str
    occasion: str


def ramp_findings_draw(
    seed: int, logbooks: dict[int, Logbook]
) -> tuple[list[DemoFinding], list[DemoEvent]]:
    """All damage that comes flight by flight, with the strikes that caused some."""
    findings: list[DemoFinding] = []
    events: list[DemoEvent] = []
    for aircraft in FLEET:
        stream = Stream(seed, "findings", aircraft.msn)
        for number, spotted in enumerate(_spotted(stream, logbooks[aircraft.msn]), 1):
            key = f"F-{aircraft.msn}-{number:03d}"
            finding = _finding_draw(stream, aircraft, key, spotted)
            if finding.occasion == "event":
                events.append(strike_event(finding))
                finding = replace(finding, event=events[-1].key)
            findings.append(finding)
    return findings, events


def strike_event(finding: DemoFinding) -> DemoEvent:
    """The strike that left this damage."""
    kind = "bird" if finding.damage_type == "bird_strike" else "lightning"
    words = "Bird strike on approach" if kind == "bird" else "Lightning strike"
    return DemoEvent(
        "V" + finding.key[1:],
        finding.msn,
        kind,
        finding.found_on,
        finding.at,
        f"{words}, reported by the crew.",
    )


def length_text(inches: float, metric: bool, places: int = 1) -> str:
    """A length as measured: inches with so many places, or whole or tenth mm."""
    if metric:
        mm = inches * 25.4
        return f"{mm:.0f} mm" if mm >= 10 else f"{max(mm, 0.1):.1f} mm"
    return f"{max(inches, 10.0**-places):.{places}f} in"


def dent_dimensions(
    stream: Stream, metric: bool, width_in: float | None = None
) -> tuple[Dimension, ...]:
    """Width, length and depth of a dent, with the ratio the technician worked out."""
    width = stream.lognormal(1.8, 0.55) if width_in is None else width_in
    length = width * (1 + stream.exponential(0.35))
    depth = width / stream.lognormal(45, 0.45)
    wide = length_text(width, metric)
    deep = f"{depth * 25.4:.2f} mm" if metric else f"{max(depth, 0.004):.3f} in"
    ratio = float(wide.split()[0]) / float(deep.split()[0])
    return (
        Dimension("length_mm", length_text(length, metric)),
        Dimension("width_mm", wide),
        Dimension("depth_mm", deep, worked_out=round(ratio, 1)),
    )


def blend_dimensions(
    length_in: float, width_in: float, thickness_mm: float, removed_mm: float
) -> tuple[Dimension, ...]:
    """What is measured after a blend-out, with the gauge's uncertainty."""
    left = thickness_mm - removed_mm
    return (
        Dimension("remaining_thickness_mm", f"{left:.2f} ± 0.05 mm"),
        Dimension("original_thickness_mm", f"{thickness_mm:.2f} mm"),
        Dimension("blend_length_mm", length_text(length_in * 1.5, False)),
        Dimension("blend_width_mm", length_text(width_in * 1.5, False)),
        Dimension("damage_removed", "yes"),
    )


def trimmed_dimensions(
    stream: Stream, found: tuple[Dimension, ...]
) -> tuple[Dimension, ...]:
    """A puncture trimmed to a round hole, before it is closed."""
    longest_mm = _mm(found[0].entered)
    return (
        Dimension("hole_diameter_mm", f"{longest_mm + 4:.1f} mm"),
        Dimension("edge_distance_mm", f"{stream.whole(70, 200)} mm"),
        Dimension("strip_width_mm", f"{stream.whole(190, 223)} mm"),
        Dimension("hole_load", "open"),
        Dimension("damage_removed", "yes"),
    )


def ramp_dimensions(stream: Stream, kind: str, metric: bool) -> tuple[Dimension, ...]:
    """The measured set of one everyday damage type."""
    if kind in ("dent", "bird_strike"):
        return dent_dimensions(stream, metric)
    if kind == "scratch":
        depth_mm = 1.4 * stream.beta(2, 8)
        deep = f"{depth_mm:.2f} mm" if metric else f"{depth_mm / 25.4:.3f} in"
        return (
            Dimension("length_mm", length_text(stream.lognormal(3.0, 0.6), metric)),
            Dimension("depth_mm", deep),
        )
    if kind == "lightning":
        return (
            Dimension("diameter_mm", f"{stream.between(1.5, 9.0):.1f} mm"),
            Dimension("depth_mm", f"{stream.between(0.1, 0.6):.2f} mm"),
        )
    if kind == "fastener":
        return (Dimension("fastener_count", str(1 + stream.poisson(1.0, 6))),)
    if kind == "hole":
        longer = stream.between(0.3, 1.4)
        return (
            Dimension("length_mm", length_text(longer, metric)),
            Dimension("width_mm", length_text(longer * 0.8, metric)),
        )
    longer = stream.lognormal(2.5, 0.5)
    return (
        Dimension("length_mm", length_text(longer, metric)),
        Dimension("width_mm", length_text(longer * stream.between(0.4, 0.9), metric)),
    )


def _spotted(stream: Stream, logbook: Logbook) -> Iterator[Spotted]:
    share = sum(KIND_WEIGHTS.values()) / 100
    for day in logbook.days:
        found = stream.poisson(FINDINGS_PER_CYCLE * share * day.cycles)
        for _ in range(found):
            reporter = stream.pick(LINE_CREW)
            occasion = stream.weighted((("ramp", 6), ("task", 3), ("check", 1)))
            yield Spotted(day.day, logbook.at(day.day), reporter, occasion)


def _kind_draw(stream: Stream, month: int) -> str:
    strikes = SUMMER_LIGHTNING if month in SUMMER else WINTER_LIGHTNING
    return stream.weighted(
        tuple(
            (kind, weight * (strikes if kind == "lightning" else 1.0))
            for kind, weight in KIND_WEIGHTS.items()
        )
    )


def _finding_draw(
    stream: Stream, aircraft: DemoAircraft, key: str, spotted: Spotted
) -> DemoFinding:
    kind = _kind_draw(stream, spotted.on.month)
    metric = stream.chance(0.2)
    written, element, surface = _place_draw(stream, kind, aircraft.variant)
    dimensions = ramp_dimensions(stream, kind, metric)
    reworked: tuple[Dimension, ...] = ()
    if kind == "hole":
        reworked = trimmed_dimensions(stream, dimensions)
    elif kind == "scratch" and stream.chance(0.4) and surface == "outer":
        removed_mm = _mm(dimensions[1].entered) + 0.03
        thickness_mm = skin_thickness_mm(degrees_of(written.truth.across_in or 0.0))
        length_in = _mm(dimensions[0].entered) / 25.4
        reworked = blend_dimensions(length_in, 0.5, thickness_mm, removed_mm)
    cause = CAUSES[kind]
    if kind == "scratch" and stream.chance(0.35):
        cause = "maintenance"
    return DemoFinding(
        key=key,
        msn=aircraft.msn,
        found_on=spotted.on,
        at=spotted.at,
        location=written.text,
        truth=written.truth,
        damage_type=kind,
        element=element,
        element_label="",
        surface=surface,
        cause=cause,
        occasion="event" if kind in ("lightning", "bird_strike") else spotted.occasion,
        method=METHODS[kind],
        reporter=spotted.reporter,
        state="reported",
        description=_description(kind, written),
        dimensions=dimensions,
        reworked=reworked,
    )


def _mm(entered: str) -> float:
    number, unit = entered.split()
    return float(number) * (25.4 if unit == "in" else 1.0)


def _place_draw(stream: Stream, kind: str, variant: str) -> tuple[Written, str, str]:
    """Location, element and surface by the habits of the damage type."""
    if kind == "disbond" or (kind not in ("lightning", "bird_strike", "hole")):
        off = kind == "disbond" or stream.chance(0.12)
        if off:
            return off_fuselage_place(stream, kind)
        sta, deg = ramp_place(stream, variant)
        return fuselage_text(stream, sta, deg, variant), "skin", "outer"
    if kind == "hole":
        sta, deg = ramp_place(stream, variant)
        return fuselage_text(stream, sta, deg, variant), "skin", "outer"
    if stream.chance(0.5):
        return off_fuselage_place(stream, kind)
    while True:
        tail = kind == "lightning" and stream.chance(0.5)
        sta = stream.between(960, 1_038) if tail else stream.between(104, 158)
        deg = stream.between(-179, 179)
        if not in_opening(sta, deg, 1.5):
            return fuselage_text(stream, sta, deg, variant), "skin", "outer"


def _description(kind: str, written: Written) -> str:
    words = NAMES[kind]
    truth = written.truth
    at_cargo_door = (
        truth.section == "FUS"
        and int(truth.sta // 20 * 20) in SPOT_STATIONS
        and truth.across_in is not None
        and truth.across_in > 90
    )
    if at_cargo_door and kind in ("dent", "scratch", "hole"):
        return f"{words} beside the aft cargo door, loader contact likely."
    return f"{words}, station about {plain(round(truth.sta))}."
