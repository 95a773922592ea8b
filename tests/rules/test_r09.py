"""R9: a category B repair is not embodied without an inspection requirement in force
or a pending stage clock (category B: permanent, with supplemental inspections;
AMC 20-20A appendix 3 annex 1)."""

from __future__ import annotations

import pytest
from django.core.exceptions import ValidationError

from repairs.models import DuePoint
from repairs.services.inspections import requirement_raise
from tests.factories import NOW
from tests.repair_rows import RELEASED, embody, inspection, plan, record

pytestmark = pytest.mark.django_db


def test_category_b_without_follow_up_is_not_embodied(world):
    """Supplemental inspections are what makes it B."""
    planned = plan(world, category="b")
    for stage in ("not_applicable", "3"):
        with pytest.raises(ValidationError, match="inspection requirement"):
            embody(world, planned, category="b", stage_reached=stage)
    planned.refresh_from_db()
    assert planned.state == "planned"


def test_its_requirement_is_raised_with_the_release(world):
    """The threshold counts from the release: 10,080 + 15,000 FC."""
    repair = embody(
        world,
        plan(world, category="b"),
        category="b",
        new_requirement=inspection(world),
    )
    assert repair.requirements.get().state == "effective"
    assert DuePoint.objects.get().due_cycles == 25_080


def test_a_requirement_raised_while_it_was_planned_counts_from_the_release(world):
    """What could not be counted before the release is counted then."""
    repair = plan(world, category="b")
    requirement_raise(draft=inspection(world, repair=repair), actor=None, at=NOW)
    assert DuePoint.objects.get().cannot_compute
    embody(world, repair, category="b")
    point = DuePoint.objects.get(closed_on__isnull=True)
    assert (point.due_cycles, point.opened_on) == (25_080, RELEASED)


def test_a_requirement_that_is_terminated_does_not_count(world):
    """One in force, not one that once was."""
    repair = plan(world, category="b")
    raised = requirement_raise(
        draft=inspection(world, repair=repair), actor=None, at=NOW
    )
    type(raised).objects.filter(pk=raised.pk).update(state="terminated")
    with pytest.raises(ValidationError, match="inspection requirement"):
        embody(world, repair, category="b")


def test_a_stage_still_to_come_is_a_clock_on_the_due_list(world):
    """Stage 2 is pending: its clock stands in for the inspection."""
    repair = record(world, category="b", stage_reached="1")
    point = DuePoint.objects.get()
    assert (point.kind, point.repair) == ("stage_clock", repair)
    assert point.opened_on == RELEASED
    assert "no policy stage_2_months" in point.cannot_compute
