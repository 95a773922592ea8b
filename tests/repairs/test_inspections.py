"""Requirements raised, done and answered; every due value worked by hand."""

from __future__ import annotations

import datetime as dt

import pytest

from fleet.canonical import digest
from fleet.due import Counter, Counters
from repairs.models import (
    BlindReentry,
    DuePoint,
    Evaluation,
    Finding,
    Repair,
    ZoneInspected,
)
from repairs.selectors.signatures import content_of
from repairs.services.accomplishments import (
    accomplishment_record,
    subject_not_applicable,
    termination_verify,
)
from repairs.services.approvals import approval_sign
from repairs.services.inspections import RequirementRefused, requirement_raise
from repairs.services.reentry import ReentryRefused, requirement_rekey
from repairs.services.requirement_draft import LimitEntry, RequirementDraft
from tests import due_rows as make
from tests.due_rows import AT, FIRST, TODAY, day, fly
from tests.factories import program

pytestmark = pytest.mark.django_db


def finding(aircraft, number="F-0001") -> Finding:
    return Finding.objects.create(
        operator=aircraft.operator,
        aircraft=aircraft,
        number=number,
        damage_type="crack",
        state="reported",
        found_on=FIRST,
        place_entered="FR 31 S-14L",
        entered_at=AT,
    )


def repair(aircraft, number="R-0001", **columns) -> Repair:
    columns = {
        "released_on": dt.date(2020, 1, 31),
        "at_minutes": 1_000_000,
        "at_cycles": 21_340,
        "at_landings": 21_340,
        "category": "b",
        "state": "embodied",
        "legacy": True,
    } | columns
    return Repair.objects.create(
        operator=aircraft.operator,
        aircraft=aircraft,
        number=number,
        kind="external_doubler",
        description="doubler",
        approval_basis="repair_manual",
        place_entered="STA 840-860 S-19R",
        entered_at=AT,
        **columns,
    )


def evaluation(of: Repair, **columns) -> Evaluation:
    columns = {
        "use": "no_known_crack",
        "outcome": "computed",
        "threshold_cycles": 15_000,
        "repeat_cycles": 5_000,
        "repair": of,
    } | columns
    texts = ("inputs", "outputs", "applicability", "note", "libraries")
    return Evaluation.objects.create(
        operator=of.operator,
        number="E-0001",
        method_version=1,
        schema_version=1,
        content_digest="d1",
        ultimate_kept="not_shown",
        source_from_memory=False,
        entered_at=AT,
        **dict.fromkeys(texts, "{}"),
        **columns,
    )


DONE = day(3)
THRESHOLD = LimitEntry("threshold", "15,000 FC", base="release")
REPEAT = LimitEntry("repeat", "5,000 FC")


def draft(of: Repair, *limits: LimitEntry, **columns) -> RequirementDraft:
    columns = {
        "operator": of.operator,
        "title": "Doubler, row 1",
        "requirement_class": "repair",
        "area": "STA 840-860 S-19R",
        "criteria": "no crack",
        "method": "eddy_current_high",
        "effective_on": FIRST,
        "aircraft": (of.aircraft,),
        "repair": of,
    } | columns
    return RequirementDraft(limits=limits, **columns)


def raised(of: Repair, *limits: LimitEntry, actor=None, **columns):
    return requirement_raise(actor=actor, at=AT, draft=draft(of, *limits, **columns))


def refused(of: Repair, *limits: LimitEntry, **columns) -> list[str]:
    with pytest.raises(RequirementRefused) as error:
        raised(of, *limits, **columns)
    return error.value.problems


def done(subject, cycles, on=DONE, *, result="no_finding", actor=None, **columns):
    return accomplishment_record(
        actor=actor,
        at=AT,
        today=TODAY,
        subject=subject,
        done_on=on,
        counters=Counters(cycles * 48, cycles, cycles),
        result=result,
        proof=program(),
        **columns,
    )


def open_points(requirement) -> list[DuePoint]:
    return list(
        DuePoint.objects.filter(
            subject__requirement=requirement, closed_on=None
        ).order_by("group", "pk")
    )


