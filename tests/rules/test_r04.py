"""R4: who signs holds an authorisation of the right scope that is valid that day.

14 CFR 121.371(d): a list of the persons who are authorised to conduct required
inspections is kept, with what each may do; 121.371(c): none but they do.
"""

from __future__ import annotations

import datetime as dt

import pytest
from django.core.exceptions import ValidationError

from fleet.services.people import authorisation_grant
from tests.factories import NOW, TODAY, authorise, user_make
from tests.folder_rows import folders_make

pytestmark = pytest.mark.django_db
EVE = TODAY - dt.timedelta(days=1)
MORROW = TODAY + dt.timedelta(days=1)


@pytest.fixture
def folders(world):
    return folders_make(world)


@pytest.fixture
def checked(folders):
    """Prepared and checked: only the approval is missing."""
    return folders.approve(folders.ready())


@pytest.fixture
def person(world):
    return user_make(world.operator, "signatory", "late").person


def grant(world, person, valid_from, valid_to=None):
    authorisation_grant(
        person=person,
        operator=world.operator,
        number="A-77",
        scope="approve",
        valid_from=valid_from,
        valid_to=valid_to,
        source="company authorisation register",
        at=NOW,
    )


def test_an_authorisation_that_expired_the_day_before_signs_nothing(
    folders, world, checked, person
):
    grant(world, person, dt.date(2020, 1, 1), EVE)
    with pytest.raises(ValidationError, match="A-77 was valid to 2024-12-31"):
        folders.sign(checked, "stage_1", person)


def test_an_authorisation_of_tomorrow_signs_nothing_today(
    folders, world, checked, person
):
    grant(world, person, MORROW)
    with pytest.raises(ValidationError, match="A-77 is valid from 2025-01-02"):
        folders.sign(checked, "stage_1", person)


def test_the_last_day_of_an_authorisation_is_a_valid_day(
    folders, world, checked, person
):
    grant(world, person, dt.date(2020, 1, 1), TODAY)
    assert folders.sign(checked, "stage_1", person).authorisation_number == "A-77"


@pytest.mark.parametrize("scope", ["assess", "check", "certify", "inspect", "ndt"])
def test_another_scope_than_approving_design_data_approves_nothing(
    folders, world, checked, person, scope
):
    authorise(person, world.operator, scope)
    with pytest.raises(ValidationError, match=r"no authorisation \(.*\) at Northmere"):
        folders.sign(checked, "stage_1", person)


def test_an_authorisation_at_another_operator_signs_nothing_here(
    folders, world, checked, person
):
    elsewhere = world.outsider.memberships.get().operator
    authorise(person, elsewhere, "approve")
    with pytest.raises(ValidationError, match=r"no authorisation \(.*\) at Northmere"):
        folders.sign(checked, "stage_1", person)
    assert not checked.approvals.filter(meaning="stage_1").exists()


def test_a_signature_stays_valid_when_the_authorisation_has_lapsed_since(
    folders, world, checked, person
):
    """AC 120-78, from memory: what was signed under an authorisation stays signed."""
    from repairs.selectors.signatures import approval_agrees

    grant(world, person, dt.date(2020, 1, 1), TODAY)
    signed = folders.sign(checked, "stage_1", person)
    type(signed.authorisation).objects.filter(pk=signed.authorisation_id).update(
        valid_to=EVE
    )
    signed.refresh_from_db()
    assert approval_agrees(signed)
