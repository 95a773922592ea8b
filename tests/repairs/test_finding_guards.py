"""The table of a finding's steps: every one from every state, and what it asks for.

The expected table is that of the workflow as trade practice has it under M.A.403:
reported, assessed, then accepted, deferred or to rectify, then rectified, then closed;
duplicate and voided stand aside. Closed has no way back.
"""

from __future__ import annotations

import pytest
from django.core.exceptions import ValidationError

from repairs.models import Finding, FindingState, Repair
from repairs.services.assessing import finding_close
from repairs.services.finding_guards import STEPS, step_problems
from repairs.services.repair_entry import Answered
from tests.factories import NOW, program
from tests.finding_rows import RELEASED, close, decide, rectified, repaired
from tests.record_rows import CRACK, assessed, found

pytestmark = pytest.mark.django_db
OPEN = ("assessed", "accepted", "deferred", "to_rectify")
EXPECTED = {
    "assess": (("reported",), "assessed"),
    "accept": (OPEN, "accepted"),
    "accept_with_inspection": (OPEN, "accepted"),
    "defer": (OPEN, "deferred"),
    "rectify": (OPEN, "to_rectify"),
    "replace": (OPEN, "to_rectify"),
    "not_damage": (OPEN, "closed"),
    "repair": ((*OPEN, "rectified"), "rectified"),
    "close": (("rectified",), "closed"),
    "duplicate": (("reported", "assessed"), "duplicate"),
    "void": (("reported", "assessed"), "voided"),
}
CERTIFYING = {"defer", "not_damage", "close"}
NOBODYS = {"repair", "duplicate", "void"}


def test_the_steps_are_those_of_the_workflow():
    assert {n: (s.since, s.to) for n, s in STEPS.items()} == EXPECTED


@pytest.mark.parametrize("name", EXPECTED)
def test_each_step_is_the_act_of_whom_the_rule_names(name):
    scopes = {scope.value for scope in STEPS[name].scopes}
    if name in NOBODYS:
        assert scopes == set()
    else:
        assert scopes == ({"certify"} if name in CERTIFYING else {"assess", "certify"})


@pytest.mark.parametrize("state", FindingState.values)
def test_a_step_from_another_state_is_refused_and_says_which_it_needs(state):
    finding = Finding(number="F-0001", state=state, damage_type="dent")
    for name, (since, _) in EXPECTED.items():
        if state in since:
            continue
        (problem,) = step_problems(name, finding)
        assert problem.startswith("F-0001 is ")
        if state == "closed":
            assert "a new finding: record it, and link it to F-0001" in problem
        else:
            assert f"only while {since[0]}" in problem


def test_a_closed_finding_is_not_decided_on_again(world):
    finding = close(world, rectified(world))
    with pytest.raises(ValidationError, match="is closed and stays so"):
        decide(world, finding)


def test_a_repair_does_not_answer_what_nobody_assessed(world):
    finding = found(world)
    with pytest.raises(ValidationError, match="assess"):
        repaired(world, finding)


def test_everything_that_is_missing_before_closing_is_said_at_once(world):
    finding = rectified(world, damage_type="crack", typed=CRACK)
    Repair.objects.update(
        release_document=None, inspection_required=True, inspected_by=None
    )
    finding.repair_rows.update(damage_removed="no")
    with pytest.raises(ValidationError) as refused:
        finding_close(
            finding=finding,
            proof=program(world.certifier),
            on=RELEASED,
            cause="",
            actor=world.users["certifier"],
            at=NOW,
        )
    said = refused.value.messages
    for words in (
        "names no certificate of release",
        "asks for an independent inspection",
        "add a photograph taken before",
        "Name the cause",
        "Decide whether F-0001 is reportable under EASA",
    ):
        assert any(words in text for text in said), words
    assert len(said) == 5


def test_the_release_may_be_named_when_it_is_closed(world):
    finding = rectified(world)
    Repair.objects.update(release_document=None)
    with pytest.raises(ValidationError, match="names no certificate of release"):
        close(world, finding)
    close(world, finding, release_reference="CRS-78")
    signed = finding.approvals.get(meaning="released")
    assert (signed.document_kind, signed.document_number) == ("release", "CRS-78")


def test_an_inspection_that_is_not_asked_for_is_not_waited_for(world):
    finding = rectified(world)
    for said, closes in ((True, False), (False, True), (None, True)):
        Repair.objects.update(inspection_required=said, inspected_by=None)
        problems = step_problems("close", finding)
        waits = any("independent inspection" in text for text in problems)
        assert waits is not closes


def test_an_unknown_cause_says_what_was_looked_into(world):
    finding = rectified(world)
    with pytest.raises(ValidationError, match="say what was looked into"):
        close(world, finding, cause="unknown")
    close(world, finding, cause="unknown", reason="no tool mark, no record of hail")
    assert (finding.refresh_from_db(), finding.state)[1] == "closed"


def test_closing_is_certifying_staffs(world):
    finding = rectified(world)
    with pytest.raises(ValidationError, match="held no authorisation"):
        close(world, finding, proof=program(world.assessor))


def test_damage_that_lies_under_a_repair_is_closed_with_its_photograph(world):
    finding = assessed(world)
    decide(world, finding, kind="rectify")
    hidden = Answered(finding, covers=True, damage_removed="no")
    repaired(world, finding, findings=(hidden,))
    finding.refresh_from_db()
    with pytest.raises(ValidationError, match="add a photograph taken before"):
        close(world, finding)
