"""One aircraft's chain verified alone, as it is handed over with the aircraft."""

from __future__ import annotations

from io import StringIO

import pytest
from django.core.management import CommandError, call_command
from django.db import connection

from fleet.digests import guarded_tables
from fleet.models import Aircraft, HistoryEntry, UsageRecord
from fleet.selectors.verify_rows import Read
from fleet.selectors.verify_stream import stream_problems
from fleet.services.aircraft import stream_of
from fleet.triggers import triggers_remove
from repairs.models import Finding, MeasuredValue
from tests.altered_rows import FAR, other, update
from tests.bare_rows import insert
from tests.factories import aircraft_make
from tests.record_rows import found, world_make

pytestmark = pytest.mark.django_db


@pytest.fixture
def world():
    return world_make()


@pytest.fixture
def finding(world):
    return found(world)


def test_an_untouched_aircraft_agrees(world, finding):
    read, out = Read(), StringIO()
    assert list(stream_problems(stream_of(world.aircraft), read)) == []
    assert read.rows > UsageRecord.objects.count()
    assert 0 < read.entries < HistoryEntry.objects.count()
    call_command("verify_history", aircraft="Q7-AAA", stdout=out)
    assert f"aircraft:{world.aircraft.pk} agrees" in out.getvalue()


@pytest.mark.parametrize(
    ("model", "column"),
    [(Finding, "place_entered"), (MeasuredValue, "value"), (UsageRecord, "cycles")],
)
def test_an_altered_record_of_the_aircraft_is_found(world, finding, model, column):
    triggers_remove(connection, guarded_tables())
    row, field = model.objects.first(), model._meta.get_field(column)
    update(model, row.pk, field, other(field, getattr(row, column)))
    assert list(stream_problems(stream_of(world.aircraft)))


def test_a_record_added_to_the_aircraft_is_found_however_deep(world, finding):
    """A measured value hangs on a measurement, that on a finding of the aircraft."""
    row = MeasuredValue.objects.first()
    values = {f.column: getattr(row, f.attname) for f in row._meta.concrete_fields}
    insert(MeasuredValue, values | {"id": FAR, "quantity": "other_mm"})
    told = list(stream_problems(stream_of(world.aircraft)))
    assert told == [f"repairs_measuredvalue {FAR} has no history: it was written "
                    "outside the program."]  # fmt: skip


def test_another_aircrafts_altered_record_is_not_its_concern(world, finding):
    other_one = aircraft_make(world.operator, world.variant, "Q7-BBB")
    update(Aircraft, other_one.pk, Aircraft._meta.get_field("serial_number"), "X")
    assert list(stream_problems(stream_of(world.aircraft))) == []
    assert list(stream_problems(stream_of(other_one)))


def test_an_entry_cut_out_of_the_aircrafts_chain_is_found(world, finding):
    triggers_remove(connection, guarded_tables())
    stream = stream_of(world.aircraft)
    first = HistoryEntry.objects.filter(stream=stream).earliest("sequence")
    update(HistoryEntry, first.pk, HistoryEntry._meta.get_field("stream"), "aside")
    assert any("does not follow in its stream" in p for p in stream_problems(stream))


def test_an_unknown_aircraft_is_said(world):
    with pytest.raises(CommandError, match="registered “Q9-NOT”"):
        call_command("verify_history", aircraft="Q9-NOT")
    with pytest.raises(CommandError, match="“aircraft:999”"):
        call_command("verify_history", stream="aircraft:999")
