"""R10: stage 2 is due within the policy's months, or before the temporary limit.

AMC 20-20A appendix 3 annex 1: damage-tolerance data are approved not later than twelve
months after return to service, unless a temporary limit, substantiated by sufficient
fatigue and damage-tolerance data, was approved at stage 1; then before that limit.
Stage 1 contains the schedule for submitting the data; twelve months are the latest.
"""

from __future__ import annotations

import datetime as dt
from fractions import Fraction

import pytest

from fleet.due import Bucket, Counter, Counters, Standing, due_status
from fleet.models import Policy
from repairs.models import DuePoint
from repairs.selectors.due_items import due_of
from repairs.services.repair_entry import Answered, Data, RepairEntry
from repairs.services.repairs import repair_record
from reports.due_list import DueQuery, due_list
from tests.factories import NOW, program
from tests.finding_rows import decide
from tests.folder_rows import folders_make
from tests.record_rows import HOLDER, assessed

pytestmark = pytest.mark.django_db
DECIDED, RELEASED = dt.date(2024, 12, 24), dt.date(2025, 1, 31)
SOURCE = {"temporary_limit_source": "ARD-RDA-0077 p. 3"}


@pytest.fixture
def folders(world):
    return folders_make(world)


def released(world, folder=None, **changes):
    said = {
        "aircraft": world.aircraft,
        "place_entered": "STA 640 to 660, S-6R to S-8R",
        "kind": "external_doubler",
        "description": "external doubler",
        "category": "pending",
        "approval_basis": "design_approval",
        "approval": Data("design_approval", "ARD-RDA-0077", "A", "p. 2"),
        "released_on": RELEASED,
        "at": Counters(1_260_000, 21_000, 21_000),
        "released_by": world.certifier,
        "performed_by": world.assessor,
        "release_reference": "CRS-77",
        "substantiation": folder,
        "layers": (),
    }
    return repair_record(
        entry=RepairEntry(**(said | changes)),
        proof=program(world.certifier),
        actor=world.engineer,
        at=NOW,
    )


def clock() -> DuePoint:
    return DuePoint.objects.get(kind="stage_clock", closed_on=None)


def stage_1(folders, **changes):
    return folders.approve(folders.ready(scale="minor", **changes), "stage_1")


def test_twelve_months_run_from_the_release(folders, world):
    """Worked example E8: released 2025-01-31, so the last day is 2026-01-31."""
    released(world, stage_1(folders))
    assert clock().due_on == dt.date(2026, 1, 31)
    assert "12 months" in clock().basis
    assert "AMC 20-20A appendix 3 annex 1" in clock().basis


def test_a_temporary_limit_counts_from_the_release_in_place_of_the_months(
    folders, world
):
    """Worked example E8: 1,200 FC from release at 21,000 FC and 5 FC a day."""
    folder = stage_1(folders, temporary_limit=Counters(cycles=1_200), **SOURCE)
    released(world, folder)
    point = clock()
    assert (point.due_cycles, point.due_on) == (22_200, None)
    assert "1,200 FC" in point.basis
    standing = Standing(
        at=Counters(cycles=21_000),
        rates={Counter.CYCLES: Fraction(5)},
        current_to=RELEASED,
    )
    status = due_status(due_of(point), standing, as_of=RELEASED, within_days=365)
    assert status.limiting.remaining == 1_200
    assert status.forecast == dt.date(2025, 9, 28)


def test_the_replacement_limit_of_category_c_stands_beside_the_clock(folders, world):
    """Worked example E8: 3,000 FC from release at 21,000 FC is a stop at 24,000 FC."""
    folder = stage_1(folders, category="c")
    released(world, folder, category="c", replacement_limit=Counters(cycles=24_000))
    kinds = {p.kind: p for p in DuePoint.objects.filter(closed_on=None)}
    assert kinds["replace"].due_cycles == 24_000
    assert kinds["stage_clock"].due_on == dt.date(2026, 1, 31)


def test_a_limit_stated_of_a_repair_without_a_folder_counts_from_release_too(world):
    released(world, stage_reached="1", temporary_limit_cycles=1_200)
    assert clock().due_cycles == 22_200


def test_a_temporary_limit_that_nobody_approved_extends_nothing(folders, world):
    folder = folders.ready(
        scale="minor", temporary_limit=Counters(cycles=90_000), **SOURCE
    )
    released(world, folder)
    assert clock().due_on == dt.date(2026, 1, 31)


def test_hours_and_a_date_may_limit_as_well_and_the_first_counts(folders, world):
    folder = stage_1(
        folders,
        temporary_limit=Counters(cycles=1_200, minutes=60_000),
        temporary_limit_on=dt.date(2025, 12, 1),
        **SOURCE,
    )
    released(world, folder)
    point = clock()
    assert (point.due_cycles, point.due_minutes) == (22_200, 1_320_000)
    assert point.due_on == dt.date(2025, 12, 1)
    assert point.combine == "first"


