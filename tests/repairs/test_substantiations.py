"""The folder: drafted, reviewed, signed in order, revised; and what each step needs.

What a stage holds is AMC 20-20A appendix 3 annex 1; the classification and its reason,
21.A.447; what a damage-tolerance inspection says, 14 CFR 26.41.
"""

from __future__ import annotations

import dataclasses
import datetime as dt

import pytest
from django.core.exceptions import ValidationError

from fleet.due import Counters
from fleet.selectors.verify import problems
from repairs.inspections_text import (
    inspections_missing,
    inspections_said,
    inspections_text,
    none_necessary,
)
from repairs.models import Meaning, Substantiation
from repairs.selectors.substantiation_needs import TOUCHES, needs
from repairs.selectors.substantiation_stages import (
    revision_state,
    stage_reached,
    with_standing,
)
from repairs.services.evaluations import evaluation_remake
from repairs.services.substantiation_entry import FolderEntry, entry_of
from repairs.services.substantiation_rows import (
    substantiation_effects_answer,
    substantiation_finding_add,
    substantiation_row_withdraw,
)
from repairs.services.substantiations import (
    substantiation_draft,
    substantiation_edit,
    substantiation_repair_link,
)
from tests.factories import NOW, TODAY
from tests.folder_rows import INSPECTIONS, LETTER, folders_make
from tests.record_rows import CRACK, assessed, found
from tests.rules.test_r10 import released

pytestmark = pytest.mark.django_db
THRESHOLD = {
    "threshold": Counters(cycles=15_000),
    "threshold_source": "ARD-DT-0077 p. 12",
}
NEAR = "STA 640+10, 10 in below S-7R"


@pytest.fixture
def folders(world):
    return folders_make(world)


@pytest.fixture
def by(world):
    return {"actor": world.engineer, "at": NOW}


def refused(folders, folder, meaning, **more) -> str:
    with pytest.raises(ValidationError) as told:
        folders.sign(folder, meaning, **more)
    return " ".join(told.value.messages)


def state(folder) -> str:
    rows = with_standing(Substantiation.objects.filter(pk=folder.pk))
    return revision_state(rows.get())


# -- drafting ------------------------------------------------------------------


def test_a_draft_covers_its_findings_and_lists_what_is_within_reach(folders, world):
    near = found(world, place_entered=NEAR)
    far = found(world, place_entered="STA 500, S-3L")
    folder = folders.draft()
    assert folder.number == "S-0001"
    listed = {row.finding: row for row in folder.neighbours.filter(joint=None)}
    assert set(listed) == {near}
    assert far not in listed
    # Their places are 4 and 10 in below the same stringer.
    assert listed[near].gap_mm == pytest.approx(6.0 * 25.4)
    assert list(problems()) == []


def test_a_folder_covers_a_finding_or_belongs_to_a_repair(folders):
    with pytest.raises(ValidationError, match="covers at least one finding"):
        folders.draft(findings=[])


def test_one_without_finding_and_repair_is_not_signed_as_prepared(folders, by):
    """14 CFR 26.41 asks for the evaluation of the repair and of the structure that it
    affects; here is neither."""
    folder = folders.ready()
    substantiation_row_withdraw(row=folder.finding_rows.get(), **by)
    assert "covers no finding and no repair uses it" in refused(
        folders, folder, "prepared"
    )


def test_everything_that_stands_against_a_draft_is_said_at_once(folders, world):
    entry = FolderEntry(
        "No limits said",
        "special_flight",
        world.assessor,
        category="not_applicable",
        temporary_limit=Counters(cycles=0),
        threshold=Counters(minutes=60_000),
    )
    with pytest.raises(ValidationError) as told:
        substantiation_draft(
            entry=entry,
            aircraft=world.aircraft,
            findings=[],
            actor=world.engineer,
            at=NOW,
        )
    assert set(told.value.message_dict) == {
        "limitation",
        "category_reason",
        "temporary_limit_cycles",
        "temporary_limit_source",
        "threshold_source",
        "__all__",
    }
    assert not Substantiation.objects.exists()


def test_a_finding_taken_in_is_a_neighbour_no_more(folders, world, by):
    near = found(world, place_entered=NEAR)
    folder = folders.draft()
    substantiation_finding_add(substantiation=folder, finding=near, **by)
    assert not folder.neighbours.filter(finding=near, withdrawn=False).exists()
    with pytest.raises(ValidationError, match="is covered already"):
        substantiation_finding_add(substantiation=folder, finding=near, **by)
    row = folder.finding_rows.get(finding=near)
    substantiation_row_withdraw(row=row, **by)
    assert folder.neighbours.get(finding=near).withdrawn is False


