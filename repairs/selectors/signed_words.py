"""The text to be signed, in words: the record's lines, then the rows that belong to it.

What is read here is the canonical text itself, so nothing is shown that is not signed,
but for the findings of a folder: their numbers are signed, and beside them stands what
is recorded of each, which later measurements may change. What only keeps records apart
is left to the exact text that stands below.
"""

from __future__ import annotations

import json
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from typing import Any

from fleet.canonical import digest
from fleet.selectors.history import FOLLOWS_FROM_PLACE
from fleet.selectors.in_words import (
    NOTHING,
    Keys,
    Table,
    keys_told,
    name_words,
    value_words,
)
from repairs.measurements import DIMENSIONS
from repairs.models import (
    Disposition,
    Finding,
    MeasuredValue,
    Repair,
    Substantiation,
)
from repairs.selectors.findings import size_words
from repairs.selectors.signatures import ROWS_OF, SUBJECT_COLUMN, Subject

Worded = Disposition | Repair | Finding | Substantiation
"""What is told line by line; an evaluation is told by its results and its note."""

TITLES = {
    "record": "Record",
    "findings": "Findings",
    "basis": "What it rests on",
    "neighbours": "Neighbours reviewed",
    "required": "Layers that the data ask for",
    "layers": "Layers fitted",
    "fasteners": "Fasteners",
    "steps": "Steps",
    "cases": "Load cases",
    "effects": "Effects",
    "documents": "Documents",
    "measurements": "Measurements",
    "values": "Dimensions",
}
"""The parts of a text in the order they are read."""

KEEPS_APART = frozenset({"id", "client_key", "evaluation_digest", "file_sha256"})
"""Keys and digests; beside them, what a location's text already says is left out."""
LEFT_OUT = KEEPS_APART | FOLLOWS_FROM_PLACE - {"panel_id", "section_id", "zone_id"}
READ_FIRST = (
    "number",
    "revision",
    "title",
    "aircraft_id",
    "aircraft",
    "damage_type",
    "kind",
    "neighbour",
    "touches",
    "answer",
    "description",
    "place_text",
    "place_entered",
)
FINDINGS_NOW = "Findings covered, as recorded now"
FINDINGS_HEAD = ("finding", "damage type", "location", "last measured", "criticality")
READ_LAST = ("entered_by_id", "entered_by", "entered_at", "operator_id", "operator")


@dataclass(frozen=True, slots=True)
class Part:
    """One part of the text: lines of name and value, or a table with a head."""

    title: str
    lines: Sequence[tuple[str, str]] = ()
    not_stated: str = ""
    head: Sequence[str] = ()
    rows: Sequence[Sequence[str]] = ()


@dataclass(frozen=True, slots=True)
class _Reader:
    subject: Subject
    keys: Keys
    length_unit: str

    def words(self, table: Table | None, name: str, value: Any) -> str:
        return value_words(table, name, value, self.keys, self.length_unit)

    def part(self, name: str, content: Any) -> Part | None:
        title = TITLES[name]
        if name == "record":
            return self._record(title, content)
        if name == "values":
            return self._dimensions(title, content)
        if not isinstance(content, list) or not content:
            return None
        if not isinstance(content[0], dict):
            how = "answered" if isinstance(self.subject, Disposition) else "covered"
            return Part(title, [(how, ", ".join(map(str, content)))])
        return self._rows(title, _table(self.subject, name), content)

    def _record(self, title: str, columns: dict[str, Any]) -> Part:
        table = type(self.subject)
        names = _ordered(table, columns)
        said = [(name, self.words(table, name, columns[name]))
                for name in names]  # fmt: skip
        return Part(
            title,
            [
                (name_words(name, table), words)
                for name, words in said
                if words != NOTHING
            ],
            ", ".join(
                name_words(name, table) for name, words in said if words == NOTHING
            ),
        )

    def _rows(
        self, title: str, table: Table | None, rows: list[dict[str, Any]]
    ) -> Part:
        own = f"{SUBJECT_COLUMN[type(self.subject)]}_id"
        names = [
            name
            for name in _ordered(table, rows[0])
            if name != own and any(row[name] not in (None, "") for row in rows)
        ]
        return Part(
            title,
            head=[name_words(name, table) for name in names],
            rows=[
                [self.words(table, name, row[name]) for name in names] for row in rows
            ],
        )

    def _dimensions(self, title: str, measurings: list[list[dict[str, Any]]]) -> Part:
        """What was measured, each by its label and unit; unknown is said."""
        rows = [
            [str(number), *self._dimension(value)]
            for number, values in enumerate(measurings, 1)
            for value in values
        ]
        return Part(title, head=("measurement", "dimension", "value"), rows=rows)

    def _dimension(self, row: dict[str, Any]) -> tuple[str, str]:
        quantity = row["quantity"]
        kind = self.subject.damage_type if isinstance(self.subject, Finding) else ""
        label = next(
            (one.label for one in DIMENSIONS.get(kind, ()) if one.quantity == quantity),
            name_words(quantity),
        )
        if row["status"] != "known":
            return label, row["status"].replace("_", " ")
        if row["word"]:
            return label, row["word"].replace("_", " ")
        told = self.words(None, quantity, row["value"])
        if row["uncertainty"] is not None:
            told += f" ± {self.words(None, quantity, row['uncertainty'])}"
        typed = row["entered"]
        return label, told if typed in ("", told) else f"{told}, typed as {typed}"


