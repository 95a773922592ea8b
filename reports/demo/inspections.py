"""Inspection requirements of the demo: from repairs, documents and a finding."""

from __future__ import annotations

import datetime as dt
from dataclasses import replace

from reports.demo.fleet import BY_MSN, DEMO_TODAY, FLEET, day_date
from reports.demo.records import (
    DemoAccomplishment,
    DemoDocument,
    DemoLimit,
    DemoRepair,
    DemoRequirement,
    DemoSubject,
)
from reports.demo.stream import Stream
from reports.demo.usage import Counters, Logbook

Planted = dict[str, list[str]]

REMAINING_WITHIN_90_DAYS = (
    (1001, 60),
    (1001, 215),
    (1002, 130),
    (1002, 340),
    (1003, 95),
)
"""Serial number and cycles left of the five repairs that fall due within 90 days."""
OVERDUE_FC = (1002, -37)
LEAST_LEFT_FC = 900
PROGRAMME = DemoDocument(
    "programme", "BR-AMP-52", "22", "53-00", "Brackenfold Regional"
)
FLEET_RULES_FROM = dt.date(2021, 4, 1)
"""When the whole present fleet had joined."""
LETTER = DemoDocument("letter", "ARD-SL-53-014", "B", "p. 3", "Ardlune Aircraft")


def requirements_draw(
    seed: int,
    logbooks: dict[int, Logbook],
    repairs: list[DemoRepair],
    planted: Planted,
) -> list[DemoRequirement]:
    """One for every category B repair in service, then the ones from documents."""
    stream = Stream(seed, "requirements")
    wanted = [*REMAINING_WITHIN_90_DAYS, OVERDUE_FC]
    made: list[DemoRequirement] = []
    for repair in repairs:
        if repair.category != "b":
            continue
        left = next((w for w in wanted if w[0] == repair.msn), None)
        if left is not None and _may_be_timed(repair, logbooks[repair.msn]):
            wanted.remove(left)
            made.append(_repair_requirement(stream, repair, logbooks, left[1]))
            case = "overdue_fc" if left[1] < 0 else "repairs_due_within_90_days"
            planted.setdefault(case, []).append(made[-1].key)
        else:
            made.append(_repair_requirement(stream, repair, logbooks, None))
    planted["repairs_past_threshold"] = [
        requirement.key
        for requirement in made
        if _past_threshold(requirement, logbooks)
    ]
    made += _fleet_requirements(logbooks)
    return made


def repeat_left(requirement: DemoRequirement, logbook: Logbook) -> int | None:
    """Cycles left to the next repeat; None before the first inspection."""
    done = requirement.subjects[0].accomplishments
    if not done:
        return None
    return done[-1].at.cycles + requirement.repeats[0].value - logbook.final.cycles


def _may_be_timed(repair: DemoRepair, logbook: Logbook) -> bool:
    """Old enough that threshold and one repeat have passed."""
    return repair.legacy and logbook.final.cycles - repair.at.cycles > 20_000


def _past_threshold(requirement: DemoRequirement, logbooks: dict[int, Logbook]) -> bool:
    msn = requirement.subjects[0].msn
    return BY_MSN[msn].left_on is None and bool(requirement.subjects[0].accomplishments)


def _repair_requirement(
    stream: Stream,
    repair: DemoRepair,
    logbooks: dict[int, Logbook],
    left: int | None,
) -> DemoRequirement:
    """Threshold 12,000-24,000 FC after release, repeat 3,000-6,000 FC."""
    logbook = logbooks[repair.msn]
    threshold = 500 * stream.whole(24, 48)
    repeat = 500 * stream.whole(6, 12)
    if repair.legacy and logbook.final.cycles - repair.at.cycles > 17_000:
        threshold = 500 * stream.whole(24, 28)
    done = _done(stream, logbook, repair.at.cycles + threshold, repeat, left)
    return DemoRequirement(
        key=f"I-{repair.key[2:]}",
        kind="repair",
        title=f"Supplemental inspection of the repair at {repair.location}",
        document=repair.document,
        task="Inspect the doubler edge rows and the skin beside them.",
        method="eddy_current_low" if stream.chance(0.6) else "detailed_visual",
        area=f"First and last fastener rows, {repair.location}",
        criteria="No crack at any fastener hole.",
        effective_on=repair.released_on,
        thresholds=(DemoLimit("cycles", threshold, f"{threshold:,} FC", "release"),),
        repeats=(DemoLimit("cycles", repeat, f"{repeat:,} FC", "last_done"),),
        subjects=(DemoSubject(repair.msn, accomplishments=done),),
        repair=repair.key,
    )


