"""The due list outside the program: a table, CSV and JSON with one set of columns."""

from __future__ import annotations

from datetime import datetime
from typing import Any

from repairs.selectors.requirements import Unaccounted
from reports.due_list import DueList
from reports.due_rows import HEADER, DueRow, export_row

Facts = list[tuple[str, str]]

COLUMNS = ("aircraft", "item", "action", "due at", "now", "remaining", "forecast")


def facts(found: DueList, *, printed_at: datetime) -> Facts:
    """What must be printed with every copy of the list."""
    query = found.query
    known_at = query.known_at or printed_at
    return [
        ("as of", query.as_of.isoformat()),
        ("known at", known_at.isoformat(timespec="seconds")),
        ("within days", str(query.within_days)),
        ("data current to", str(found.data_current_to or "no usage")),
        ("rows", str(len(found.rows))),
        ("digest of the rows (SHA-256)", found.digest),
        *(("incomplete", _gap(item)) for item in found.unaccounted),
        *(("policy", edition) for edition in found.policies),
    ]


def _gap(item: Unaccounted) -> str:
    marks = ", ".join(str(aircraft) for aircraft in item.aircraft)
    return f"{item.requirement.number} has no answer for {marks}"


def due_csv_rows(found: DueList, *, printed_at: datetime) -> list[list[Any]]:
    """The rows, then an empty line and what belongs to the print."""
    rows = [export_row(row) for row in found.rows]
    return [
        *rows,
        [],
        *([name, text] for name, text in facts(found, printed_at=printed_at)),
    ]


def due_json(found: DueList, *, printed_at: datetime) -> dict[str, Any]:
    query = found.query
    current_to = found.data_current_to
    return {
        "as_of": query.as_of.isoformat(),
        "known_at": (query.known_at or printed_at).isoformat(),
        "within_days": query.within_days,
        "data_current_to": current_to and current_to.isoformat(),
        "counts": {bucket.value: count for bucket, count in found.tally.items()},
        "digest": found.digest,
        "incomplete": [_gap(item) for item in found.unaccounted],
        "policies": list(found.policies),
        "rows": [
            dict(zip(HEADER, export_row(row), strict=True)) | {"kind": row.item.kind}
            for row in found.rows
        ],
    }


def due_table(found: DueList, *, printed_at: datetime) -> str:
    """Plain text in columns: one line for each counter of each row, by group."""
    table: list[tuple[str, ...]] = [COLUMNS]
    for title, rows in found.groups:
        table += [(), (title.upper(),)]
        for row in rows:
            table += _lines(row)
    full = [line for line in table if len(line) == len(COLUMNS)]
    widths = [max(len(line[n]) for line in full) for n in range(len(COLUMNS))]
    text = [
        "  ".join(cell.ljust(widths[n]) for n, cell in enumerate(line)).rstrip()
        for line in table
    ]
    printed = [f"{name}: {said}" for name, said in facts(found, printed_at=printed_at)]
    return "\n".join([*text, "", *printed])


def _lines(row: DueRow) -> list[tuple[str, ...]]:
    first = (row.mark, row.item.item, row.item.action)
    amounts = [(cell.due, cell.now, cell.remaining) for cell in row.cells]
    lines = [
        (*(first if not n else ("", "", "")), *three, row.forecast if not n else "")
        for n, three in enumerate(amounts or [("", "", "")])
    ]
    return [*lines, *(("", f"  ! {text}") for text in (*row.said, *row.item.marks))]
