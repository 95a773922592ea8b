"""R5: a rejection by a required inspection is overruled only within the inspection
line (14 CFR 121.369(b), wording of 91.1427)."""

from __future__ import annotations

import pytest
from django.core.exceptions import ValidationError

from repairs.models import Approval
from repairs.selectors.repair_inspections import rejections_open
from repairs.services.repair_inspection import repair_inspect
from tests.factories import NOW, program
from tests.repair_rows import RELEASED, embody, person_of, plan

pytestmark = pytest.mark.django_db


def inspect(world, repair, person, accepted=False, answers=None, **said) -> Approval:
    return repair_inspect(
        repair=repair,
        accepted=accepted,
        answers=answers,
        proof=program(person),
        on=RELEASED,
        actor=world.engineer,
        at=NOW,
        **({"statement": "edge distance 1.5 D measured"} | said),
    )


@pytest.fixture
def rejected(world):
    repair = plan(world)
    eye = person_of(world, "Robin Eye", "inspect")
    return repair, eye, inspect(world, repair, eye)


def test_a_rejected_repair_is_not_released(world, rejected):
    """The rejection stands in the way of the release."""
    repair, _, _ = rejected
    with pytest.raises(ValidationError, match="a required inspection rejected it"):
        embody(world, repair)
    repair.refresh_from_db()
    assert repair.state == "planned"


@pytest.mark.parametrize("scope", ["certify", "assess", "check", "approve"])
def test_certifying_and_engineering_scope_do_not_overrule_it(world, rejected, scope):
    """Only persons of the inspection unit countermand a rejection."""
    repair, _, rejection = rejected
    other = person_of(world, "Robin Other", scope)
    with pytest.raises(ValidationError, match="held no authorisation"):
        inspect(world, repair, other, accepted=True, answers=rejection)
    assert rejections_open(repair) == [rejection]


@pytest.mark.parametrize("scope", ["inspect", "ndt"])
def test_another_inspection_authorisation_overrules_it(world, rejected, scope):
    """Within the line it is overruled, pointing at what it overrules."""
    repair, _, rejection = rejected
    second = person_of(world, "Robin Second", scope)
    answer = inspect(world, repair, second, accepted=True, answers=rejection)
    assert answer.overrules == rejection
    assert rejections_open(repair) == []
    assert embody(world, repair).state == "embodied"


def test_the_inspector_who_rejected_it_may_accept_the_rework(world, rejected):
    """Finding rework good overrules nobody; the rejection and its answer both stay."""
    repair, eye, rejection = rejected
    inspect(
        world, repair, eye, accepted=True, answers=rejection, statement="reworked: 2 D"
    )
    assert [one.meaning for one in repair.approvals.all()] == ["rejected", "inspected"]
    assert embody(world, repair).state == "embodied"


def test_an_acceptance_that_answers_no_rejection_leaves_it_standing(world, rejected):
    """A rejection is answered in the open, not passed over."""
    repair, _, rejection = rejected
    second = person_of(world, "Robin Second", "inspect")
    with pytest.raises(ValidationError, match="choose the rejection"):
        inspect(world, repair, second, accepted=True)
    with pytest.raises(ValidationError, match="answered already"):
        inspect(world, plan(world), second, accepted=True, answers=rejection)
    with pytest.raises(ValidationError, match="what was inspected"):
        inspect(world, repair, second, accepted=True, answers=rejection, statement=" ")
