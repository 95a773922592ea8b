"""Recording damage: never refused for a doubtful location, size or counter.

A location that cannot be read is saved *to be placed*, as written. Doubts become
questions, kept with their answers; they block assessment, never the record.
"""

from __future__ import annotations

import datetime as dt
import uuid
from collections.abc import Callable, Iterable, Sequence
from dataclasses import dataclass

from django.core.exceptions import ValidationError

from fleet.due import Counters, Standing
from fleet.models import (
    Aircraft,
    Criticality,
    Person,
    SafeLifePart,
    User,
)
from fleet.selectors.counters import aircraft_standing
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from fleet.services.numbers import number_next
from fleet.services.parts import counter_columns
from repairs.measured import Hole, Typed
from repairs.models import Element, Event, Finding, FindingQuestion, FindingState
from repairs.plausibility import (
    ASKED,
    PLACE_WARNING,
    Question,
    ahead_of_usage,
    counter_questions,
)
from repairs.selectors.report_triggers import is_critical_crack
from repairs.services.assessing import finding_link_write
from repairs.services.authority import operator_on
from repairs.services.manufacture import made_before
from repairs.services.measuring import Measuring, measurement_write, questions_ask
from repairs.services.photographs import Photo, photographs_write
from repairs.services.places import (
    Placed,
    item_columns,
    keyed,
    place_columns_of,
    place_try,
)
from repairs.services.reports import questions_open_write

FROM_USAGE = "usage, as of {day}"
BEFORE_USAGE = "not stated; usage begins on {day}"
AS_STATED = "as stated on entry"
PLACED_ALREADY = (
    "{number} is {state}; its location is fixed. Record a new finding where it is, and "
    "link it to {number} as the same damage."
)
ALREADY_ANSWERED = "This question was answered before: {answer}"
ANSWER_NEEDED = "Answer in words; the answer is kept with the question."
AS_ENTERED = (
    "aircraft", "safe_life_part", "damage_type", "cluster_count", "cause", "found_on",
    "found_by", "occasion", "task_reference", "detection_method",
    "detection_procedure", "last_clean_on", "last_clean_cycles", "last_clean_method",
    "event", "ata", "description", "client_key",
)  # fmt: skip
StandingOf = Callable[[Aircraft, dt.date], Standing]


@dataclass(frozen=True, slots=True)
class Link:
    """The answer to "is it this earlier one?", given before the finding is saved."""

    earlier: Finding
    kind: str


@dataclass(frozen=True, slots=True)
class FindingEntry:
    """A finding as written down; whatever is left out is unknown, not nought.

    `at` is left out when the counters are to be taken from usage.
    """

    aircraft: Aircraft
    place_entered: str
    damage_type: str
    found_on: dt.date
    typed: Sequence[Typed] = ()
    holes: Sequence[Hole] = ()
    at: Counters | None = None
    counters_source: str = ""
    element: str = ""
    element_label: str = ""
    surface: str = ""
    criticality: str = ""
    criticality_source: str = ""
    ata: str = ""
    cause: str = "unknown"
    cluster_count: int = 1
    occasion: str = "other"
    task_reference: str = ""
    detection_method: str = "unknown"
    detection_procedure: str = ""
    last_clean_on: dt.date | None = None
    last_clean_cycles: int | None = None
    last_clean_method: str = ""
    found_by: Person | None = None
    event: Event | None = None
    safe_life_part: SafeLifePart | None = None
    description: str = ""
    instrument: str = ""
    light: str = ""
    client_key: uuid.UUID | None = None
    photographs: Sequence[Photo] = ()
    links: Sequence[Link] = ()


def finding_record(
    *,
    entry: FindingEntry,
    actor: User | None,
    at: dt.datetime,
    standing_of: StandingOf | None = None,
) -> Finding:
    """A new finding, reported. The same form sent twice is one finding.

    `standing_of` gives counters from totals the caller already has, as a loader does;
    without it the usage is asked.
    """
    if (before := _sent_before(entry)) is not None:
        return before
    try:
        with Writing(
            actor=actor,
            action="finding_record",
            at=at,
            operator=entry.aircraft.operator,
            stream=stream_of(entry.aircraft),
        ) as w:
            return finding_write(w, entry, standing_of=standing_of)
    except ValidationError:
        if (before := _sent_before(entry)) is not None:
            return before
        raise


def findings_record_many(
    w: Writing,
    entries: Iterable[FindingEntry],
    *,
    standing_of: StandingOf | None = None,
) -> list[Finding]:
    """Many findings inside one writing, as from an import."""
    return [finding_write(w, entry, standing_of=standing_of) for entry in entries]


def finding_write(
    w: Writing, entry: FindingEntry, *, standing_of: StandingOf | None = None
) -> Finding:
    """Inside a writing: the finding with its first measurement and its questions."""
    if refused := made_before(entry.aircraft, entry.found_on):
        raise ValidationError({"found_on": refused})
    standing = _standing(entry, standing_of)
    placed = place_try(entry.aircraft, entry.place_entered)
    at = standing.at if entry.at is None else entry.at
    finding = w.create(_row(w, entry, placed, at, standing))
    asked = [
        *counter_questions(at, standing, found_on=entry.found_on),
        *_place_questions(placed),
    ]
    questions_ask(w, finding, asked)
    measuring = Measuring(
        typed=entry.typed,
        measured_on=entry.found_on,
        measured_by=entry.found_by,
        at=at,
        method=entry.detection_method,
        instrument=entry.instrument,
        light=entry.light,
        holes=entry.holes,
    )
    measurement_write(w, finding=finding, measuring=measuring)
    photographs_write(w, shown=finding, photos=entry.photographs)
    if is_critical_crack(finding):
        questions_open_write(w, finding)
    for link in entry.links:
        finding_link_write(
            w,
            finding=finding,
            earlier=link.earlier,
            kind=link.kind,
            decided_by=entry.found_by,
            on=w.at.date(),
        )
    return finding


