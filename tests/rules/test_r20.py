"""R20: what lies within the review reach is listed in the folder, and answered.

14 CFR 26.41: the damage-tolerance evaluation of a repair covers the repair and the
fatigue-critical structure that it affects. How far is a policy of the operator.
"""

from __future__ import annotations

import datetime as dt

import pytest
from django.core.exceptions import ValidationError

from fleet.due import Counters
from fleet.models import Policy
from repairs.services.repair_entry import Data, RepairEntry
from repairs.services.repairs import repair_record
from repairs.services.substantiation_rows import substantiation_neighbours_find
from tests.factories import NOW, program
from tests.folder_rows import folders_make
from tests.record_rows import FOUND, found

pytestmark = pytest.mark.django_db
HERE = "STA 640+10, 10 in below S-7R"


@pytest.fixture
def folders(world):
    return folders_make(world)


def repaired(world):
    """A repair, 10 in forward of the finding that the folder covers."""
    return repair_record(
        entry=RepairEntry(
            aircraft=world.aircraft,
            place_entered="STA 620 to 640, S-7R to S-8R",
            kind="external_doubler",
            description="external doubler",
            category="a",
            approval_basis="repair_manual",
            approval=Data("repair_manual", "SRM 53-10-12", "14", "fig. 202"),
            released_on=FOUND + dt.timedelta(days=5),
            at=Counters(604_000, 10_080, 10_080),
            released_by=world.certifier,
            performed_by=world.assessor,
            release_reference="CRS-77",
        ),
        proof=program(world.certifier),
        actor=world.engineer,
        at=NOW,
    )


def test_a_repair_within_reach_is_listed_with_its_gap(folders, world):
    repair = repaired(world)
    folder = folders.draft()
    row = folder.neighbours.get(repair=repair)
    # The repair ends at STA 640, the finding begins at STA 650: 10 in, as written.
    assert row.gap_mm == pytest.approx(254.0)


def test_a_neighbour_that_nobody_answered_bars_the_first_signature(folders, world):
    other = found(world, place_entered=HERE)
    folder = folders.draft()
    with pytest.raises(ValidationError) as refused:
        folders.sign(folder, "prepared")
    told = next(t for t in refused.value.messages if t.startswith("Not reviewed yet"))
    assert other.number in told


def test_what_has_come_within_reach_since_the_draft_is_named(folders, world):
    folder = folders.ready()
    repair, finding = repaired(world), found(world, place_entered=HERE)
    with pytest.raises(ValidationError, match="Within reach, but not listed") as told:
        folders.sign(folder, "prepared")
    assert f"{repair} at 254 mm" in told.value.messages[0]
    assert f"{finding} at 152 mm" in told.value.messages[0]
    substantiation_neighbours_find(substantiation=folder, actor=world.engineer, at=NOW)
    folders.review(folder)
    assert folders.sign(folder, "prepared").meaning == "prepared"


def test_what_comes_within_reach_between_check_and_approval_bars_the_approval(
    folders, world
):
    folder = folders.approve(folders.ready())
    found(world, place_entered=HERE)
    with pytest.raises(ValidationError, match="Within reach, but not listed"):
        folders.sign(folder, "stage_1")


def test_what_lies_beyond_the_reach_is_not_asked_for(folders, world):
    beyond = found(world, place_entered="STA 600, 4 in below S-7R")
    # STA 600 to STA 650 is 50 in; the reach is 508 mm, 20 in.
    folder = folders.ready()
    assert not folder.neighbours.filter(finding=beyond).exists()
    assert folders.sign(folder, "prepared").meaning == "prepared"


def test_production_joints_within_reach_are_reviewed_too(folders, world):
    """The type file has a lap joint along S-5R and a butt joint at STA 700."""
    damage = found(world, place_entered="STA 690, 8 in below S-5R")
    folder = folders.draft(findings=[damage])
    gaps = {row.joint.label: row.gap_mm for row in folder.neighbours.all()}
    assert gaps == {
        "LAP S-5R": pytest.approx(8 * 25.4),
        "BUTT STA 700": pytest.approx(10 * 25.4),
    }


def test_without_a_reach_nobody_can_say_that_every_neighbour_was_reviewed(
    folders, world
):
    folder = folders.ready()
    Policy.objects.filter(key="review_reach_mm").delete()
    with pytest.raises(ValidationError, match="No policy review_reach_mm is recorded"):
        folders.sign(folder, "prepared")


def test_a_finding_to_be_placed_has_no_neighbours_to_be_sure_of(folders, world):
    lost = found(world, place_entered="somewhere aft of the door")
    folder = folders.ready(findings=[lost])
    with pytest.raises(ValidationError, match=f"{lost} is to be placed"):
        folders.sign(folder, "prepared")
