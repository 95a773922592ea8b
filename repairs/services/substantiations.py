"""The signed folder behind a repair, or behind damage that stays.

A revision is a draft until somebody signs it, and changes only until then; afterwards a
change is a new revision of the same number. The rows of a draft are written in
`substantiation_rows`.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from typing import Any

from django.core.exceptions import ValidationError

from fleet.models import Aircraft, Person, User
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from fleet.services.numbers import number_next
from repairs.models import (
    Finding,
    Repair,
    Substantiation,
    SubstantiationCase,
    SubstantiationDocument,
    SubstantiationEffect,
    SubstantiationFinding,
    SubstantiationNeighbour,
)
from repairs.services.stage_clocks import repair_clock_follow
from repairs.services.substantiation_draft import (
    draft_of,
    latest_of,
    neighbours_write,
)
from repairs.services.substantiation_entry import (
    FolderEntry,
    covering_problems,
    entry_problems,
)

REVISION_REASON = "Say why it is revised; the reason stands in the new revision."
STILL_A_DRAFT = "{folder} is not signed yet; edit it instead of revising it."
COPIED: tuple[type[Any], ...] = (
    SubstantiationFinding,
    SubstantiationNeighbour,
    SubstantiationCase,
    SubstantiationEffect,
    SubstantiationDocument,
)
"""Tables whose rows a new revision starts with, as they stood."""
COPIED_COLUMNS = (
    "title", "answer", "limitation", "scale", "scale_reason", "category",
    "category_reason", "data_due_on", "temporary_limit_cycles",
    "temporary_limit_minutes", "temporary_limit_on", "temporary_limit_source",
    "threshold_cycles", "threshold_minutes", "threshold_on", "threshold_source",
    "inspections",
)  # fmt: skip


def substantiation_draft(
    *,
    entry: FolderEntry,
    aircraft: Aircraft,
    findings: Sequence[Finding],
    actor: User | None,
    at: dt.datetime,
    repair: Repair | None = None,
) -> Substantiation:
    """A new folder with the findings it covers, and the neighbours it must review.

    A repair that has no folder yet gets this one.
    """
    with Writing(
        actor=actor,
        action="substantiation_draft",
        at=at,
        operator=aircraft.operator,
        stream=stream_of(aircraft),
    ) as w:
        if repair is not None:
            repair = w.locked(Repair.objects.select_related("aircraft"), pk=repair.pk)
        _refuse(covering_problems(aircraft, findings, repair), entry)
        row = w.create(
            Substantiation(
                operator=aircraft.operator,
                aircraft=aircraft,
                number=number_next(w, operator=aircraft.operator, kind="S"),
                **entry.columns(),
            )
        )
        for finding in findings:
            w.create(SubstantiationFinding(substantiation=row, finding=finding))
        if repair is not None:
            _repair_linked(w, row, repair)
        neighbours_write(w, row)
    return row


def substantiation_edit(
    *,
    substantiation: Substantiation,
    entry: FolderEntry,
    actor: User | None,
    at: dt.datetime,
) -> Substantiation:
    """Other columns for a draft; refused once somebody has signed it."""
    with writing_on(substantiation, "substantiation_edit", actor, at) as w:
        row = draft_of(substantiation)
        _refuse([], entry)
        w.change(row, **entry.columns())
    return row


def substantiation_revise(
    *,
    substantiation: Substantiation,
    reason: str,
    prepared_by: Person,
    actor: User | None,
    at: dt.datetime,
) -> Substantiation:
    """A new revision with the rows of the last one, to be changed and signed anew.

    Only the latest can be revised. The answers given for neighbours are kept with who
    gave them; what has come within reach since is added, unanswered.
    """
    if not reason.strip():
        raise ValidationError({"revision_reason": REVISION_REASON})
    with writing_on(substantiation, "substantiation_revise", actor, at, reason) as w:
        last = latest_of(substantiation)
        if not last.approvals.exists():
            raise ValidationError(STILL_A_DRAFT.format(folder=last))
        row = w.create(
            Substantiation(
                operator=last.operator,
                aircraft=last.aircraft,
                number=last.number,
                revision=last.revision + 1,
                replaces=last,
                revision_reason=reason.strip(),
                prepared_by=prepared_by,
                **{name: getattr(last, name) for name in COPIED_COLUMNS},
            )
        )
        for table in COPIED:
            _rows_copy(w, table, last, row)
        neighbours_write(w, row)
    return row


def substantiation_repair_link(
    *,
    substantiation: Substantiation,
    repair: Repair,
    actor: User | None,
    at: dt.datetime,
) -> Repair:
    """The folder of a repair that was recorded without one: its clocks follow."""
    action = "substantiation_repair_link"
    with writing_on(substantiation, action, actor, at) as w:
        row = w.locked(Repair.objects.select_related("aircraft"), pk=repair.pk)
        aircraft = substantiation.aircraft
        if problems := covering_problems(aircraft, (), row):
            raise ValidationError(problems)
        _repair_linked(w, substantiation, row)
        if not substantiation.approvals.exists():
            neighbours_write(w, substantiation)
    return row


def _repair_linked(w: Writing, row: Substantiation, repair: Repair) -> None:
    w.change(repair, substantiation_id=row.pk)
    repair_clock_follow(w, repair, on=w.at.date())


def writing_on(
    substantiation: Substantiation,
    action: str,
    actor: User | None,
    at: dt.datetime,
    reason: str = "",
) -> Writing:
    """A writing in the history of the folder's aircraft."""
    return Writing(
        actor=actor,
        action=action,
        at=at,
        operator=substantiation.operator,
        stream=stream_of(substantiation.aircraft),
        reason=reason,
    )


def _refuse(problems: list[str], entry: FolderEntry) -> None:
    """Everything at once: the fields first, then what belongs to no field."""
    told: dict[str, object] = dict(entry_problems(entry))
    if problems:
        told["__all__"] = problems
    if told:
        raise ValidationError(told)


def _rows_copy(
    w: Writing,
    table: type[Any],
    last: Substantiation,
    row: Substantiation,
) -> None:
    rows = table.objects.filter(substantiation=last)
    if table is not SubstantiationEffect:
        rows = rows.filter(withdrawn=False)
    names = [f.attname for f in table._meta.concrete_fields]
    left = {"id", "substantiation_id"}
    for one in rows.order_by("pk"):
        same = {name: getattr(one, name) for name in names if name not in left}
        w.create(table(substantiation=row, **same))
