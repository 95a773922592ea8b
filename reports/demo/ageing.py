"""Damage that comes with age: corrosion in calendar time, cracks in flight cycles."""

from __future__ import annotations

from reports.demo.airframe import (
    BAY_IN,
    BUTT_STATIONS,
    FRAME_PITCH_IN,
    LAP_STRINGERS,
    OPENINGS,
    STRINGER_STEP_DEG,
    frame_before,
    frame_station,
    in_opening,
    skin_thickness_mm,
    stringer_name,
)
from reports.demo.findings import Spotted, blend_dimensions, length_text
from reports.demo.fleet import FLEET, DemoAircraft, day_date
from reports.demo.places import (
    FUSELAGE,
    Written,
    clear_of_plug,
    fuselage_text,
    fuselage_truth,
    nearest_stringer,
    plain,
    precise_text,
    rounded,
)
from reports.demo.records import DemoFinding, Dimension, Truth
from reports.demo.stream import Stream
from reports.demo.usage import Logbook, years_of_service

CORROSION_PER_CHECK_AND_YEAR = 0.30
CRACK_SCALE_FC, CRACK_SHAPE = 13_200, 3
HANGAR_CREW = ("hangar_1", "hangar_2", "inspector")


def corrosion_draw(seed: int, logbooks: dict[int, Logbook]) -> list[DemoFinding]:
    """Found at checks; more of it the older the aircraft."""
    findings = []
    for aircraft in FLEET:
        stream = Stream(seed, "corrosion", aircraft.msn)
        logbook = logbooks[aircraft.msn]
        number = 0
        for check in aircraft.check_days():
            age = years_of_service(day_date(check), aircraft.msn)
            for _ in range(stream.poisson(CORROSION_PER_CHECK_AND_YEAR * age)):
                number += 1
                day = check + stream.whole(0, 9)
                if day >= aircraft.to_day:
                    day = check
                found_on = day_date(day)
                spotted = Spotted(
                    found_on, logbook.at(found_on), stream.pick(HANGAR_CREW), "check"
                )
                key = f"F-{aircraft.msn}-C{number:02d}"
                findings.append(_corrosion(stream, aircraft, key, spotted))
    return findings


def cracks_draw(seed: int, logbooks: dict[int, Logbook]) -> list[DemoFinding]:
    """Weibull in total flight cycles: few on young aircraft, many on old ones."""
    findings = []
    for aircraft in FLEET:
        stream = Stream(seed, "cracks", aircraft.msn)
        logbook = logbooks[aircraft.msn]
        first = (aircraft.opening_cycles / CRACK_SCALE_FC) ** CRACK_SHAPE
        last = (logbook.final.cycles / CRACK_SCALE_FC) ** CRACK_SHAPE
        for number in range(1, stream.poisson(last - first) + 1):
            hazard = stream.between(first, last)
            cycles = int(CRACK_SCALE_FC * hazard ** (1 / CRACK_SHAPE))
            found_on = logbook.date_at_cycles(max(cycles, aircraft.opening_cycles + 1))
            spotted = Spotted(
                found_on, logbook.at(found_on), stream.pick(HANGAR_CREW), "task"
            )
            key = f"F-{aircraft.msn}-K{number:02d}"
            findings.append(_crack(stream, aircraft, key, spotted))
    return findings


def lap_joint_place(
    stream: Stream, sta: float, stringer: int, right: bool, variant: str
) -> Written:
    """On a row of a longitudinal lap joint."""
    deg = (stringer - 1) * STRINGER_STEP_DEG * (1 if right else -1)
    label, tolerance = rounded(stream, sta)
    text = f"STA {plain(label)} {stringer_name(stringer, deg)} lap joint"
    return Written(text, fuselage_truth(sta, deg, variant, tolerance, 0.5))


