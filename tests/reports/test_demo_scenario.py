"""The drawn demo: same everywhere, right counts, and every planted case in it."""

from __future__ import annotations

import datetime as dt
import time
from collections import Counter

import pytest

from reports.demo.airframe import BAY_IN, in_opening
from reports.demo.fleet import DEMO_TODAY, FLEET
from reports.demo.inspections import repeat_left
from reports.demo.parts import LIFE_LIMITS, NOSE, SWAPS, run_of
from reports.demo.people import AUTHORISATIONS
from reports.demo.records import DemoFinding, DemoRequirement, Scenario
from reports.demo.scenario import canonical_csv, draw, scenario_digest
from reports.demo.stream import Stream, stream_digest


@pytest.fixture(scope="module")
def scenario() -> Scenario:
    return draw()


def finding(scenario: Scenario, case: str, index: int = 0) -> DemoFinding:
    key = scenario.planted[case][index]
    return next(f for f in scenario.findings if f.key == key)


def requirement(scenario: Scenario, case: str) -> DemoRequirement:
    key = scenario.planted[case][0]
    return next(r for r in scenario.requirements if r.key == key)


class TestStream:
    def test_digest_and_first_draws_agree_with_values_computed_apart(self) -> None:
        """Worked out with sha256sum and a bare random.Random, not with this class."""
        assert stream_digest(1, "util", 1001).startswith("12a46bc60a2997da")
        stream = Stream(1, "util", 1001)
        assert [stream.uniform() for _ in range(3)] == [
            0.5021918032712387,
            0.5897625121565808,
            0.717411725263389,
        ]

    def test_poisson_draws_have_mean_and_variance_of_the_law(self) -> None:
        stream = Stream(7, "test")
        draws = [stream.poisson(4.5) for _ in range(20_000)]
        mean = sum(draws) / len(draws)
        variance = sum((d - mean) ** 2 for d in draws) / len(draws)
        assert mean == pytest.approx(4.5, abs=0.06)
        assert variance == pytest.approx(4.5, abs=0.2)

    def test_beta_draws_have_the_mean_alpha_over_sum(self) -> None:
        stream = Stream(7, "test")
        draws = [stream.beta(2, 8) for _ in range(20_000)]
        assert sum(draws) / len(draws) == pytest.approx(0.2, abs=0.004)

    def test_lognormal_draws_have_the_median_asked_for(self) -> None:
        stream = Stream(7, "test")
        draws = sorted(stream.lognormal(52, 0.28) for _ in range(20_001))
        assert draws[10_000] == pytest.approx(52, rel=0.01)

    def test_weights_are_kept(self) -> None:
        stream = Stream(7, "test")
        draws = Counter(stream.weighted((("a", 1.0), ("b", 3.0))) for _ in range(8_000))
        assert draws["b"] / draws["a"] == pytest.approx(3.0, rel=0.1)


class TestWhole:
    def test_two_draws_of_one_seed_are_the_same_to_the_letter(
        self, scenario: Scenario
    ) -> None:
        assert canonical_csv(draw()) == canonical_csv(scenario)

    def test_another_seed_gives_another_demo(self, scenario: Scenario) -> None:
        assert scenario_digest(draw(2)) != scenario_digest(scenario)

    def test_digest_is_the_one_recorded(self, scenario: Scenario) -> None:
        """Pins the demo between machines and Python versions; a change is a choice."""
        assert scenario_digest(scenario) == (
            "08a2539c69fe677761bddd3b8f184d4acdd641f2c7bd9743b81f7e452a3c03d5"
        )

    def test_drawing_takes_less_than_three_seconds(self) -> None:
        began = time.perf_counter()
        draw()
        assert time.perf_counter() - began < 3.0

    def test_every_key_is_used_once(self, scenario: Scenario) -> None:
        for records in (
            scenario.findings,
            scenario.repairs,
            scenario.requirements,
            scenario.parts,
            scenario.events,
        ):
            keys = [record.key for record in records]
            assert len(keys) == len(set(keys))

    def test_planted_keys_exist(self, scenario: Scenario) -> None:
        keys = {
            record.key
            for records in (
                scenario.findings,
                scenario.repairs,
                scenario.requirements,
                scenario.parts,
                scenario.dispositions,
            )
            for record in records
        }
        assert {k for ks in scenario.planted.values() for k in ks} <= keys


