"""For which serials a document holds, and who may say so.

That a repair drawn for one range of serials was used outside it is a published case
(ASRS report 807223: the manual repair "was not effective for that line number").
"""

from __future__ import annotations

import pytest
from django.core.exceptions import ValidationError
from django.urls import reverse

from fleet.models import Document
from fleet.selectors.applicability import NO, NOT_RECORDED, YES, applies_to
from fleet.serials import in_range
from fleet.services.applicability import document_applicability_record
from fleet.services.documents import document_get_or_create
from fleet.services.history import Writing
from tests.factories import NOW, aircraft_make, operator_make, type_bare, user_make
from tests.queries import assert_same_queries


@pytest.mark.parametrize(
    ("serial", "first", "last", "holds"),
    [
        ("0012", "12", "12", True),
        ("12", "0001", "0040", True),
        ("9", "10", "", False),
        ("100", "9", "", True),
        ("A-101", "A-9", "A-110", True),
        ("a 101", "A-101", "A-101", True),
        ("A-9", "A-10", "A-110", False),
        ("A-101", "1", "200", False),
        ("B-101", "A-1", "A-200", False),
        ("41", "", "40", False),
        ("7", "", "", True),
    ],
)
def test_serials_are_compared_as_numbers_within_one_series(serial, first, last, holds):
    # Trade practice: serial ranges are read by number, leading zeros dropped.
    assert in_range(serial, first, last) is holds


@pytest.fixture
def cited(db):
    operator = operator_make()
    _, variant = type_bare()
    aircraft = aircraft_make(operator, variant)
    return operator, variant, aircraft, document(operator, "SRM 53-10-12")


def document(operator, reference) -> Document:
    with Writing(actor=None, action="document_record", at=NOW) as w:
        return document_get_or_create(
            w, operator=operator, kind="repair_manual", reference=reference
        )


def hold(row, **said):
    return document_applicability_record(
        document=row, actor=None, at=NOW, **({"page": "p. 1"} | said)
    )


def test_nothing_recorded_is_unknown_and_several_ranges_are_read_as_or(cited):
    _, variant, aircraft, row = cited
    assert applies_to(row, aircraft).answer == NOT_RECORDED
    hold(row, first_serial="1", last_serial="40")
    refused = applies_to(row, aircraft)
    assert refused.answer == NO
    assert "serial 1 to 40 (p. 1)" in refused.refusal
    assert aircraft.serial_number in refused.refusal
    hold(row, variant=variant, first_serial=aircraft.serial_number)
    assert applies_to(row, aircraft).answer == YES


def test_another_variant_is_not_covered_by_its_range(cited):
    _, variant, aircraft, row = cited
    with Writing(actor=None, action="type_create", at=NOW) as w:
        other = w.create(
            type(variant)(
                aircraft_type=variant.aircraft_type, code="long", name="TST long"
            )
        )
    hold(row, variant=other)
    assert applies_to(row, aircraft).refused


def test_a_range_names_its_page_and_is_not_turned_round(cited):
    *_, row = cited
    with pytest.raises(ValidationError, match="where the document says so"):
        hold(row, page=" ")
    with pytest.raises(ValidationError, match="no serial lies in it"):
        hold(row, first_serial="40", last_serial="1")
    with pytest.raises(ValidationError, match="as on the data plate"):
        hold(row, first_serial="--")


def test_the_page_records_a_range_and_shows_what_is_not_recorded(client, cited):
    operator, _, _, row = cited
    client.force_login(user_make(operator, "engineer"))
    listed = reverse("documents")
    assert "not recorded" in client.get(listed).content.decode()
    url = reverse("document_applicability", args=[row.pk])
    wrong = client.post(url, {"first_serial": "40", "last_serial": "1", "page": "p. 3"})
    assert "no serial lies in it" in wrong.content.decode()
    assert 'value="40"' in wrong.content.decode()
    said = {"first_serial": "0001", "last_serial": "0040", "page": "p. 3"}
    assert client.post(url, said).url == listed
    assert "serial 0001 to 0040 (p. 3)" in client.get(listed).content.decode()


def test_the_list_costs_the_same_for_one_and_for_twenty(client, cited):
    operator, _, _, row = cited
    hold(row)
    client.force_login(user_make(operator, "engineer"))

    def more() -> None:
        for number in range(20):
            hold(document(operator, f"SRM 53-20-{number:02d}"))

    assert_same_queries(client, reverse("documents"), more)