def crack_finding(
    aircraft: DemoAircraft,
    key: str,
    spotted: Spotted,
    written: Written,
    *,
    length_in: float,
    direction: str,
    origin: str,
    element: str = "skin",
    element_label: str = "",
    holes: int = 0,
) -> DemoFinding:
    """A crack with what the applicability tests ask about it."""
    dimensions = [
        Dimension("length_mm", f"{length_in:.2f} ± 0.02 in"),
        Dimension("direction", direction),
        Dimension("origin", origin),
    ]
    if holes:
        dimensions += [
            Dimension("crack_count", str(holes)),
            Dimension("hole_diameter_mm", "4.8 mm"),
            Dimension("hole_load", "loaded"),
        ]
    row = f" at {holes} holes of one row" if holes > 1 else ""
    return DemoFinding(
        key=key,
        msn=aircraft.msn,
        found_on=spotted.on,
        at=spotted.at,
        location=written.text,
        truth=written.truth,
        damage_type="crack",
        element=element,
        element_label=element_label,
        surface="outer" if element == "skin" else "internal",
        cause="fatigue",
        occasion=spotted.occasion,
        method="eddy_current_high" if holes else "detailed_visual",
        reporter=spotted.reporter,
        state="reported",
        description=f"{direction.capitalize()} crack{row}, origin {origin}.",
        dimensions=tuple(dimensions),
        cluster_count=max(1, holes),
    )


def corrosion_dimensions(
    stream: Stream, thickness_mm: float
) -> tuple[tuple[Dimension, ...], tuple[Dimension, ...]]:
    """As found and after the blend-out that removed it."""
    length = stream.lognormal(2.5, 0.5)
    width = length * stream.between(0.3, 0.8)
    depth_mm = max(0.05, thickness_mm * stream.beta(2, 7))
    removed_mm = min(depth_mm + stream.between(0.02, 0.08), 0.9 * thickness_mm)
    found = (
        Dimension("length_mm", length_text(length, False)),
        Dimension("width_mm", length_text(width, False)),
        Dimension("depth_mm", f"{depth_mm:.2f} mm"),
        Dimension("corrosion_type", stream.pick(("pitting", "surface", "exfoliation"))),
    )
    return found, blend_dimensions(length, width, thickness_mm, removed_mm)


def _corrosion(
    stream: Stream, aircraft: DemoAircraft, key: str, spotted: Spotted
) -> DemoFinding:
    written, element = _corrosion_place(stream, aircraft.variant)
    across = written.truth.across_in
    skin = element == "skin" and across is not None
    thickness_mm = skin_thickness_mm(across / BAY_IN * 9) if skin and across else 2.0
    found, reworked = corrosion_dimensions(stream, thickness_mm)
    internal = element != "skin"
    return DemoFinding(
        key=key,
        msn=aircraft.msn,
        found_on=spotted.on,
        at=spotted.at,
        location=written.text,
        truth=written.truth,
        damage_type="corrosion",
        element=element,
        element_label="",
        surface="internal" if internal else stream.pick(("outer", "inner")),
        cause="corrosion",
        occasion="check",
        method="detailed_visual",
        reporter=spotted.reporter,
        state="reported",
        description="Corrosion found when the area was opened at the check.",
        dimensions=found,
        reworked=reworked,
    )


def _corrosion_place(stream: Stream, variant: str) -> tuple[Written, str]:
    kind = stream.weighted(
        (("belly", 45), ("sill", 27), ("joint", 13), ("floor", 9), ("keel", 6))
    )
    side = 1 if stream.chance(0.5) else -1
    while True:
        sta = stream.between(242, 898)
        if clear_of_plug(sta, variant) and not in_opening(sta, side * 153, 2.0):
            break
    if kind == "belly":
        return fuselage_text(
            stream, sta, side * stream.between(156, 177), variant
        ), "skin"
    if kind == "sill":
        door = OPENINGS[stream.whole(0, 3)]
        sta = stream.between(door.sta1, door.sta2)
        deg = (150 + stream.between(2.5, 6.0)) * (1 if door.deg1 > 0 else -1)
        return precise_text(stream, sta, deg, variant), "skin"
    if kind == "joint":
        return lap_joint_place(stream, sta, 18, side > 0, variant), "skin"
    label = frame_station(frame_before(sta))
    if kind == "floor":
        text = f"FLOOR BEAM STA {label} {'R' if side > 0 else 'L'}BL 20"
        return Written(text, _internal(label, variant)), "floor_beam"
    keel = frame_station(21 + frame_before(sta) % 10)
    text = f"KEEL BEAM STA {keel} {'RH' if side > 0 else 'LH'}"
    return Written(text, _internal(keel, variant)), "keel_beam"


def _internal(sta: float, variant: str) -> Truth:
    truth = fuselage_truth(sta, 0.0, variant, 0.1, 0.0)
    return Truth(FUSELAGE, truth.sta, truth.x_in, None, 0.1, 0.0)


