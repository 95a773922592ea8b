"""R2: no release of a repair without an approved-data reference, or an in-limits
reference, and for fatigue-critical structure stage 1 (14 CFR 121.379(b); AMC 20-20A
appendix 3 annex 1, where the operator's programme adopts the three stages)."""

from __future__ import annotations

import datetime as dt
from dataclasses import replace

import pytest
from django.core.exceptions import ValidationError

from fleet.models import Operator
from repairs.models import Repair
from tests.repair_rows import LETTER, MANUAL_PAGE, embody, plan, record

pytestmark = pytest.mark.django_db


@pytest.fixture
def staged(world):
    """The programme adopts the three stages."""
    Operator.objects.filter(pk=world.operator.pk).update(programme_three_stages=True)
    world.aircraft.refresh_from_db()
    return world


def test_a_repair_is_not_released_without_its_approval_data(world):
    """121.379(b): a major repair is done in accordance with approved data."""
    planned = plan(world, approval=None)
    for lacking in (None, replace(MANUAL_PAGE, page=""), replace(LETTER, reference="")):
        with pytest.raises(ValidationError, match="Name the approval data"):
            embody(world, planned, approval=lacking)
        with pytest.raises(ValidationError, match="Name the approval data"):
            record(world, approval=lacking)
    planned.refresh_from_db()
    assert planned.state == "planned"


def test_pse_is_not_released_on_a_letter_before_stage_1(staged):
    """AMC 20-20A appendix 3 annex 1: stage 1 before return to service."""
    planned = plan(staged, approval=LETTER)
    with pytest.raises(ValidationError, match="stage 1 is approved before release"):
        embody(staged, planned, approval=LETTER, category="pending")
    released = embody(
        staged, planned, approval=LETTER, category="pending", stage_reached="1"
    )
    assert (released.state, released.stage_reached) == ("embodied", "1")


def test_a_published_repair_within_its_limits_needs_no_stage_of_its_own(staged):
    """The page of the repair manual is the in-limits reference."""
    assert record(staged, approval=MANUAL_PAGE).state == "embodied"


def test_secondary_structure_needs_no_stage(staged):
    """The stages are for fatigue-critical structure."""
    made = record(
        staged,
        approval=LETTER,
        criticality="secondary",
        criticality_source="list of structure",
    )
    assert made.state == "embodied"


def test_structure_that_nobody_classified_counts_as_pse(staged):
    """A missing answer never passes."""
    with pytest.raises(ValidationError, match="stage 1"):
        record(staged, approval=LETTER, criticality="unknown")


def test_category_a_is_not_given_before_the_approval_is_complete(world):
    """Category A: permanent, baseline zonal inspection adequate, which is what the
    damage-tolerance evaluation of stages 2 and 3 shows."""
    for stage in ("none", "1", "2"):
        with pytest.raises(ValidationError, match="still pending"):
            record(world, stage_reached=stage)
    assert record(world, stage_reached="3").category == "a"


def test_approval_data_that_do_not_hold_for_the_serial_are_refused(world):
    """The published case: a manual repair not effective for that line number
    (ASRS report 807223)."""
    from fleet.services.applicability import document_applicability_record
    from tests.factories import NOW

    document = record(world).approval_document
    assert document is not None
    document_applicability_record(
        document=document,
        first_serial="0001",
        last_serial="0040",
        page="title page",
        actor=None,
        at=NOW,
    )
    with pytest.raises(ValidationError) as refused:
        record(world, released_on=dt.date(2024, 12, 26))
    said = " ".join(refused.value.messages)
    assert "serial 0001 to 0040 (title page)" in said
    assert f"serial {world.aircraft.serial_number}" in said
    assert Repair.objects.count() == 1
