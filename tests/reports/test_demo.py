"""The loaded demo: its planted cases are visible, and loading it is repeatable.

The demo is loaded once for this file, inside a transaction that is rolled back.
"""

from __future__ import annotations

import datetime as dt
import io
import json
from collections.abc import Iterator
from dataclasses import dataclass

import pytest
from django.core.exceptions import ValidationError
from django.core.management import CommandError, call_command
from django.db import transaction
from django.test import Client

from fleet.due import Counter, DueState
from fleet.models import Aircraft, HistoryEntry, Operator, SafeLifePart, UsageRecord
from fleet.selectors.counters import aircraft_standing
from fleet.selectors.parts import part_life
from fleet.selectors.verify import problems
from repairs.models import (
    DuePoint,
    Evaluation,
    Finding,
    InspectionRequirement,
    Outcome,
    Repair,
)
from repairs.selectors.duplicates import duplicate_candidates
from repairs.selectors.signatures import approvals_verified
from repairs.selectors.substantiation_stages import stage_reached
from repairs.services.authority import CERTIFIERS, authorised
from reports.demo.fleet import DEMO_TODAY, FLEET
from reports.demo.load_base import Loaded
from reports.demo.loader import demo_load
from reports.demo.people import LAPSED_ON, PEOPLE
from reports.demo.records import Scenario
from reports.demo.scenario import draw
from reports.demo.stated import STATED, DemoStated
from reports.due_list import DueList, DueQuery, due_list
from reports.due_rows import DueRow
from tests.factories import FIXTURES, operator_make


@dataclass(frozen=True)
class Demo:
    scenario: Scenario
    loaded: Loaded
    due: DueList

    def keys(self, case: str) -> list[str]:
        return self.scenario.planted[case]

    def finding(self, case: str, index: int = 0) -> Finding:
        return Finding.objects.get(pk=self.loaded.rows[self.keys(case)[index]].pk)

    def repair(self, case: str, index: int = 0) -> Repair:
        return Repair.objects.get(pk=self.loaded.rows[self.keys(case)[index]].pk)

    def requirement(self, case: str) -> InspectionRequirement:
        row = self.loaded.rows[self.keys(case)[0]]
        return InspectionRequirement.objects.get(pk=row.pk)

    def rows_of(self, page: str, pk: int) -> list[DueRow]:
        return [row for row in self.due.rows if row.item.address == (page, pk)]

    def due_row(self, case: str) -> DueRow:
        """The one row of the 90-day list about a planted requirement."""
        (row,) = self.rows_of("requirement", self.requirement(case).pk)
        return row


@pytest.fixture(scope="module")
def demo(django_db_setup: None, django_db_blocker) -> Iterator[Demo]:
    with django_db_blocker.unblock(), transaction.atomic():
        scenario = draw()
        loaded = demo_load(scenario, say=lambda _: None)
        yield Demo(scenario, loaded, due_list(DueQuery(DEMO_TODAY, 90)))
        transaction.set_rollback(True)


def remaining(row: DueRow) -> int:
    assert row.status.limiting is not None
    return row.status.limiting.remaining


