"""Part numbers, serials, their earlier life, overhauls and life limits."""

from __future__ import annotations

from datetime import date, datetime
from typing import Any

from fleet.amounts import amount_read
from fleet.due import COUNTED, Counters
from fleet.models import (
    Configuration,
    Document,
    KeyedState,
    LifeLimit,
    Operator,
    PartEarlierLife,
    PartEvent,
    PartNumber,
    PartState,
    Person,
    SafeLifePart,
    User,
)
from fleet.services.history import Writing
from fleet.services.parts import PartRefused, counter_columns

TWO_PEOPLE = (
    "An assumed life needs its acceptance reference and two different people; read: "
    "accepted by {first}, second person {second}, acceptance “{acceptance}”."
)


def part_number_record(
    *,
    actor: User | None,
    at: datetime,
    operator: Operator,
    number: str,
    title: str,
    ata: str = "",
) -> PartNumber:
    with Writing(
        actor=actor, action="part_number_record", at=at, operator=operator
    ) as w:
        return w.create(
            PartNumber(operator=operator, number=number, title=title, ata=ata)
        )


def part_record(
    *,
    actor: User | None,
    at: datetime,
    part_number: PartNumber,
    serial: str,
    manufactured_on: date | None,
    release_reference: str,
    chain: str = "complete",
) -> SafeLifePart:
    """A serial, in store. `chain` says how its back-to-birth record stands. A part
    number that is not recorded yet is recorded with it, both or neither."""
    operator = part_number.operator
    with Writing(actor=actor, action="part_record", at=at, operator=operator) as w:
        if part_number.pk is None:
            w.create(part_number)
        return w.create(
            SafeLifePart(
                operator=operator,
                part_number=part_number,
                serial=serial,
                manufactured_on=manufactured_on,
                state=PartState.IN_STORE,
                chain=chain,
                release_reference=release_reference,
            )
        )


def part_earlier_life(
    *,
    actor: User | None,
    at: datetime,
    part: SafeLifePart,
    kind: str,
    treatment: str,
    counters: Counters,
    evidence: str,
    configuration: Configuration | None = None,
    from_on: date | None = None,
    to_on: date | None = None,
    acceptance: str = "",
    accepted_by: Person | None = None,
    second_person: Person | None = None,
    replaces: PartEarlierLife | None = None,
) -> PartEarlierLife:
    """Life before these records, or a gap in them. A gap blocks, or is assumed with its
    evidence, its acceptance and two people; it is never plainly counted."""
    if treatment == "assumed_maximum" and (
        not acceptance or not accepted_by or not second_person
    ):
        raise PartRefused(
            [
                TWO_PEOPLE.format(
                    first=accepted_by or "nobody",
                    second=second_person or "nobody",
                    acceptance=acceptance,
                )
            ]
        )
    amounts: dict[str, Any] = {x.value: counters[x] for x in COUNTED}
    with Writing(
        actor=actor, action="part_earlier_life", at=at, operator=part.operator
    ) as w:
        return w.create(
            PartEarlierLife(
                part=part,
                kind=kind,
                treatment=treatment,
                configuration=configuration,
                from_on=from_on,
                to_on=to_on,
                evidence=evidence,
                acceptance=acceptance,
                accepted_by=accepted_by,
                second_person=second_person,
                replaces=replaces,
                **amounts,
            )
        )


def part_overhaul(
    *,
    actor: User | None,
    at: datetime,
    part: SafeLifePart,
    on: date,
    life: Counters,
    document: Document,
) -> PartEvent:
    """An overhaul with the part's own life at it; limits since overhaul restart."""
    with Writing(
        actor=actor, action="part_overhaul", at=at, operator=part.operator
    ) as w:
        return w.create(
            PartEvent(
                part=part,
                kind="overhaul",
                happened_on=on,
                document=document,
                **counter_columns("life", life),
            )
        )


def life_limit_key(
    *,
    actor: User | None,
    at: datetime,
    part_number: PartNumber,
    entered: str,
    base: str,
    document: Document,
    page: str,
    effective_from: date,
    configuration: Configuration | None = None,
    carry_over: str = "most_restrictive",
    replaces: LifeLimit | None = None,
) -> LifeLimit:
    """Key a limit from its document, as "30,000 FC"; it waits for blind re-entry, and
    governs meanwhile where it is the smaller. Raises AmountError."""
    counter, value = amount_read(entered)
    operator = part_number.operator
    with Writing(actor=actor, action="life_limit_key", at=at, operator=operator) as w:
        return w.create(
            LifeLimit(
                part_number=part_number,
                configuration=configuration,
                counter=counter.value,
                value=value,
                entered=entered.strip(),
                base=base,
                carry_over=carry_over,
                document=document,
                page=page,
                state=KeyedState.KEYED,
                effective_from=effective_from,
                replaces=replaces,
            )
        )


def life_limit_put_in_force(w: Writing, *, limit: LifeLimit) -> None:
    """After an agreeing blind re-entry; what it replaces, or what held for the same
    counter, configuration and base, is replaced."""
    rivals = LifeLimit.objects.filter(
        part_number=limit.part_number,
        configuration=limit.configuration,
        counter=limit.counter,
        base=limit.base,
        state=KeyedState.IN_FORCE,
    )
    for rival in rivals:
        w.change(rival, state=KeyedState.REPLACED.value)
    w.change(limit, state=KeyedState.IN_FORCE.value)