class TestRaise:
    def test_a_threshold_counts_from_release_and_opens_a_due_point(self):
        """21,340 + 15,000 = 36,340."""
        requirement = raised(repair(make.aircraft()), THRESHOLD, REPEAT)
        (point,) = open_points(requirement)
        assert (point.kind, point.due_cycles) == ("threshold", 36_340)
        assert point.basis == "first 15,000 FC from release"
        assert requirement.state == "effective"
        assert not requirement.verified

    def test_a_replace_by_limit_stands_beside_the_inspections(self):
        requirement = raised(
            repair(make.aircraft()),
            THRESHOLD,
            LimitEntry("replace", "12 months", base="release"),
        )
        assert [(x.kind, x.due_on) for x in open_points(requirement)] == [
            ("threshold", None),
            ("replace", dt.date(2021, 1, 31)),
        ]

    def test_grace_after_the_effective_date_whichever_later(self):
        """25,000 + 3 x 4 = 25,012 at the effective date; max(24,000; 26,512)."""
        aircraft = make.aircraft()
        fly(aircraft, 20)
        requirement = raised(
            repair(aircraft),
            LimitEntry("threshold", "24,000 FC", base="new", combine="last"),
            LimitEntry("threshold", "1,500 FC", base="effective", combine="last"),
            effective_on=day(2),
        )
        (point,) = open_points(requirement)
        assert point.due_cycles == 26_512

    def test_a_missing_base_is_on_the_list_as_cannot_be_computed(self):
        unknown = repair(make.aircraft(), at_cycles=None, at_minutes=None)
        (point,) = open_points(raised(unknown, THRESHOLD))
        assert point.cannot_compute == "no flight cycles recorded for base release"

    def test_a_requirement_on_a_serial_counts_the_serials_own_life(self):
        part = make.part()
        requirement = raised(
            repair(make.aircraft()),
            LimitEntry("threshold", "8,000 FC", base="new"),
            aircraft=(),
            parts=(part,),
        )
        (point,) = open_points(requirement)
        assert (point.part, point.aircraft, point.due_cycles) == (part, None, 8_000)

    def test_no_inspection_needed_is_a_statement_with_its_document(self):
        fixed = repair(make.aircraft())
        (problem,) = refused(fixed)
        assert problem.startswith("No threshold, repeat or replacement limit")
        requirement = raised(fixed, none_needed=True, source_document=make.document())
        assert requirement.state == "terminated"
        assert not open_points(requirement)

    @pytest.mark.parametrize(
        ("entry", "says"),
        [
            (LimitEntry("repeat", "250"), "“250” is not an interval"),
            (LimitEntry("threshold", "250 FC"), "cannot count from the last"),
            (LimitEntry("repeat", "250 FC", base="new"), "not from new"),
            (
                LimitEntry("repeat", "250 FC", tolerance="25 FC"),
                "Tolerance 25 FC is not possible",
            ),
        ],
    )
    def test_limits_that_cannot_be(self, entry, says):
        (problem,) = refused(repair(make.aircraft()), entry)
        assert says in problem

    def test_a_tolerance_of_the_programme_names_it_in_the_same_unit(self):
        fixed = repair(make.aircraft())
        entry = LimitEntry("repeat", "250 FC", tolerance="25 FH")
        assert refused(fixed, entry, requirement_class="operator") == [
            "Tolerance 25 FH is not in the unit of its limit, 250 FC.",
            "Tolerance 25 FH needs the programme that grants it.",
        ]


def signed(calculated: Evaluation, meaning: str) -> None:
    signer = make.person()
    make.factories.authorise(signer, calculated.operator, "approve")
    approval_sign(
        subject=calculated,
        meaning=meaning,
        proof=make.factories.program(signer),
        shown_digest=digest(content_of(calculated)),
        on=TODAY,
        actor=signer.user,
        at=AT,
    )


class TestFromACalculation:
    def test_it_is_interim_until_the_calculation_is_approved(self):
        fixed = repair(make.aircraft())
        calculated = evaluation(fixed)
        assert raised(fixed, THRESHOLD, REPEAT, evaluation=calculated).interim
        for meaning in ("checked", "approved"):
            signed(calculated, meaning)
        assert not raised(fixed, THRESHOLD, REPEAT, evaluation=calculated).interim

    def test_it_is_never_longer_than_calculated(self):
        fixed = repair(make.aircraft())
        longer = LimitEntry("threshold", "15,001 FC", base="release")
        (problem,) = refused(fixed, longer, REPEAT, evaluation=evaluation(fixed))
        assert problem == (
            "The threshold 15,001 FC is longer than E-0001 calculated, 15,000 FC."
        )

    def test_what_was_calculated_in_cycles_is_limited_in_cycles(self):
        fixed = repair(make.aircraft())
        months = LimitEntry("repeat", "24 months")
        (problem,) = refused(fixed, THRESHOLD, months, evaluation=evaluation(fixed))
        assert problem.endswith("give the repeat in FC too.")

    def test_a_phase_that_was_not_calculated_cannot_come_from_it(self):
        fixed = repair(make.aircraft())
        calculated = evaluation(fixed, repeat_cycles=None)
        (problem,) = refused(fixed, THRESHOLD, REPEAT, evaluation=calculated)
        assert problem == "E-0001 gives no repeat, so 5,000 FC cannot come from it."

    def test_found_damage_never_gives_an_interval(self):
        fixed = repair(make.aircraft())
        calculated = evaluation(
            fixed, use="found_damage", threshold_cycles=None, repeat_cycles=None
        )
        (problem,) = refused(fixed, THRESHOLD, evaluation=calculated)
        assert problem.startswith("E-0001 is for found damage")