def test_an_answer_falls_when_the_gap_is_no_longer_what_it_was(folders, world, by):
    near = found(world, place_entered=NEAR)
    folder = folders.ready()
    assert folder.neighbours.get(finding=near).answer == "does_not_interact"
    closer = found(world, place_entered="STA 640+10, 8 in below S-7R")
    substantiation_finding_add(substantiation=folder, finding=closer, **by)
    row = folder.neighbours.get(finding=near)
    assert (row.answer, row.reviewed_by) == ("", None)
    assert row.gap_mm == pytest.approx(2.0 * 25.4)


def test_a_draft_changes_until_it_is_signed(folders, by):
    folder = folders.draft()
    entry = dataclasses.replace(entry_of(folder), title="Another title")
    substantiation_edit(substantiation=folder, entry=entry, **by)
    folder.refresh_from_db()
    assert folder.title == "Another title"
    assert list(problems()) == []


def test_a_repair_recorded_without_a_folder_gets_one_and_its_clock(folders, world, by):
    repair = released(world)
    folder = folders.draft(repair=repair, findings=[])
    repair.refresh_from_db()
    assert (repair.substantiation, repair.stage_reached) == (folder, "none")
    with pytest.raises(ValidationError, match="uses S-0001 already"):
        substantiation_repair_link(substantiation=folder, repair=repair, **by)


# -- what a first signature needs ------------------------------------------------


@pytest.mark.parametrize(
    ("changes", "problem"),
    [
        ({"scale": "undecided"}, "Say whether it is minor or major."),
        ({"scale_reason": ""}, "Say why it is major."),
        ({"category": ""}, "Give the repair category"),
    ],
)
def test_it_is_not_prepared_without_its_classification(folders, changes, problem):
    assert problem in refused(folders, folders.ready(**changes), "prepared")


def test_it_is_not_prepared_without_case_data_and_every_effect(folders):
    folder = folders.draft()
    folders.review(folder)
    told = refused(folders, folder, "prepared")
    assert "Add the load case of static ultimate strength." in told
    assert "Name the approval data" in told
    assert "weight and balance, control surface balance" in told


def test_an_unknown_effect_is_no_answer(folders, by):
    folder = folders.ready()
    substantiation_effects_answer(
        substantiation=folder, answers={"flight_manual": ("unknown", "")}, **by
    )
    told = refused(folders, folder, "prepared")
    assert told == "A major one answers every effect; not answered: flight manual."


def test_a_minor_one_may_leave_effects_open(folders):
    folder = folders.draft(scale="minor")
    folders.review(folder)
    folders.case(folder)
    folders.document(folder)
    assert folders.sign(folder, "prepared").meaning == "prepared"


@pytest.mark.parametrize(
    ("place", "pressurised"), [("RADOME STA 60", False), (NEAR, True)]
)
def test_secondary_structure_needs_a_category_where_it_is_pressurised(
    folders, world, place, pressurised
):
    damage = assessed(
        world,
        place_entered=place,
        criticality="secondary",
        criticality_source="list of structure",
    )
    folder = folders.draft(findings=[damage], category="")
    told = " ".join(needs(folder, Meaning.PREPARED, day=TODAY))
    assert ("Give the repair category" in told) is pressurised


# -- order, rejection -------------------------------------------------------------


def test_signatures_come_in_order_and_each_once(folders):
    folder = folders.ready()
    told = refused(folders, folder, "checked")
    assert "has not been signed as prepared; that comes before checked" in told
    folders.sign(folder, "prepared")
    assert "signed as prepared already" in refused(folders, folder, "prepared")
    told = refused(folders, folder, "stage_1")
    assert "has not been signed as checked" in told
    folders.sign(folder, "checked")
    folders.sign(folder, "stage_1")
    assert state(folder) == "approved, stage 1"


def test_a_rejected_revision_is_revised_not_signed(folders):
    folder = folders.approve(folders.ready())
    told = refused(folders, folder, "rejected", statement=" ")
    assert told == "Say in the statement why it is rejected."
    folders.sign(folder, "rejected", statement="the doubler is too short")
    assert state(folder) == "rejected"
    assert "was rejected by Robin Signatory" in refused(folders, folder, "stage_1")
    later = folders.revise(folder)
    folders.approve(later, "stage_1")
    assert stage_reached(folder) == 1


def test_what_is_approved_is_not_rejected_but_revised(folders):
    folder = folders.approve(folders.ready(), "stage_1")
    told = refused(folders, folder, "rejected", statement="second thoughts")
    assert "is approved already; it is not rejected but revised" in told


# -- the stages -------------------------------------------------------------------


def test_an_approval_names_its_document(folders):
    folder = folders.approve(folders.ready())
    bare = dataclasses.replace(LETTER, issuer="", date=None)
    told = refused(folders, folder, "stage_1", document=bare)
    assert "its kind, number, issuer and date; missing: issuer, date." in told
    row = folders.sign(folder, "stage_1")
    assert (row.document_kind, row.document_number, row.document_revision) == (
        "design_approval",
        "ARD-RDA-0077",
        "A",
    )
    assert row.document_date == dt.date(2024, 12, 22)


