"""The folder: drafted, reviewed, signed in order, revised; and what each step needs."""

from __future__ import annotations

import pytest
from django.core.exceptions import ValidationError

from fleet.selectors.verify import problems
from repairs.models import Substantiation
from tests.folder_rows import INSPECTIONS, folders_make
from tests.record_rows import assessed, found

pytestmark = pytest.mark.django_db


@pytest.fixture
def folders(world):
    return folders_make(world)


def test_a_draft_covers_its_findings_and_lists_what_is_within_reach(folders, world):
    near = found(world, place_entered="STA 640+10, 10 in below S-7R")
    far = found(world, place_entered="STA 500, S-3L")
    folder = folders.draft()
    assert folder.number == "S-0001"
    listed = {row.finding: row for row in folder.neighbours.filter(joint=None)}
    assert set(listed) == {near}
    assert far not in listed
    # Their places are 4 and 10 in below the same stringer.
    assert listed[near].gap_mm == pytest.approx(6.0 * 25.4)
    assert list(problems()) == []


def test_everything_is_signed_in_order(folders):
    folder = folders.ready()
    folders.approve(folder, "stage_1")
    assert Substantiation.objects.get().approvals.count() == 3
