"""R12: what is signed does not change; a correction is a new revision that names it.

AMC M.A.305(e): amendments of a record stay traceable. Which columns and rows a
signature covers is asked of each table, past the services, as nobody should.
"""

from __future__ import annotations

import pytest
from django.core.exceptions import ValidationError
from django.db import connection

from repairs.models import (
    SubstantiationCase,
    SubstantiationDocument,
    SubstantiationNeighbour,
)
from repairs.selectors.signatures import approvals_verified
from repairs.selectors.substantiation_content import differences
from repairs.services.substantiation_entry import FolderEntry
from repairs.services.substantiation_rows import (
    substantiation_finding_add,
    substantiation_neighbours_find,
    substantiation_row_withdraw,
)
from repairs.services.substantiations import (
    substantiation_edit,
    substantiation_revise,
)
from tests.factories import NOW
from tests.folder_rows import folders_make
from tests.record_rows import found

pytestmark = pytest.mark.django_db
NEAR = "STA 640+10, 10 in below S-7R"


@pytest.fixture
def folders(world):
    return folders_make(world)


@pytest.fixture
def signed(folders, world):
    """Prepared; the first signature freezes the revision."""
    found(world, place_entered=NEAR)
    folder = folders.ready()
    folders.sign(folder, "prepared")
    return folder


def revised(folders, folder, reason="the margin was mistyped"):
    return substantiation_revise(
        substantiation=folder,
        reason=reason,
        prepared_by=folders.world.assessor,
        actor=folders.world.engineer,
        at=NOW,
    )


def test_every_edit_of_a_signed_revision_is_refused(folders, world, signed):
    by = {"actor": world.engineer, "at": NOW}
    entry = FolderEntry("Other title", "permanent", world.assessor)
    edits = [
        lambda: substantiation_edit(substantiation=signed, entry=entry, **by),
        lambda: substantiation_finding_add(
            substantiation=signed, finding=found(world), **by
        ),
        lambda: substantiation_neighbours_find(substantiation=signed, **by),
        lambda: substantiation_row_withdraw(row=signed.cases.get(), **by),
        lambda: substantiation_row_withdraw(row=signed.documents.get(), **by),
        lambda: substantiation_row_withdraw(row=signed.finding_rows.get(), **by),
        lambda: folders.case(signed),
        lambda: folders.effects(signed),
        lambda: folders.document(signed),
    ]
    for edit in edits:
        with pytest.raises(ValidationError, match="is signed, so it does not change"):
            edit()


def test_an_answer_for_a_neighbour_does_not_change_once_signed(folders, signed):
    signed.neighbours.update(answer="", reason="", reviewed_by=None, reviewed_on=None)
    with pytest.raises(ValidationError, match="is signed, so it does not change"):
        folders.review(signed)


def test_a_correction_is_a_new_revision_that_names_the_first_and_says_why(
    folders, signed
):
    later = revised(folders, signed)
    assert (later.number, later.revision) == (signed.number, 1)
    assert later.replaces == signed
    assert later.revision_reason == "the margin was mistyped"
    assert not later.approvals.exists()
    assert signed.approvals.count() == 1
    assert differences(signed, later) == []


def test_a_revision_needs_its_reason(folders, signed):
    with pytest.raises(ValidationError, match="Say why it is revised"):
        revised(folders, signed, " ")


def test_only_the_latest_revision_is_revised_or_signed(folders, signed):
    later = revised(folders, signed)
    with pytest.raises(ValidationError, match="S-0001 rev 1 is the latest"):
        revised(folders, signed)
    with pytest.raises(ValidationError, match="S-0001 rev 1 is the latest"):
        folders.sign(signed, "checked")
    with pytest.raises(ValidationError, match="is not signed yet; edit it instead"):
        revised(folders, later)


def test_the_revisions_differ_by_what_was_changed_in_the_later_one(folders, signed):
    later = revised(folders, signed)
    substantiation_row_withdraw(
        row=later.cases.get(), actor=folders.world.engineer, at=NOW
    )
    folders.case(later, margin=0.05)
    told = {one.what: (one.before, one.after) for one in differences(signed, later)}
    assert set(told) == {"cases: static ultimate 1", "cases: static ultimate 2"}
    assert "0.21" in told["cases: static ultimate 1"][0]
    assert "0.05" in told["cases: static ultimate 2"][1]


ALTERED = {
    "a column": ("repairs_substantiation", "scale_reason = 'no matter'"),
    "a limit": ("repairs_substantiation", "data_due_on = '2030-01-01'"),
    "a margin": (SubstantiationCase._meta.db_table, "margin = 0.9"),
    "a case withdrawn": (SubstantiationCase._meta.db_table, "withdrawn = true"),
    "an answer": (SubstantiationNeighbour._meta.db_table, "answer = 'interacts'"),
    "a gap": (SubstantiationNeighbour._meta.db_table, "gap_mm = 1"),
    "an effect": ("repairs_substantiationeffect", "answer = 'unknown'"),
    "what an effect is": ("repairs_substantiationeffect", "note = 'changed'"),
    "a page": (SubstantiationDocument._meta.db_table, "page = 'p. 9'"),
    "a finding": ("repairs_substantiationfinding", "withdrawn = true"),
}


@pytest.mark.parametrize("what", ALTERED)
def test_what_is_altered_in_the_database_shows_as_changed_after_signing(
    folders, signed, what
):
    (before,) = approvals_verified(signed)
    assert before.agrees
    table, change = ALTERED[what]
    with connection.cursor() as cursor:
        cursor.execute(f"UPDATE {table} SET {change}")
        assert cursor.rowcount > 0
    signed.refresh_from_db()
    (after,) = approvals_verified(signed)
    assert after.changed == ("the record",)
    with pytest.raises(ValidationError, match="changed after signing"):
        folders.sign(signed, "checked")
