"""Repairs of the demo fleet: those that answer findings, and the legacy ones."""

from __future__ import annotations

import datetime as dt
from dataclasses import replace

from reports.demo.airframe import in_opening
from reports.demo.fleet import BY_MSN, DEMO_TODAY, FLEET
from reports.demo.places import (
    clear_of_plug,
    fuselage_text,
)
from reports.demo.records import (
    DemoDocument,
    DemoFastener,
    DemoFinding,
    DemoLimit,
    DemoRepair,
    Truth,
)
from reports.demo.stream import Stream
from reports.demo.usage import Counters, Logbook

REPAIRED_SHARE = {
    "crack": 1.0,
    "hole": 1.0,
    "fastener": 1.0,
    "disbond": 0.10,
    "bird_strike": 0.10,
    "corrosion": 0.06,
    "lightning": 0.05,
    "dent": 0.03,
    "scratch": 0.03,
}
"""Cracks, holes and loose fasteners do not stay; most other damage is accepted."""
LEGACY_COUNTS = {
    1001: 11,
    1002: 11,
    1003: 9,
    1005: 8,
    1006: 8,
    1009: 5,
    1010: 3,
    1014: 2,
    1021: 1,
    1022: 1,
}
PAST_THRESHOLD_PER_AIRCRAFT = 5
PAST_THRESHOLD_MSNS = (1001, 1002, 1003, 1005)
CATEGORY_WEIGHTS = (("a", 52.0), ("b", 31.0), ("c", 17.0))
RECENT_CATEGORY_WEIGHTS = (("a", 30.0), ("b", 20.0), ("c", 80.0))
TIME_LIMITED_DAYS = 330
KINDS = {
    "dent": (("external_doubler", 5), ("flush", 3)),
    "scratch": (("blend", 8), ("external_doubler", 2)),
    "corrosion": (("blend", 6), ("external_doubler", 3), ("replacement", 1)),
    "crack": (("external_doubler", 7), ("internal_doubler", 2), ("replacement", 1)),
    "hole": (("flush", 1), ("external_doubler", 1)),
    "lightning": (("flush", 3), ("oversize_fastener", 2)),
    "fastener": (("oversize_fastener", 1),),
    "bird_strike": (("flush", 1), ("external_doubler", 2)),
    "disbond": (("bonded", 1),),
}
LEGACY_KINDS = (
    ("external_doubler", 11),
    ("internal_doubler", 2),
    ("flush", 3),
    ("blend", 3),
    ("splice", 1),
)
UNANSWERED = (
    "to_be_placed",
    "crack_computed",
    "crack_near_cutout",
    "crack_at_lap_hole",
    "duplicates",
    "mm_for_inch",
    "decimal_slip",
    "hail",
    "side_flips",
    "transpositions",
)
"""Planted findings that no repair may answer."""
DOUBLERS = ("external_doubler", "internal_doubler", "flush", "splice")
WORDS = {
    "blend": "Blend-out, shot peened and protected",
    "external_doubler": "External doubler",
    "internal_doubler": "Internal doubler",
    "flush": "Flush insert with internal doubler",
    "splice": "Stringer splice",
    "bonded": "Bonded patch",
    "oversize_fastener": "Oversize fasteners",
    "replacement": "Part replaced",
}


def repairs_draw(
    seed: int,
    logbooks: dict[int, Logbook],
    findings: list[DemoFinding],
    planted: dict[str, list[str]],
) -> list[DemoRepair]:
    """Repairs by aircraft, oldest first; keys follow that order."""
    stay_open = {key for case in UNANSWERED for key in planted[case]}
    stay_open |= {
        key for case in ("duplicates", "mm_for_inch") for key in planted[case]
    }
    stay_open |= set(planted["decimal_slip"]) | set(planted["hail"])
    repairs = []
    for aircraft in FLEET:
        msn = aircraft.msn
        found = sorted(
            (f for f in findings if f.msn == msn and f.key not in stay_open),
            key=lambda f: (f.found_on, f.key),
        )
        drawn = _legacy_draw(seed, msn, logbooks[msn])
        stream = Stream(seed, "repairs", msn)
        for finding in found:
            if stream.chance(REPAIRED_SHARE[finding.damage_type]):
                answer = _answer_draw(stream, finding, logbooks[msn])
                if answer is not None:
                    drawn.append(answer)
        drawn.sort(key=lambda repair: (repair.released_on, repair.key))
        repairs += [
            replace(repair, key=f"R-{msn}-{number:03d}")
            for number, repair in enumerate(drawn, 1)
        ]
    return repairs


def approval_draw(stream: Stream, msn: int, sequence: int) -> DemoDocument:
    """Repair manual 70 %, maker's letter 18 %, design organisation 12 %."""
    kind = stream.weighted(
        (("repair_manual", 70), ("letter", 18), ("design_approval", 12))
    )
    if kind == "repair_manual":
        page = f"p. {stream.whole(201, 248)}, fig. {stream.whole(1, 12)}"
        reference = f"ARD-52 SRM 53-{stream.whole(10, 40)}-{stream.whole(1, 9):02d}"
        return DemoDocument(kind, reference, "14", page, "Ardlune Aircraft")
    number = f"{msn}-{sequence:03d}"
    if kind == "letter":
        return DemoDocument(kind, f"ARD-L-{number}", "A", "p. 2", "Ardlune Aircraft")
    return DemoDocument(kind, f"TS-DA-{number}", "1", "p. 4", "Tarrant Structures")