@pytest.mark.parametrize(
    ("scheduled", "due"),
    [
        (dt.date(2025, 11, 1), dt.date(2025, 11, 1)),
        (dt.date(2026, 1, 31), dt.date(2026, 1, 31)),
        (dt.date(2026, 3, 1), dt.date(2026, 1, 31)),
    ],
)
def test_the_approved_schedule_counts_where_it_is_earlier_than_the_months(
    folders, world, scheduled, due
):
    """AMC 20-20A appendix 3 annex 1: stage 1 is approved with the schedule for the
    data, and they are approved not later than twelve months after the release."""
    released(world, stage_1(folders, data_due_on=scheduled))
    assert clock().due_on == due
    assert "12 months" in clock().basis
    assert f"schedule for the data of S-0001: {scheduled}" in clock().basis


def test_a_schedule_that_nobody_approved_moves_nothing(folders, world):
    """The schedule is part of what stage 1 approves (AMC 20-20A app. 3 annex 1)."""
    released(world, folders.ready(scale="minor", data_due_on=dt.date(2025, 11, 1)))
    assert clock().due_on == dt.date(2026, 1, 31)
    assert "schedule" not in clock().basis


def test_a_limit_to_a_day_gives_way_to_an_earlier_schedule(folders, world):
    folder = stage_1(
        folders,
        temporary_limit=Counters(cycles=1_200),
        temporary_limit_on=dt.date(2025, 12, 1),
        data_due_on=dt.date(2025, 11, 1),
        **SOURCE,
    )
    released(world, folder)
    assert (clock().due_cycles, clock().due_on) == (22_200, dt.date(2025, 11, 1))
    assert "temporary limit of 1,200 FC" in clock().basis


def test_a_limit_in_cycles_alone_stands_beside_no_schedule(folders, world):
    """Cycles and a day do not compare; the limit is what was approved to fly on."""
    folder = stage_1(
        folders,
        temporary_limit=Counters(cycles=1_200),
        data_due_on=dt.date(2025, 11, 1),
        **SOURCE,
    )
    released(world, folder)
    assert (clock().due_cycles, clock().due_on) == (22_200, None)
    assert "schedule" not in clock().basis


def test_counters_unknown_at_release_make_the_limit_due_at_once(folders, world):
    folder = stage_1(folders, temporary_limit=Counters(cycles=1_200), **SOURCE)
    released(world, folder, legacy=True, at=Counters(), released_by=None)
    assert "no flight cycles recorded" in clock().cannot_compute


def test_without_the_policy_the_clock_is_due_and_says_what_is_missing(folders, world):
    folder = stage_1(folders)
    Policy.objects.filter(key="stage_2_months").delete()
    released(world, folder)
    assert "no policy stage_2_months" in clock().cannot_compute


def test_an_expired_clock_is_overdue_on_the_list_and_leads_to_the_repair(
    folders, world
):
    repair = released(world, stage_1(folders))
    day = dt.date(2026, 2, 1)
    (row,) = (x for x in due_list(DueQuery(day)).rows if x.item.kind == "stage_clock")
    assert row.bucket is Bucket.OVERDUE
    assert row.item.address == ("repair", repair.pk)


def test_secondary_structure_has_no_stage_clock(folders, world):
    released(
        world,
        stage_1(folders),
        criticality="secondary",
        criticality_source="list of structure",
    )
    assert not DuePoint.objects.filter(kind="stage_clock").exists()


def test_damage_that_stays_has_its_clock_on_the_folder_from_the_decision(
    folders, world
):
    """From the decision's own day and counters: nothing is released here."""
    finding = assessed(world)
    folder = stage_1(
        folders,
        findings=[finding],
        answer="limitation",
        limitation="not above FL 250",
        temporary_limit=Counters(cycles=300),
        **SOURCE,
    )
    decide(world, finding, basis=HOLDER, decided_on=DECIDED, substantiation=folder)
    point = clock()
    assert (point.substantiation, point.due_cycles) == (folder, 10_380)
    rows = due_list(DueQuery(dt.date(2025, 1, 2), within_days=365)).rows
    (row,) = (x for x in rows if x.item.kind == "stage_clock")
    assert row.item.address == ("substantiation", folder.pk)
    assert folder.number in row.item.item


def test_once_it_is_repaired_the_clock_of_the_damage_is_closed(folders, world):
    finding = assessed(world)
    folder = stage_1(folders, findings=[finding])
    decide(world, finding, basis=HOLDER, decided_on=DECIDED, substantiation=folder)
    own = clock()
    repair = released(world, category="a", findings=(Answered(finding, True, "yes"),))
    own.refresh_from_db()
    assert own.closed_on == RELEASED
    assert own.closed_reason == f"answered by {repair}"
