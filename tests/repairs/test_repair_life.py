"""A repair planned, in work, released, superseded, removed or cancelled."""

from __future__ import annotations

import datetime as dt
from dataclasses import replace

import pytest
from django.core.exceptions import ValidationError

from fleet.due import Counters
from fleet.selectors.verify import problems
from repairs.described import APART, OVER, read_apart
from repairs.models import DuePoint, Repair
from repairs.selectors.edges import edge_margin_mm
from repairs.selectors.repair_overlaps import chain_of, overlaps_of, repairs_met
from repairs.services.disposition_entry import DispositionEntry
from repairs.services.dispositions import disposition_decide
from repairs.services.finding_guards import released_rows
from repairs.services.repair_ends import repair_cancel, repair_remove
from repairs.services.repair_entry import Answered, Lies, Step
from repairs.services.repair_progress import (
    repair_start,
    repair_step_add,
    repair_step_do,
)
from tests.factories import NOW, program
from tests.record_rows import CRACK, FOUND, MANUAL, assessed, found
from tests.repair_rows import RELEASED, embody, entry_of, inspection, plan, record

pytestmark = pytest.mark.django_db
LATER = RELEASED + dt.timedelta(days=3)


def remove(world, repair, **said) -> Repair:
    told = {"removed_on": LATER, "reason": "panel replaced"} | said
    return repair_remove(repair=repair, actor=world.engineer, at=NOW, **told)


def test_a_planned_repair_answers_no_finding_until_its_release(world):
    finding = assessed(world)
    answered = Answered(finding, covers=True, damage_removed="yes")
    repair = plan(world, findings=(answered,))
    finding.refresh_from_db()
    assert (repair.state, finding.state) == ("planned", "assessed")
    assert released_rows(finding) == []
    repair_start(repair=repair, actor=None, at=NOW)
    assert released_rows(finding) == []
    embody(world, repair, findings=(answered,))
    finding.refresh_from_db()
    assert finding.state == "rectified"
    assert [row.repair for row in released_rows(finding)] == [repair]
    assert list(problems()) == []


def test_a_finding_the_plan_named_and_the_work_did_not_answer_stays_open(world):
    finding = assessed(world)
    repair = plan(world, findings=(Answered(finding, covers=True),))
    embody(world, repair)
    finding.refresh_from_db()
    row = repair.finding_rows.get()
    assert (finding.state, row.covers, row.damage_removed) == ("assessed", False, "no")


def test_findings_of_several_types_lie_under_one_repair(world):
    dent = assessed(world)
    crack = assessed(world, damage_type="crack", typed=CRACK)
    rows = tuple(Answered(one, covers=True, damage_removed="yes")
                 for one in (dent, crack))  # fmt: skip
    repair = record(world, findings=rows)
    assert repair.finding_rows.count() == 2
    for one in (dent, crack):
        one.refresh_from_db()
        assert one.state == "rectified"


def test_every_step_is_done_before_the_release(world):
    repair = plan(world, steps=(Step("drill and fit"), Step("seal", "option 2")))
    with pytest.raises(ValidationError) as refused:
        embody(world, repair)
    assert len([m for m in refused.value.messages if "not recorded as done" in m]) == 2
    for row in repair.steps.all():
        repair_step_do(
            step=row, option="", done_on=RELEASED, done_by=world.assessor,
            actor=world.engineer, at=NOW,
        )  # fmt: skip
    repair.refresh_from_db()
    assert repair.state == "in_work"
    with pytest.raises(ValidationError, match="was done on"):
        repair_step_do(
            step=repair.steps.first(), option="", done_on=RELEASED,
            done_by=world.assessor, actor=world.engineer, at=NOW,
        )  # fmt: skip
    embody(world, repair)
    assert [row.option for row in repair.steps.all()] == ["", "option 2"]
    with pytest.raises(ValidationError, match="before the release"):
        repair_step_add(repair=repair, step=Step("more"), actor=None, at=NOW)