def structure_of(
    stream: Stream, kind: str, length_in: float
) -> tuple[tuple[tuple[str, str], ...], tuple[DemoFastener, ...]]:
    """Layers and fasteners of a repair of this kind."""
    if kind in ("blend", "replacement"):
        return (), ()
    if kind == "oversize_fastener":
        return (), (DemoFastener("solid rivet, oversize", "5.6 mm", "", "", 1, 3),)
    if kind == "bonded":
        return (("glass laminate, two plies", "0.5 mm"),), ()
    thickness = stream.pick(("1.6 mm", "1.8 mm", "0.071 in"))
    per_row = max(4, int(length_in))
    rivet = DemoFastener("solid rivet", "4.8 mm", "25 mm", "10 mm", 3, 3 * per_row)
    return (("2024-T3 clad sheet", thickness),), (rivet,)


def _legacy_draw(seed: int, msn: int, logbook: Logbook) -> list[DemoRepair]:
    """Released at 10-95 % of the opening cycles, before our records begin."""
    aircraft = BY_MSN[msn]
    stream = Stream(seed, "legacy", msn)
    drawn = []
    for number in range(LEGACY_COUNTS.get(msn, 0)):
        forced = msn in PAST_THRESHOLD_MSNS and number < PAST_THRESHOLD_PER_AIRCRAFT
        share = stream.between(0.10, 0.50 if forced else 0.95)
        cycles = int(aircraft.opening_cycles * share)
        released_on = logbook.date_at_cycles(cycles)
        at = Counters(
            aircraft.opening_hours * 60 * cycles // aircraft.opening_cycles, cycles
        )
        kind = "external_doubler" if forced else stream.weighted(LEGACY_KINDS)
        written = _legacy_place(stream, aircraft.variant)
        length = stream.between(6, 22)
        category = stream.weighted((("a", 60), ("b", 40)))
        if forced or kind == "blend":
            category = "b" if forced else "a"
        layers, fasteners = structure_of(stream, kind, length)
        drawn.append(
            DemoRepair(
                key=f"L{number:02d}",
                msn=msn,
                kind=kind,
                location=written[0],
                truth=written[1],
                length_in=length,
                width_in=length * stream.between(0.4, 0.9),
                released_on=released_on,
                at=at,
                category=category,
                category_reason="",
                document=approval_draw(stream, msn, number + 1),
                performed_by="hangar_1",
                inspected_by="inspector",
                released_by="certifier",
                description=f"{WORDS[kind]}, from the former operator's records.",
                layers=layers,
                fasteners=fasteners,
                legacy=True,
            )
        )
    return drawn


def _legacy_place(stream: Stream, variant: str) -> tuple[str, Truth]:
    while True:
        sta, deg = stream.between(245, 895), stream.between(-170, 170)
        if clear_of_plug(sta, variant) and not in_opening(sta, deg, 8.0):
            written = fuselage_text(stream, sta, deg, variant)
            return written.text, written.truth


def _answer_draw(
    stream: Stream, finding: DemoFinding, logbook: Logbook
) -> DemoRepair | None:
    """The repair that answers a finding; None while it is still being planned."""
    released_on = finding.found_on + dt.timedelta(days=stream.whole(1, 5))
    kind = stream.weighted(KINDS[finding.damage_type])
    if kind == "blend" and not finding.reworked:
        kind = "external_doubler"
    length = stream.between(5, 16)
    document = approval_draw(stream, finding.msn, 500 + len(finding.key))
    category, reason = _category_draw(stream, finding, kind, released_on)
    layers, fasteners = structure_of(stream, kind, length)
    if released_on > logbook.days[-1].day - dt.timedelta(days=10):
        return None
    hidden = kind == "external_doubler" and finding.damage_type == "dent"
    return DemoRepair(
        key=finding.key,
        msn=finding.msn,
        kind=kind,
        location=finding.location,
        truth=finding.truth,
        length_in=length,
        width_in=length * 0.7,
        released_on=released_on,
        at=logbook.at(released_on),
        category=category,
        category_reason=reason,
        document=document,
        performed_by=stream.pick(("hangar_1", "hangar_2")),
        inspected_by="inspector",
        released_by="certifier",
        description=f"{WORDS[kind]} at {finding.location}.",
        findings=(finding.key,),
        damage_removed="no" if hidden and stream.chance(0.4) else "yes",
        edge_margin_in=round(stream.between(0.8, 2.5), 1),
        layers=layers,
        fasteners=fasteners,
        replace_by=_replacement_limits(stream, logbook, released_on)
        if category == "c"
        else (),
    )


def _category_draw(
    stream: Stream, finding: DemoFinding, kind: str, released_on: dt.date
) -> tuple[str, str]:
    old = (DEMO_TODAY - released_on).days > TIME_LIMITED_DAYS
    category = stream.weighted(CATEGORY_WEIGHTS if old else RECENT_CATEGORY_WEIGHTS)
    if finding.truth.section.startswith("NAC") or finding.damage_type == "disbond":
        return "not_applicable", "secondary structure by the type's list"
    if kind not in DOUBLERS or (category == "c" and (old or finding.msn == 1006)):
        return "a", ""
    return category, ""


def _replacement_limits(
    stream: Stream, logbook: Logbook, released_on: dt.date
) -> tuple[DemoLimit, ...]:
    """500-3,000 FC or 12-18 months, whichever comes first."""
    cycles = 100 * stream.whole(17, 30)
    months = stream.whole(12, 18)
    return (
        DemoLimit("cycles", logbook.at(released_on).cycles + cycles, f"{cycles} FC"),
        DemoLimit("months", months, f"{months} months"),
    )
