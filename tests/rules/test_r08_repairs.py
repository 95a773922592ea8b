"""R8: a category C repair is replaced, or reclassified by a new approved evaluation,
before its limit (category definitions of AC 120-93: time-limited, must be reworked or
replaced before an established limit)."""

from __future__ import annotations

import datetime as dt

import pytest
from django.core.exceptions import ValidationError

from fleet.due import Counters
from repairs.models import DuePoint
from repairs.services.repair_category import NewCategory, repair_reclassify
from repairs.services.repair_entry import Data
from tests.factories import NOW
from tests.repair_rows import LETTER, embody, inspection, plan, record

pytestmark = pytest.mark.django_db
LATER = dt.date(2025, 1, 1)
NEW = Data("design_approval", "ARD-RDA-0077", "A", "p. 2")


def reclassify(world, repair, **said):
    change = {
        "category": "a",
        "approval": NEW,
        "reason": "damage-tolerance evaluation complete",
        "on": LATER,
        "stage_reached": "3",
    }
    return repair_reclassify(
        repair=repair, change=NewCategory(**(change | said)), actor=None, at=NOW
    )


def test_category_c_is_not_released_without_its_replacement_limit(world):
    """The definition asks for an established limit."""
    planned = plan(world, category="c")
    with pytest.raises(ValidationError, match="replacement limit"):
        embody(world, planned, category="c")


@pytest.mark.parametrize(
    ("limit", "due"),
    [
        ({"replacement_limit": Counters(cycles=12_000)}, (12_000, None, None)),
        ({"replacement_limit": Counters(minutes=700_000)}, (None, 700_000, None)),
        ({"replacement_limit_on": dt.date(2026, 6, 1)},
         (None, None, dt.date(2026, 6, 1))),
    ],
)  # fmt: skip
def test_its_limit_is_due_in_cycles_in_hours_or_on_a_date(world, limit, due):
    """The limit as approved is what is due, on its own counter."""
    record(world, category="c", **limit)
    point = DuePoint.objects.get()
    assert (point.due_cycles, point.due_minutes, point.due_on) == due
    assert point.kind == "replace"


def test_replacement_by_another_repair_closes_the_limit(world):
    """Replaced before the limit."""
    first = record(world, category="c", replacement_limit=Counters(cycles=12_000))
    second = record(world, supersedes=(first,))
    assert DuePoint.objects.get().closed_reason == f"superseded by {second}"


def test_a_new_approval_reclassifies_it_and_its_limit_ends(world):
    """Reclassified by a new approved evaluation."""
    repair = record(
        world,
        category="c",
        approval=LETTER,
        replacement_limit=Counters(cycles=12_000),
    )
    after = reclassify(world, repair)
    assert (after.category, after.replacement_limit_cycles) == ("a", None)
    assert str(after.approval_document) == "ARD-RDA-0077 rev A"
    assert DuePoint.objects.get(kind="replace").closed_on == LATER


def test_the_old_approval_does_not_reclassify_it(world):
    """Never extended by an edit: a new approval, or a new revision, is named."""
    repair = record(
        world,
        category="c",
        approval=LETTER,
        replacement_limit=Counters(cycles=12_000),
    )
    with pytest.raises(ValidationError, match="rests on a new approval"):
        reclassify(world, repair, approval=LETTER)
    with pytest.raises(ValidationError, match="Name the approval data"):
        reclassify(world, repair, approval=Data("letter", "ARD-L-1"))
    assert DuePoint.objects.get().closed_on is None


def test_a_new_category_brings_what_it_needs(world):
    """B its inspection, C its new limit, A the complete approval."""
    repair = record(world, category="c", replacement_limit=Counters(cycles=12_000))
    for category, stage, refused in (
        ("a", "1", "still pending"),
        ("b", "3", "inspection requirement"),
        ("c", "3", "replacement limit"),
    ):
        with pytest.raises(ValidationError, match=refused):
            reclassify(world, repair, category=category, stage_reached=stage)
    reclassify(world, repair, category="b", new_requirement=inspection(world))
    # 15,000 FC from the release at 10,080 FC.
    assert DuePoint.objects.get(closed_on__isnull=True).due_cycles == 25_080


def test_a_complete_approval_ends_the_clock_of_a_repair_without_a_folder(world):
    """A of AC 120-93 needs the complete approval; nothing is due towards it then, and
    the record says why."""
    repair = record(world, category="pending", approval=LETTER, stage_reached="1")
    assert DuePoint.objects.get().closed_on is None
    reclassify(world, repair)
    clock = DuePoint.objects.get()
    assert (clock.kind, clock.closed_on) == ("stage_clock", LATER)
    assert "A, permanent" in clock.closed_reason
