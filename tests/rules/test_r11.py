"""R11: what stage 2 approved as threshold is a hard limit until stage 3.

AMC 20-20A appendix 3 annex 1: at stage 2 the data may hold the threshold alone, if a
process exists to obtain method and repeat in time; the threshold then is a limitation.
"""

from __future__ import annotations

import datetime as dt

import pytest
from django.core.exceptions import ValidationError

from fleet.due import Counters
from repairs.models import DuePoint
from repairs.selectors.substantiation_stages import stage_reached
from repairs.services.inspections import requirement_raise
from repairs.services.requirement_draft import LimitEntry, RequirementDraft
from tests.factories import NOW
from tests.folder_rows import INSPECTIONS, folders_make
from tests.rules.test_r10 import clock, released, stage_1

pytestmark = pytest.mark.django_db
THRESHOLD = {
    "threshold": Counters(cycles=15_000),
    "threshold_source": "ARD-DT-0077 p. 12",
}
ON = dt.date(2025, 10, 1)


@pytest.fixture
def folders(world):
    return folders_make(world)


def with_stage_2(folders, world):
    """Released on stage 1; a new revision brings the threshold of stage 2."""
    folder = stage_1(folders)
    repair = released(world, folder)
    later = folders.revise(folder, **THRESHOLD)
    folders.fatigue(later)
    return folders.approve(later, "stage_2", on=ON), repair


def in_force(world, repair):
    requirement_raise(
        draft=RequirementDraft(
            operator=world.operator,
            title="Inspect the doubler's edge",
            requirement_class="repair",
            area="doubler",
            criteria="no crack",
            method="eddy_current_high",
            effective_on=ON,
            limits=(LimitEntry("threshold", "15,000 FC", base="release"),),
            aircraft=(world.aircraft,),
            repair=repair,
        ),
        actor=world.engineer,
        at=NOW,
    )


def test_the_threshold_counts_from_the_release_and_is_called_a_limitation(
    folders, world
):
    folder, repair = with_stage_2(folders, world)
    point = clock()
    # Released at 21,000 FC.
    assert (point.repair, point.due_cycles, point.due_on) == (repair, 36_000, None)
    assert point.basis.startswith("operating limitation: stage 3 before")
    assert "ARD-DT-0077 p. 12" in point.basis
    assert point.replaces.closed_reason == f"stage 2 approved: {folder}"
    repair.refresh_from_db()
    assert repair.stage_reached == "2"


def test_stage_2_is_not_approved_without_a_threshold_and_a_fatigue_case(folders, world):
    folder = stage_1(folders)
    with pytest.raises(ValidationError) as refused:
        folders.sign(folder, "stage_2")
    told = " ".join(refused.value.messages)
    assert "Give the threshold of the inspections" in told
    assert "Add a fatigue case" in told


def test_a_later_threshold_moves_the_limit_only_once_it_is_approved(folders, world):
    folder, _ = with_stage_2(folders, world)
    later = folders.revise(
        folder, threshold=Counters(cycles=18_000), threshold_source="ARD-DT-0077 B"
    )
    assert clock().due_cycles == 36_000
    folders.approve(later, "stage_2", on=ON)
    assert clock().due_cycles == 39_000


def test_stage_3_names_method_procedure_criteria_and_repeat(folders, world):
    folder, repair = with_stage_2(folders, world)
    in_force(world, repair)
    with pytest.raises(ValidationError, match="method, procedure, criteria, repeat"):
        folders.sign(folder, "stage_3", on=ON)
    assert clock().due_cycles == 36_000


def test_after_stage_3_no_clock_is_left(folders, world):
    folder, repair = with_stage_2(folders, world)
    in_force(world, repair)
    later = folders.revise(folder, inspections=INSPECTIONS)
    folders.approve(later, "stage_3", on=ON)
    assert stage_reached(folder) == 3
    assert not DuePoint.objects.filter(kind="stage_clock", closed_on=None).exists()
    repair.refresh_from_db()
    assert repair.stage_reached == "3"


def test_category_b_keeps_its_clock_until_an_inspection_is_in_force(folders, world):
    """R9 as well: or nothing of the repair would be left on the due list."""
    folder, _ = with_stage_2(folders, world)
    later = folders.revise(folder, inspections=INSPECTIONS)
    with pytest.raises(ValidationError, match="has no inspection requirement in force"):
        folders.approve(later, "stage_3", on=ON)


def test_stage_2_without_its_threshold_on_record_is_due(folders, world):
    released(world, stage_reached="2")
    assert "no approved threshold is recorded" in clock().cannot_compute


def test_stages_are_not_skipped(folders):
    folder = folders.ready(scale="minor", inspections=INSPECTIONS, **THRESHOLD)
    folders.fatigue(folder)
    folders.approve(folder)
    with pytest.raises(ValidationError, match="Stage 1 has not been approved"):
        folders.sign(folder, "stage_2")