class TestWhole:
    def test_everything_drawn_is_recorded(self, demo: Demo) -> None:
        scenario = demo.scenario
        assert Aircraft.objects.count() == len(FLEET)
        assert Finding.objects.count() == len(scenario.findings)
        assert Repair.objects.count() == len(scenario.repairs)
        assert SafeLifePart.objects.count() == len(scenario.parts)
        days = sum(len(book.days) for book in scenario.logbooks.values())
        assert UsageRecord.objects.count() == days

    def test_counters_are_those_of_the_log(self, demo: Demo) -> None:
        for msn, book in demo.scenario.logbooks.items():
            standing = aircraft_standing(demo.loaded.aircraft[msn], as_of=DEMO_TODAY)
            assert standing.counters[Counter.CYCLES] == book.final.cycles
            if book.aircraft.left_on is None:
                assert standing.current_to == DEMO_TODAY - dt.timedelta(days=1)

    def test_findings_stand_where_the_story_says(self, demo: Demo) -> None:
        states = dict(Finding.objects.values_list("pk", "state"))
        for finding in demo.scenario.findings:
            assert states[demo.loaded.rows[finding.key].pk] == finding.state, (
                finding.key
            )

    def test_every_finding_is_evaluated_and_each_outcome_occurs(
        self, demo: Demo
    ) -> None:
        assert Evaluation.objects.count() == Finding.objects.count()
        outcomes = set(Evaluation.objects.values_list("outcome", flat=True))
        assert outcomes == set(Outcome.values)

    @pytest.mark.parametrize("case", STATED, ids=lambda case: case.method)
    def test_each_kind_of_calculation_is_completed_by_what_was_stated(
        self, demo: Demo, case: DemoStated
    ) -> None:
        finding = case.of(demo.scenario.findings)
        assert finding is not None
        made = Evaluation.objects.get(finding=demo.loaded.rows[finding.key].pk)
        assert made.outcome == Outcome.COMPUTED
        asked = {one["method"]: one for one in json.loads(made.outputs)["asked"]}
        assert asked[case.method]["part"] == "answers"
        inputs = json.loads(made.inputs)
        for name, _ in case.inputs:
            assert "invented for the demonstration" in inputs[name]["source"]

    def test_methods_that_need_no_statement_compute_too(self, demo: Demo) -> None:
        computed = Evaluation.objects.filter(outcome=Outcome.COMPUTED)
        assert set(computed.values_list("method", flat=True)) >= {
            "pressurised-skin-longitudinal-crack",
            "corrosion-blend-out",
            "open-or-trimmed-hole",
        }

    def test_every_record_agrees_with_its_history(self, demo: Demo) -> None:
        assert list(problems()) == []

    def test_records_are_entered_after_they_happened_and_in_order(
        self, demo: Demo
    ) -> None:
        at = list(
            HistoryEntry.objects.order_by("sequence").values_list("at", flat=True)
        )
        assert at == sorted(at)
        for found_on, entered in Finding.objects.values_list("found_on", "entered_at"):
            assert found_on < entered.date()
            assert (entered.date() - found_on).days <= 93

    def test_there_is_a_login_of_every_role_and_one_outsider(self, demo: Demo) -> None:
        logins = {person.key for person in PEOPLE if person.role}
        assert set(demo.loaded.users) == logins
        assert {"planner", "auditor", "outsider"} <= logins


class TestUsageCases:
    def test_three_legs_without_hours_are_said(self, demo: Demo) -> None:
        without = UsageRecord.objects.filter(cycles_without_minutes__gt=0)
        assert without.count() == 3
        for row in without.select_related("aircraft"):
            standing = aircraft_standing(row.aircraft, as_of=DEMO_TODAY)
            assert standing.flights_without_hours == 1

    def test_one_aircraft_is_stored_and_one_in_check(self, demo: Demo) -> None:
        states = [
            aircraft_standing(aircraft, as_of=DEMO_TODAY).state
            for aircraft in Aircraft.objects.filter(data_to__isnull=True)
        ]
        assert states.count("stored") == 1
        assert states.count("in_maintenance") == 1

    def test_oldest_aircraft_nears_its_limit_of_validity(self, demo: Demo) -> None:
        far = due_list(DueQuery(DEMO_TODAY, 730))
        rows = [row for row in far.rows if row.item.kind == "validity"]
        assert rows[0].mark == "Q7-BFA"
        cycles = [x for x in rows[0].status.lines if x.counter is Counter.CYCLES]
        assert 0 < cycles[0].remaining < 2_000


