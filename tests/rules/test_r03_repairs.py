"""R3: who performed the work does not carry out the required inspection of it
(14 CFR 121.371(c)); and R4 of the inspector: authorised on the day."""

from __future__ import annotations

import pytest
from django.core.exceptions import ValidationError

from repairs.services.repair_entry import Step
from repairs.services.repair_inspection import repair_inspect
from repairs.services.repair_progress import repair_step_do
from tests.factories import NOW, program
from tests.repair_rows import RELEASED, embody, person_of, plan, record

pytestmark = pytest.mark.django_db


def test_the_performer_is_not_the_inspector(world):
    """121.371(c): no person may perform a required inspection if that person
    performed the item of work."""
    with pytest.raises(ValidationError, match="other than who performed"):
        record(world, performed_by=world.assessor, inspected_by=world.assessor)


def test_who_did_one_step_does_not_inspect_the_whole(world):
    """The item of work is every part of it."""
    hand = person_of(world, "Robin Hand", "inspect")
    planned = plan(world, steps=(Step("drill and fit"), Step("seal")))
    for step in planned.steps.all():
        repair_step_do(
            step=step,
            option="",
            done_on=RELEASED,
            done_by=hand,
            actor=world.engineer,
            at=NOW,
        )
    with pytest.raises(ValidationError, match="performed the step drill and fit"):
        embody(world, planned, inspected_by=hand)
    with pytest.raises(ValidationError, match="another person inspects it"):
        repair_inspect(
            repair=planned,
            accepted=True,
            statement="edge distance measured",
            on=RELEASED,
            proof=program(hand),
            actor=world.engineer,
            at=NOW,
        )


def test_a_required_inspection_is_named_before_release(world):
    """121.371: required inspection items are inspected."""
    with pytest.raises(ValidationError, match="name who inspected it"):
        record(world, inspection_required=True)


def test_the_required_inspector_holds_an_inspection_authorisation_that_day(world):
    """121.371(d): the list of persons authorised to perform required inspections."""
    with pytest.raises(ValidationError, match="held no authorisation"):
        record(world, inspection_required=True, inspected_by=world.certifier)
    inspector = person_of(world, "Robin Eye", "inspect")
    made = record(world, inspection_required=True, inspected_by=inspector)
    assert made.inspected_by == inspector
