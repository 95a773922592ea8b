"""R15: a life-limited part is not installed with nothing left in the configuration it
goes into, with an incomplete history, or unless it is in store with its release.

14 CFR 43.10(c): the disposition of a life-limited part must deter its installation
after it reached its life limit, and its current status must be known. From memory.
"""

from __future__ import annotations

import datetime as dt

import pytest

from fleet.models import PartInstallation
from tests import due_rows as make
from tests.due_rows import FIRST
from tests.fleet.test_part_services import (
    at,
    earlier,
    install,
    limit,
    problems,
    remove,
)

pytestmark = pytest.mark.django_db
EARLY = dt.date(2012, 1, 1)


def refused(part, **where) -> str:
    (problem,) = problems(install, part, make.aircraft("Q7-TSR"), 25_000, **where)
    assert not part.installations.filter(removed_on=None).exists()
    return problem


def flown(cycles: int):
    """A part back in store after that many cycles on an aircraft."""
    part = make.part()
    install(part, make.aircraft("Q7-TSB"), 10_000, on=EARLY)
    remove(part, 10_000 + cycles, on=dt.date(2020, 1, 1))
    return part


@pytest.mark.parametrize("cycles", [5_000, 5_001])
def test_with_nothing_left_it_stays_in_store(cycles):
    limit("5,000 FC")
    assert "has no life left" in refused(flown(cycles))


def test_with_one_cycle_left_it_is_installed():
    limit("5,000 FC")
    part = flown(4_999)
    install(part, make.aircraft("Q7-TSR"), 25_000)
    assert part.installations.filter(removed_on=None).exists()


def test_the_configuration_it_goes_into_decides():
    """5,000 flown: within the 8,000 of one configuration, at the end of the other's."""
    limit("8,000 FC", configuration=make.configuration("base"))
    limit("5,000 FC", configuration=make.configuration("heavy"))
    part = flown(5_000)
    assert "no life left in configuration" in refused(part, config="heavy")
    assert install(part, make.aircraft("Q7-TSC"), 25_000, config="base")


def test_of_several_limits_the_one_that_ends_first_decides():
    limit("90,000 FC")
    limit("4,000 FH")
    assert "no life left" in refused(flown(5_000))  # 5,000 FC x 48 min = 4,000 FH


def test_a_calendar_life_that_has_ended_is_no_life_left():
    limit("14 years")  # of a part made on 1 January 2010; ended 1 January 2024
    assert "no life left" in refused(make.part())


def test_a_broken_back_to_birth_record_is_incomplete():
    limit("5,000 FC")
    assert "back-to-birth record is broken" in refused(make.part(chain="broken"))


def test_a_gap_that_is_not_reconstructed_is_incomplete():
    limit("5,000 FC")
    part = make.part()
    earlier(part, "gap", "blocked", at(0), from_on=EARLY, to_on=FIRST)
    assert "gap in the back-to-birth record" in refused(part)


def test_without_any_recorded_limit_its_status_is_not_known():
    assert "no life limit is recorded" in refused(make.part())


@pytest.mark.parametrize(
    "state", ["installed", "unserviceable", "quarantined", "expired", "scrapped"]
)
def test_from_any_place_but_the_store_it_is_not_installed(state):
    limit("5,000 FC")
    assert "only a part in store is installed" in refused(make.part(state=state))


def test_without_its_release_certificate_it_is_not_installed():
    limit("5,000 FC")
    assert "no release reference" in refused(make.part(release_reference=""))
    assert not PartInstallation.objects.exists()


def test_the_certificate_may_come_with_the_installation():
    limit("5,000 FC")
    row = install(
        make.part(release_reference=""), make.aircraft(), 25_000, release="C7"
    )
    assert row.release_reference == "C7"


def test_what_stands_against_it_is_said_all_at_once():
    limit("5,000 FC")
    part = make.part(state="quarantined", chain="broken", release_reference="")
    assert len(problems(install, part, make.aircraft(), 25_000)) == 3