def test_stage_1_of_pse_is_approved_with_the_schedule_of_its_data(folders):
    folder = folders.approve(folders.ready(data_due_on=None))
    assert "the day by which the damage-tolerance data" in refused(
        folders, folder, "stage_1"
    )


@pytest.mark.parametrize("kind", ["static_ultimate", "residual"])
def test_a_margin_below_nought_bars_every_stage(folders, kind):
    folder = folders.ready(scale="minor")
    folders.case(folder, kind=kind, margin=-0.02)
    folders.approve(folder)
    told = refused(folders, folder, "stage_1")
    assert "the margin -0.02 is below nought" in told


def test_strength_without_a_number_says_method_and_allowable(folders):
    folder = folders.ready(scale="minor")
    folders.case(folder, margin=None, allowable_source="")
    folders.approve(folder)
    assert "give its margin, or the method" in refused(folders, folder, "stage_1")


def test_an_unapproved_calculation_may_be_checked_but_bars_the_stages(folders, world):
    crack = assessed(world, damage_type="crack", typed=CRACK)
    folder = folders.ready(findings=[crack], scale="minor")
    evaluation = folders.evaluation(crack)
    folders.case(folder, evaluation=evaluation)
    folders.approve(folder)
    told = refused(folders, folder, "stage_1")
    assert f"{evaluation} is unchecked: an unapproved calculation." in told


def test_a_superseded_evaluation_bars_every_signature(folders, world, by):
    crack = assessed(world, damage_type="crack", typed=CRACK)
    folder = folders.ready(findings=[crack])
    evaluation = folders.evaluation(crack)
    folders.case(folder, evaluation=evaluation)
    evaluation_remake(evaluation=evaluation, as_of=TODAY, **by)
    told = refused(folders, folder, "prepared")
    assert told == (
        f"{evaluation} was superseded; cite the evaluation that replaces it."
    )


def test_an_evaluation_of_other_damage_is_not_cited(folders, world):
    crack = assessed(
        world, damage_type="crack", typed=CRACK, place_entered="STA 500, S-3L"
    )
    with pytest.raises(ValidationError, match="neither covers nor is used by"):
        folders.case(folders.draft(), evaluation=folders.evaluation(crack))


def test_all_at_once_needs_everything_and_leaves_it_complete(folders, world):
    """AMC 20-20A appendix 3 annex 1: the data may be submitted all at once."""
    folder = folders.ready(scale="minor", category="a", data_due_on=None)
    folders.approve(folder)
    told = refused(folders, folder, "approved")
    for problem in (
        "Add a fatigue case",
        "Give the threshold of the inspections",
        "The inspections do not say: method, procedure, criteria, repeat.",
    ):
        assert problem in told
    later = folders.revise(folder, inspections=INSPECTIONS, **THRESHOLD)
    folders.fatigue(later)
    folders.approve(later, "approved")
    assert stage_reached(later) == 3
    assert state(later) == "complete"


def test_no_supplemental_inspection_is_an_answer_by_a_document(folders):
    """14 CFR 26.41: that none is necessary is an answer too; category B has some."""
    text = inspections_text({"none necessary": "ARD-DT-0077 p. 14"})
    folder = folders.ready(scale="minor", category="b", inspections=text)
    folders.fatigue(folder)
    folders.approve(folder)
    told = refused(folders, folder, "approved")
    assert told == (
        "Category B has supplemental inspections; “none necessary” is not for it."
    )
    later = folders.revise(folder, category="a")
    folders.approve(later, "approved")
    assert stage_reached(folder) == 3


def test_a_category_that_is_pending_is_not_complete(folders):
    folder = folders.ready(
        scale="minor", category="pending", inspections=INSPECTIONS, **THRESHOLD
    )
    folders.fatigue(folder)
    folders.approve(folder)
    assert "The category is still pending" in refused(folders, folder, "approved")


def test_stage_and_clock_are_read_over_all_revisions_of_the_number(folders, world):
    folder = folders.approve(folders.ready(scale="minor"), "stage_1")
    later = folders.revise(folder)
    assert (stage_reached(folder), stage_reached(later)) == (1, 1)
    assert state(later) == "draft"


# -- the text of the inspections ----------------------------------------------------


def test_the_text_of_the_inspections_reads_back_as_it_was_said():
    said = {
        "method": "eddy  current",
        "procedure": "NDT 53-10-01: part 2",
        "criteria": "",
        "repeat": "5,000 FC",
    }
    text = inspections_text(said)
    assert inspections_said(text) == {
        "method": "eddy current",
        "procedure": "NDT 53-10-01: part 2",
        "repeat": "5,000 FC",
    }
    assert inspections_missing(text) == ["criteria"]
    assert not none_necessary(text)


def test_all_seven_effects_of_21_a_447_are_asked():
    assert list(TOUCHES) == [
        "weight_and_balance",
        "control_surface_balance",
        "performance",
        "systems",
        "flight_manual",
        "limitations_section",
        "maintenance_programme",
    ]
