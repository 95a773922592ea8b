"""An evaluation as it is shown: on its page, by the command, to another program."""

from __future__ import annotations

import json
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from fleet.drawing.chart import Chart, Level, Point, Series, chart_svg
from repairs.evaluation_text import number_text, value_text
from repairs.models import Evaluation, Finding, Repair
from repairs.selectors.evaluations import (
    APPROVED,
    InputRow,
    evaluation_state,
    input_rows,
    stale_reasons,
)

COLUMNS = (
    "residual_strength_mpa",
    "required_residual_mpa",
    "residual_case",
    "margin_residual",
    "ultimate_mpa",
    "ultimate_case",
    "margin_ultimate",
    "ultimate_kept",
    "life_cycles",
    "life_base",
    "scatter_factor",
    "threshold_cycles",
    "repeat_cycles",
)
SOURCE_GRADES = {
    "print": "",
    "recorded": "",
    "quoted": "quoted",
    "memory": "from memory",
    "adopted": "adopted",
}


def subject_of(evaluation: Evaluation) -> Finding | Repair:
    """The finding or repair an evaluation is of."""
    subject = evaluation.finding or evaluation.repair
    if subject is None:
        raise ValueError(f"{evaluation} has no subject.")  # a constraint forbids it
    return subject


def evaluation_json(evaluation: Evaluation) -> dict[str, Any]:
    """The evaluation as plain data, as the command and the API give it."""
    outputs = json.loads(evaluation.outputs)
    state = evaluation_state(evaluation)
    return {
        "number": evaluation.number,
        "subject": str(subject_of(evaluation)),
        "use": evaluation.use,
        "outcome": evaluation.outcome,
        "method": evaluation.method,
        "version": evaluation.method_version,
        "title": outputs["title"],
        "state": state,
        "unapproved": state != APPROVED,
        "inputs": json.loads(evaluation.inputs),
        **{name: getattr(evaluation, name) for name in COLUMNS},
        "life_after_factor_cycles": evaluation.usable_life_cycles,
        "lives": outputs["lives"],
        "threshold": outputs["threshold"],
        "repeat": outputs["repeat"],
        "missing": outputs["missing"],
        "applicability": json.loads(evaluation.applicability),
        "warnings": outputs["warnings"],
        "curves": outputs["curves"],
        "note": json.loads(evaluation.note),
        "barred": outputs["barred"],
        "libraries": json.loads(evaluation.libraries),
        "content_digest": evaluation.content_digest,
    }


@dataclass(frozen=True, slots=True)
class Figure:
    """One line of the results: what, the number as text, and what it is of."""

    title: str
    value: str
    remark: str


@dataclass(frozen=True, slots=True)
class NoteRow:
    """One line of the note, ready to print."""

    number: int
    symbol: str
    formula: str
    substitution: str
    value: str
    unit: str
    source: str
    grade: str


@dataclass(frozen=True, slots=True)
class TestRow:
    """One applicability test in words."""

    met: str
    failed: bool
    test: str
    value: str
    limit: str


@dataclass(frozen=True, slots=True)
class Shown:
    """Everything the page of an evaluation prints."""

    evaluation: Evaluation
    subject: Finding | Repair
    title: str
    state: str
    approved: bool
    stale: list[str]
    warnings: list[str]
    barred: list[str]
    figures: list[Figure]
    tests: list[TestRow]
    missing: list[dict[str, str]]
    charts: list[tuple[str, str]]
    note: list[NoteRow]
    inputs: list[InputRow]
    libraries: str
    digest: list[str]


def evaluation_shown(evaluation: Evaluation, versions: Mapping[str, int]) -> Shown:
    """The page of an evaluation; a handful of queries."""
    data = evaluation_json(evaluation)
    barred = data["barred"]
    return Shown(
        evaluation=evaluation,
        subject=subject_of(evaluation),
        title=data["title"] or "No method for this damage",
        state=data["state"],
        approved=not data["unapproved"],
        stale=stale_reasons(evaluation, versions),
        warnings=[w for w in data["warnings"][1:] if w not in barred]
        if evaluation.outcome == "computed"
        else data["warnings"],
        barred=barred,
        figures=_figures(data),
        tests=[_test(test) for test in data["applicability"]],
        missing=data["missing"],
        charts=[(c["title"], chart_of(c)) for c in data["curves"]],
        note=[_note_row(line) for line in data["note"]],
        inputs=input_rows(evaluation),
        libraries=", ".join(f"{k} {v}" for k, v in sorted(data["libraries"].items())),
        digest=[
            evaluation.content_digest[start : start + 16] for start in range(0, 64, 16)
        ],
    )