def test_a_step_done_after_the_release_is_refused(world):
    repair = plan(world)
    late = Step("seal", "", LATER, world.assessor)
    repair_step_add(repair=repair, step=late, actor=None, at=NOW)
    with pytest.raises(ValidationError, match="after the release"):
        embody(world, repair)


def test_it_is_released_once(world):
    repair = plan(world)
    embody(world, repair)
    with pytest.raises(ValidationError, match="is embodied already"):
        embody(world, repair)
    with pytest.raises(ValidationError, match="only a planned repair is begun"):
        repair_start(repair=repair, actor=None, at=NOW)


def test_a_cancelled_repair_keeps_its_record_and_is_never_released(world):
    repair = plan(world)
    with pytest.raises(ValidationError, match="Say why"):
        repair_cancel(repair=repair, reason=" ", on=RELEASED, actor=None, at=NOW)
    repair_cancel(
        repair=repair, reason="part replaced instead", on=RELEASED, actor=None, at=NOW
    )
    repair.refresh_from_db()
    assert (repair.state, repair.removal_reason) == (
        "cancelled",
        "part replaced instead",
    )
    with pytest.raises(ValidationError, match="is cancelled already"):
        embody(world, repair)
    with pytest.raises(ValidationError, match="only a planned repair or one in work"):
        repair_cancel(
            repair=record(world), reason="no", on=RELEASED, actor=None, at=NOW
        )


def test_removal_ends_the_inspections_that_came_with_it(world):
    repair = record(world, category="b", new_requirement=inspection(world))
    requirement = repair.requirements.get()
    remove(world, repair)
    requirement.refresh_from_db()
    subject = requirement.subjects.get()
    assert (requirement.state, subject.state) == ("terminated", "terminated")
    assert subject.terminated_on == LATER
    assert "removed: panel replaced" in subject.termination_evidence
    assert DuePoint.objects.get().closed_on == LATER
    assert list(problems()) == []


def test_supersession_ends_them_too(world):
    first = record(world, category="b", new_requirement=inspection(world))
    second = record(world, supersedes=(first,))
    subject = first.requirements.get().subjects.get()
    assert subject.state == "terminated"
    assert f"superseded by {second}" in subject.termination_evidence


def test_a_removal_lies_after_the_release(world):
    repair = record(world)
    with pytest.raises(ValidationError, match="before its release"):
        remove(world, repair, removed_on=RELEASED - dt.timedelta(days=1))


def test_damage_that_a_removed_repair_hid_stands_open_again(world):
    finding = assessed(world)
    repair = record(world, findings=(Answered(finding, covers=True),))
    remove(world, repair)
    finding.refresh_from_db()
    assert finding.state == "assessed"
    assert released_rows(finding) == []


def test_damage_that_left_with_the_part_does_not(world):
    finding = assessed(world)
    repair = record(world, findings=(Answered(finding, covers=True),))
    remove(world, repair, damage_gone=True)
    finding.refresh_from_db()
    assert finding.state == "rectified"


def test_removing_the_last_of_a_chain_uncovers_what_the_first_hid(world):
    finding = assessed(world)
    first = record(world, findings=(Answered(finding, covers=True),))
    remove(world, record(world, supersedes=(first,)))
    finding.refresh_from_db()
    assert finding.state == "assessed"


def test_a_chain_is_told_from_any_member_oldest_to_newest(world):
    one, two = record(world), record(world)
    three = record(world, supersedes=(one, two), released_on=LATER)
    four = record(world, supersedes=(three,), released_on=LATER)
    alone = record(world)
    numbers = [str(row) for row in (one, two, three, four)]
    for member in (one, two, three, four):
        member.refresh_from_db()
        assert [str(row) for row in chain_of(member)] == numbers
    assert chain_of(alone) == []


