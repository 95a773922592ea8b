"""Repairs at release: their data, their category's follow-up, what they cover."""

from __future__ import annotations

import datetime as dt

import pytest
from django.core.exceptions import ValidationError

from fleet.due import Counters
from fleet.selectors.verify import problems
from fleet.services.people import policy_set
from repairs.models import DuePoint, Photograph, Repair
from repairs.selectors.edges import earlier_depth_mm
from repairs.services.assessing import finding_close
from repairs.services.disposition_entry import DispositionEntry
from repairs.services.dispositions import disposition_decide
from repairs.services.repair_ends import repair_remove
from repairs.services.repair_entry import (
    Answered,
    Data,
    Fastener,
    Layer,
    RepairEntry,
)
from repairs.services.repairs import repair_record
from repairs.services.reports import Reportability
from repairs.services.requirement_draft import LimitEntry, RequirementDraft
from tests.factories import NOW, program
from tests.record_rows import CRACK, FOUND, MANUAL, assessed, found

pytestmark = pytest.mark.django_db
RELEASED = FOUND + dt.timedelta(days=5)
APPROVAL = Data("repair_manual", "SRM 53-10-12", "14", "fig. 202")


def record(world, **changes) -> Repair:
    entry = {
        "aircraft": world.aircraft,
        "place_entered": "STA 640 to 660, S-6R to S-8R",
        "kind": "external_doubler",
        "description": "external doubler over the dent",
        "category": "a",
        "approval_basis": "repair_manual",
        "approval": APPROVAL,
        "released_on": RELEASED,
        "at": Counters(604_000, 10_080),
        "released_by": world.certifier,
        "release_reference": "CRS-77",
        "performed_by": world.assessor,
    }
    return repair_record(
        entry=RepairEntry(**(entry | changes)),
        proof=program(world.certifier),
        actor=world.engineer,
        at=NOW,
    )


def inspection(world) -> RequirementDraft:
    return RequirementDraft(
        operator=world.operator,
        title="Inspect the doubler's edge",
        requirement_class="repair",
        area="doubler at STA 640-660",
        criteria="no crack",
        method="eddy_current_high",
        effective_on=RELEASED,
        limits=(
            LimitEntry("threshold", "15,000 FC", base="release"),
            LimitEntry("repeat", "5,000 FC"),
        ),
        aircraft=(world.aircraft,),
    )


def test_a_repair_rectifies_the_finding_and_ends_its_deferral(world):
    finding = assessed(world)
    disposition_decide(
        entry=DispositionEntry(
            aircraft=world.aircraft,
            findings=(finding,),
            kind="defer",
            basis=MANUAL,
            reason="next check",
            decided_on=FOUND,
            at=Counters(604_000, 10_080, 10_080),
            limit=Counters(cycles=10_300),
            crew_informed_on=FOUND,
        ),
        proof=program(world.certifier),
        actor=world.engineer,
        at=NOW,
    )
    repair = record(
        world,
        findings=(Answered(finding, covers=True, damage_removed="no"),),
        layers=(Layer("2024-T3 clad", "0.063 in", 1.6002),),
        fasteners=(Fastener("solid rivet", 4.0, 20.0, 8.0, 3, 48),),
    )
    finding.refresh_from_db()
    assert (repair.number, repair.state) == ("R-0001", "embodied")
    assert finding.state == "rectified"
    assert DuePoint.objects.get().closed_on == RELEASED
    assert repair.layers.get().thickness_mm == 1.6002
    assert repair.fasteners.get().count == 48
    assert list(problems()) == []


def test_the_edge_margin_is_worked_out_and_negative_when_not_spanned(world):
    finding = assessed(world)
    wide = record(
        world,
        findings=(Answered(finding, covers=True, damage_removed="yes"),),
    )
    # Damage 2.4 in about STA 650, repair from STA 640 to 660: 10 - 1.2 = 8.8 in.
    along = (10.0 - 1.2) * 25.4
    margin = wide.finding_rows.get().edge_margin_mm
    assert margin is not None
    assert margin <= along + 1e-6
    short = record(
        world,
        place_entered="STA 650 to 651, S-7R to S-8R",
        findings=(Answered(finding, covers=True, damage_removed="yes"),),
    )
    # Half the damage, 1.2 in, lies forward of STA 650, where the repair begins.
    assert short.finding_rows.get().edge_margin_mm == pytest.approx(-1.2 * 25.4)


def test_a_stop_drilled_crack_is_not_rectified(world):
    finding = assessed(world, damage_type="crack", typed=CRACK)
    record(
        world,
        kind="stop_drill",
        findings=(Answered(finding, covers=False, damage_removed="no"),),
    )
    finding.refresh_from_db()
    assert finding.state == "assessed"


def test_category_a_holds_by_the_document_that_says_so(world):
    with pytest.raises(ValidationError, match="Name the approval data"):
        record(world, approval=None)


def test_category_b_needs_its_inspection_or_a_stage_to_come(world):
    with pytest.raises(ValidationError, match="inspection requirement"):
        record(world, category="b")
    repair = record(world, category="b", new_requirement=inspection(world))
    # 15,000 FC from release at 10,080 FC.
    assert DuePoint.objects.get().due_cycles == 25_080
    assert repair.requirements.get().state == "effective"


