"""Findings planted on purpose: errors and traps that the program must show."""

from __future__ import annotations

import datetime as dt
from dataclasses import dataclass, replace

from reports.demo.ageing import crack_finding, lap_joint_place
from reports.demo.airframe import PLUG_STA, degrees_of
from reports.demo.findings import Spotted, dent_dimensions, length_text
from reports.demo.fleet import BY_MSN, day_date
from reports.demo.places import (
    FUSELAGE,
    Written,
    fuselage_text,
    fuselage_truth,
    nearest_stringer,
    plain,
    ramp_place,
)
from reports.demo.records import DemoEvent, DemoFinding, Dimension, Truth
from reports.demo.stream import Stream
from reports.demo.usage import Counters, Logbook

DUPLICATE_PAIRS, UNIT_ERRORS, SIDE_FLIPS, TRANSPOSITIONS = 12, 9, 6, 4
KEEN_MSN, KEEN_FINDINGS, KEEN_FROM_DAY = 1014, 40, 1_100
HAIL_DENTS = 46

Planted = dict[str, list[str]]


@dataclass
class Planting:
    """The findings and events so far, to which the planted cases are added."""

    seed: int
    logbooks: dict[int, Logbook]
    findings: list[DemoFinding]
    events: list[DemoEvent]
    planted: Planted

    def add(self, case: str, finding: DemoFinding) -> DemoFinding:
        self.findings.append(finding)
        self.planted.setdefault(case, []).append(finding.key)
        return finding

    def spotted(self, msn: int, on: dt.date, reporter: str) -> Spotted:
        return Spotted(on, self.logbooks[msn].at(on), reporter, "ramp")


def findings_plant(planting: Planting) -> None:
    """Add and alter findings; the order is fixed, so the draws are too."""
    _plain_cases(planting)
    _cracks(planting)
    _hail(planting)
    _keen_reporter(planting)
    taken: set[str] = set()
    _duplicates(planting, taken)
    _unit_errors(planting, taken)
    _side_flips(planting, taken)
    _transpositions(planting, taken)


def _dent(
    planting: Planting,
    key: str,
    msn: int,
    on: dt.date,
    written: Written,
    dimensions: tuple[Dimension, ...],
    description: str,
    reporter: str = "line_1",
) -> DemoFinding:
    return DemoFinding(
        key=key,
        msn=msn,
        found_on=on,
        at=planting.logbooks[msn].at(on),
        location=written.text,
        truth=written.truth,
        damage_type="dent",
        element="skin",
        element_label="",
        surface="outer",
        cause="accidental",
        occasion="ramp",
        method="general_visual",
        reporter=reporter,
        state="reported",
        description=description,
        dimensions=dimensions,
    )


def _plain_cases(planting: Planting) -> None:
    sizes = (
        Dimension("length_mm", "2.4 in"),
        Dimension("width_mm", "1.8 in"),
        Dimension("depth_mm", "0.040 in", worked_out=45.0),
    )
    slipped = (
        Dimension("length_mm", "6.4 in"),
        Dimension("width_mm", "3.0 in"),
        Dimension("depth_mm", "0.0120 in", worked_out=25.0),
    )
    label_600 = Written("STA 600 S-9R", fuselage_truth(600, 72, "S", 0.5, 4.4))
    slip = Written("STA 486+7 S-9L", fuselage_truth(493, -72, "S", 0.5, 4.4))
    nowhere = Written("dent near the galley", Truth("", 0, 0, None, 0, 0))
    panel = [
        Written(f"STA 560A+{aft} S-{n}L", _plug_truth(aft, -9 * (n - 1)))
        for aft, n in ((6, 3), (12, 4))
    ]
    made = (
        ("station_label_on_stretched", 1021, (2024, 3, 14), label_600, sizes),
        ("decimal_slip", 1022, (2024, 8, 22), slip, slipped),
        ("to_be_placed", 1009, (2024, 12, 19), nowhere, sizes),
        ("small_number_trap", 1027, (2023, 5, 9), panel[0], sizes),
        ("small_number_trap", 1027, (2024, 6, 2), panel[1], sizes),
    )
    for number, (case, msn, on, written, dimensions) in enumerate(made, 1):
        key = f"F-{msn}-P{number:02d}"
        planting.add(
            case,
            _dent(planting, key, msn, dt.date(*on), written, dimensions, "Dent."),
        )
    true_sizes = (slipped[0], slipped[1], Dimension("depth_mm", "0.120 in", 25.0))
    _alter(planting, planting.planted["decimal_slip"][0], true_dimensions=true_sizes)


