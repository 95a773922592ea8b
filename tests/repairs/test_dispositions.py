"""Decisions: by whom, on what, and what they do to the finding and the due list."""

from __future__ import annotations

import datetime as dt

import pytest
from django.core.exceptions import ValidationError
from django.db import DatabaseError, connection

from fleet.canonical import digest
from fleet.due import Counters
from fleet.selectors.verify import problems
from repairs.measured import Typed
from repairs.models import Approval, DuePoint, Evaluation
from repairs.selectors.signatures import approval_agrees, content_of
from repairs.services.approvals import approval_sign
from repairs.services.disposition_entry import Reviewed
from repairs.services.requirement_draft import LimitEntry, RequirementDraft
from tests.factories import NOW, authorise, program
from tests.finding_rows import decide
from tests.record_rows import (
    CRACK,
    FOUND,
    HOLDER,
    MANUAL,
    assessed,
    found,
)

pytestmark = pytest.mark.django_db


def inspection(world) -> RequirementDraft:
    return RequirementDraft(
        operator=world.operator,
        title="Look at the dent again",
        requirement_class="operator",
        area="STA 640+10 S-7R",
        criteria="no crack",
        method="detailed_visual",
        effective_on=FOUND,
        limits=(
            LimitEntry("threshold", "500 FC", base="effective"),
            LimitEntry("repeat", "500 FC"),
        ),
        aircraft=(world.aircraft,),
    )


def crack(world):
    return assessed(world, damage_type="crack", typed=CRACK)


def test_accepted_damage_remains_and_the_decision_cites_its_page(world):
    disposition = decide(world)
    finding = disposition.finding_rows.get().finding
    assert finding.state == "accepted"
    assert str(disposition.basis_document) == "SRM 53-10-12 rev 14"
    assert disposition.basis_page == "p. 101"
    assert disposition.authorisation.person == world.assessor
    assert (disposition.number, disposition.revision) == ("D-0001", 0)
    assert not DuePoint.objects.exists()
    assert list(problems()) == []


def test_a_decision_cannot_be_altered_afterwards(world):
    disposition = decide(world)
    with pytest.raises(DatabaseError), connection.cursor() as cursor:
        cursor.execute(
            "UPDATE repairs_disposition SET reason = 'x' WHERE id = %s",
            [disposition.pk],
        )


def test_a_reported_finding_is_not_decided_on(world):
    with pytest.raises(ValidationError, match="decided on only while assessed"):
        decide(world, found(world))


def test_every_objection_is_said_at_once(world):
    with pytest.raises(ValidationError) as refused:
        decide(
            world,
            found(world),
            kind="defer",
            basis=type(MANUAL)("repair_manual", "", ""),
            decided_on=FOUND - dt.timedelta(days=1),
        )
    assert len(refused.value.messages) == 4


def test_a_deferral_is_certifying_staffs_and_has_a_limit(world):
    finding = assessed(world)
    with pytest.raises(ValidationError, match="has a deferral limit"):
        decide(world, finding, kind="defer", by=world.certifier)
    limit = Counters(cycles=10_300)
    with pytest.raises(ValidationError, match="held no authorisation"):
        decide(world, finding, kind="defer", limit=limit, crew_informed_on=FOUND)
    with pytest.raises(ValidationError, match="overdue at once"):
        decide(
            world,
            finding,
            kind="defer",
            limit=Counters(cycles=10_080),
            crew_informed_on=FOUND,
            by=world.certifier,
        )
    told = {"crew_informed_on": FOUND, "by": world.certifier}
    decide(world, finding, kind="defer", limit=limit, **told)
    finding.refresh_from_db()
    assert finding.state == "deferred"
    due = DuePoint.objects.get()
    assert (due.kind, due.due_cycles) == ("deferral", 10_300)


def test_an_extension_keeps_the_original_date_and_moves_no_limit(world):
    finding = assessed(world)
    first = decide(
        world,
        finding,
        kind="defer",
        limit=Counters(cycles=10_300),
        crew_informed_on=FOUND,
        by=world.certifier,
    )
    later = FOUND + dt.timedelta(days=10)
    second = decide(
        world,
        finding,
        kind="defer",
        limit=Counters(cycles=10_500),
        crew_informed_on=later,
        by=world.certifier,
        decided_on=later,
        replaces=first,
    )
    assert (second.number, second.revision) == (first.number, 1)
    assert second.found_on == FOUND
    old, new = DuePoint.objects.order_by("pk")
    assert (old.due_cycles, old.closed_on) == (10_300, later)
    assert (new.due_cycles, new.closed_on, new.replaces) == (10_500, None, old)
    with pytest.raises(ValidationError, match="was replaced by revision 1"):
        decide(world, finding, replaces=first)


def test_accept_with_inspection_is_not_saved_without_the_inspection(world):
    finding = assessed(world)
    kind = "accept_with_inspection"
    with pytest.raises(ValidationError, match="inspection requirement"):
        decide(world, finding, kind=kind)
    disposition = decide(world, finding, kind=kind, new_requirement=inspection(world))
    requirement = disposition.requirements.get()
    assert requirement.state == "effective"
    # Threshold 500 FC from the effective day, when usage stood at 10,080 FC.
    assert DuePoint.objects.get().due_cycles == 10_580