def _done(
    stream: Stream, logbook: Logbook, first_due: int, repeat: int, left: int | None
) -> tuple[DemoAccomplishment, ...]:
    """Each inspection a little early; the last one so that ``left`` cycles remain."""
    now = logbook.final.cycles
    last = now if left is None else now + left - repeat
    cycles = []
    due = first_due
    while due <= last:
        cycles.append(due - stream.whole(40, 600))
        due = cycles[-1] + repeat
    if left is not None:
        if cycles and last - cycles[-1] < 400:
            cycles[-1] -= 400
        cycles.append(last)
    elif cycles and due - now < LEAST_LEFT_FC:
        cycles.append(now - stream.whole(60, 400))
    return tuple(_accomplished(logbook, count) for count in cycles if count <= now)


def _accomplished(logbook: Logbook, cycles: int) -> DemoAccomplishment:
    done_on = logbook.date_at_cycles(cycles)
    opening = logbook.aircraft.opening_cycles
    if cycles > opening:
        minutes = logbook.at(done_on).minutes
    else:
        minutes = logbook.aircraft.opening_hours * 60 * cycles // max(opening, 1)
    return DemoAccomplishment(
        done_on, Counters(minutes, cycles), "no_finding", "inspector"
    )


def _fleet_requirements(logbooks: dict[int, Logbook]) -> list[DemoRequirement]:
    lap_subjects, belly_subjects = [], []
    for aircraft in FLEET:
        if aircraft.left_on is not None:
            continue
        logbook = logbooks[aircraft.msn]
        lap_subjects.append(_lap_subject(logbook))
        done = tuple(
            DemoAccomplishment(date, logbook.at(date), "no_finding", "hangar_1")
            for date in (day_date(day) for day in aircraft.check_days())
            if FLEET_RULES_FROM <= date < DEMO_TODAY - dt.timedelta(days=18)
        )
        belly_subjects.append(DemoSubject(aircraft.msn, accomplishments=done))
    lap = DemoRequirement(
        key="I-LAP-S12",
        kind="limitation",
        title="Lap joint S-12 left and right, upper fastener row",
        document=LETTER,
        task="Inspect the upper row for cracks under the fastener heads.",
        method="eddy_current_high",
        area="Lap joints S-12L and S-12R, STA 500 to STA 900",
        criteria="No indication above the reference notch.",
        effective_on=FLEET_RULES_FROM,
        thresholds=(DemoLimit("cycles", 20_000, "20,000 FC", "new"),),
        repeats=(DemoLimit("cycles", 4_500, "4,500 FC", "last_done"),),
        subjects=tuple(lap_subjects),
    )
    belly = DemoRequirement(
        key="I-BELLY",
        kind="corrosion",
        title="Corrosion inspection of the belly and the door sills",
        document=PROGRAMME,
        task="Open the belly panels, clean, inspect, renew the protection.",
        method="detailed_visual",
        area="Belly S-18L to S-18R, STA 240 to STA 900, and all door sills",
        criteria="Corrosion beyond light: record a finding.",
        effective_on=FLEET_RULES_FROM,
        thresholds=(DemoLimit("months", 25, "25 months", "effective"),),
        repeats=(DemoLimit("months", 25, "25 months", "last_done"),),
        subjects=tuple(belly_subjects),
    )
    return [lap, belly]


def _lap_subject(logbook: Logbook) -> DemoSubject:
    aircraft = logbook.aircraft
    if aircraft.variant == "S":
        return DemoSubject(
            aircraft.msn, False, "stretched variant has the bonded joint of 2016"
        )
    cycles, due = [], 20_000
    while due - 150 <= logbook.final.cycles:
        cycles.append(due - 150)
        due = cycles[-1] + 4_500
    done = [_accomplished(logbook, count) for count in cycles]
    left = due - logbook.final.cycles
    if cycles and left < LEAST_LEFT_FC:
        done.append(_accomplished(logbook, logbook.final.cycles - 200))
    return DemoSubject(aircraft.msn, accomplishments=tuple(done))


