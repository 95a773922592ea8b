"""R3, engineering: who prepares does not check, and neither approves a major one.

14 CFR 121.371(c): nobody performs a required inspection of an item that he worked on.
For engineering it is trade practice, as the independence of design verification is in
Part-21.
"""

from __future__ import annotations

import pytest
from django.core.exceptions import ValidationError

from tests.factories import NOW, authorise, user_make
from tests.folder_rows import folders_make

pytestmark = pytest.mark.django_db


@pytest.fixture
def folders(world):
    return folders_make(world)


@pytest.fixture
def all_scopes(world):
    """One person with every authorisation: only independence can refuse."""
    person = user_make(world.operator, "signatory", "everything").person
    for scope in ("check", "approve"):
        authorise(person, world.operator, scope)
    return person


def test_who_prepared_it_does_not_check_it(folders, all_scopes):
    folder = folders.ready(prepared_by=all_scopes)
    folders.sign(folder, "prepared", all_scopes)
    with pytest.raises(ValidationError, match="prepared S-0001; checked is by another"):
        folders.sign(folder, "checked", all_scopes)


def test_who_typed_it_for_another_does_not_check_it_either(folders, world, all_scopes):
    authorise(world.users["recorder"].person, world.operator, "check")
    folder = folders.ready()
    folders.sign(folder, "prepared")
    with pytest.raises(ValidationError, match="is by another person"):
        folders.sign(folder, "checked", world.users["recorder"].person)


def test_nobody_signs_as_preparer_for_another(folders, all_scopes):
    with pytest.raises(ValidationError, match="names Robin Engineer as the one who"):
        folders.sign(folders.ready(), "prepared", all_scopes)


def test_who_prepared_a_minor_one_does_not_approve_it(folders, all_scopes):
    folder = folders.ready(scale="minor", prepared_by=all_scopes)
    folders.sign(folder, "prepared", all_scopes)
    folders.sign(folder, "checked")
    with pytest.raises(ValidationError, match="stage 1 is by another person"):
        folders.sign(folder, "stage_1", all_scopes)


def test_who_checked_a_major_one_does_not_approve_it(folders, all_scopes):
    folder = folders.ready(scale="major")
    folders.sign(folder, "prepared")
    folders.sign(folder, "checked", all_scopes)
    with pytest.raises(ValidationError, match="approved by a third person"):
        folders.sign(folder, "stage_1", all_scopes)


def test_who_checked_a_minor_one_may_approve_it(folders, all_scopes):
    folder = folders.ready(scale="minor")
    folders.sign(folder, "prepared")
    folders.sign(folder, "checked", all_scopes)
    assert folders.sign(folder, "stage_1", all_scopes).meaning == "stage_1"


def test_who_prepared_an_earlier_revision_does_not_approve_a_later_one(
    folders, world, all_scopes
):
    from repairs.services.substantiations import substantiation_revise

    folder = folders.ready(prepared_by=all_scopes)
    folders.sign(folder, "prepared", all_scopes)
    later = substantiation_revise(
        substantiation=folder,
        reason="a word",
        prepared_by=world.assessor,
        actor=world.users["recorder"],
        at=NOW,
    )
    folders.sign(later, "prepared")
    folders.sign(later, "checked")
    with pytest.raises(ValidationError, match="stage 1 is by another person"):
        folders.sign(later, "stage_1", all_scopes)
