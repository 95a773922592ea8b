"""What an evaluation answers, ready to print: figures, margins, lives, methods asked.

Pure: from plain data, of a stored evaluation or of one just calculated, to text.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from repairs.evaluation_text import UNKNOWN, number_text

Data = Mapping[str, Any]
COMPUTED = "computed"
INSPECTIONS = "inspections"
"""Key of the curve that marks the inspections of a plan."""
SAME = 5e-5
"""Share below which two printed numbers are the same."""
NOT_CHECKED = "not checked"
PARTS = {
    "answers": "answers",
    "beside": "stands beside",
    "unanswered": "not answered",
    "not_applicable": "does not apply",
}
MET_WORDS = {True: "met", False: "not met", None: "not known"}
BESIDE_COMPUTED = "computed too; a better method answers"


@dataclass(frozen=True, slots=True)
class Figure:
    """One line of the results: what, the number as text, and what it is of."""

    title: str
    value: str
    remark: str
    number: float | None = None


@dataclass(frozen=True, slots=True)
class TestRow:
    """One applicability test in words."""

    met: str
    failed: bool
    test: str
    value: str
    limit: str


@dataclass(frozen=True, slots=True)
class AskedRow:
    """One method asked: its part in the answer, and why it has no other."""

    method: str
    version: int
    title: str
    part: str
    answers: bool
    governs: bool
    why: str
    tests: tuple[TestRow, ...]


@dataclass(frozen=True, slots=True)
class MarginRow:
    """One mechanism in one case; a case that was not checked says so."""

    method: str
    mechanism: str
    case: str
    strength: str
    required: str
    margin: str
    negative: bool
    least: bool


@dataclass(frozen=True, slots=True)
class IntervalRow:
    """A threshold or repeat, as calculated and after its cap."""

    title: str
    cycles: str
    calculated: str
    cap: str
    base: str


@dataclass(frozen=True, slots=True)
class LookRow:
    """One inspection along the growth curve."""

    cycles: str
    size: str
    words: str


@dataclass(frozen=True, slots=True)
class Answer:
    """Everything a result says, in the order it is read."""

    title: str
    outcome: str
    computed: bool
    governing: str
    figures: tuple[Figure, ...]
    asked: tuple[AskedRow, ...]
    margins: tuple[MarginRow, ...]
    lives: tuple[Figure, ...]
    intervals: tuple[IntervalRow, ...]
    plan: tuple[Figure, ...]
    looks: tuple[LookRow, ...]
    not_checked: tuple[str, ...]
    assumptions: tuple[str, ...]
    missing: tuple[Data, ...]
    warnings: tuple[str, ...]
    barred: tuple[str, ...]


def answer_of(data: Data) -> Answer:
    """The answer of an evaluation's data."""
    barred, computed = data["barred"], data["outcome"] == COMPUTED
    return Answer(
        title=data["title"] or "No method for this damage",
        outcome=data["outcome"],
        computed=computed,
        governing=data["governing"],
        figures=tuple(figures_of(data)),
        asked=tuple(_asked(data)),
        margins=tuple(_margins(data)) if computed else (),
        lives=tuple(_life(life) for life in data["lives"]) if computed else (),
        intervals=tuple(_intervals(data)) if computed else (),
        plan=tuple(_plan(data["plan"])) if computed and data["plan"] else (),
        looks=tuple(_looks(data)) if computed else (),
        not_checked=tuple(data["cases_not_checked"]) if computed else (),
        assumptions=tuple(data["assumptions"]),
        missing=tuple(data["missing"]),
        warnings=tuple(
            w
            for w in data["warnings"]
            if w not in barred and w != "Unapproved calculation."
        ),
        barred=tuple(barred),
    )


def figures_of(data: Data) -> Iterator[Figure]:
    """Results in the order they are read; nothing for what is not computed."""
    if data["outcome"] != COMPUTED:
        return
    yield _figure("Residual strength", data["residual_strength_mpa"], "MPa", "gross")
    yield _figure(
        "Required, residual",
        data["required_residual_mpa"],
        "MPa",
        data["residual_case"],
    )
    yield _margin("Margin, residual", data["margin_residual"], data["residual_case"])
    yield _figure(
        "Required, static ultimate", data["ultimate_mpa"], "MPa", data["ultimate_case"]
    )
    yield _margin("Margin, ultimate", data["margin_ultimate"], data["ultimate_case"])
    kept = data["ultimate_kept"].replace("_", " ")
    yield Figure("Ultimate strength kept", kept, "")
    yield from (_life(life) for life in data["lives"])
    if data["scatter_factor"] is not None:
        remark = f"factor {data['scatter_factor']:g}, {data['life_base']}"
        yield _figure(
            "Life after factor", data["life_after_factor_cycles"], "FC", remark
        )
    if data["use"] == "no_known_crack":
        yield _interval("Threshold", data["threshold"])
        yield _interval("Repeat interval", data["repeat"])


def margin_text(value: float | None) -> str:
    """A margin with its sign, two decimals; unknown is a dash."""
    return UNKNOWN if value is None else f"{value:+.2f}".replace("-", "−")


def test_row(test: Data) -> TestRow:
    """One applicability test in words."""
    met = test["met"]
    return TestRow(
        MET_WORDS[met], met is False, test["test"], test["value"], test["limit"]
    )


def _figure(title: str, value: float | None, unit: str, remark: str) -> Figure:
    text = UNKNOWN if value is None else f"{number_text(value)} {unit}".strip()
    return Figure(title, text, remark, value)


