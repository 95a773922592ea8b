"""What the history says of a change, in the trade's words and units.

Trade practice: times are kept as hours and minutes, h:mm; one inch is 25.4 mm and a
quarter inch 6.35 mm exactly (international yard and pound agreement, 1959).
"""

from __future__ import annotations

import datetime as dt

import pytest

from fleet.selectors.history import history_of
from fleet.selectors.in_words import keys_told, name_words, value_words
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from fleet.services.people import person_create
from repairs.models import Disposition, Finding, Measurement, Repair
from tests.factories import NOW
from tests.record_rows import found
from tests.repair_rows import record

pytestmark = pytest.mark.django_db


def changed(world, row, **columns) -> list[str]:
    """The row changed so, and what its history then says."""
    with Writing(
        actor=None, action="repair_reclassify", at=NOW, operator=world.operator,
        stream=stream_of(row.aircraft),
    ) as w:  # fmt: skip
        w.change(row, **columns)
    return history_of(row)[0].changes


@pytest.mark.parametrize(
    ("column", "words"),
    [
        ("place_text", "location"),
        ("released_by_id", "released by"),
        ("thickness_mm", "thickness"),
        ("replacement_limit_minutes", "replacement limit in flight hours"),
        ("at_minutes", "flight hours then"),
        ("element", "structural item"),
        ("repeat_cycles", "repeat in flight cycles"),
    ],
)
def test_a_column_is_named_without_key_and_unit(column, words):
    assert name_words(column) == words


@pytest.mark.parametrize(
    ("table", "column", "kept", "words"),
    [
        # 951,036 minutes are 15,850 hours and 36 minutes.
        (Repair, "at_minutes", 951_036, "15,850:36 FH"),
        (Repair, "replacement_limit_cycles", 12_000, "12,000 FC"),
        (Finding, "at_landings", 1, "1 landing"),
        (Repair, "remaining_thickness_mm", (6.35).hex(), "6.35 mm"),
        (Repair, "weight_change_g", -1_250, "−1,250 g"),
        (Disposition, "kind", "accept_with_inspection", "accept with inspection"),
        (Measurement, "stage", "as_found", "as found"),
        (Finding, "criticality", "principal", "PSE"),
        (Measurement, "method", "detailed_visual", "detailed visual"),
        (Measurement, "instrument", "UT_gauge 7", "UT_gauge 7"),
        (Repair, "legacy", True, "yes"),
        (Repair, "released_on", "2024-12-06", "2024-12-06"),
        (Repair, "entered_at", "2025-01-01T09:00:00.000000+00:00",
         "2025-01-01 09:00 UTC"),
        (Repair, "removal_reason", "", "—"),
        (Repair, "at_cycles", 0, "0 FC"),
    ],
)  # fmt: skip
def test_a_value_has_its_unit_or_its_label(table, column, kept, words):
    assert value_words(table, column, kept) == words


def test_a_key_is_told_by_the_record_it_points_at(world):
    repair = record(world)
    someone = person_create(
        organisation=world.operator.organisation, name="Ida Voss", at=NOW
    )
    told = changed(world, repair, inspected_by_id=someone.pk, legacy=True)
    assert "inspected by: — → Ida Voss" in told
    assert "from before these records: no → yes" in told


def test_no_change_of_a_repair_is_told_as_a_column(world):
    repair = record(world)
    told = changed(
        world,
        repair,
        at_minutes=repair.at_minutes + 30,
        length_mm=254.0,
        category="pending",
        released_on=repair.released_on + dt.timedelta(days=1),
        performed_by_id=world.certifier.pk,
    )
    assert len(told) == 5
    for line in told:
        assert "_" not in line
        assert "0x" not in line
    assert "flight hours then: 10,066:40 FH → 10,067:10 FH" in told
    assert "length: — → 254 mm" in told
    assert f"performed by: {world.assessor} → {world.certifier}" in told


def test_one_change_and_twenty_cost_the_same_queries(world, django_assert_num_queries):
    row = found(world)
    people = [world.assessor, world.certifier]

    def change(number: int) -> None:
        with Writing(
            actor=None, action="finding_assess", at=NOW, operator=world.operator,
            stream=stream_of(row.aircraft),
        ) as w:  # fmt: skip
            w.change(row, found_by_id=people[number % 2].pk)

    change(0)
    with django_assert_num_queries(2):
        assert len(history_of(row)) == 2
    for number in range(1, 20):
        change(number)
    with django_assert_num_queries(2):
        assert len(history_of(row)) == 21


def test_what_is_no_longer_there_is_said_so():
    assert value_words(Repair, "released_by_id", 9) == "no longer there"
    assert keys_told([(Repair, "released_by_id", None)]) == {}