def _crack(
    stream: Stream, aircraft: DemoAircraft, key: str, spotted: Spotted
) -> DemoFinding:
    length = stream.lognormal(0.6, 0.5)
    kind = stream.weighted((("joint", 40), ("skin", 30), ("frame", 18), ("corner", 12)))
    if kind == "joint":
        return _joint_crack(stream, aircraft, key, spotted, length)
    if kind == "skin":
        return _skin_crack(stream, aircraft, key, spotted, length)
    if kind == "frame":
        return _frame_crack(stream, aircraft, key, spotted, length)
    return _corner_crack(stream, aircraft, key, spotted, length)


def _joint_crack(
    stream: Stream, aircraft: DemoAircraft, key: str, spotted: Spotted, length: float
) -> DemoFinding:
    right = stream.chance(0.55)
    if stream.chance(0.12):
        sta = float(stream.pick(BUTT_STATIONS))
        deg = (1 if right else -1) * 9 * stream.whole(5, 7)
        text = f"STA {plain(sta)} {nearest_stringer(deg)} butt joint"
        written = Written(text, fuselage_truth(sta, deg, aircraft.variant, 0.5, 4.4))
        direction = "circumferential"
    else:
        aft_row = stream.chance(0.75)
        stringer = 12 if aft_row else stream.pick(LAP_STRINGERS)
        deg = STRINGER_STEP_DEG * (stringer - 1) * (1 if right else -1)
        while True:
            sta = stream.between(600, 738) if aft_row else stream.between(310, 890)
            if clear_of_plug(sta, aircraft.variant) and not in_opening(sta, deg, 2.0):
                break
        written = lap_joint_place(stream, sta, stringer, right, aircraft.variant)
        direction = "longitudinal"
    return crack_finding(
        aircraft,
        key,
        spotted,
        written,
        length_in=min(length * 0.4, 0.9),
        direction=direction,
        origin="fastener hole",
        holes=1 + stream.poisson(1.6, 9),
    )


def _skin_crack(
    stream: Stream, aircraft: DemoAircraft, key: str, spotted: Spotted, length: float
) -> DemoFinding:
    while True:
        frame = stream.whole(12, 32)
        sta = frame_station(frame) + FRAME_PITCH_IN / 2 + stream.between(-2.5, 2.5)
        clear = all(abs(sta - butt) > 9 for butt in BUTT_STATIONS)
        if clear and clear_of_plug(sta, aircraft.variant):
            break
    side = 1 if stream.chance(0.5) else -1
    low, high = stream.weighted((((11, 28), 1), ((107, 145), 2)))
    written = precise_text(
        stream, sta, side * stream.between(low, high), aircraft.variant
    )
    across = stream.chance(0.2)
    return crack_finding(
        aircraft,
        key,
        spotted,
        written,
        length_in=length,
        direction="circumferential" if across else "longitudinal",
        origin="scratch" if stream.chance(0.4) else "skin",
    )


def _frame_crack(
    stream: Stream, aircraft: DemoAircraft, key: str, spotted: Spotted, length: float
) -> DemoFinding:
    while True:
        frame = stream.whole(10, 40)
        side = 1 if stream.chance(0.5) else -1
        deg = STRINGER_STEP_DEG * stream.whole(12, 17) * side
        if not in_opening(frame_station(frame), deg, 1.0):
            break
    part = stream.pick(("WEB", "CAP"))
    text = f"FR {frame} {part} {nearest_stringer(deg)}"
    truth = fuselage_truth(frame_station(frame), deg, aircraft.variant, 0.1, 4.4)
    return crack_finding(
        aircraft,
        key,
        spotted,
        Written(text, truth),
        length_in=length,
        direction="radial",
        origin="cut-out corner",
        element=f"frame_{part.lower()}",
        element_label=f"FR {frame}",
    )


def _corner_crack(
    stream: Stream, aircraft: DemoAircraft, key: str, spotted: Spotted, length: float
) -> DemoFinding:
    door = stream.pick(OPENINGS)
    out = stream.between(0.6, 2.2)
    aft, low = stream.chance(0.5), stream.chance(0.5)
    right = door.deg1 > 0
    sta = door.sta2 + out if aft else door.sta1 - out
    corner = (
        max(abs(door.deg1), abs(door.deg2))
        if low
        else min(abs(door.deg1), abs(door.deg2))
    )
    deg = (corner + (2.0 if low else -2.0)) * (1 if right else -1)
    assert not in_opening(sta, deg)
    written = precise_text(stream, sta, deg, aircraft.variant)
    return crack_finding(
        aircraft,
        key,
        spotted,
        written,
        length_in=length,
        direction="diagonal",
        origin="cut-out corner",
    )