def _margin(title: str, value: float | None, remark: str) -> Figure:
    return Figure(title, margin_text(value), remark, value)


def _life(life: Data) -> Figure:
    remark = ", ".join(part for part in (life["base"], life["remark"]) if part)
    return _figure(f"Life, {life['title']}", life["cycles"], "FC", remark)


def _interval(title: str, interval: Data | None) -> Figure:
    if interval is None:
        return Figure(title, "none", "needs an engineer: see the warnings")
    remark = interval["base"]
    if interval["cap"]:
        remark += f"; calculated {interval['uncapped']:,}, cut to {interval['cap']}"
    return _figure(title, interval["cycles"], "FC", remark)


def _intervals(data: Data) -> Iterator[IntervalRow]:
    for title, name in (("Threshold", "threshold"), ("Repeat interval", "repeat")):
        if row := data[name]:
            yield IntervalRow(
                title,
                number_text(row["cycles"]),
                number_text(row["uncapped"]),
                row["cap"] or "none",
                row["base"],
            )


def _plan(plan: Data) -> Iterator[Figure]:
    """How surely the proposed plan finds the crack before it is critical."""
    for title, name in (
        ("Found before critical, mean over the phase", "mean"),
        ("Found before critical, worst phase", "worst"),
        ("Found before critical, as scheduled", "scheduled"),
    ):
        chance = plan[name]
        yield Figure(title, f"{chance:.4f}", f"missed {1 - chance:.2g}", chance)
    if plan["target"] is not None:
        yield Figure("Asked for", f"{plan['target']:g}", "the operator’s target")
        longest = plan["longest"]
        yield _figure("Longest repeat that meets it", longest, "FC", "")


def _looks(data: Data) -> Iterator[LookRow]:
    for curve in data["curves"]:
        if curve["key"] == INSPECTIONS:
            for mark in curve["marks"]:
                cycles, size = number_text(int(mark["x"])), number_text(mark["y"])
                yield LookRow(cycles, size, mark["label"])


def _asked(data: Data) -> Iterator[AskedRow]:
    for row in data["asked"]:
        yield AskedRow(
            row["method"],
            row["version"],
            row["title"],
            PARTS[row["part"]],
            row["part"] == "answers",
            data["outcome"] == COMPUTED and row["method"] == data["method"],
            _why(row),
            tuple(test_row(test) for test in row["applicability"]),
        )


def _why(row: Data) -> str:
    """Why a method does not answer: its first failed test, else what it lacks."""
    failed = [test for test in row["applicability"] if test["met"] is False]
    if failed:
        first = failed[0]
        return f"{first['test']}: {first['value']}; required {first['limit']}"
    lacking = [item["title"] for item in row["missing"]]
    lacking += [t["test"] for t in row["applicability"] if t["met"] is None]
    more = "not recorded: " + ", ".join(dict.fromkeys(lacking)) if lacking else ""
    if row["outcome"] == COMPUTED:
        first = row["governing"] if row["part"] == "answers" else BESIDE_COMPUTED
        return "; ".join(part for part in (first, more) if part)
    if more:
        return more
    return row["warnings"][0] if row["warnings"] else ""


def _margins(data: Data) -> Iterator[MarginRow]:
    titles = {row["method"]: row["title"] for row in data["asked"]}
    values = [
        row["strength"] / row["required"] - 1 if row["required"] else None
        for row in data["margins"]
    ]
    least = min((value for value in values if value is not None), default=None)
    for row, value in zip(data["margins"], values, strict=True):
        yield MarginRow(
            titles.get(row["method"], row["method"]),
            row["mechanism"],
            row["case"],
            number_text(row["strength"]),
            NOT_CHECKED if value is None else number_text(row["required"]),
            NOT_CHECKED if value is None else margin_text(value),
            value is not None and value < 0,
            value is not None and value == least,
        )


@dataclass(frozen=True, slots=True)
class Cell:
    """A figure of one column beside the first column's."""

    value: str
    differs: bool
    by: str = ""


@dataclass(frozen=True, slots=True)
class Compared:
    """One figure in every column."""

    title: str
    remark: str
    cells: tuple[Cell, ...]


def compared(columns: Sequence[Iterable[Figure]]) -> list[Compared]:
    """Figures side by side; what differs from the first column is marked."""
    tables = [{figure.title: figure for figure in column} for column in columns]
    titles = dict.fromkeys(title for table in tables for title in table)
    return [
        Compared(
            title,
            next(table[title].remark for table in tables if title in table),
            tuple(
                _cell(tables[0].get(title), table.get(title), number)
                for number, table in enumerate(tables)
            ),
        )
        for title in titles
    ]


def _cell(first: Figure | None, figure: Figure | None, column: int) -> Cell:
    if figure is None:
        return Cell(UNKNOWN, column > 0 and first is not None)
    if column == 0 or (first is not None and figure.value == first.value):
        return Cell(figure.value, differs=False)
    was, now = (first.number if first else None), figure.number
    if was is None or now is None or was == 0 or figure.title.startswith("Margin"):
        more = was is not None and now is not None
        by = margin_text(now - was) if more else ""  # type: ignore[operator]
        return Cell(figure.value, differs=True, by=by)
    share = 100 * (now - was) / abs(was)
    return Cell(figure.value, differs=True, by=f"{share:+.1f} %".replace("-", "−"))