class TestFleetAndUsage:
    def test_twelve_aircraft_of_two_variants(self) -> None:
        assert len(FLEET) == 12
        assert sum(aircraft.variant == "S" for aircraft in FLEET) == 4

    def test_cycles_flown_are_near_the_expected_total(self, scenario: Scenario) -> None:
        """An independent first draw gave 121,084 FC; the spread is about 350."""
        flown = sum(
            book.final.cycles - book.aircraft.opening_cycles
            for book in scenario.logbooks.values()
        )
        stored_short = 108 * 5
        assert flown == pytest.approx(121_084 - stored_short, abs=1_000)

    def test_no_day_of_an_aircraft_is_missing(self, scenario: Scenario) -> None:
        for book in scenario.logbooks.values():
            aircraft = book.aircraft
            assert len(book.days) == aircraft.to_day - aircraft.from_day
            gaps = {
                (later.day - earlier.day).days
                for earlier, later in zip(book.days, book.days[1:], strict=False)
            }
            assert gaps == {1}

    def test_three_legs_have_no_hours(self, scenario: Scenario) -> None:
        without = [
            day
            for book in scenario.logbooks.values()
            for day in book.days
            if day.cycles_without_minutes
        ]
        assert len(without) == 3
        assert len({day.msn for day in without}) == 3

    def test_one_aircraft_is_stored_and_one_in_check_today(self) -> None:
        states = Counter(
            aircraft.state_spans()[-1].state
            for aircraft in FLEET
            if aircraft.left_on is None
        )
        assert states == {"in_service": 9, "stored": 1, "in_maintenance": 1}

    def test_oldest_aircraft_is_within_2000_cycles_of_its_limit_of_validity(
        self, scenario: Scenario
    ) -> None:
        assert 0 < 34_000 - scenario.logbooks[1001].final.cycles < 2_000


class TestFindings:
    def test_counts(self, scenario: Scenario) -> None:
        kinds = Counter(f.damage_type for f in scenario.findings)
        assert 600 <= len(scenario.findings) <= 720
        assert kinds["dent"] > kinds["corrosion"] > kinds["crack"]
        assert min(kinds.values()) >= 3

    def test_fifteen_per_cent_are_off_the_fuselage(self, scenario: Scenario) -> None:
        off = sum(f.truth.section not in ("FUS", "") for f in scenario.findings)
        assert off / len(scenario.findings) == pytest.approx(0.15, abs=0.03)

    def test_no_finding_on_the_shell_lies_in_a_cut_out(
        self, scenario: Scenario
    ) -> None:
        for record in scenario.findings:
            truth = record.truth
            if truth.section == "FUS" and truth.across_in is not None:
                deg = truth.across_in / BAY_IN * 9
                assert not in_opening(truth.sta, deg, 0.0), record.key

    def test_hot_spot_is_on_the_cargo_door_surround(self, scenario: Scenario) -> None:
        """The window is 2.2 % of the shell; it holds several times its share."""
        on_shell = [
            (f.truth.sta, f.truth.across_in / BAY_IN * 9)
            for f in scenario.findings
            if f.truth.section == "FUS" and f.truth.across_in is not None
        ]
        hot = sum(740 <= sta < 860 and 99 <= deg < 162 for sta, deg in on_shell)
        assert hot / len(on_shell) > 4 * 0.022

    def test_cracks_lie_at_joints_in_skin_and_at_frames(
        self, scenario: Scenario
    ) -> None:
        cracks = [f for f in scenario.findings if f.damage_type == "crack"]
        at_joint = sum("joint" in f.location for f in cracks) / len(cracks)
        at_frame = sum(f.element.startswith("frame") for f in cracks)
        at_corner = sum(
            f.element == "skin" and "corner" in f.entered("origin") for f in cracks
        )
        assert at_joint == pytest.approx(0.40, abs=0.15)
        assert (at_frame + at_corner) / len(cracks) == pytest.approx(0.30, abs=0.15)

    def test_corrosion_is_found_at_checks(self, scenario: Scenario) -> None:
        for record in scenario.findings:
            if record.damage_type == "corrosion":
                aircraft = next(a for a in FLEET if a.msn == record.msn)
                assert aircraft.in_check((record.found_on - FIRST_DAY).days)

    def test_lightning_comes_in_summer(self, scenario: Scenario) -> None:
        months = [
            f.found_on.month for f in scenario.findings if f.damage_type == "lightning"
        ]
        assert sum(5 <= month <= 9 for month in months) / len(months) > 0.45

    def test_worked_out_ratio_agrees_unless_planted(self, scenario: Scenario) -> None:
        doubtful = set(scenario.planted["decimal_slip"])
        doubtful |= set(scenario.planted["mm_for_inch"])
        for record in scenario.findings:
            for dimension in record.dimensions:
                if dimension.worked_out is None:
                    continue
                width = in_inches(record.dimensions[1].entered)
                ratio = width / in_inches(dimension.entered)
                agrees = abs(ratio / dimension.worked_out - 1) < 0.02
                assert agrees != (record.key in doubtful), record.key