def to_sign(subject: Worded, content: str) -> dict[str, Any]:
    """What `fleet/_to_sign.html` shows: the words, the exact text, and its digest."""
    unit = subject.aircraft.variant.aircraft_type.entry_unit
    parts = content_in_words(subject, content, unit)
    if isinstance(subject, Substantiation):
        parts = [told for one in parts for told in _beside(one, subject)]
    return {"parts": parts, "content": content, "digest": digest(content)}


def _beside(part: Part, folder: Substantiation) -> list[Part]:
    """After the numbers that are signed, what is recorded of each finding now."""
    if part.title != TITLES["findings"]:
        return [part]
    rows = folder.finding_rows.filter(withdrawn=False).select_related("finding")
    measured = rows.prefetch_related("finding__measurements__values")
    told = [
        (
            one.number,
            one.get_damage_type_display(),
            one.place_text or one.place_entered,
            size_words(list(one.measurements.all())),
            one.get_criticality_display(),
        )
        for one in sorted((row.finding for row in measured), key=str)
    ]
    return [part, Part(FINDINGS_NOW, head=FINDINGS_HEAD, rows=told)]


def content_in_words(subject: Subject, content: str, length_unit: str) -> list[Part]:
    """The parts of a record's canonical text; a query for each table pointed at."""
    text: dict[str, Any] = json.loads(content)
    keys = keys_told(
        (_table(subject, name), column, value)
        for name, part in text.items()
        for column, value in _columns(part)
    )
    reader = _Reader(subject, keys, length_unit)
    parts = (reader.part(name, text[name]) for name in TITLES if name in text)
    return [part for part in parts if part is not None]


def _table(subject: Subject, part: str) -> Table | None:
    """The table that a part's columns are of."""
    if part == "record":
        return type(subject)
    if part == "values":
        return MeasuredValue
    accessors = {name: rows for name, rows, _ in ROWS_OF.get(type(subject), ())}
    accessor = accessors.get(part, part)
    known = {one.name: one.related_model for one in type(subject)._meta.related_objects}
    found = known.get(accessor)
    return found if isinstance(found, type) else None


def _columns(part: Any) -> Iterable[tuple[str, Any]]:
    if isinstance(part, dict):
        yield from part.items()
    elif isinstance(part, list):
        for row in part:
            yield from _columns(row)


def _ordered(table: Table | None, columns: Iterable[str]) -> list[str]:
    """Columns as a reader wants them: what it is, the rest as declared, who entered."""
    fields = table._meta.concrete_fields if table else ()
    declared = {name: at for at, one in enumerate(fields)
                for name in (one.name, one.attname)}  # fmt: skip

    def place(name: str) -> tuple[int, int]:
        if name in READ_FIRST:
            return 0, READ_FIRST.index(name)
        return (2 if name in READ_LAST else 1), declared.get(name, len(declared))

    return sorted((name for name in columns if name not in LEFT_OUT), key=place)