def _row(
    w: Writing, entry: FindingEntry, placed: Placed, at: Counters, standing: Standing
) -> Finding:
    operator = operator_on(entry.aircraft, entry.found_on)
    same = {name: getattr(entry, name) for name in AS_ENTERED}
    return Finding(
        operator=operator,
        number=number_next(w, operator=operator, kind="F"),
        state=FindingState.REPORTED,
        counters_source=_source(entry),
        counters_ahead=ahead_of_usage(at, standing.at),
        **counter_columns("at", at),
        **same | place_columns_of(placed) | _item_columns(entry, placed),
    )


def finding_relocate(
    *,
    finding: Finding,
    place_entered: str,
    actor: User | None,
    at: dt.datetime,
    reason: str = "",
) -> Finding:
    """Read a finding's location anew, while it is reported.

    LocationRefused when the text gives no place: nothing is changed then.
    """
    placed = place_try(finding.aircraft, place_entered)
    if placed.refused is not None:
        raise placed.refused
    with Writing(
        actor=actor,
        action="finding_relocate",
        at=at,
        operator=finding.aircraft.operator,
        stream=stream_of(finding.aircraft),
        reason=reason,
    ) as w:
        row = w.locked(Finding.objects.select_related("aircraft"), pk=finding.pk)
        if row.state != FindingState.REPORTED:
            raise ValidationError(
                PLACED_ALREADY.format(number=row, state=row.get_state_display())
            )
        columns = place_columns_of(placed) | _item_now(row, placed)
        w.change(row, **keyed(row, columns))
        open_codes = set(row.questions.values_list("code", flat=True))
        asked = [q for q in _place_questions(placed) if q.code not in open_codes]
        questions_ask(w, row, asked)
    return row


def finding_question_answer(
    *, question: FindingQuestion, answer: str, actor: User, at: dt.datetime
) -> FindingQuestion:
    """The answer to a doubt, given once and kept."""
    if not answer.strip():
        raise ValidationError({"answer": ANSWER_NEEDED})
    finding = question.finding
    with Writing(
        actor=actor,
        action="finding_question_answer",
        at=at,
        operator=finding.aircraft.operator,
        stream=stream_of(finding.aircraft),
    ) as w:
        row = w.locked(FindingQuestion.objects.all(), pk=question.pk)
        if row.answered_at is not None:
            raise ValidationError(ALREADY_ANSWERED.format(answer=row.answer))
        w.change(row, answer=answer.strip(), answered_by_id=actor.pk, answered_at=at)
    return row


def standing_on(aircraft: Aircraft, day: dt.date) -> Standing:
    """What the aircraft had flown by that day."""
    return aircraft_standing(aircraft, as_of=day).standing


def _sent_before(entry: FindingEntry) -> Finding | None:
    if entry.client_key is None:
        return None
    return Finding.objects.filter(client_key=entry.client_key).first()


def _standing(entry: FindingEntry, standing_of: StandingOf | None) -> Standing:
    """Usage that day; before the aircraft's data begin it says nothing."""
    if entry.found_on < entry.aircraft.data_from:
        return Standing()
    return (standing_of or standing_on)(entry.aircraft, entry.found_on)


def _source(entry: FindingEntry) -> str:
    if entry.at is None and entry.found_on < entry.aircraft.data_from:
        return BEFORE_USAGE.format(day=entry.aircraft.data_from)
    if entry.at is None:
        return FROM_USAGE.format(day=entry.found_on)
    return entry.counters_source or AS_STATED


def _item_columns(entry: FindingEntry, placed: Placed) -> dict[str, object]:
    """What was said of the structural item, else what the location says of it."""
    return item_columns(
        placed,
        element=entry.element,
        element_label=entry.element_label,
        surface=entry.surface,
        criticality=entry.criticality,
        criticality_source=entry.criticality_source,
    )


def _item_now(row: Finding, placed: Placed) -> dict[str, object]:
    """Of a finding placed later: what is still unknown of its structural item."""
    entry = FindingEntry(
        aircraft=row.aircraft,
        place_entered=row.place_entered,
        damage_type=row.damage_type,
        found_on=row.found_on,
        surface=row.surface,
        element="" if row.element == Element.UNKNOWN else row.element,
        element_label=row.element_label,
        criticality="" if row.criticality == Criticality.UNKNOWN else row.criticality,
        criticality_source=row.criticality_source,
    )
    return _item_columns(entry, placed)


def _place_questions(placed: Placed) -> list[Question]:
    if placed.place is None or not placed.place.needs_yes:
        return []
    text = ASKED[PLACE_WARNING].format(
        code=", ".join(placed.place.codes), canonical=placed.place.canonical
    )
    return [Question(PLACE_WARNING, text)]
