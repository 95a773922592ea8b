"""R16: one serial is in one place at a time, and is not removed with counters below
those of its installation.

Trade practice: a back-to-birth record adds up only if each stint ends before the next
begins and no stint runs backwards (14 CFR 43.10 asks for the life accumulated).
"""

from __future__ import annotations

import datetime as dt

import pytest
from django.db import IntegrityError, transaction

from fleet.due import Counters
from fleet.models import PartInstallation
from fleet.services.parts import part_remove
from tests import due_rows as make
from tests.due_rows import AT, day
from tests.fleet.test_part_services import install, limit, problems, remove

pytestmark = pytest.mark.django_db


@pytest.fixture
def fitted():
    """A serial on one aircraft since the first day, at 25,000 FC and 20,000 FH."""
    limit("30,000 FC")
    part = make.part()
    install(part, make.aircraft("Q7-TSB"), 25_000, on=day(0))
    return part


def taken_off(part, counters):
    part_remove(
        actor=None, at=AT, part=part, on=day(1), counters=counters, reason="check"
    )


def test_installed_here_it_is_not_installed_there(fitted):
    (problem,) = problems(install, fitted, make.aircraft("Q7-TSC"), 25_000, on=day(1))
    assert "only a part in store is installed" in problem
    assert fitted.installations.count() == 1


def test_the_database_refuses_a_second_place_whatever_the_program_does(fitted):
    held = fitted.installations.get()
    with pytest.raises(IntegrityError), transaction.atomic():
        PartInstallation.objects.create(
            part=fitted,
            aircraft=make.aircraft("Q7-TSC"),
            position="MLG RH",
            configuration=held.configuration,
            installed_on=day(1),
            installed_minutes=0,
            installed_cycles=0,
            installed_landings=0,
            entered_at=AT,
        )


def test_a_position_holds_one_serial(fitted):
    aircraft = fitted.installations.get().aircraft
    (problem,) = problems(install, make.part(), aircraft, 25_000, on=day(1))
    assert f"holds {fitted}" in problem


def test_removed_it_may_go_elsewhere_but_not_before_that_day(fitted):
    remove(fitted, 25_040, on=day(10))
    other = make.aircraft("Q7-TSC")
    (problem,) = problems(install, fitted, other, 25_000, on=day(9))
    assert str(day(10)) in problem
    assert install(fitted, other, 25_000, on=day(10)).removed_on is None


@pytest.mark.parametrize(
    ("counters", "named"),
    [
        (Counters(25_000 * 48 - 1, 25_000, 25_000), "flight hours"),
        (Counters(25_000 * 48, 24_999, 25_000), "flight cycles"),
        (Counters(25_000 * 48, 25_000, 24_999), "landings"),
    ],
)
def test_no_counter_at_removal_is_below_installation(fitted, counters, named):
    (problem,) = problems(taken_off, fitted, counters)
    assert problem.startswith(named)
    assert "is below" in problem
    assert fitted.installations.get().removed_on is None


def test_the_counters_of_installation_are_the_least_a_removal_may_have(fitted):
    assert remove(fitted, 25_000, on=day(0)).removed_cycles == 25_000


def test_the_database_refuses_a_counter_that_runs_backwards(fitted):
    row = fitted.installations.get()
    with pytest.raises(IntegrityError), transaction.atomic():
        PartInstallation.objects.filter(pk=row.pk).update(
            removed_on=day(1),
            removed_minutes=row.installed_minutes,
            removed_cycles=row.installed_cycles - 1,
            removed_landings=row.installed_landings,
            removal_reason="check",
        )


def test_a_day_of_removal_before_installation_is_refused(fitted):
    (problem,) = problems(remove, fitted, 25_000, on=day(0) - dt.timedelta(days=1))
    assert str(day(0)) in problem


def test_what_is_off_is_not_taken_off_again(fitted):
    remove(fitted, 25_040, on=day(10))
    (problem,) = problems(remove, fitted, 25_044, on=day(11))
    assert "not installed" in problem
    row = fitted.installations.get()
    assert (row.removed_on, row.removed_cycles) == (day(10), 25_040)
