"""The page on which a finding or repair is evaluated: what is used, what follows, and
what would follow from other numbers. Only its form that is posted keeps anything."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import Any

from fleet.clock import today
from fleet.views.requests import Request
from repairs.evaluation_charts import charts_of
from repairs.evaluation_figures import Answer, answer_of, compared, figures_of
from repairs.forms.evaluations import EvaluationForm, WhatIfForm
from repairs.models import Evaluation
from repairs.selectors.evaluation_shown import evaluation_json
from repairs.selectors.evaluations import (
    detectable_sizes,
    evaluation_current,
    evaluations_current,
)
from repairs.services.evaluation_gathered import Choice
from repairs.services.evaluation_place import Subject
from repairs.services.evaluation_prepare import (
    ALSO,
    InputLine,
    Prepared,
    choice_from,
    default_use,
    evaluation_prepare,
    input_lines,
    input_titles,
)
from repairs.services.evaluation_sensitivity import moves_of
from repairs.services.evaluation_what_if import prepared_data, what_if
from repairs.services.evaluations import choice_of
from repairs.services.stated import stated_lines
from repairs.views.evaluation_links import entry_link, state_address

RECORD, WHAT_IF = "as the record stands", "what if"
SENSITIVITY = "sensitivity"


@dataclass(frozen=True, slots=True)
class Line:
    """One input with its what-if field and the page it is entered on."""

    line: InputLine
    field: Any
    address: str
    words: str


def choice_form(request: Request, subject: Subject) -> EvaluationForm:
    """What is asked for, from the address; else what the evaluation in force was
    asked, or what the subject suggests."""
    sizes = detectable_sizes(subject.aircraft.variant.aircraft_type)
    use = default_use(subject)
    stored = evaluation_current(subject, use.value)
    choice = choice_of(stored) if stored else Choice(use)
    first = {
        "use": choice.use.value,
        "detectable": choice.detectable,
        "life_used_reason": choice.life_used_reason,
    }
    given = request.GET if "use" in request.GET else None
    return EvaluationForm(given, sizes=sizes, initial=first)


def kept_choice(request: Request, subject: Subject) -> dict[str, Any]:
    """What the form that keeps begins with: what was asked for."""
    return _asked(choice_form(request, subject))


def _asked(ask: EvaluationForm) -> dict[str, Any]:
    if ask.is_bound and ask.is_valid():
        return ask.cleaned_data
    return dict(ask.initial)


def evaluate_context(request: Request, subject: Subject) -> dict[str, Any]:
    """Everything the page shows but the form that keeps."""
    ask = choice_form(request, subject)
    choice = choice_from(subject, **_asked(ask))
    prepared = evaluation_prepare(subject=subject, choice=choice, as_of=today())
    lines = input_lines(prepared)
    form = WhatIfForm(request.GET or None, lines=lines, given=prepared.inputs.values)
    other, refusal = _other(subject, choice, form)
    current = evaluations_current(subject)
    stored = next((row for row in current if row.use == choice.use), None)
    data = prepared_data(prepared)
    answer, titles = answer_of(data), input_titles()
    return {
        "subject": subject,
        "ask": ask,
        "choice": choice,
        "use_words": dict(ask.fields["use"].choices)[choice.use.value],  # type: ignore[attr-defined]
        "current": current,
        "prepared": prepared,
        "answer": answer,
        "what_if": form,
        "set_aside": [
            (key, titles.get(name, name), text) for key, name, text in form.set_aside
        ],
        "other": _besides(answer, other),
        "refusal": refusal,
        **_inputs(subject, form, lines),
        "stated": [
            (line, state_address(subject, line.row.name))
            for line in stated_lines(subject)
        ],
        **_side_by_side(data, other, stored),
        "moves": moves_of(other or prepared) if SENSITIVITY in request.GET else None,
    }


def _other(
    subject: Subject, choice: Choice, form: WhatIfForm
) -> tuple[Prepared | None, str]:
    """The what-if, if one is asked for and all of it can be read."""
    if not form.asks or not form.is_valid():
        return None, ""
    return what_if(
        subject=subject,
        choice=choice,
        as_of=today(),
        instead=form.cleaned_data["instead"],
    )


def _besides(answer: Answer, other: Prepared | None) -> Answer | None:
    """What the what-if says, with only those warnings that the record has not."""
    if other is None:
        return None
    found, known = answer_of(prepared_data(other)), {*answer.warnings, *answer.barred}
    return replace(
        found,
        warnings=tuple(text for text in found.warnings if text not in known),
        barred=tuple(text for text in found.barred if text not in known),
    )


def _inputs(
    subject: Subject, form: WhatIfForm, lines: Sequence[InputLine]
) -> dict[str, Any]:
    """What the methods need, and what else is on record: open once it is changed."""
    rows = [_line(subject, form, line) for line in lines]
    also = [row for row in rows if row.line.group == ALSO]
    return {
        "lines": [row for row in rows if row.line.group != ALSO],
        "also": also,
        "also_open": any(row.field is not None and row.field.value() for row in also),
    }


def _line(subject: Subject, form: WhatIfForm, line: InputLine) -> Line:
    return Line(line, form.of(line.name), *entry_link(subject, line))


def _side_by_side(
    data: dict[str, Any], other: Prepared | None, stored: Evaluation | None
) -> dict[str, Any]:
    """Figures of the record, the what-if and the stored evaluation, and the curves."""
    heads: list[tuple[str, Evaluation | None]] = [(RECORD, None)]
    columns: list[Sequence[Any]] = [list(figures_of(data))]
    beside = prepared_data(other) if other else None
    if beside:
        heads.append((WHAT_IF, None))
        columns.append(list(figures_of(beside)))
    if stored:
        heads.append((stored.number, stored))
        columns.append(list(figures_of(evaluation_json(stored))))
    drawn = charts_of(data, beside) if data["curves"] else charts_of(beside or data)
    return {"heads": heads, "figures": compared(columns), "charts": drawn}