def _plug_truth(aft: float, deg: float) -> Truth:
    """In the bay aft of frame 24A, which only stretched aircraft have."""
    base = fuselage_truth(PLUG_STA, deg, "S", 0.5, 4.4)
    return replace(base, sta=PLUG_STA + 20 + aft, x_in=PLUG_STA + 20 + aft)


def _cracks(planting: Planting) -> None:
    """Three recent cracks: one the shell method covers, two that it must refuse."""
    cases = (
        ("crack_computed", 1001, (2024, 12, 17), 0.9, "skin", 0),
        ("crack_near_cutout", 1002, (2024, 11, 20), 0.7, "skin", 0),
        ("crack_at_lap_hole", 1005, (2024, 9, 18), 0.35, "fastener hole", 4),
    )
    stream = Stream(planting.seed, "planted-cracks")
    wheres = (
        _exact(650.0, -121.0, "STA 650, 3.9 in below S-14L"),
        _exact(811.0, 163.0, "STA 811, 1 in below S-19R"),
        lap_joint_place(stream, 668.0, 12, True, "base"),
    )
    for number, (case, written) in enumerate(zip(cases, wheres, strict=True), 11):
        name, msn, on, length, origin, holes = case
        spotted = planting.spotted(msn, dt.date(*on), "inspector")
        planting.add(
            name,
            crack_finding(
                BY_MSN[msn],
                f"F-{msn}-P{number}",
                replace(spotted, occasion="check"),
                written,
                length_in=length,
                direction="longitudinal",
                origin=origin,
                holes=holes,
            ),
        )


def _exact(sta: float, deg: float, text: str) -> Written:
    return Written(text, fuselage_truth(sta, deg, "base", 0.05, 0.1))


def _hail(planting: Planting) -> None:
    """46 dents of one afternoon: one event, one finding, one count on the map."""
    msn, on = 1009, dt.date(2023, 6, 18)
    at = planting.logbooks[msn].at(on)
    event = DemoEvent(
        "V-1009-P01", msn, "hail", on, at, "Parked in a hailstorm; crown dented."
    )
    planting.events.append(event)
    truth = Truth(FUSELAGE, 480.0, 480.0, 0.0, 80.0, 27.0)
    sizes = (
        Dimension("length_mm", "0.9 in"),
        Dimension("width_mm", "0.8 in"),
        Dimension("depth_mm", "0.020 in", worked_out=40.0),
    )
    written = Written("Stations 400-560 S-4L to S-4R", truth)
    dent = _dent(
        planting,
        "F-1009-P20",
        msn,
        on,
        written,
        sizes,
        "46 hail dents over the crown; the largest is measured.",
    )
    planting.add(
        "hail",
        replace(
            dent,
            cause="accidental",
            occasion="event",
            event=event.key,
            cluster_count=HAIL_DENTS,
        ),
    )


def _keen_reporter(planting: Planting) -> None:
    """One inspector writes down every mark on one aircraft."""
    stream = Stream(planting.seed, "keen", KEEN_MSN)
    logbook = planting.logbooks[KEEN_MSN]
    for number in range(1, KEEN_FINDINGS + 1):
        while True:
            on = day_date(stream.whole(KEEN_FROM_DAY, 2_170))
            if not logbook.aircraft.in_check((on - day_date(0)).days):
                break
        sta, deg = ramp_place(stream, "base")
        finding = _dent(
            planting,
            f"F-{KEEN_MSN}-Q{number:02d}",
            KEEN_MSN,
            on,
            fuselage_text(stream, sta, deg, "base"),
            dent_dimensions(stream, False, stream.lognormal(0.8, 0.3)),
            "Small dent noted on the walk-round.",
            reporter="keen",
        )
        planting.add("keen_reporter", finding)


def _alter(planting: Planting, key: str, **changes: object) -> DemoFinding:
    index = next(i for i, f in enumerate(planting.findings) if f.key == key)
    changed: DemoFinding = replace(planting.findings[index], **changes)  # type: ignore[arg-type]  # each caller names real fields
    planting.findings[index] = changed
    return changed