class TestFindingCases:
    def test_twelve_duplicates_are_offered_as_candidates(self, demo: Demo) -> None:
        keys = demo.keys("duplicates")
        for again, first in zip(keys[::2], keys[1::2], strict=True):
            row = Finding.objects.get(pk=demo.loaded.rows[again].pk)
            found = duplicate_candidates(row, {})
            assert demo.loaded.rows[first].pk in [c.finding.pk for c in found], again

    @pytest.mark.parametrize("case", ["mm_for_inch", "decimal_slip", "transpositions"])
    def test_slips_of_the_pen_raise_a_question_and_block_assessment(
        self, demo: Demo, case: str
    ) -> None:
        codes = {
            "mm_for_inch": "unit_slip-1",
            "decimal_slip": "ratio_differs-1",
            "transpositions": "counters_below",
        }
        for index in range(len(demo.keys(case))):
            row = demo.finding(case, index)
            asked = row.questions.filter(answered_at__isnull=True)
            assert codes[case] in asked.values_list("code", flat=True)
            assert row.state == "reported"

    def test_no_other_finding_has_an_open_question(self, demo: Demo) -> None:
        slips = {
            demo.loaded.rows[key].pk
            for case in ("mm_for_inch", "decimal_slip", "transpositions")
            for key in demo.keys(case)
        }
        asked = Finding.objects.filter(questions__answered_at__isnull=True)
        doubtful = asked.filter(questions__isnull=False).values_list("pk", flat=True)
        assert set(doubtful) == slips

    def test_hail_is_one_finding_of_46_with_its_event(self, demo: Demo) -> None:
        row = demo.finding("hail")
        assert row.cluster_count == 46
        assert row.event is not None
        assert row.event.kind == "hail"

    def test_side_flips_are_recorded_as_written(self, demo: Demo) -> None:
        for index, key in enumerate(demo.keys("side_flips")):
            row = demo.finding("side_flips", index)
            true = next(f for f in demo.scenario.findings if f.key == key).truth
            assert row.s1_mm is not None
            assert true.across_in is not None
            assert row.s1_mm * true.across_in < 0

    def test_station_600_of_a_stretched_aircraft_is_640_in_aft(
        self, demo: Demo
    ) -> None:
        row = demo.finding("station_label_on_stretched")
        assert row.x1_mm == pytest.approx(640 * 25.4)

    def test_unreadable_location_waits_to_be_placed(self, demo: Demo) -> None:
        row = demo.finding("to_be_placed")
        assert row.section is None
        assert row.place_entered == "dent near the galley"

    def test_small_number_trap_is_on_the_newest_aircraft_only(self, demo: Demo) -> None:
        rows = [demo.finding("small_number_trap", i) for i in (0, 1)]
        assert {row.aircraft.registration for row in rows} == {"Q7-BFM"}
        assert all(row.place_text.startswith("STA 560A") for row in rows)

    def test_one_reporter_makes_one_aircraft_hot(self, demo: Demo) -> None:
        keen = demo.loaded.people["keen"]
        rows = Finding.objects.filter(found_by=keen)
        assert set(rows.values_list("aircraft__registration", flat=True)) == {"Q7-BFH"}
        assert rows.count() == 40

    def test_plain_skin_crack_is_computed(self, demo: Demo) -> None:
        made = Evaluation.objects.get(finding=demo.finding("crack_computed"))
        assert made.outcome == Outcome.COMPUTED
        assert made.use == "found_damage"
        assert made.residual_strength_mpa is not None

    def test_a_crack_near_a_cut_out_says_which_test_failed(self, demo: Demo) -> None:
        made = Evaluation.objects.get(finding=demo.finding("crack_near_cutout"))
        assert made.outcome == Outcome.NOT_COVERED
        assert "cut-out" in made.outputs
        assert made.residual_strength_mpa is None

    def test_cracks_at_lap_joint_holes_wait_for_their_load_transfer(
        self, demo: Demo
    ) -> None:
        made = Evaluation.objects.get(finding=demo.finding("crack_at_lap_hole"))
        assert made.outcome == Outcome.MISSING_INPUT
        assert "load_transfer" in made.outputs
        assert made.residual_strength_mpa is None

    def test_expired_authorisation_is_refused_on_the_signing_day(
        self, demo: Demo
    ) -> None:
        lapsed, operator = demo.loaded.people["lapsed"], demo.loaded.operator
        on_last_day = authorised(
            person=lapsed, operator=operator, scopes=CERTIFIERS, on=LAPSED_ON
        )
        assert on_last_day.number == "HA-C-191"
        with pytest.raises(ValidationError, match="valid to 2023-06-30"):
            authorised(
                person=lapsed,
                operator=operator,
                scopes=CERTIFIERS,
                on=LAPSED_ON + dt.timedelta(days=1),
            )
        decision = demo.loaded.rows[demo.keys("authorisation_expired")[0]]
        assert "had ended on 2023-06-30" in decision.reason

    def test_one_accepted_finding_has_a_repeat_that_nobody_raised(
        self, demo: Demo
    ) -> None:
        row = demo.finding("never_raised_repeat")
        decision = row.disposition_rows.get().disposition
        assert "inspect again every 1,000 FC" in decision.reason
        assert not decision.requirements.exists()
        assert not row.requirements.exists()