FIRST_DAY = dt.date(2019, 1, 1)


def in_inches(entered: str) -> float:
    number, unit = entered.split()
    return float(number) / {"in": 1.0, "mm": 25.4}[unit]


class TestPlantedFindings:
    def test_twelve_duplicate_pairs_are_the_same_dent(self, scenario: Scenario) -> None:
        keys = scenario.planted["duplicates"]
        assert len(keys) == 24
        by_key = {f.key: f for f in scenario.findings}
        for again, first in zip(keys[::2], keys[1::2], strict=True):
            one, other = by_key[first], by_key[again]
            assert one.msn == other.msn
            assert one.found_on < other.found_on
            assert one.reporter != other.reporter
            assert one.location != other.location or one.dimensions != other.dimensions

    def test_nine_entries_in_inches_were_read_in_mm(self, scenario: Scenario) -> None:
        for index in range(9):
            record = finding(scenario, "mm_for_inch", index)
            wrong, true = record.dimensions[0], record.true_dimensions[0]
            assert in_inches(wrong.entered) == pytest.approx(
                25.4 * in_inches(true.entered)
            )

    def test_six_texts_name_the_other_side(self, scenario: Scenario) -> None:
        assert len(scenario.planted["side_flips"]) == 6

    def test_four_counters_have_two_digits_swapped(self, scenario: Scenario) -> None:
        assert len(scenario.planted["transpositions"]) == 4
        for index in range(4):
            record = finding(scenario, "transpositions", index)
            true = scenario.logbooks[record.msn].at(record.found_on).cycles
            assert record.at.cycles != true
            assert (true - record.at.cycles) % 9 == 0
            assert sorted(str(true)) == sorted(str(record.at.cycles))

    def test_hail_is_one_record_of_46_dents(self, scenario: Scenario) -> None:
        record = finding(scenario, "hail")
        assert record.cluster_count == 46
        assert [e.kind for e in scenario.events if e.key == record.event] == ["hail"]

    def test_keen_reporter_makes_one_hot_aircraft(self, scenario: Scenario) -> None:
        by_keen = {f.msn for f in scenario.findings if f.reporter == "keen"}
        assert by_keen == {1014}
        assert len(scenario.planted["keen_reporter"]) == 40

    def test_small_number_trap_is_two_findings_on_the_newest(
        self, scenario: Scenario
    ) -> None:
        both = [finding(scenario, "small_number_trap", i) for i in (0, 1)]
        assert {f.msn for f in both} == {FLEET[-1].msn}
        assert all("560A" in f.location for f in both)

    def test_label_600_on_a_stretched_aircraft_is_640_inches_aft(
        self, scenario: Scenario
    ) -> None:
        record = finding(scenario, "station_label_on_stretched")
        assert record.location.startswith("STA 600 ")
        assert record.truth.x_in == 640.0

    def test_decimal_slip_betrays_itself_by_the_ratio(self, scenario: Scenario) -> None:
        record = finding(scenario, "decimal_slip")
        width, depth = record.dimensions[1:]
        assert in_inches(width.entered) / in_inches(depth.entered) == pytest.approx(250)
        assert depth.worked_out == 25.0

    def test_three_recent_cracks_wait_to_be_rectified(self, scenario: Scenario) -> None:
        for case in ("crack_computed", "crack_near_cutout", "crack_at_lap_hole"):
            assert finding(scenario, case).state == "to_rectify"

    def test_one_text_cannot_be_placed(self, scenario: Scenario) -> None:
        assert finding(scenario, "to_be_placed").state == "reported"

    def test_one_decision_was_first_signed_after_the_authorisation_ended(
        self, scenario: Scenario
    ) -> None:
        key = scenario.planted["authorisation_expired"][0]
        decided = next(d for d in scenario.dispositions if d.key == key)
        lapsed = next(a for a in AUTHORISATIONS if a.person == "lapsed")
        assert f"{lapsed.number} had ended on {lapsed.valid_to}" in decided.statement
        assert decided.decided_by != "lapsed"

    def test_one_accepted_finding_names_a_repeat_that_nobody_raised(
        self, scenario: Scenario
    ) -> None:
        key = scenario.planted["never_raised_repeat"][0]
        decided = next(d for d in scenario.dispositions if key in d.findings)
        assert "inspect again every 1,000 FC" in decided.statement
        assert not [r for r in scenario.requirements if r.finding == key]