def _candidates(planting: Planting, taken: set[str]) -> list[DemoFinding]:
    """Unplanted dents on the cylinder's sides, in key order, spread by aircraft."""
    planted = {key for keys in planting.planted.values() for key in keys}
    found = [
        finding
        for finding in planting.findings
        if finding.damage_type == "dent"
        and finding.truth.section == FUSELAGE
        and finding.truth.across_in is not None
        and 20 < abs(degrees_of(finding.truth.across_in)) < 160
        and 250 < finding.truth.sta < 890
        and finding.key not in planted
        and finding.key not in taken
        and "o'clock" not in finding.location
    ]
    return sorted(found, key=lambda f: (f.key[-3:], f.key))


def _degrees(finding: DemoFinding) -> float:
    assert finding.truth.across_in is not None
    return degrees_of(finding.truth.across_in)


def _duplicates(planting: Planting, taken: set[str]) -> None:
    """The same dent written down again by someone else, days later."""
    stream = Stream(planting.seed, "duplicates")
    for finding in _candidates(planting, taken)[:DUPLICATE_PAIRS]:
        taken.add(finding.key)
        logbook = planting.logbooks[finding.msn]
        last = logbook.days[-1].day
        on = min(finding.found_on + dt.timedelta(days=stream.whole(2, 30)), last)
        variant = BY_MSN[finding.msn].variant
        sta = finding.truth.sta + stream.between(-1.0, 1.0)
        label = f"{plain(round(sta))} {nearest_stringer(_degrees(finding))}"
        truth = replace(finding.truth, x_tolerance_in=1.6, across_tolerance_in=4.5)
        assert variant != "S" or not PLUG_STA < sta < PLUG_STA + 20
        again = replace(
            finding,
            key=finding.key + "D",
            found_on=on,
            at=logbook.at(on),
            location=f"STA {label}",
            truth=truth,
            reporter="line_2" if finding.reporter != "line_2" else "line_3",
            dimensions=_measured_again(finding.dimensions),
            description="Dent.",
            occasion="ramp",
        )
        planting.add("duplicates", again)
        planting.planted["duplicates"].append(finding.key)


def _measured_again(dimensions: tuple[Dimension, ...]) -> tuple[Dimension, ...]:
    """Length and width a tenth larger, in inches; no depth gauge at hand."""
    again = []
    for dimension in dimensions[:2]:
        number, unit = dimension.entered.split()
        inches = float(number) / (25.4 if unit == "mm" else 1.0)
        again.append(Dimension(dimension.quantity, length_text(inches * 1.1, False)))
    return tuple(again)


def _unit_errors(planting: Planting, taken: set[str]) -> None:
    """Length and width read in mm, written down as inches."""
    metric = [
        finding
        for finding in _candidates(planting, taken)
        if finding.dimensions[0].entered.endswith("mm")
    ]
    for finding in metric[:UNIT_ERRORS]:
        taken.add(finding.key)
        wrong = tuple(
            replace(d, entered=d.entered.replace("mm", "in"))
            if d.quantity != "depth_mm"
            else d
            for d in finding.dimensions
        )
        _alter(
            planting,
            finding.key,
            dimensions=wrong,
            true_dimensions=finding.dimensions,
        )
        planting.planted.setdefault("mm_for_inch", []).append(finding.key)


def _side_flips(planting: Planting, taken: set[str]) -> None:
    """The text names the other side of the aircraft."""
    stream = Stream(planting.seed, "flips")
    for finding in _candidates(planting, taken)[:SIDE_FLIPS]:
        taken.add(finding.key)
        variant = BY_MSN[finding.msn].variant
        other = fuselage_text(stream, finding.truth.sta, -_degrees(finding), variant)
        _alter(planting, finding.key, location=other.text)
        planting.planted.setdefault("side_flips", []).append(finding.key)


def _transpositions(planting: Planting, taken: set[str]) -> None:
    """Two digits of the cycles swapped: 18,247 for 18,427."""
    done = 0
    for finding in _candidates(planting, taken):
        cycles = finding.at.cycles
        hundreds, tens = cycles // 100 % 10, cycles // 10 % 10
        swapped = cycles + (tens - hundreds) * 90
        if hundreds <= tens or done == TRANSPOSITIONS:
            continue
        done += 1
        taken.add(finding.key)
        _alter(planting, finding.key, at=Counters(finding.at.minutes, swapped))
        planting.planted.setdefault("transpositions", []).append(finding.key)
