"""Safe-life parts on and off aircraft.

No total is stored: every answer is summed from these rows. One serial is in one place
at a time; a part without life left, or without a complete history, is not installed.
"""

from __future__ import annotations

from datetime import date, datetime
from typing import Any

from django.db.models import Model

from fleet.amounts import amount_write, due_write
from fleet.due import COUNTED, COUNTER_WORDS, Counters
from fleet.models import (
    Aircraft,
    Configuration,
    PartInstallation,
    PartState,
    Person,
    SafeLifePart,
    User,
)
from fleet.refusals import Refused
from fleet.selectors.parts import PartLife, part_life
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing

NOT_IN_STORE = "{part} is {state}; only a part in store is installed."
NO_RELEASE = (
    "{part} has no release reference; record its release certificate before installing."
)
INCOMPLETE = "{part} is not installed: {reason}."
LIFE_ENDED = (
    "{part} has no life left in configuration {configuration}: {limit}, accumulated "
    "{total}."
)
OCCUPIED = "{position} of {mark} holds {other} since {since}; remove it first."
OUT_OF_ORDER = "{day} lies before {last}, when the part was last installed or removed."
BACKWARDS = (
    "{counter} {read} at removal is below {fitted} at installation; check both records."
)
MISSING = "Give the aircraft's {counter}; a part's life is counted from it."
NOT_INSTALLED = "{part} is not installed, so it cannot be {act}."
REMOVED_ALREADY = "It is off {position} since {day}; nothing was changed."
NO_REASON = "Say why the part was removed."
NEEDED = (COUNTED[0], COUNTED[1], COUNTED[2])


class PartRefused(Refused):
    """A part that cannot go where it is asked to go."""


def part_install(
    *,
    actor: User | None,
    at: datetime,
    part: SafeLifePart,
    aircraft: Aircraft,
    position: str,
    configuration: Configuration,
    on: date,
    counters: Counters,
    release_reference: str = "",
    installed_by: Person | None = None,
) -> PartInstallation:
    """Put a part on a position; `counters` are the aircraft's, as recorded."""
    with _writing(actor, "part_install", at, aircraft) as w:
        _lock(aircraft, part)
        release = release_reference.strip() or part.release_reference
        problems = _missing(counters)
        problems += _install_problems(part, configuration, on, release)
        taken = PartInstallation.objects.filter(
            aircraft=aircraft, position=position, removed_on=None
        ).select_related("part")
        problems += [
            OCCUPIED.format(
                position=position,
                mark=aircraft.registration,
                other=row.part,
                since=row.installed_on,
            )
            for row in taken
        ]
        if problems:
            raise PartRefused(problems)
        row = w.create(
            PartInstallation(
                part=part,
                aircraft=aircraft,
                position=position,
                configuration=configuration,
                installed_on=on,
                release_reference=release,
                installed_by=installed_by,
                **counter_columns("installed", counters),
            )
        )
        w.change(part, state=PartState.INSTALLED.value)
    return row


def part_remove(
    *,
    actor: User | None,
    at: datetime,
    part: SafeLifePart,
    on: date,
    counters: Counters,
    reason: str,
    state: PartState = PartState.IN_STORE,
    release_reference: str = "",
) -> PartInstallation:
    """Take a part off; it goes to store, or aside with another state."""
    row = _open(part, "removed")
    with _writing(actor, "part_remove", at, row.aircraft, reason) as w:
        _lock(part, row)
        problems = _removal_problems(row, on, counters)
        if not reason.strip():
            problems.append(NO_REASON)
        if problems:
            raise PartRefused(problems)
        w.change(
            row,
            removed_on=on,
            removal_reason=reason,
            **counter_columns("removed", counters),
        )
        w.change(part, state=state.value, release_reference=release_reference)
    return row


