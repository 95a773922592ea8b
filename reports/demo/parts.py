"""Forty safe-life parts: where each was fitted, swapped and stored, and what lacks."""

from __future__ import annotations

import datetime as dt
from dataclasses import replace

from reports.demo.fleet import FLEET
from reports.demo.records import (
    DemoEarlierLife,
    DemoLifeLimit,
    DemoPart,
    DemoPartNumber,
    DemoStint,
)
from reports.demo.usage import Counters, Logbook

MAIN, STAY, NOSE = "ARD-3211-1", "ARD-3214-3", "ARD-3221-1"
PART_NUMBERS = (
    DemoPartNumber(MAIN, "main gear attachment fitting", "main gear"),
    DemoPartNumber(STAY, "side stay", "side stay"),
    DemoPartNumber(NOSE, "nose gear attachment fitting", "nose gear"),
)
LIFE_LIMITS = (
    DemoLifeLimit(MAIN, "base", "cycles", 60_000, "birth"),
    DemoLifeLimit(MAIN, "S", "cycles", 45_000, "birth"),
    DemoLifeLimit(STAY, "", "minutes", 20_000 * 60, "birth"),
    DemoLifeLimit(STAY, "", "months", 120, "first_fitted"),
    DemoLifeLimit(NOSE, "", "cycles", 32_500, "birth"),
)
STAY_FITTED = {
    1001: dt.date(2016, 5, 10),
    1002: dt.date(2016, 9, 2),
    1003: dt.date(2017, 2, 21),
    1005: dt.date(2017, 6, 14),
}
NOSE_MSNS = (1001, 1002, 1003, 1021, 1022)
NEW = Counters(0, 0)
SWAPS = (
    ("main gear LH", 1001, 1009, dt.date(2019, 8, 12)),
    ("main gear RH", 1002, 1010, dt.date(2020, 2, 3)),
    ("main gear LH", 1003, 1014, dt.date(2020, 9, 21)),
    ("main gear RH", 1014, 1021, dt.date(2021, 4, 19)),
    ("main gear LH", 1005, 1010, dt.date(2021, 11, 8)),
    ("side stay LH", 1001, 1003, dt.date(2022, 5, 16)),
    ("main gear RH", 1022, 1026, dt.date(2022, 10, 10)),
    ("main gear LH", 1021, 1027, dt.date(2023, 3, 27)),
    ("nose gear", 1021, 1022, dt.date(2023, 9, 4)),
)
"""Two parts of one position change aircraft on the same day; the fourth pair has one
aircraft of either variant, so the base part goes under a lower limit."""
TO_STRETCHED = 3
GAP_FROM, GAP_DAYS = dt.date(2018, 3, 1), 214
GAP_AIRCRAFT, GAP_FITTED_ON = 1009, dt.date(2019, 3, 5)


def parts_draw(
    logbooks: dict[int, Logbook], planted: dict[str, list[str]]
) -> list[DemoPart]:
    """All serials with their stints; the first of a key is the oldest."""
    fitted: dict[tuple[int, str], DemoPart] = {}
    for aircraft in FLEET:
        if aircraft.left_on is None:
            for position, number in _positions(aircraft.msn):
                part = _first_fitted(logbooks[aircraft.msn], position, number)
                fitted[aircraft.msn, position] = part
    for index, (position, one, other, on) in enumerate(SWAPS):
        first, second = fitted[one, position], fitted[other, position]
        fitted[other, position] = _moved(logbooks, first, other, on)
        fitted[one, position] = _moved(logbooks, second, one, on)
        if index == TO_STRETCHED:
            planted["lower_limit_on_stretched"] = [first.key]
    parts = list(fitted.values())
    parts += _spares(logbooks, planted)
    planted["part_close_to_limit"] = [fitted[1001, "nose gear"].key]
    return sorted(parts, key=lambda part: part.key)


def run_of(part: DemoPart, logbooks: dict[int, Logbook]) -> Counters:
    """Life of a part to the end of the data, gaps not counted."""
    minutes = sum(life.run.minutes for life in part.earlier)
    cycles = sum(life.run.cycles for life in part.earlier)
    for stint in part.stints:
        end = stint.removed_at or logbooks[stint.msn].final
        minutes += end.minutes - stint.fitted_at.minutes
        cycles += end.cycles - stint.fitted_at.cycles
    return Counters(minutes, cycles)


def _positions(msn: int) -> list[tuple[str, str]]:
    positions = [("main gear LH", MAIN), ("main gear RH", MAIN)]
    if msn in STAY_FITTED:
        positions += [("side stay LH", STAY), ("side stay RH", STAY)]
    if msn in NOSE_MSNS:
        positions.append(("nose gear", NOSE))
    return positions


def _first_fitted(logbook: Logbook, position: str, number: str) -> DemoPart:
    aircraft = logbook.aircraft
    fitted_on, at = aircraft.manufactured_on, NEW
    if number == STAY:
        fitted_on = STAY_FITTED[aircraft.msn]
        at = logbook.at(fitted_on)
    side = {"LH": "L", "RH": "R"}.get(position[-2:], "N")
    serial = f"{number[4:8]}-{aircraft.msn}{side}"
    return DemoPart(
        key=f"P-{serial}",
        part_number=number,
        serial=serial,
        manufactured_on=fitted_on - dt.timedelta(days=60),
        stints=(DemoStint(aircraft.msn, position, fitted_on, at),),
    )


def _moved(
    logbooks: dict[int, Logbook], part: DemoPart, to_msn: int, on: dt.date
) -> DemoPart:
    last = part.stints[-1]
    removed = replace(
        last,
        removed_on=on,
        removed_at=logbooks[last.msn].at(on),
        reason="exchanged between aircraft to balance lives",
    )
    fitted = DemoStint(to_msn, last.position, on, logbooks[to_msn].at(on))
    return replace(part, stints=(*part.stints[:-1], removed, fitted))


def _spares(
    logbooks: dict[int, Logbook], planted: dict[str, list[str]]
) -> list[DemoPart]:
    """In store, but for the one with a gap in its papers, which is on an aircraft."""
    gap_ends = GAP_FROM + dt.timedelta(days=GAP_DAYS)
    gap = DemoPart(
        key="P-3221-0415",
        part_number=NOSE,
        serial="3221-0415",
        manufactured_on=dt.date(2009, 10, 1),
        stints=(
            DemoStint(
                GAP_AIRCRAFT,
                "nose gear",
                GAP_FITTED_ON,
                logbooks[GAP_AIRCRAFT].at(GAP_FITTED_ON),
            ),
        ),
        earlier=(
            DemoEarlierLife(
                "documented",
                dt.date(2010, 1, 15),
                GAP_FROM,
                Counters(11_120 * 60, 12_480),
                "life record card of the former operator, sheets 1 to 6",
            ),
            DemoEarlierLife(
                "gap",
                GAP_FROM,
                gap_ends,
                NEW,
                "no card between removal and the shop's receipt",
            ),
        ),
    )
    planted["part_gap"] = [gap.key]
    stored = [
        DemoPart(f"P-{serial}", number, serial, made_on, ())
        for number, serial, made_on in (
            (MAIN, "3211-0907", dt.date(2021, 2, 8)),
            (MAIN, "3211-0908", dt.date(2021, 2, 8)),
            (STAY, "3214-0233", dt.date(2022, 7, 19)),
            (NOSE, "3221-0612", dt.date(2023, 1, 30)),
        )
    ]
    return [gap, *stored]
