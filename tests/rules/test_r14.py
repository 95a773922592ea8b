"""R14: a release is entered as soon as practicable, not later than 30 days after it; a
later one is accepted, and the lateness is shown and counted.

M.A.305(a): the entry in the aircraft's record system is made "as soon as practicable
but in no case more than 30 days after the day of the maintenance action".
"""

from __future__ import annotations

import datetime as dt

import pytest
from django.urls import reverse

from fleet.due import Counters
from fleet.models import Document
from fleet.services.documents import document_get_or_create
from fleet.services.history import Writing
from repairs.models import Accomplishment, Repair
from repairs.selectors.late_entries import late_entries, repair_late_words
from repairs.services.accomplishments import accomplishment_record
from repairs.services.inspections import requirement_raise
from repairs.services.requirement_draft import LimitEntry, RequirementDraft
from tests.factories import NOW, TODAY, program
from tests.finding_rows import clock, repaired
from tests.queries import assert_same_queries
from tests.record_rows import FIRST

pytestmark = pytest.mark.django_db


@pytest.fixture
def policy(world):
    return clock("late_entry_days", 30, "days", source="M.A.305(a)")


def released(world, days: int, **changes) -> Repair:
    """Released so many days before it is entered; entered now."""
    day = NOW.date() - dt.timedelta(days=days)
    return repaired(world, None, findings=(), released_on=day, **changes)


def counted(world) -> list[str]:
    return [one.what for one in late_entries(world.engineer, as_of=TODAY)]


def test_a_release_entered_on_the_thirtieth_day_is_in_time(world, policy):
    repair = released(world, 30)
    assert repair_late_words(repair, as_of=TODAY) == ""
    assert counted(world) == []


def test_a_release_entered_later_is_accepted_marked_and_counted(world, policy):
    repair = released(world, 31)
    assert repair.state == "embodied"
    assert "Entered 31 days after the release" in repair_late_words(repair, as_of=TODAY)
    assert "M.A.305(a) allows 30 days" in repair_late_words(repair, as_of=TODAY)
    assert counted(world) == [repair.number]


def test_a_demonstration_counts_to_the_day_it_takes_as_today(world, policy):
    repair = released(world, 31)
    assert repair_late_words(repair, as_of=repair.released_on) == ""
    assert late_entries(world.engineer, as_of=repair.released_on) == []


def test_the_number_of_days_is_the_policys(world):
    clock("late_entry_days", 10, "days")
    repair = released(world, 11)
    assert "allows 10 days" in repair_late_words(repair, as_of=TODAY)


def test_without_a_number_on_record_the_days_are_still_said(world):
    assert "no number of days is recorded" in repair_late_words(
        released(world, 12), as_of=TODAY
    )


def test_a_repair_from_before_our_records_is_not_late(world, policy):
    repair = released(world, 3_000, legacy=True, evidence="seen")
    assert repair_late_words(repair, as_of=TODAY) == ""
    assert counted(world) == []


def inspected(world, on: dt.date) -> Accomplishment:
    """A programme inspection done on that day, entered now."""
    requirement = requirement_raise(
        draft=RequirementDraft(
            operator=world.operator,
            title="Look at the keel",
            requirement_class="programme",
            area="keel",
            criteria="no crack",
            method="detailed_visual",
            effective_on=FIRST - dt.timedelta(days=90),
            limits=(LimitEntry("threshold", "10,100 FC", base="new"),),
            aircraft=(world.aircraft,),
            source_document=document(world),
        ),
        actor=world.engineer,
        at=NOW,
    )
    return accomplishment_record(
        subject=requirement.subjects.get(),
        done_on=on,
        counters=Counters(604_000, 10_080, 10_080),
        result="no_finding",
        proof=program(world.certifier),
        actor=None,
        at=NOW,
        today=TODAY,
    ).row


def document(world) -> Document:
    with Writing(actor=None, action="document_record", at=NOW) as w:
        return document_get_or_create(
            w, operator=world.operator, kind="programme", reference="AMP-1"
        )


def test_an_inspection_counts_from_the_day_it_was_done(world, policy):
    assert dt.timedelta(days=31) == TODAY - FIRST
    row = inspected(world, FIRST)
    assert counted(world) == [row.subject.requirement.number]


def test_an_inspection_from_before_our_records_is_not_late(world, policy):
    inspected(world, FIRST - dt.timedelta(days=30))
    assert counted(world) == []


def test_the_page_of_the_record_says_it(client, world, policy):
    repair = released(world, 40)
    client.force_login(world.users["auditor"])
    page = client.get(reverse("repair", args=[repair.pk])).content.decode()
    assert "Entered 40 days after the release" in page


def test_the_list_of_late_entries_costs_the_same_for_more(client, world, policy):
    released(world, 40)
    client.force_login(world.users["auditor"])
    assert_same_queries(
        client, reverse("late_list"), lambda: [released(world, 50) for _ in range(6)]
    )


def test_another_operator_sees_none_of_them(client, world, policy):
    repair = released(world, 40)
    client.force_login(world.outsider)
    assert repair.number not in client.get(reverse("late_list")).content.decode()