class TestRepairs:
    def test_about_150_of_which_60_are_legacy(self, scenario: Scenario) -> None:
        assert 140 <= len(scenario.repairs) <= 180
        assert sum(repair.legacy for repair in scenario.repairs) == 60

    def test_all_four_categories_and_the_reason_where_none_applies(
        self, scenario: Scenario
    ) -> None:
        counts = Counter(repair.category for repair in scenario.repairs)
        assert set(counts) == {"a", "b", "c", "pending", "not_applicable"}
        assert counts["a"] > counts["b"] > counts["c"]

    def test_legacy_were_released_within_10_to_95_per_cent_of_opening(
        self, scenario: Scenario
    ) -> None:
        found_later = scenario.planted["found_not_recorded"]
        for repair in scenario.repairs:
            if repair.legacy and repair.key not in found_later:
                opening = scenario.logbooks[repair.msn].aircraft.opening_cycles
                assert 0.099 * opening < repair.at.cycles <= 0.95 * opening

    def test_category_c_has_a_limit_still_ahead(self, scenario: Scenario) -> None:
        for repair in scenario.repairs:
            assert (repair.category == "c") == bool(repair.replace_by)
            for limit in repair.replace_by:
                if limit.counter == "cycles":
                    assert limit.value > scenario.logbooks[repair.msn].final.cycles

    def test_stage_two_clock_stands_at_eleven_months(self, scenario: Scenario) -> None:
        key = scenario.planted["stage_clock_eleven_months"][0]
        repair = next(r for r in scenario.repairs if r.key == key)
        assert repair.released_on == dt.date(2024, 2, 1)
        assert repair.stage_due_on == dt.date(2025, 2, 1)

    def test_one_doubler_overlaps_another(self, scenario: Scenario) -> None:
        one, other = (
            next(r for r in scenario.repairs if r.key == key)
            for key in scenario.planted["overlapping_doublers"]
        )
        assert one.msn == other.msn
        apart = abs(one.truth.sta - other.truth.sta)
        assert apart < (one.length_in + other.length_in) / 2

    def test_damage_under_one_doubler_is_not_shown_removed(
        self, scenario: Scenario
    ) -> None:
        key = scenario.planted["damage_hidden_under_doubler"][0]
        repair = next(r for r in scenario.repairs if r.key == key)
        assert repair.findings
        assert repair.damage_removed == "unknown"
        assert repair.edge_margin_in is None

    def test_four_documents_of_the_aircraft_handed_back_are_missing(
        self, scenario: Scenario
    ) -> None:
        missing = [r for r in scenario.repairs if r.msn == 1006 and not r.document.held]
        assert len(missing) == 4


