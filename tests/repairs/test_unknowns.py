"""What is not known of an aircraft: counted, each count leading to exactly its rows.

Operators reviewing the records of ageing aircraft found that "amount and kind of data
requested may not exist": unknown is a value, and how often it stands is a report.
"""

from __future__ import annotations

import datetime as dt
from urllib.parse import parse_qs, urlparse

import pytest

from fleet.models import PartEarlierLife
from repairs.filters import FindingFilter, RepairFilter
from repairs.measured import Typed
from repairs.models import Finding, Repair, RequirementState
from repairs.selectors.unknowns import (
    finding_unknowns,
    legacy_counts,
    repair_unknowns,
    unknowns,
)
from repairs.services.accomplishments import accomplishment_record
from repairs.services.repair_entry import Answered
from tests.factories import NOW, TODAY, program
from tests.finding_rows import decide, repaired
from tests.queries import assert_same_queries
from tests.record_rows import DENT, FOUND, assessed, found
from tests.release_causes import AT, change, create, legacy, life, raised

pytestmark = pytest.mark.django_db


def counted(world) -> dict[str, int]:
    return {row.words: row.count for row in unknowns(world.aircraft)}


def listed(world, words: str) -> int:
    """How many rows the list shows that the count leads to."""
    (row,) = [one for one in unknowns(world.aircraft) if one.words == words]
    address = urlparse(row.address)
    asked = {key: values[0] for key, values in parse_qs(address.query).items()}
    request = type("Asked", (), {"user": world.engineer})()
    model, kind = {
        "/findings/": (Finding, FindingFilter),
        "/repairs/": (Repair, RepairFilter),
    }[address.path]
    shown = kind(asked, queryset=model.objects.all(), request=request)
    assert shown.form.is_valid()
    return shown.qs.count()


class TestFindings:
    def test_each_unknown_of_a_finding_is_counted_and_listed(self, world):
        found(
            world,
            place_entered="near the galley",
            typed=[*DENT[:2], Typed("depth_mm", "unknown")],
            found_on=dt.date(2024, 11, 1),
        )
        expected = {"place", "criticality", "element", "dimensions", "counters",
                    "method", "cause"}  # fmt: skip
        for key, (words, _) in finding_unknowns().items():
            assert counted(world).get(words, 0) == (key in expected), words
            if key in expected:
                assert listed(world, words) == 1

    def test_a_dimension_measured_later_is_unknown_no_more(self, world):
        words = finding_unknowns()["dimensions"][0]
        found(world)
        assert words not in counted(world)

    def test_what_is_closed_or_set_aside_is_not_counted(self, world):
        row = found(world, place_entered="near the galley")
        change(row, state="voided")
        assert finding_unknowns()["place"][0] not in counted(world)

    def test_damage_kept_without_a_decision_is_counted(self, world):
        words = finding_unknowns()["decision"][0]
        row = assessed(world)
        change(row, state="accepted")
        assert counted(world)[words] == 1
        decide(world, row)
        assert words not in counted(world)


class TestRepairs:
    def test_each_unknown_of_a_legacy_repair_is_counted_and_listed(self, world):
        legacy(world, place_entered="near the galley", category="pending")
        expected = set(repair_unknowns()) - {"hiding", "applicability"}
        for key, (words, _) in repair_unknowns().items():
            assert counted(world).get(words, 0) == (key in expected), words
            if key in expected:
                assert listed(world, words) == 1

    def test_damage_not_shown_removed_under_a_repair_is_counted(self, world):
        finding = assessed(world)
        repaired(world, finding, findings=(Answered(finding, True, "unknown"),))
        words = repair_unknowns()["hiding"][0]
        assert (counted(world)[words], listed(world, words)) == (1, 1)

    def test_approval_data_that_say_no_serials_are_counted(self, world):
        repaired(world, assessed(world))
        words = repair_unknowns()["applicability"][0]
        assert (counted(world)[words], listed(world, words)) == (1, 1)

    def test_a_repair_that_was_removed_is_counted_no_more(self, world):
        row = legacy(world)
        change(row, state="removed", removed_on=FOUND, removal_reason="replaced")
        assert repair_unknowns()["data"][0] not in counted(world)

    def test_legacy_repairs_are_counted_by_their_evidence(self, world):
        legacy(world)
        legacy(world, evidence="seen")
        repaired(world, assessed(world))
        found_ = {row.words: row.count for row in legacy_counts(world.aircraft)}
        assert found_ == {
            "legacy repairs": 2,
            "evidence seen": 1,
            "evidence not seen": 1,
        }


class TestTheAircraft:
    def test_what_is_not_known_of_the_aircraft_itself_is_counted(self, world):
        told = counted(world)
        assert told["manufacture date"] == 1
        assert told["opening counters keyed once only"] == 1
        change(world.aircraft, manufactured_on=dt.date(2001, 4, 3))
        world.aircraft.refresh_from_db()
        assert "manufacture date" not in counted(world)

    def test_a_gap_in_the_history_of_an_installed_part_is_counted(self, world):
        life(world)
        part = world.aircraft.installations.get().part
        create(
            PartEarlierLife(
                part=part,
                kind="gap",
                treatment="blocked",
                minutes=0,
                cycles=0,
                landings=0,
                evidence="no card found",
            )
        )
        words = "gaps in the history of installed safe-life parts"
        assert counted(world)[words] == 1

    def test_a_terminating_action_from_papers_is_unverified_until_somebody_saw_it(
        self, world
    ):
        """NTSB AAB-13/01: an erroneous entry said that the improved fitting was in, so
        the inspections were stopped. A claim alone ends nothing."""
        subject = raised(world, "10,180 FC").subjects.get()
        accomplishment_record(
            actor=None,
            at=NOW,
            today=TODAY,
            subject=subject,
            done_on=FOUND,
            counters=AT,
            result="terminated",
            evidence="entry of the former owner",
            proof=program(world.certifier),
        )
        subject.refresh_from_db()
        assert subject.state == RequirementState.TERMINATION_UNVERIFIED
        assert subject.due_points.filter(closed_on__isnull=True).exists()
        assert counted(world)["terminating actions not verified"] == 1

    def test_nothing_is_counted_as_nought(self, world):
        assert all(row.count > 0 for row in unknowns(world.aircraft))


class TestPages:
    def test_the_aircraft_and_its_surveys_show_the_counts(self, client, world):
        found(world, place_entered="near the galley")
        client.force_login(world.engineer)
        for address in ("", "surveys/"):
            page = client.get(f"/aircraft/{world.aircraft.pk}/{address}")
            text = page.content.decode()
            assert "findings to be placed" in text
            assert "Unknown is counted, never filled in" in text

    def test_the_list_costs_the_same_for_twenty_unknown_rows(self, client, world):
        client.force_login(world.engineer)
        legacy(world)
        found(world, place_entered="near the galley")

        def grow():
            for _ in range(19):
                legacy(world)
                found(world, place_entered="near the galley")

        assert_same_queries(client, f"/aircraft/{world.aircraft.pk}/surveys/", grow)
