"""How the answer of one calculation moves with its inputs: drawings and a table."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass

from fleet.drawing.bars import Bar, Bars, bars_svg
from repairs.analysis.sensitivity import Answers, Moved, Sensitivity, sensitivity
from repairs.evaluation_figures import margin_text
from repairs.evaluation_text import UNKNOWN, number_text
from repairs.input_text import input_write
from repairs.models import StatedInput
from repairs.services.evaluation_prepare import Prepared

MOST_BARS = 12
SHORTEST_BAR = 0.01
"""Share of the longest bar below which an input is in the table only."""
TENTH = "±10 %"


def _cycles(value: float | None) -> str:
    return UNKNOWN if value is None else f"{number_text(value)} FC"


QUANTITIES: tuple[tuple[str, str, Callable[[float | None], str]], ...] = (
    ("margin_residual", "Margin, residual", margin_text),
    ("margin_ultimate", "Margin, ultimate", margin_text),
    ("usable_life", "Life after factor", _cycles),
)


@dataclass(frozen=True, slots=True)
class MoveRow:
    """One input: its value, how far it was moved, and the answers at both ends."""

    title: str
    value: str
    step: str
    answers: tuple[tuple[str, str], ...]
    why_none: str


@dataclass(frozen=True, slots=True)
class Moves:
    """What the page shows of a sensitivity; `heads` name the columns of the rows."""

    heads: tuple[str, ...]
    drawings: tuple[tuple[str, str], ...]
    rows: tuple[MoveRow, ...]
    still: tuple[str, ...]


def moves_of(prepared: Prepared) -> Moves:
    """Calculate again with every number less and more. Nothing is kept."""
    spreads = {
        row.name: row.uncertainty
        for row in prepared.gathered.rows.values()
        if isinstance(row, StatedInput) and row.uncertainty
    }
    return moves_shown(sensitivity(prepared.result.use, prepared.inputs, spreads))


def moves_shown(found: Sensitivity) -> Moves:
    """Drawings of each quantity that has an answer, and one table of all."""
    answered = [row for row in QUANTITIES if getattr(found.base, row[0]) is not None]
    names = [name for name, _, _ in answered]
    ranked = {row.name: row for name in names for row in found.ranked(name)}
    return Moves(
        tuple(title for _, title, _ in answered),
        tuple(
            (title, _drawn(found, name, title, words))
            for name, title, words in answered
            if found.ranked(name)
        ),
        tuple(_row(row, answered) for row in ranked.values()),
        found.still if answered else (),
    )


def _drawn(
    found: Sensitivity, name: str, title: str, words: Callable[[float | None], str]
) -> str:
    base = getattr(found.base, name)
    bars = [
        Bar(
            row.title,
            _step(row),
            getattr(row.less, name),
            getattr(row.more, name),
            _end(row.less, name, words),
            _end(row.more, name, words),
        )
        for row in _worth_a_bar(found, name)
    ]
    return bars_svg(Bars(title, base, f"{title} {words(base)}", bars))


def _worth_a_bar(found: Sensitivity, name: str) -> list[Moved]:
    """The farthest, without those whose bar could not be seen beside the longest."""
    ranked = found.ranked(name)[:MOST_BARS]
    reaches = [row.reach(found.base, name) for row in ranked]
    longest = max((reach for reach in reaches if reach < math.inf), default=0.0)
    return [
        row
        for row, reach in zip(ranked, reaches, strict=True)
        if reach >= SHORTEST_BAR * longest
    ]


def _end(answers: Answers, name: str, words: Callable[[float | None], str]) -> str:
    value = getattr(answers, name)
    return "no answer" if value is None else words(value)


def _row(
    row: Moved, answered: list[tuple[str, str, Callable[[float | None], str]]]
) -> MoveRow:
    return MoveRow(
        row.title,
        input_write(row.value, row.unit),
        _step(row),
        tuple(
            (_end(row.less, name, words), _end(row.more, name, words))
            for name, _, words in answered
        ),
        row.less.why_none or row.more.why_none,
    )


def _step(row: Moved) -> str:
    return f"±{input_write(row.step, row.unit)}" if row.stated else TENTH