def test_a_requirement_of_another_aircraft_does_not_serve(world):
    first = decide(
        world, kind="accept_with_inspection", new_requirement=inspection(world)
    )
    requirement = first.requirements.get()
    requirement.subjects.update(applies="no", reason="not on this tail")
    with pytest.raises(ValidationError, match="does not apply"):
        decide(world, kind="accept_with_inspection", requirement=requirement)


def test_a_crack_in_pse_is_rectified_unless_its_holder_approved_otherwise(world):
    finding = crack(world)
    for kind in ("accept", "not_damage"):
        with pytest.raises(ValidationError, match="design approval holder"):
            decide(world, finding, kind=kind)
    with pytest.raises(ValidationError, match="the limit and the inspection"):
        decide(world, finding, basis=HOLDER)
    limited = {"basis": HOLDER, "limit": Counters(cycles=10_400)}
    with pytest.raises(ValidationError, match="Give the inspection requirement"):
        decide(world, finding, **limited)
    decide(world, finding, **limited, new_requirement=inspection(world))
    assert set(DuePoint.objects.values_list("kind", flat=True)) == {
        "deferral",
        "threshold",
    }


def test_rectify_is_the_plain_answer_to_a_crack(world):
    finding = crack(world)
    decide(world, finding, kind="rectify")
    finding.refresh_from_db()
    assert finding.state == "to_rectify"


def test_unstated_criticality_of_a_crack_counts_as_critical(world):
    finding = assessed(
        world,
        damage_type="crack",
        typed=CRACK,
        place_entered="FR 31 WEB S-16L",
    )
    assert finding.criticality == "unknown"
    with pytest.raises(ValidationError, match="structure that is unknown"):
        decide(world, finding)


def test_neighbours_reviewed_are_kept_with_the_decision(world):
    near = found(world)
    disposition = decide(world, neighbours=(Reviewed(near, 0.0, False, "far enough"),))
    review = disposition.neighbour_reviews.get()
    assert (review.finding, review.interacts) == (near, False)


def test_a_signature_binds_what_was_shown(world):
    disposition = decide(world)
    with pytest.raises(ValidationError, match="has changed since"):
        sign(world, disposition, shown="something else")
    approval = sign(world, disposition)
    assert approval.content_digest == digest(approval.content)
    assert approval_agrees(approval)


def test_who_decided_does_not_approve(world):
    authorise(world.assessor, world.operator, "approve")
    disposition = decide(world)
    with pytest.raises(ValidationError, match="by another person"):
        sign(world, disposition, person=world.assessor)


def test_a_signature_needs_its_scope(world):
    with pytest.raises(ValidationError, match="approve design data"):
        sign(world, decide(world), person=world.certifier)


def test_an_evaluation_from_memory_is_barred_from_approval(world):
    finding = crack(world)
    barred = evaluation(finding, source_from_memory=True)
    sign(world, barred, "checked")
    other = world.users["manager"].person
    authorise(other, world.operator, "approve")
    with pytest.raises(ValidationError, match="values from memory"):
        sign(world, barred, "approved", person=other)


def test_an_evaluation_is_checked_by_one_and_approved_by_another(world):
    row = evaluation(crack(world))
    with pytest.raises(ValidationError, match="after another person has checked"):
        sign(world, row)
    sign(world, row, "checked")
    with pytest.raises(ValidationError, match="by another person"):
        sign(world, row)
    other = world.users["manager"].person
    authorise(other, world.operator, "approve")
    assert approval_agrees(sign(world, row, "approved", person=other))
    assert Approval.objects.filter(evaluation=row).count() == 2


def sign(world, subject, meaning="approved", *, person=None, shown=None) -> Approval:
    return approval_sign(
        subject=subject,
        meaning=meaning,
        proof=program(person or world.approver),
        shown_digest=shown or digest(content_of(subject)),
        on=FOUND,
        actor=world.users["signatory"],
        at=NOW,
    )


def evaluation(finding, **changes) -> Evaluation:
    columns = {
        "operator": finding.operator,
        "finding": finding,
        "number": "E-0001",
        "use": "found_damage",
        "outcome": "computed",
        "method": "m",
        "method_version": 1,
        "schema_version": 1,
        "inputs": "{}",
        "outputs": "{}",
        "applicability": "[]",
        "note": "[]",
        "libraries": "{}",
        "content_digest": digest("{}"),
        "ultimate_kept": "not_shown",
        "source_from_memory": False,
        "entered_at": NOW,
    }
    return Evaluation.objects.create(**(columns | changes))


def test_a_size_typed_in_mm_and_one_in_inches_are_kept_as_typed(world):
    typed = (Typed("length_mm", "61 mm"), Typed("width_mm", "1.8"),
             Typed("depth_mm", "1 mm"))  # fmt: skip
    rows = found(world, typed=typed).measurements.get().values
    entered = dict(rows.values_list("quantity", "entered"))
    assert entered == {
        "length_mm": "61 mm",
        "width_mm": "1.8 in",
        "depth_mm": "1 mm",
    }