def test_category_b_may_wait_for_its_stage(world):
    record(world, category="b", stage_reached="1")
    assert DuePoint.objects.get().kind == "stage_clock"


def test_category_c_opens_its_replacement_limit(world):
    with pytest.raises(ValidationError, match="replacement limit"):
        record(world, category="c")
    with pytest.raises(ValidationError, match="at or before the release"):
        record(world, category="c", replacement_limit=Counters(cycles=10_080))
    record(world, category="c", replacement_limit=Counters(cycles=15_000))
    due = DuePoint.objects.get()
    assert (due.kind, due.due_cycles) == ("replace", 15_000)


def test_pending_on_pse_opens_the_stage_clock_from_the_policy(world):
    policy_set(
        key="stage_2_months",
        value=12,
        unit="months",
        source="AMC 20-20A",
        grade="quoted",
        regime="EASA",
        effective_from=dt.date(2020, 1, 1),
        at=NOW,
    )
    record(world, category="pending", stage_reached="1")
    due = DuePoint.objects.get()
    assert (due.kind, due.due_on) == ("stage_clock", dt.date(2025, 12, 25))
    assert "AMC 20-20A" in due.basis


def test_without_a_policy_the_stage_clock_cannot_be_computed_and_is_due(world):
    record(world, category="pending", stage_reached="1")
    due = DuePoint.objects.get()
    assert due.due_on is None
    assert "no policy stage_2_months" in due.cannot_compute


def test_pending_on_secondary_structure_has_no_clock(world):
    record(
        world,
        category="pending",
        criticality="secondary",
        criticality_source="list of structure",
    )
    assert not DuePoint.objects.exists()


def test_not_applicable_says_why(world):
    with pytest.raises(ValidationError, match="Say why no category"):
        record(world, category="not_applicable")
    record(world, category="not_applicable", category_reason="fairing")


def test_release_is_by_an_authorised_person_on_stated_counters(world):
    with pytest.raises(ValidationError, match="hours and cycles at release"):
        record(world, at=Counters(cycles=10_080))
    with pytest.raises(ValidationError, match="held no authorisation"):
        record(world, released_by=world.assessor, release_reference="CRS 7")
    with pytest.raises(ValidationError, match="other than who performed"):
        record(world, performed_by=world.certifier, inspected_by=world.certifier)


def test_a_legacy_repair_is_recorded_with_what_is_known(world):
    legacy = record(
        world,
        legacy=True,
        approval=None,
        approval_basis="unknown",
        released_by=None,
        at=Counters(),
        released_on=dt.date(2015, 3, 1),
        evidence="not_seen",
    )
    assert (legacy.at_cycles, legacy.approval_document) == (None, None)


def test_a_larger_repair_supersedes_what_lies_under_it(world):
    first = record(world, category="c", replacement_limit=Counters(cycles=15_000))
    second = record(world, supersedes=(first,))
    first.refresh_from_db()
    assert (first.state, first.removal_reason) == (
        "superseded",
        f"superseded by {second.number}",
    )
    assert first.superseded_by == second
    assert DuePoint.objects.get().closed_on == RELEASED
    with pytest.raises(ValidationError, match="only an embodied repair"):
        record(world, supersedes=(first,))


def test_a_removed_repair_leaves_no_clock(world):
    repair = record(world, category="c", replacement_limit=Counters(cycles=15_000))
    repair_remove(
        repair=repair,
        removed_on=RELEASED,
        reason="panel replaced",
        actor=world.engineer,
        at=NOW,
    )
    assert DuePoint.objects.get().closed_reason == "panel replaced"


def test_earlier_blends_add_up_and_an_unknown_depth_is_not_nought(world):
    for depth in (0.10, 0.15):
        record(world, kind="blend", remaining_thickness_mm=1.2, blend_depth_mm=depth)
    finding = found(world, damage_type="corrosion", typed=())
    assert earlier_depth_mm(finding) == pytest.approx(0.25)
    record(world, kind="blend", remaining_thickness_mm=1.1)
    assert earlier_depth_mm(finding) is None


def test_a_blend_out_states_its_remaining_thickness(world):
    with pytest.raises(ValidationError, match="remaining thickness"):
        record(world, kind="blend")


def test_closing_needs_release_photograph_and_the_answer_on_reporting(world):
    finding = assessed(world, damage_type="crack", typed=CRACK)
    repair = record(
        world, findings=(Answered(finding, covers=True, damage_removed="partly"),)
    )
    with pytest.raises(ValidationError) as refused:
        close(world, finding)
    said = " ".join(refused.value.messages)
    assert "add a photograph taken before" in said
    assert "reportable under EASA" in said
    repair.finding_rows.update(damage_removed="yes")
    closed = close(world, finding, Reportability(True, "crack in PSE"))
    assert closed.state == "closed"
    assert closed.cause == "fatigue"
    report = closed.reports.get()
    assert (report.state, report.reason) == ("reportable", "crack in PSE")
    assert not Photograph.objects.exists()


def close(world, finding, report=None):
    return finding_close(
        finding=finding,
        proof=program(world.certifier),
        on=RELEASED,
        cause="fatigue",
        report=report,
        actor=world.users["certifier"],
        at=NOW,
    )
