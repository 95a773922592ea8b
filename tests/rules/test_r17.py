"""R17: a limit or interval is never extended by an edit; it has a new revision with its
source and the day from which it holds.

Company practice: what the due list says today must be explained by a document, and what
it said before by the row that held then.
"""

from __future__ import annotations

import datetime as dt

import pytest
from django.core.exceptions import ValidationError

from fleet.models import KeyedState, LifeLimit, Policy
from fleet.selectors.parts import part_life
from fleet.services.history import Writing
from fleet.services.part_records import life_limit_put_in_force
from fleet.services.people import policy_set
from repairs.models import DuePoint
from tests import due_rows as make
from tests.due_rows import AT, FIRST, TODAY, day
from tests.fleet.test_part_services import limit
from tests.repairs.test_inspections import REPEAT, THRESHOLD, raised, repair

pytestmark = pytest.mark.django_db


def edited(row, **columns) -> None:
    with Writing(actor=None, action="row_set", at=AT) as w:
        w.change(row, **columns)


@pytest.fixture
def requirement():
    return raised(repair(make.aircraft()), THRESHOLD, REPEAT)


@pytest.mark.parametrize(
    "columns",
    [
        {"value": 40_000},
        {"entered": "40,000 FC"},
        {"counter": "landings"},
        {"base": "overhaul"},
        {"effective_from": dt.date(2030, 1, 1)},
        {"state": "in_force", "value": 40_000},
    ],
)
def test_a_life_limit_is_not_edited(columns):
    held = limit("30,000 FC")
    with pytest.raises(RuntimeError, match="never edited"):
        edited(held, **columns)
    assert LifeLimit.objects.get().value == 30_000


@pytest.mark.parametrize("columns", [{"value": 6_000}, {"tolerance": 500}])
def test_an_interval_is_not_edited(requirement, columns):
    row = requirement.limits.get(phase="repeat")
    with pytest.raises(RuntimeError, match="never edited"):
        edited(row, **columns)


@pytest.mark.parametrize("columns", [{"anchor": "actual"}, {"window_percent": 10}])
def test_what_an_interval_counts_from_is_not_edited(requirement, columns):
    with pytest.raises(RuntimeError, match="never edited"):
        edited(requirement, **columns)


def test_a_due_point_is_not_moved(requirement):
    point = DuePoint.objects.get()
    for column in ("due_cycles", "due_minutes", "due_landings", "due_on", "opened_on"):
        with pytest.raises(RuntimeError, match="never edited"):
            edited(point, **{column: getattr(point, column)})


def test_a_longer_life_comes_with_its_document_and_day_and_the_old_row_stays():
    """20,000 governs until the day of the revision, also once the new one is keyed."""
    held = limit("20,000 FC")
    later = dt.date(2024, 12, 1)
    new = limit(
        "25,000 FC",
        in_force=False,
        replaces=held,
        effective_from=later,
        document=make.document("ARD-ALS-2"),
    )
    part = make.part()
    assert part_life(part, as_of=TODAY).due.at.cycles == 20_000, "not keyed again yet"
    with Writing(actor=None, action="life_limit_put_in_force", at=AT) as w:
        life_limit_put_in_force(w, limit=new)
    before = later - dt.timedelta(days=1)
    assert part_life(part, as_of=before).due.at.cycles == 20_000
    assert part_life(part, as_of=later).due.at.cycles == 25_000
    held.refresh_from_db()
    assert (held.value, held.state) == (20_000, KeyedState.REPLACED)


def test_without_a_document_or_day_there_is_no_new_limit():
    for missing in ("document", "effective_from"):
        with pytest.raises(ValidationError):
            limit("25,000 FC", in_force=False, **{missing: None})
    assert not LifeLimit.objects.exists()


def test_a_policy_has_a_new_row_with_its_source_and_the_old_one_stays():
    rule = {"key": "stage_2_months", "unit": "months", "grade": "quoted", "at": AT}
    rule |= {"operator": make.operator()}
    first = policy_set(**rule, value=12, source="AMC 20-20A", effective_from=FIRST)
    policy_set(
        **rule, value=18, source="letter 7", effective_from=day(9), replaces=first
    )
    assert sorted(Policy.objects.values_list("value", flat=True)) == [12, 18]
    with pytest.raises(ValidationError, match="source"):
        policy_set(**rule, value=24, source="", effective_from=day(10))
