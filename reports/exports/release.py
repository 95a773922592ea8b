"""Release stops outside the program: a table, CSV and JSON with one set of columns."""

from __future__ import annotations

from collections.abc import Sequence
from datetime import datetime
from typing import Any

from reports.release_rules import OPEN_ITEMS, STOPS
from reports.release_stops import CAUTIONS, EMPTY, ReleaseStops

Facts = list[tuple[str, str]]

JUDGED_ON = "counters to {day}"
NO_USAGE = "opening counters; no usage is recorded"


def judged_on(found: ReleaseStops) -> str:
    """What the counters that were compared rest on."""
    day = found.standing.current_to
    flown = day is not None and day >= found.aircraft.data_from
    return JUDGED_ON.format(day=day) if flown else NO_USAGE


def facts(found: ReleaseStops, *, printed_at: datetime) -> Facts:
    """What must be printed with every copy."""
    notes = [found.states_note, found.standing.hours_note]
    return [
        ("aircraft", f"{found.aircraft} msn {found.aircraft.serial_number}"),
        ("as of", found.query.as_of.isoformat()),
        ("known at", printed_at.isoformat(timespec="seconds")),
        ("judged on", judged_on(found)),
        ("stops", str(len(found.stops))),
        ("open items", str(len(found.open_items))),
        ("digest of the rows (SHA-256)", found.digest),
        *(("note", note) for note in notes if note),
        *(("policy", edition) for edition in found.policies),
        *(("caution", text) for text in CAUTIONS),
    ]


def release_csv_rows(
    found: ReleaseStops, *, printed_at: datetime
) -> list[Sequence[Any]]:
    """The rows, or the sentence that none stands; then what belongs to the print."""
    first: list[Sequence[Any]] = [] if found.stops else [[EMPTY]]
    printed = ([name, text] for name, text in facts(found, printed_at=printed_at))
    return [*first, *found.rows, [], *printed]


def release_json(found: ReleaseStops, *, printed_at: datetime) -> dict[str, Any]:
    return {
        "aircraft": found.aircraft.registration,
        "serial_number": found.aircraft.serial_number,
        "as_of": found.query.as_of.isoformat(),
        "known_at": printed_at.isoformat(),
        "judged_on": judged_on(found),
        "usage_behind": found.behind,
        "said": "" if found.stops else EMPTY,
        "stops": [
            {
                "cause": one.cause,
                "record": one.item,
                "stands": one.stands,
                "rule": STOPS[one.cause].words,
                "basis": STOPS[one.cause].basis_words,
                "lifted_by": STOPS[one.cause].lifted_by,
            }
            for one in found.stops
        ],
        "open_items": [
            {"cause": OPEN_ITEMS[x.cause], "record": x.item, "stands": x.stands}
            for x in found.open_items
        ],
        "digest": found.digest,
        "policies": list(found.policies),
        "cautions": list(CAUTIONS),
    }


def release_table(found: ReleaseStops, *, printed_at: datetime) -> str:
    """Plain text: each stop with its rule beneath, then the open items."""
    text = [f"BEFORE RELEASE {found.aircraft} ({judged_on(found)})", ""]
    for one in found.stops:
        rule = STOPS[one.cause]
        text += [
            f"{one.item}: {one.stands}",
            f"  {rule.words} ({rule.basis_words})",
            f"  lifted by: {rule.lifted_by}",
        ]
    text += [] if found.stops else [EMPTY]
    if found.open_items:
        text += ["", "OPEN, NO STOP"]
        text += [
            f"{x.item}: {OPEN_ITEMS[x.cause]}; {x.stands}" for x in found.open_items
        ]
    printed = [f"{name}: {said}" for name, said in facts(found, printed_at=printed_at)]
    return "\n".join([*text, "", *printed])
