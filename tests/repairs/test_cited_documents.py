"""A document that does not hold for the serial is no basis of a decision there.

Published case: the manual repair used "was not effective for that line number" (ASRS
report 807223); caught by a paperwork audit, which is too late.
"""

from __future__ import annotations

import pytest
from django.core.exceptions import ValidationError
from django.urls import reverse

from fleet.models import Document
from fleet.services.applicability import document_applicability_record
from repairs.models import Disposition
from repairs.services.disposition_entry import DispositionEntry
from repairs.services.dispositions import disposition_decide
from tests.factories import NOW, program
from tests.record_rows import FOUND, MANUAL, assessed
from tests.repair_rows import plan

pytestmark = pytest.mark.django_db


def decide(world) -> Disposition:
    return disposition_decide(
        entry=DispositionEntry(
            aircraft=world.aircraft,
            findings=(assessed(world),),
            kind="rectify",
            basis=MANUAL,
            reason="beyond the limits",
            decided_on=FOUND,
        ),
        proof=program(world.assessor),
        actor=world.engineer,
        at=NOW,
    )


def holds(**said) -> None:
    document_applicability_record(
        document=Document.objects.get(reference=MANUAL.reference),
        page="title page",
        actor=None,
        at=NOW,
        **said,
    )


def test_a_decision_is_refused_with_the_range_and_the_serial(world):
    decide(world)
    holds(first_serial="1", last_serial="40")
    with pytest.raises(ValidationError) as refused:
        decide(world)
    said = " ".join(refused.value.messages)
    assert "serial 1 to 40 (title page)" in said
    assert f"serial {world.aircraft.serial_number}" in said
    assert Disposition.objects.count() == 1


def test_its_page_says_what_is_recorded_of_the_basis(client, world):
    row = decide(world)
    client.force_login(world.engineer)
    url = reverse("disposition", args=[row.pk])
    assert "applicability not recorded" in client.get(url).content.decode()
    holds(first_serial=world.aircraft.serial_number)
    assert "applies: serial" in client.get(url).content.decode()


def test_a_repair_is_not_even_planned_on_it(world):
    decide(world)
    holds(last_serial="40")
    with pytest.raises(ValidationError, match="serial first to 40"):
        plan(world)