class TestRepairCases:
    def test_stage_two_clock_is_due_in_a_month(self, demo: Demo) -> None:
        repair = demo.repair("stage_clock_eleven_months")
        (row,) = demo.rows_of("repair", repair.pk)
        assert row.item.kind == "stage_clock"
        assert remaining(row) == 31

    def test_the_folder_behind_the_clock_is_approved_to_stage_1(
        self, demo: Demo
    ) -> None:
        repair = demo.repair("stage_clock_eleven_months")
        folder = repair.substantiation
        assert folder is not None
        assert (stage_reached(folder), repair.stage_reached) == (1, "1")
        assert all(one.agrees for one in approvals_verified(folder))

    def test_damage_under_a_doubler_is_not_shown_removed(self, demo: Demo) -> None:
        repair = demo.repair("damage_hidden_under_doubler")
        (row,) = repair.finding_rows.all()
        assert row.covers
        assert row.damage_removed == "unknown"
        assert row.finding.state == "rectified"

    def test_one_doubler_overlaps_another(self, demo: Demo) -> None:
        one, other = (demo.repair("overlapping_doublers", i) for i in (0, 1))
        assert one.x1_mm is not None
        assert other.x1_mm is not None
        assert one.length_mm is not None
        assert abs(one.x1_mm - other.x1_mm) < one.length_mm
        assert one.s1_mm == other.s1_mm

    def test_found_not_recorded_has_no_approval_and_a_limit(self, demo: Demo) -> None:
        repair = demo.repair("found_not_recorded")
        assert repair.approval_document is None
        assert repair.evidence == "not_seen"
        assert repair.due_points.get().due_cycles == 21_000

    def test_four_papers_of_the_aircraft_handed_back_are_not_seen(
        self, demo: Demo
    ) -> None:
        gone = Repair.objects.filter(aircraft__data_to__isnull=False)
        assert gone.filter(evidence="not_seen").count() == 4

    def test_every_category_b_and_c_repair_is_on_the_list_of_due_points(
        self, demo: Demo
    ) -> None:
        for repair in Repair.objects.filter(category="b"):
            subject = repair.requirements.get().subjects.get()
            assert subject.due_points.filter(closed_on__isnull=True).count() == 1
        for repair in Repair.objects.filter(category="c"):
            assert repair.due_points.get().kind == "replace"


class TestDueCases:
    def test_one_is_due_today(self, demo: Demo) -> None:
        row = demo.due_row("due_today")
        assert remaining(row) == 0
        assert row.state is DueState.DUE

    def test_one_is_37_cycles_over(self, demo: Demo) -> None:
        row = demo.due_row("overdue_fc")
        assert remaining(row) == -37
        assert row.overdue

    def test_one_is_twenty_days_over(self, demo: Demo) -> None:
        row = demo.due_row("overdue_days")
        assert remaining(row) == -20
        assert row.overdue

    def test_what_is_overdue_leads_the_list(self, demo: Demo) -> None:
        over = [row.overdue for row in demo.due.rows]
        assert sum(over) == 2
        assert over == sorted(over, reverse=True)

    def test_five_category_b_repairs_fall_due_within_90_days(self, demo: Demo) -> None:
        keys = demo.keys("repairs_due_within_90_days")
        wanted = {demo.loaded.rows[key].pk for key in keys}
        listed = {
            row.item.address[1]
            for row in demo.due.rows
            if row.item.source_class
            and "repair" in row.item.source_class
            and not row.overdue
        }
        assert listed == wanted

    def test_repeats_count_from_the_last_inspection(self, demo: Demo) -> None:
        """Against the scenario's own sum: done plus interval, less the counter now."""
        for item in demo.scenario.requirements:
            done = item.subjects[0].accomplishments
            if not item.repair or not done:
                continue
            subject = demo.loaded.rows[item.key].subjects.get()
            point = subject.due_points.get(closed_on__isnull=True)
            assert point.due_cycles == done[-1].at.cycles + item.repeats[0].value

    def test_unit_error_stands_in_days_beside_a_page_in_cycles(
        self, demo: Demo
    ) -> None:
        item = demo.requirement("unit_error")
        (repeat,) = item.limits.filter(phase="repeat")
        assert (repeat.counter, repeat.value) == ("days", 250)
        assert "250 FC" in item.source_page

    def test_unverified_termination_stays_on_the_list(self, demo: Demo) -> None:
        item = demo.requirement("unverified_termination")
        subject = item.subjects.get()
        assert subject.state == "termination_unverified"
        assert DuePoint.objects.filter(subject=subject, closed_on=None).exists()

    def test_look_on_the_sisters_waits_for_five_answers(self, demo: Demo) -> None:
        item = demo.requirement("look_on_the_sisters")
        assert item.finding == demo.finding("crack_near_cutout")
        assert item.subjects.filter(applies="unanswered").count() == 5


