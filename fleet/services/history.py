"""Every write goes through `Writing`: the rows, and the entry that tells of them.

    with Writing(actor=user, action="finding_record", at=now, stream=...) as w:
        w.create(row)
        w.change(other, state="closed")

Leaving the block locks the end of the chain, appends one entry with its items and
commits all of it together, or nothing.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterable, Sequence
from contextvars import ContextVar
from types import TracebackType
from typing import Any, Self, TypeVar

from django.core.exceptions import ValidationError
from django.db import (
    IntegrityError,
    OperationalError,
    connection,
    models,
    transaction,
)

from fleet.canonical import canonical, plain
from fleet.cleaning import busy, clean_row, refusal, taken
from fleet.digests import (
    append_only,
    entry_digest,
    items_digest,
    row_digest,
    run_digest,
)
from fleet.models import (
    Aircraft,
    HistoryEntry,
    HistoryItem,
    Operator,
    User,
)
from fleet.refusals import Refused
from fleet.selectors.history import just_done
from fleet.services.chain import end_locked, end_moved, stream_end
from fleet.services.sending import changed_check, form_claim, form_written

Row = TypeVar("Row", bound=models.Model)

PROGRAM = "Framebay"
NESTED = "A service called another inside its own writing; pass the writing on instead."
NOT_MANY = "Rows of {table} may change later, so they are written one by one."
NOT_CHANGED = "Rows of {table} are never changed; write a new one that replaces it."
FIXED = "{columns} of {table} are never edited; write a new row that replaces it."
CHANGED_MEANWHILE = "{row} is not what was read: {told}"
SECRET = frozenset({"password"})

_open: ContextVar[bool] = ContextVar("writing_open", default=False)


class Writing:
    """One service call: one transaction, one history entry.

    `stream` names whose history it is: "aircraft:17", or "fleet" for what belongs to
    no aircraft. Raises ValidationError when a constraint refuses a row.
    """

    def __init__(
        self,
        *,
        actor: User | None,
        action: str,
        at: dt.datetime,
        stream: str = "fleet",
        operator: Operator | None = None,
        reason: str = "",
        origin: str = "",
    ) -> None:
        self.actor, self.action, self.at = actor, action, at
        self.stream, self.operator = stream, operator
        self.reason, self.origin = reason, origin
        self.items: list[HistoryItem] = []
        self._held: dict[int, models.Model] = {}
        self._creating: models.Model | None = None

    def __enter__(self) -> Self:
        if _open.get():
            raise RuntimeError(NESTED)
        self._atomic = transaction.atomic()
        try:
            self._atomic.__enter__()
        except OperationalError as error:
            raise busy(error) or error from error
        self._token = _open.set(True)
        try:
            self._form = form_claim(self.at)
            self._queue()
        except BaseException as refused:
            self._leave(refused)
            raise
        return self

    def __exit__(
        self,
        kind: type[BaseException] | None,
        error: BaseException | None,
        trace: TracebackType | None,
    ) -> None:
        try:
            if error is None and self.items:
                self._append()
            elif error is None:
                changed_check()
        except BaseException as late:
            self._leave(late)
            raise
        self._leave(error)
        if isinstance(error, IntegrityError):
            raise self._refusal(error) from error
        if isinstance(error, OperationalError) and (refused := busy(error)):
            raise refused from error

    def _queue(self) -> None:
        """Who writes about one aircraft waits here for one another, before any other
        lock: in whatever order services lock findings, repairs and numbers after it,
        they cannot wait for each other. SQLite has one writer at a time anyway."""
        kind, _, key = self.stream.partition(":")
        if kind == "aircraft" and connection.features.has_select_for_update:
            Aircraft.objects.select_for_update(no_key=True).filter(pk=int(key)).first()

    def _leave(self, error: BaseException | None) -> None:
        """Commit or roll back; what is rolled back leaves the form's key free."""
        _open.reset(self._token)
        if error is not None and (form := getattr(self, "_form", None)) is not None:
            form.claimed = None
        trace = error.__traceback__ if error else None
        self._atomic.__exit__(type(error) if error else None, error, trace)

    def _refusal(self, error: IntegrityError) -> ValidationError:
        """The database's refusal; of what is taken, by whom and when."""
        refused = refusal(error)
        if refused.code == "taken" and self._creating is not None:
            other = taken(self._creating, error)
            told = just_done(other) if other is not None else ""
            return Refused([*refused.messages, told]) if told else refused
        return refused

    def create(self, row: Row) -> Row:
        """Check and insert one row."""
        self._stamp(row)
        clean_row(row)
        self._creating = row
        row.save(force_insert=True)
        self._creating = None
        self._held[id(row)] = row
        self._note("created", row, {})
        return row

    def create_many(self, rows: Sequence[Row]) -> list[Row]:
        """Insert many rows of a table that never changes; one item a run of keys."""
        if not rows:
            return []
        table = rows[0]._meta.db_table
        if not append_only(type(rows[0])):
            raise RuntimeError(NOT_MANY.format(table=table))
        for row in rows:
            self._stamp(row)
            clean_row(row)
        written = type(rows[0])._default_manager.bulk_create(rows, batch_size=2_000)
        for run in _runs(written):
            self._add(
                "created_range", table, run[0].pk, run[-1].pk, run_digest(run), {}
            )
        return written

    def change(self, row: models.Model, **columns: Any) -> None:
        """Set columns (by column name: `closed_by_id`) and record from and to."""
        table = row._meta.db_table
        if append_only(type(row)):
            raise RuntimeError(NOT_CHANGED.format(table=table))
        fixed = set(columns) - getattr(row, "changeable", set(columns))
        if fixed:
            raise RuntimeError(FIXED.format(table=table, columns=", ".join(fixed)))
        self._hold(row, columns)
        changes = {}
        for name, value in columns.items():
            before = getattr(row, name)
            if before != value:
                setattr(row, name, value)
                changes[name] = [before, value]
        if not changes:
            return
        clean_row(row)
        row.save(update_fields=[_field_name(row, name) for name in changes])
        self._note(
            "changed",
            row,
            {
                name: ["secret", "secret"] if name in SECRET else [plain(a), plain(b)]
                for name, (a, b) in changes.items()
            },
        )

    def locked(self, rows: models.QuerySet[Row], **key: Any) -> Row:
        """The row, fresh and held until the end of the writing."""
        row = rows.select_for_update(no_key=True, of=("self",)).get(**key)
        self._held[id(row)] = row
        return row

    def _hold(self, row: models.Model, columns: Iterable[str]) -> None:
        """Hold a row that was read before the writing held it. What others changed in
        between is taken over; a column that is to be changed is not changed twice."""
        if id(row) in self._held:
            return
        now = type(row)._base_manager.select_for_update(no_key=True).get(pk=row.pk)
        names = [field.attname for field in row._meta.concrete_fields]
        differing = [name for name in names if getattr(row, name) != getattr(now, name)]
        if not set(differing).isdisjoint(columns):
            raise Refused([CHANGED_MEANWHILE.format(row=row, told=just_done(row))])
        for name in differing:
            setattr(row, name, getattr(now, name))
        self._held[id(row)] = row

    def _stamp(self, row: models.Model) -> None:
        """Rows that say who entered them, and when, say what the entry says."""
        if hasattr(row, "entered_at") and row.entered_at is None:
            row.entered_at = self.at
            row.entered_by = self.actor  # type: ignore[attr-defined]

    def _note(self, kind: str, row: models.Model, changes: dict[str, Any]) -> None:
        self._add(kind, row._meta.db_table, row.pk, row.pk, row_digest(row), changes)

    def _add(
        self, kind: str, table: str, first: int, last: int, of_row: str, changes: Any
    ) -> None:
        self.items.append(
            HistoryItem(
                number=len(self.items) + 1,
                kind=kind,
                table=table,
                first_pk=first,
                last_pk=last,
                row_digest=of_row,
                changes=canonical(changes),
            )
        )

    def _append(self) -> None:
        sequence, digest = end_locked()
        changed_check()
        of_stream, stream_digest = stream_end(self.stream)
        entry = HistoryEntry(
            sequence=sequence + 1,
            previous_digest=digest,
            stream=self.stream,
            stream_sequence=of_stream + 1,
            stream_previous_digest=stream_digest,
            operator=self.operator,
            actor=self.actor,
            actor_name=str(self.actor) if self.actor else PROGRAM,
            at=self.at,
            action=self.action,
            reason=self.reason,
            origin=self.origin,
            items_digest=items_digest(self.items),
        )
        entry.digest = entry_digest(entry)
        for item in self.items:
            item.entry_id = entry.sequence
        end_moved(entry, self.items)
        form_written(self._form, entry)


def _runs(rows: list[Row]) -> list[list[Row]]:
    """Rows grouped into unbroken runs of keys, so a range names no row of another."""
    runs: list[list[Row]] = []
    for row in rows:
        if runs and row.pk == runs[-1][-1].pk + 1:
            runs[-1].append(row)
        else:
            runs.append([row])
    return runs


def _field_name(row: models.Model, column: str) -> str:
    for field in row._meta.concrete_fields:
        if column in (field.name, field.attname):
            return field.name
    raise AttributeError(f"{row._meta.label} has no column {column}.")