def test_overlapping_extents_are_met_and_the_answer_is_told_on_both(world):
    under = record(world)
    drawn = replace(entry_of(world), place_entered="STA 655 to 670, S-6R to S-8R")
    over = record(world, place_entered=drawn.place_entered, lies=(Lies(under, OVER),))
    (seen,) = overlaps_of(over)
    assert (seen.repair, seen.how) == (under, "lies over it")
    (back,) = overlaps_of(under)
    assert (back.repair, back.how) == (over, "lies under it")
    apart = record(world, lies=(Lies(under, APART), Lies(over, APART)))
    assert {one.how for one in overlaps_of(apart)} == {"does not touch it"}


def test_an_overlap_nobody_spoke_of_is_shown_as_not_said(world):
    first, second = record(world), record(world)
    (seen,) = overlaps_of(second)
    assert (seen.repair, seen.is_said) == (first, False)
    assert (
        overlaps_of(record(world, place_entered="STA 300 to 310, S-3L to S-4L")) == []
    )


@pytest.mark.parametrize(
    ("length_in", "meets"), [(10.0, False), (21.9, False), (22.1, True)]
)
def test_the_recorded_size_decides_whether_two_points_meet(world, length_in, meets):
    """Two doublers 22 in apart between middles, one of the size, one of 22 in: they
    meet when half the sum of the sizes reaches 22 in."""
    along = {"place_entered": "STA 640, S-7R", "width_mm": 250.0}
    record(world, **along, length_mm=22 * 25.4)
    other = along | {"place_entered": "STA 662, S-7R"}
    row = record(world, **other, length_mm=length_in * 25.4)
    assert bool(overlaps_of(row)) is meets
    assert bool(repairs_met(world.aircraft, row, but=[row])) is meets


def test_a_repair_under_way_is_asked_of_nobody(world):
    planned = plan(world)
    assert repairs_met(world.aircraft, record(world), but=[]) == [
        Repair.objects.get(state="embodied")
    ]
    assert planned.state == "planned"


def test_what_is_said_beside_the_words_is_read_apart_again(world):
    under = record(world)
    row = record(
        world,
        description="Doubler.\nTrimmed square.",
        sealant="PR-1 class B, fay",
        protection="primer, two coats",
        work_order="WO-17",
        lies=(Lies(under, OVER),),
    )
    apart = read_apart(row.description)
    assert apart.words == "Doubler.\nTrimmed square."
    assert apart.said == {
        "sealant": "PR-1 class B, fay",
        "protection": "primer, two coats",
        "work_order": "WO-17",
    }
    assert apart.lies == {under.number: OVER}


def test_the_margin_of_a_plan_is_worked_out_as_of_a_release(world):
    finding = found(world)
    repair = plan(world, findings=(Answered(finding, covers=True),))
    # Damage 2.4 in about STA 650 in a repair from STA 640 to 660: 10 - 1.2 = 8.8 in
    # along; across it may be less, never more than told.
    margin = edge_margin_mm(repair, finding)
    assert margin is not None
    assert margin <= (10.0 - 1.2) * 25.4 + 1e-6
    assert repair.finding_rows.get().edge_margin_mm == margin


def test_a_major_repair_names_its_materials(world):
    decision = disposition_decide(
        entry=DispositionEntry(
            aircraft=world.aircraft,
            findings=(assessed(world),),
            kind="rectify",
            basis=MANUAL,
            reason="beyond the limits of the manual",
            scale="major",
            scale_reason="primary structure",
            decided_on=FOUND,
            at=Counters(604_000, 10_080),
        ),
        proof=program(world.assessor),
        actor=world.engineer,
        at=NOW,
    )
    with pytest.raises(ValidationError, match="with its materials"):
        record(world, disposition=decision)


def test_a_legacy_repair_is_recorded_with_what_is_known(world):
    row = record(
        world, legacy=True, approval=None, released_by=None, release_reference="",
        performed_by=None, at=Counters(), evidence="seen",
    )  # fmt: skip
    assert row.state == "embodied"