class TestPartCases:
    def part(self, demo: Demo, case: str) -> SafeLifePart:
        row = demo.loaded.rows[demo.keys(case)[0]]
        return SafeLifePart.objects.select_related("part_number").get(pk=row.pk)

    def test_gap_of_214_days_blocks_and_counts_as_due(self, demo: Demo) -> None:
        part = self.part(demo, "part_gap")
        gap = part.earlier_lives.get(kind="gap")
        assert (gap.to_on - gap.from_on).days == 214
        life = part_life(part, as_of=DEMO_TODAY)
        assert life.due.cannot_compute
        (row,) = [r for r in demo.due.rows if r.part == part]
        assert row.state is DueState.CANNOT_COMPUTE

    def test_lower_limit_of_the_stretched_variant_holds(self, demo: Demo) -> None:
        """45,000 FC of the variant it is on now, not the 60,000 FC it came from."""
        life = part_life(self.part(demo, "lower_limit_on_stretched"), as_of=DEMO_TODAY)
        assert life.due.at[Counter.CYCLES] == 45_000

    def test_one_part_is_close_to_its_limit(self, demo: Demo) -> None:
        part = self.part(demo, "part_close_to_limit")
        (row,) = [r for r in demo.due.rows if r.part == part]
        assert remaining(row) == 32_500 - demo.scenario.logbooks[1001].final.cycles


class TestPages:
    @pytest.mark.parametrize(
        "address", ["/", "/findings/", "/repairs/", "/due/", "/safe-life/", "/density/"]
    )
    def test_engineer_reads_them_and_the_outsider_sees_nothing_of_it(
        self, demo: Demo, settings, address: str
    ) -> None:
        settings.FRAMEBAY_TODAY = DEMO_TODAY.isoformat()
        client = Client()
        client.force_login(demo.loaded.users["engineer"])
        assert client.get(address).status_code == 200
        client.force_login(demo.loaded.users["outsider"])
        assert b"Q7-BF" not in client.get(address).content


class TestCommand:
    def test_second_run_changes_nothing(self, demo: Demo, settings, tmp_path) -> None:
        settings.DATA_DIR, settings.FRAMEBAY_TODAY = tmp_path, ""
        before = HistoryEntry.objects.count()
        out = io.StringIO()
        call_command("demo", stdout=out)
        said = out.getvalue()
        assert "nothing was changed" in said
        assert f"Findings             {len(demo.scenario.findings):6,}" in said
        assert "planner" in said
        assert HistoryEntry.objects.count() == before
        assert (tmp_path / "today").read_text() == "2025-01-01"

    def test_another_seed_is_refused(self, demo: Demo, settings, tmp_path) -> None:
        settings.DATA_DIR = tmp_path
        with pytest.raises(CommandError, match="seed 1, not 2"):
            call_command("demo", seed=2, stdout=io.StringIO())

    def test_demo_with_another_operator_is_refused(
        self, demo: Demo, settings, tmp_path
    ) -> None:
        settings.DATA_DIR = tmp_path
        with transaction.atomic():
            operator_make()
            with pytest.raises(CommandError, match="operator Northmere Air"):
                call_command("demo", stdout=io.StringIO())
            transaction.set_rollback(True)


@pytest.mark.django_db
def test_foreign_database_is_refused_and_left_alone(settings, tmp_path) -> None:
    settings.DATA_DIR = tmp_path
    operator_make()
    with pytest.raises(CommandError, match="not the demo's: operator Northmere Air"):
        call_command("demo", stdout=io.StringIO())
    assert Operator.objects.count() == 1
    assert not (tmp_path / "today").exists()


@pytest.mark.django_db
def test_whatever_was_written_before_is_foreign(settings, tmp_path) -> None:
    settings.DATA_DIR = tmp_path
    call_command("load_materials", FIXTURES / "materials.toml", stdout=io.StringIO())
    with pytest.raises(CommandError, match=r"not the demo.s: history entries \(1\)"):
        call_command("demo", stdout=io.StringIO())
    assert not Operator.objects.exists()
