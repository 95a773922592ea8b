"""Numbers that an engineer takes from a document, and a second person confirms."""

from __future__ import annotations

import datetime as dt

from fleet.models import AdoptedValue, Material, Operator, Person, User
from fleet.refusals import Refused
from fleet.services.history import Writing

NO_PERSON = (
    "Your login has no person behind it; an administrator links one before you adopt "
    "or confirm a value."
)
SAME_PERSON = (
    "{name} adopted this value; somebody else reads it from the document and confirms."
)
CONFIRMED = "This value was confirmed before."
DIFFERS = (
    "Read {again:g} {unit}; the value adopted is another. Look at the document again, "
    "and at what was adopted; a wrong one is adopted anew."
)


def value_adopt(
    *,
    operator: Operator,
    quantity: str,
    value: float,
    unit: str,
    document: str,
    page: str,
    revision: str,
    actor: User,
    at: dt.datetime,
    on: dt.date,
    material: Material | None = None,
) -> AdoptedValue:
    """A value from a document's page; it counts once a second person has confirmed it.

    One that stands for the same quantity is replaced, and stays on record.
    """
    person = _person(actor)
    with Writing(actor=actor, action="value_adopt", at=at, operator=operator) as w:
        before = operator.adopted_values.filter(
            quantity=quantity, material=material, replaced_by__isnull=True
        ).last()
        return w.create(
            AdoptedValue(
                operator=operator,
                material=material,
                quantity=quantity,
                value=value,
                unit=unit,
                document=document,
                page=page,
                revision=revision,
                person=person,
                adopted_on=on,
                replaces=before,
            )
        )


def value_confirm(
    *, adopted: AdoptedValue, again: float, actor: User, at: dt.datetime
) -> AdoptedValue:
    """Another person reads the number from the document; both must be the same."""
    person = _person(actor)
    with Writing(
        actor=actor, action="value_confirm", at=at, operator=adopted.operator
    ) as w:
        row = w.locked(AdoptedValue.objects.all(), pk=adopted.pk)
        if row.second_person_id is not None:
            raise Refused([CONFIRMED])
        if row.person_id == person.pk:
            raise Refused([SAME_PERSON.format(name=person.name)])
        if row.value != again:
            raise Refused([DIFFERS.format(again=again, unit=row.unit)])
        w.change(row, second_person_id=person.pk)
    return row


def _person(actor: User) -> Person:
    if actor.person is None:
        raise Refused([NO_PERSON])
    return actor.person