class TestRequirements:
    def test_every_category_b_repair_has_one(self, scenario: Scenario) -> None:
        wanted = {r.key for r in scenario.repairs if r.category == "b"}
        assert {r.repair for r in scenario.requirements if r.repair} == wanted

    def test_at_least_fifteen_repairs_are_past_their_threshold(
        self, scenario: Scenario
    ) -> None:
        assert len(scenario.planted["repairs_past_threshold"]) >= 15

    def test_five_category_b_items_fall_due_within_90_days(
        self, scenario: Scenario
    ) -> None:
        """At 4.75 flights a day, 90 days are about 430 FC."""
        left = []
        for item in scenario.requirements:
            msn = item.subjects[0].msn
            aircraft = scenario.logbooks[msn].aircraft
            if not item.repair or aircraft.left_on is not None:
                continue
            remaining = repeat_left(item, scenario.logbooks[msn])
            if remaining is None:
                repair = next(r for r in scenario.repairs if r.key == item.repair)
                threshold = repair.at.cycles + item.thresholds[0].value
                remaining = threshold - scenario.logbooks[msn].final.cycles
            left.append(remaining)
        assert sum(0 <= remaining <= 430 for remaining in left) == 5
        assert sum(430 < remaining < 850 for remaining in left) == 0
        assert [remaining for remaining in left if remaining < 0] == [-37]

    def test_one_item_is_due_today_and_one_is_twenty_days_over(
        self, scenario: Scenario
    ) -> None:
        for case, date in (
            ("due_today", DEMO_TODAY),
            ("overdue_days", DEMO_TODAY - dt.timedelta(days=20)),
        ):
            item = requirement(scenario, case)
            done = item.subjects[0].accomplishments[-1].done_on
            assert item.repeats[0].counter == "months"
            assert done.replace(year=done.year + 2) == date
            assert item.repeats[0].value == 24

    def test_unit_error_is_250_days_where_the_letter_says_cycles(
        self, scenario: Scenario
    ) -> None:
        item = requirement(scenario, "unit_error")
        assert (item.repeats[0].value, item.repeats[0].counter) == (250, "days")
        assert "250 FC" in item.document.page

    def test_accomplishments_run_forward(self, scenario: Scenario) -> None:
        for item in scenario.requirements:
            for subject in item.subjects:
                done = subject.accomplishments
                dates = [a.done_on for a in done]
                cycles = [a.at.cycles for a in done]
                assert dates == sorted(dates), item.key
                assert cycles == sorted(cycles), item.key
                assert all(date < DEMO_TODAY for date in dates)

    def test_one_termination_has_no_evidence(self, scenario: Scenario) -> None:
        item = requirement(scenario, "unverified_termination")
        claim = item.subjects[0].accomplishments[-1]
        assert claim.result == "terminated"
        assert "not seen" in claim.note


class TestParts:
    def test_forty_serials_and_nine_swaps(self, scenario: Scenario) -> None:
        assert len(scenario.parts) == 40
        assert len(SWAPS) == 9
        moves = sum(max(0, len(part.stints) - 1) for part in scenario.parts)
        assert moves == 18

    def test_a_serial_is_in_one_place_and_a_place_holds_one_serial(
        self, scenario: Scenario
    ) -> None:
        held = []
        for part in scenario.parts:
            for earlier, later in zip(part.stints, part.stints[1:], strict=False):
                assert earlier.removed_on is not None
                assert earlier.removed_on <= later.fitted_on
            if part.stints and part.stints[-1].removed_on is None:
                held.append((part.stints[-1].msn, part.stints[-1].position))
        assert len(held) == len(set(held))

    def test_gap_of_214_days(self, scenario: Scenario) -> None:
        key = scenario.planted["part_gap"][0]
        part = next(p for p in scenario.parts if p.key == key)
        gaps = [life for life in part.earlier if life.kind == "gap"]
        assert [(life.until - life.begin).days for life in gaps] == [214]

    def test_a_base_part_went_under_the_lower_limit(self, scenario: Scenario) -> None:
        key = scenario.planted["lower_limit_on_stretched"][0]
        part = next(p for p in scenario.parts if p.key == key)
        variants = [scenario.logbooks[s.msn].aircraft.variant for s in part.stints]
        assert variants == ["base", "S"]
        limits = {
            limit.configuration: limit.value
            for limit in LIFE_LIMITS
            if limit.part_number == part.part_number
        }
        assert limits["S"] < limits["base"]

    def test_one_part_is_within_500_cycles_of_its_limit(
        self, scenario: Scenario
    ) -> None:
        key = scenario.planted["part_close_to_limit"][0]
        part = next(p for p in scenario.parts if p.key == key)
        limit = next(x.value for x in LIFE_LIMITS if x.part_number == NOSE)
        assert 0 < limit - run_of(part, scenario.logbooks).cycles < 500