class TestDone:
    def test_early_work_counts_from_itself(self):
        """36,102 + 5,000 = 41,102."""
        requirement = raised(repair(make.aircraft()), THRESHOLD, REPEAT)
        subject = requirement.subjects.get()
        found = done(subject, 36_102)
        (point,) = open_points(requirement)
        assert (point.kind, point.due_cycles, point.after) == (
            "repeat",
            41_102,
            found.row,
        )
        assert found.overrun == ()
        first = DuePoint.objects.get(kind="threshold")
        assert (first.closed_by, first.closed_reason) == (found.row, "done")

    def test_late_work_counts_from_its_due_and_says_how_late(self):
        """Due 36,340, done 36,371: 31 late; next 41,340."""
        requirement = raised(repair(make.aircraft()), THRESHOLD, REPEAT)
        found = done(requirement.subjects.get(), 36_371)
        assert [(x.counter, x.remaining) for x in found.overrun] == [
            (Counter.CYCLES, -31)
        ]
        assert open_points(requirement)[0].due_cycles == 41_340

    def test_an_approved_lateness_inside_the_tolerance_is_no_overrun(self):
        requirement = raised(
            repair(make.aircraft()),
            THRESHOLD,
            LimitEntry(
                "repeat", "5,000 FC", tolerance="250 FC", tolerance_source="AMP 3.2"
            ),
            requirement_class="operator",
        )
        subject = requirement.subjects.get()
        done(subject, 36_340)
        late = done(subject, 41_500, on=day(5), late_approval="variation 7")
        assert late.overrun == ()
        assert late.row.late_approved
        assert open_points(requirement)[0].due_cycles == 46_340

    def test_the_date_and_the_needed_counters_are_asked_for(self):
        subject = raised(repair(make.aircraft()), THRESHOLD, REPEAT).subjects.get()
        with pytest.raises(RequirementRefused) as error:
            accomplishment_record(
                actor=None,
                at=AT,
                today=TODAY,
                subject=subject,
                done_on=dt.date(2025, 1, 2),
                counters=Counters(),
                result="finding",
                proof=program(),
            )
        assert error.value.problems == [
            "2025-01-02 lies after today, 2025-01-01; record the inspection when it is "
            "done.",
            "Give the flight cycles at the inspection; the next one is counted from "
            "it.",
            "Name the finding; a result with a finding has its own record.",
        ]

    def test_every_inspection_is_a_look_that_rates_can_count(self):
        subject = raised(repair(make.aircraft()), THRESHOLD, REPEAT).subjects.get()
        done(subject, 36_000, result="finding", finding=finding(subject.aircraft))
        look = ZoneInspected.objects.get()
        assert (look.found, look.at_cycles, look.level) == (True, 36_000, "special")

    def test_a_single_inspection_leaves_nothing_open(self):
        requirement = raised(repair(make.aircraft()), THRESHOLD)
        done(requirement.subjects.get(), 36_000)
        assert not open_points(requirement)


class TestTermination:
    def test_it_stays_on_the_list_until_another_person_has_verified_it(self):
        one, two = make.user("certifier"), make.user("certifier")
        requirement = raised(repair(make.aircraft()), THRESHOLD)
        make.factories.authorise(two.person, requirement.operator, "certify")
        subject = requirement.subjects.get()
        done(
            subject, 36_000, result="terminated", evidence="new fitting seen", actor=one
        )
        (point,) = open_points(requirement)
        assert point.cannot_compute == "the terminating action is not verified yet"
        with pytest.raises(RequirementRefused, match="someone other"):
            verify(subject, one)
        verify(subject, two)
        requirement.refresh_from_db()
        assert requirement.state == "terminated"
        assert not open_points(requirement)

    def test_it_needs_its_evidence(self):
        subject = raised(repair(make.aircraft()), THRESHOLD).subjects.get()
        with pytest.raises(RequirementRefused, match="Say what shows"):
            done(subject, 36_000, result="terminated")

    def test_what_does_not_apply_says_why(self):
        requirement = raised(repair(make.aircraft()), THRESHOLD)
        subject = requirement.subjects.get()
        with pytest.raises(RequirementRefused, match="Say why"):
            not_applicable(subject, " ")
        not_applicable(subject, "modification 12 embodied at build")
        assert not open_points(requirement)
        subject.refresh_from_db()
        assert subject.applies == "no"