def part_reconfigure(
    *,
    actor: User | None,
    at: datetime,
    part: SafeLifePart,
    configuration: Configuration,
    on: date,
    counters: Counters,
    reason: str,
) -> PartInstallation:
    """The aircraft changes configuration with the part on it: one stint ends, the next
    begins at the same counters."""
    row = _open(part, "given another configuration")
    with _writing(actor, "part_reconfigure", at, row.aircraft, reason) as w:
        _lock(part, row)
        problems = _removal_problems(row, on, counters)
        if problems:
            raise PartRefused(problems)
        w.change(
            row,
            removed_on=on,
            removal_reason=reason,
            **counter_columns("removed", counters),
        )
        return w.create(
            PartInstallation(
                part=part,
                aircraft=row.aircraft,
                position=row.position,
                configuration=configuration,
                carried_by=row.carried_by,
                installed_on=on,
                release_reference=row.release_reference,
                installed_by=row.installed_by,
                **counter_columns("installed", counters),
            )
        )


def _writing(
    actor: User | None, action: str, at: datetime, aircraft: Aircraft, reason: str = ""
) -> Writing:
    return Writing(
        actor=actor,
        action=action,
        at=at,
        stream=stream_of(aircraft),
        operator=aircraft.operator,
        reason=reason,
    )


def _lock(*rows: Model) -> None:
    """Hold the rows until the end of the writing, and read them afresh."""
    for row in rows:
        type(row)._default_manager.select_for_update(no_key=True).get(pk=row.pk)
        row.refresh_from_db()


def counter_columns(prefix: str, counters: Counters) -> dict[str, Any]:
    return {f"{prefix}_{x.value}": counters[x] for x in COUNTED}


def _open(part: SafeLifePart, act: str) -> PartInstallation:
    row: PartInstallation | None = (
        PartInstallation.objects.filter(part=part, removed_on=None)
        .select_related("aircraft__operator", "configuration")
        .first()
    )
    if row is None:
        raise PartRefused([NOT_INSTALLED.format(part=part, act=act)])
    return row


def _missing(counters: Counters) -> list[str]:
    return [
        MISSING.format(counter=COUNTER_WORDS[x][0])
        for x in NEEDED
        if counters[x] is None
    ]


def _install_problems(
    part: SafeLifePart, configuration: Configuration, on: date, release: str
) -> list[str]:
    problems = []
    if part.state != PartState.IN_STORE:
        state = part.get_state_display()
        problems.append(NOT_IN_STORE.format(part=part, state=state))
    if not release:
        problems.append(NO_RELEASE.format(part=part))
    last = part.installations.order_by("installed_on", "pk").last()
    if last and max(last.installed_on, last.removed_on or last.installed_on) > on:
        day = last.removed_on or last.installed_on
        problems.append(OUT_OF_ORDER.format(day=on, last=day))
    return problems + _life_problems(part, configuration, on)


def _life_problems(
    part: SafeLifePart, configuration: Configuration, on: date
) -> list[str]:
    life: PartLife = part_life(part, as_of=on, target=configuration)
    if life.due.cannot_compute:
        return [INCOMPLETE.format(part=part, reason=life.due.cannot_compute)]
    return [
        LIFE_ENDED.format(
            part=part,
            configuration=configuration,
            limit=f"ends at {due_write(line.counter, line.due)}",
            total=due_write(line.counter, line.now),
        )
        for line in life.status().lines
        if line.remaining <= 0
    ]


def _removal_problems(row: PartInstallation, on: date, counters: Counters) -> list[str]:
    if row.removed_on is not None:
        return [REMOVED_ALREADY.format(position=row.position, day=row.removed_on)]
    problems = _missing(counters)
    if on < row.installed_on:
        problems.append(OUT_OF_ORDER.format(day=on, last=row.installed_on))
    for counter in COUNTED:
        fitted, read = getattr(row, f"installed_{counter.value}"), counters[counter]
        if fitted is not None and read is not None and read < fitted:
            problems.append(
                BACKWARDS.format(
                    counter=COUNTER_WORDS[counter][0],
                    read=amount_write(counter, read),
                    fitted=amount_write(counter, fitted),
                )
            )
    return problems