def requirements_plant(
    logbooks: dict[int, Logbook],
    requirements: list[DemoRequirement],
    planted: Planted,
) -> None:
    """Calendar items, a wrong unit, an unproved termination, a look on the sisters."""
    made = (
        ("due_today", 1010, dt.date(2023, 1, 1), "FR 28 main frame, lower half"),
        ("overdue_days", 1014, dt.date(2022, 12, 12), "Fin attachment fittings"),
    )
    for case, msn, done_on, area in made:
        key = f"I-{msn}-{case}"
        requirements.append(_calendar_item(logbooks[msn], key, done_on, area))
        planted[case] = [key]
    _unit_error(logbooks, requirements, planted)
    unverified = _calendar_item(
        logbooks[1003], "I-1003-termination", dt.date(2023, 6, 1), "Frame 31 fittings"
    )
    subject = unverified.subjects[0]
    claimed = replace(
        subject.accomplishments[0],
        result="terminated",
        note="entry of the former operator: improved fitting installed; not seen",
    )
    subject = replace(subject, accomplishments=(claimed,))
    requirements.append(replace(unverified, subjects=(subject,)))
    planted["unverified_termination"] = ["I-1003-termination"]
    requirements.append(_sisters(logbooks, planted["crack_near_cutout"][0]))
    planted["look_on_the_sisters"] = ["I-SISTERS"]


def _calendar_item(
    logbook: Logbook, key: str, done_on: dt.date, area: str
) -> DemoRequirement:
    done = DemoAccomplishment(done_on, logbook.at(done_on), "no_finding", "hangar_2")
    return DemoRequirement(
        key=key,
        kind="operator",
        title=f"Two-yearly inspection: {area}",
        document=PROGRAMME,
        task="Inspect for corrosion, cracks and loose fasteners.",
        method="detailed_visual",
        area=area,
        criteria="No damage.",
        effective_on=done_on.replace(year=done_on.year - 2),
        thresholds=(DemoLimit("months", 24, "24 months", "effective"),),
        repeats=(DemoLimit("months", 24, "24 months", "last_done"),),
        subjects=(DemoSubject(logbook.aircraft.msn, accomplishments=(done,)),),
    )


def _unit_error(
    logbooks: dict[int, Logbook],
    requirements: list[DemoRequirement],
    planted: Planted,
) -> None:
    """The letter says every 250 FC; it was keyed as 250 days."""
    logbook = logbooks[1009]
    done_on = dt.date(2024, 9, 20)
    item = _calendar_item(logbook, "I-1009-unit", done_on, "FR 31 web, S-14L to S-17L")
    letter = replace(LETTER, reference="ARD-L-1009-077", page="p. 1, every 250 FC")
    requirements.append(
        replace(
            item,
            title="Repeat inspection of the stop-drilled crack in FR 31 web",
            document=letter,
            thresholds=(DemoLimit("days", 250, "250 days", "effective"),),
            repeats=(DemoLimit("days", 250, "250 days", "last_done"),),
            effective_on=dt.date(2024, 6, 3),
        )
    )
    planted["unit_error"] = ["I-1009-unit"]


def _sisters(logbooks: dict[int, Logbook], finding: str) -> DemoRequirement:
    """After a crack beside the cargo door: look at the same corner on every sister."""
    effective = dt.date(2024, 11, 25)
    answered = {
        1001: dt.date(2024, 12, 3),
        1009: dt.date(2024, 12, 11),
        1022: dt.date(2024, 12, 12),
        1026: dt.date(2024, 12, 16),
        1027: dt.date(2024, 12, 18),
    }
    subjects = []
    for aircraft in FLEET:
        if aircraft.left_on is not None or aircraft.msn == 1002:
            continue
        done_on = answered.get(aircraft.msn)
        done = (
            (
                DemoAccomplishment(
                    done_on,
                    logbooks[aircraft.msn].at(done_on),
                    "no_finding",
                    "inspector",
                ),
            )
            if done_on
            else ()
        )
        subjects.append(DemoSubject(aircraft.msn, accomplishments=done))
    return DemoRequirement(
        key="I-SISTERS",
        kind="operator",
        title="Look on the sisters: skin below the aft cargo door",
        document=replace(PROGRAMME, page="53-00, engineering order 24-118"),
        task="Look for cracks in the skin within 10 in of the cut-out.",
        method="detailed_visual",
        area="Skin below the aft cargo door, STA 750 to STA 850, S-18R to S-20R",
        criteria="No crack.",
        effective_on=effective,
        thresholds=(DemoLimit("days", 60, "60 days", "effective"),),
        repeats=(),
        subjects=tuple(subjects),
        finding=finding,
    )