def _figures(data: dict[str, Any]) -> list[Figure]:
    """Results in the order they are read; nothing for what is not computed."""
    if data["outcome"] != "computed":
        return []
    found = [
        _figure("Residual strength", data["residual_strength_mpa"], "MPa", "gross"),
        _figure("Required, residual", data["required_residual_mpa"], "MPa",
                data["residual_case"]),
        _figure("Margin", data["margin_residual"], "", "residual", signed=True),
        _figure("Static ultimate", data["ultimate_mpa"], "MPa", data["ultimate_case"]),
        _figure("Margin", data["margin_ultimate"], "", "ultimate", signed=True),
        Figure("Ultimate strength kept", data["ultimate_kept"].replace("_", " "), ""),
        *(_life(life) for life in data["lives"]),
    ]  # fmt: skip
    if data["scatter_factor"] is not None:
        after = data["life_after_factor_cycles"]
        found.append(
            _figure("Life after factor", after, "FC",
                    f"factor {data['scatter_factor']:g}, {data['life_base']}")
        )  # fmt: skip
    if data["use"] == "no_known_crack":
        found += [
            _interval("Threshold", data["threshold"]),
            _interval("Repeat interval", data["repeat"]),
        ]
    return found


def _figure(
    title: str, value: float | None, unit: str, remark: str, *, signed: bool = False
) -> Figure:
    text = number_text(value)
    if signed and value is not None:
        text = f"{value:+.2f}".replace("-", "−")
    return Figure(title, f"{text} {unit}".strip(), remark)


def _life(life: dict[str, Any]) -> Figure:
    remark = ", ".join(part for part in (life["base"], life["remark"]) if part)
    return _figure(f"Life, {life['title']}", life["cycles"], "FC", remark)


def _interval(title: str, interval: dict[str, Any] | None) -> Figure:
    if interval is None:
        return Figure(title, "none", "needs an engineer: see the warnings")
    remark = interval["base"]
    if interval["cap"]:
        remark += f"; calculated {interval['uncapped']:,}, cut to {interval['cap']}"
    return _figure(title, interval["cycles"], "FC", remark)


def _test(test: dict[str, Any]) -> TestRow:
    words = {True: "met", False: "not met", None: "not known"}
    return TestRow(
        words[test["met"]],
        test["met"] is False,
        test["test"],
        test["value"],
        test["limit"],
    )


def _note_row(line: dict[str, Any]) -> NoteRow:
    grade = SOURCE_GRADES.get(line["grade"] or "", "")
    return NoteRow(
        line["number"], line["symbol"], line["formula"], line["substitution"],
        value_text(line),
        line["unit"].strip("-"), line["source"], grade,
    )  # fmt: skip


def chart_of(curve: dict[str, Any]) -> str:
    """A stored curve as SVG; cycles are drawn in thousands once they are many."""
    scale, unit = 1.0, curve["x_unit"]
    if unit == "cycles":
        unit = ""
        if curve["points"][-1][0] >= 10_000:
            scale, unit = 1000.0, "thousands"
    levels = [mark for mark in curve["marks"] if mark["x"] is None]
    named = [mark for mark in curve["marks"] if mark["x"] is not None]
    x_label = f"{curve['x_label']}, {unit}" if unit else curve["x_label"]
    return chart_svg(
        Chart(
            title=curve["title"],
            x_label=x_label,
            y_label=f"{curve['y_label']}, {curve['y_unit']}",
            series=[
                Series(
                    curve["title"],
                    [point[0] / scale for point in curve["points"]],
                    [point[1] for point in curve["points"]],
                )
            ],
            levels=[
                Level(mark["y"], f"{mark['label']} {number_text(mark['y'])} "
                      f"{curve['y_unit']}", soft=number == 0)
                for number, mark in enumerate(levels)
            ],
            point=Point(named[0]["x"] / scale, named[0]["y"], named[0]["label"])
            if named
            else None,
        )
    )  # fmt: skip