def verify(subject, actor):
    termination_verify(
        actor=actor,
        at=AT,
        subject=subject,
        on=day(9),
        evidence="part number read",
        proof=program(actor.person),
    )


def not_applicable(subject, reason):
    subject_not_applicable(actor=None, at=AT, subject=subject, on=day(9), reason=reason)


class TestKeyedAgain:
    def test_another_person_keying_alike_verifies_it(self):
        one, two = make.user("engineer"), make.user("planner")
        requirement = raised(repair(make.aircraft()), THRESHOLD, REPEAT, actor=one)
        row = again(requirement, two, [REPEAT, THRESHOLD])
        requirement.refresh_from_db()
        assert row.agrees
        assert requirement.verified

    def test_a_difference_is_kept_and_leaves_it_in_force_unverified(self):
        one, two = make.user("engineer"), make.user("planner")
        requirement = raised(repair(make.aircraft()), THRESHOLD, REPEAT, actor=one)
        days = LimitEntry("repeat", "5,000 days")
        assert not again(requirement, two, [THRESHOLD, days]).agrees
        requirement.refresh_from_db()
        assert not requirement.verified
        assert open_points(requirement)

    def test_the_first_person_does_not_key_it_again(self):
        one = make.user("engineer")
        requirement = raised(repair(make.aircraft()), THRESHOLD, actor=one)
        with pytest.raises(ReentryRefused, match="by another person"):
            again(requirement, one, [THRESHOLD])
        assert not BlindReentry.objects.exists()


def again(requirement, actor, limits):
    return requirement_rekey(
        actor=actor,
        at=AT,
        requirement=requirement,
        limits=limits,
        applicability=["q7-tsa"],
    )


class TestCorrection:
    def test_what_is_due_next_is_made_again_from_what_holds_now(self):
        """Keyed 36,201 for 36,102: next 41,102 instead of 41,201."""
        requirement = raised(repair(make.aircraft()), THRESHOLD, REPEAT)
        subject = requirement.subjects.get()
        wrong = done(subject, 36_201).row
        right = done(subject, 36_102, replaces=wrong, reason="digits swapped").row
        assert right.replaces == wrong
        (point,) = open_points(requirement)
        assert point.due_cycles == 41_102
        void = DuePoint.objects.get(due_cycles=41_201)
        assert void.closed_on == void.opened_on
        assert ZoneInspected.objects.get().at_cycles == 36_102

    def test_an_earlier_row_is_corrected_and_the_chain_follows(self):
        """36,102 + 5,000 = 41,102 done at 41,150, 48 late: next 46,102. Corrected to
        36,202: due 41,202, so 41,150 was early: next 46,150."""
        requirement = raised(repair(make.aircraft()), THRESHOLD, REPEAT)
        subject = requirement.subjects.get()
        first = done(subject, 36_102).row
        done(subject, 41_150, on=day(9))
        assert open_points(requirement)[0].due_cycles == 46_102
        done(subject, 36_202, replaces=first, reason="log page misread")
        assert open_points(requirement)[0].due_cycles == 46_150

    def test_a_termination_claimed_by_mistake_is_taken_back(self):
        requirement = raised(repair(make.aircraft()), THRESHOLD, REPEAT)
        subject = requirement.subjects.get()
        claim = done(subject, 36_000, result="terminated", evidence="seen").row
        done(subject, 36_000, replaces=claim, reason="wrong aircraft")
        subject.refresh_from_db()
        assert subject.state == "effective"
        assert open_points(requirement)[0].due_cycles == 41_000

    def test_it_needs_its_reason_and_the_row_that_holds(self):
        subject = raised(repair(make.aircraft()), THRESHOLD, REPEAT).subjects.get()
        wrong = done(subject, 36_201).row
        with pytest.raises(RequirementRefused, match="Say why the row"):
            done(subject, 36_102, replaces=wrong)
        done(subject, 36_102, replaces=wrong, reason="digits swapped")
        with pytest.raises(RequirementRefused, match="corrected before"):
            done(subject, 36_103, replaces=wrong, reason="again")
