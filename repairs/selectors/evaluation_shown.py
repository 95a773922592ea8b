"""An evaluation as it is shown: on its page, by the command, to another program."""

from __future__ import annotations

import json
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from repairs.evaluation_charts import charts_of
from repairs.evaluation_figures import Answer, TestRow, answer_of, test_row
from repairs.evaluation_text import value_text
from repairs.input_text import input_write
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
        "governing": evaluation.governing,
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
        "margins": outputs["margins"],
        "cases_not_checked": outputs["cases_not_checked"],
        "assumptions": outputs["assumptions"],
        "asked": outputs["asked"],
        "plan": outputs.get("plan"),
        "applicability": json.loads(evaluation.applicability),
        "warnings": outputs["warnings"],
        "curves": outputs["curves"],
        "note": json.loads(evaluation.note),
        "barred": outputs["barred"],
        "libraries": json.loads(evaluation.libraries),
        "content_digest": evaluation.content_digest,
    }


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
class GivenRow:
    """One input that a stored calculation was given."""

    title: str
    value: str
    source: str
    grade: str


@dataclass(frozen=True, slots=True)
class Shown:
    """Everything the page of an evaluation prints."""

    evaluation: Evaluation
    subject: Finding | Repair
    title: str
    state: str
    approved: bool
    stale: list[str]
    answer: Answer
    tests: list[TestRow]
    charts: list[tuple[str, str]]
    note: list[NoteRow]
    given: list[GivenRow]
    inputs: list[InputRow]
    libraries: str
    digest: list[str]


def evaluation_shown(
    evaluation: Evaluation, versions: Mapping[str, int], titles: Mapping[str, str]
) -> Shown:
    """The page of an evaluation; a handful of queries.

    `titles` names the inputs there are, by the name they are stored under.
    """
    data = evaluation_json(evaluation)
    answer = answer_of(data)
    return Shown(
        evaluation=evaluation,
        subject=subject_of(evaluation),
        title=answer.title,
        state=data["state"],
        approved=not data["unapproved"],
        stale=stale_reasons(evaluation, versions),
        answer=answer,
        tests=[test_row(test) for test in data["applicability"]],
        charts=charts_of(data),
        note=[_note_row(line) for line in data["note"]],
        given=[
            _given(titles.get(name, name), value)
            for name, value in _in_order(data["inputs"], titles)
        ],
        inputs=input_rows(evaluation),
        libraries=", ".join(f"{k} {v}" for k, v in sorted(data["libraries"].items())),
        digest=[
            evaluation.content_digest[start : start + 16] for start in range(0, 64, 16)
        ],
    )


def _in_order(
    inputs: Mapping[str, Any], titles: Mapping[str, str]
) -> list[tuple[str, Any]]:
    """Stored inputs in the order of the titles, others behind them."""
    order = {name: place for place, name in enumerate(titles)}
    return sorted(inputs.items(), key=lambda item: order.get(item[0], len(order)))


def _note_row(line: dict[str, Any]) -> NoteRow:
    grade = SOURCE_GRADES.get(line["grade"] or "", "")
    return NoteRow(
        line["number"], line["symbol"], line["formula"], line["substitution"],
        value_text(line),
        line["unit"].strip("-"), line["source"], grade,
    )  # fmt: skip


def _given(title: str, value: dict[str, Any]) -> GivenRow:
    """A stored input as text; the long ones by what tells them apart."""
    kind, words = value["kind"], ""
    origin = value
    if kind == "Sourced":
        words = input_write(value["value"], value["unit"])
    elif kind == "Stated":
        words = value["value"].replace("_", " ")
    elif kind.endswith("Law"):
        origin = value["reference"]
        words = f"{kind[:-3]}, C {value['coefficient']:.4g}, m {value['exponent']:g}"
        if "gamma" in value:
            words += f", γ {value['gamma']:g}"
    elif kind == "FatiguePolicy":
        origin = value["factor"]
        words = f"factor {origin['value']:g} on {value['multiplies']}"
    elif kind == "StressLifeFamily":
        origin = value["curves"][0]
        words = "Kt " + ", ".join(f"{curve['kt']:g}" for curve in value["curves"])
    elif kind == "RecordedSpectrum":
        words = value["name"]
    elif kind == "Detection":
        origin = value["curve"]["study"]
        words = value["title"]
    elif kind == "Surroundings":
        words = value["bay_label"] or "on the geometry"
    grade = origin.get("grade", "")
    return GivenRow(title, words, origin.get("source", ""), grade)
