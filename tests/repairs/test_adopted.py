"""Adopting a value: two people, printed as adopted, and evaluations that use it."""

from __future__ import annotations

import pytest
from django.urls import reverse

from fleet.models import AdoptedValue
from fleet.refusals import Refused
from fleet.services.adopted import CONFIRMED, value_adopt, value_confirm
from repairs.services.evaluation_materials import adopted_values
from tests.factories import NOW, TODAY
from tests.record_rows import world_make

pytestmark = pytest.mark.django_db


@pytest.fixture
def world():
    return world_make()


def adopt(world, value=1.15):
    return value_adopt(
        operator=world.operator,
        quantity="residual_pressure_factor",
        value=value,
        unit="-",
        document="14 CFR 25.571",
        page="(b)",
        revision="",
        actor=world.engineer,
        at=NOW,
        on=TODAY,
    )


def counting(world):
    return adopted_values(world.operator, None)


def test_it_counts_once_a_second_person_has_confirmed_it(world):
    row = adopt(world)
    assert counting(world) == {}
    value_confirm(adopted=row, again=1.15, actor=world.users["signatory"], at=NOW)
    assert counting(world) == {"residual_pressure_factor": row}


def test_whoever_adopted_it_cannot_confirm_it(world):
    with pytest.raises(Refused, match="somebody else"):
        value_confirm(adopted=adopt(world), again=1.15, actor=world.engineer, at=NOW)


def test_another_reading_confirms_nothing(world):
    row, second = adopt(world), world.users["signatory"]
    with pytest.raises(Refused, match=r"Read 1\.51"):
        value_confirm(adopted=row, again=1.51, actor=second, at=NOW)
    assert counting(world) == {}


def test_it_is_confirmed_once(world):
    row, second = adopt(world), world.users["signatory"]
    value_confirm(adopted=row, again=1.15, actor=second, at=NOW)
    with pytest.raises(Refused, match=CONFIRMED):
        value_confirm(adopted=row, again=1.15, actor=second, at=NOW)


def test_the_one_before_counts_until_the_next_is_confirmed(world):
    first, second = adopt(world), world.users["signatory"]
    value_confirm(adopted=first, again=1.15, actor=second, at=NOW)
    later = adopt(world, value=1.2)
    assert later.replaces == first
    assert counting(world)["residual_pressure_factor"] == first
    value_confirm(adopted=later, again=1.2, actor=second, at=NOW)
    assert counting(world)["residual_pressure_factor"] == later


def test_the_pages_lead_from_reading_to_counting(world, client):
    client.force_login(world.engineer)
    sent = {
        "operator": world.operator.pk,
        "quantity": "residual_pressure_factor",
        "value": "1.15",
        "document": "14 CFR 25.571",
        "page": "(b)",
    }
    client.post(reverse("adopted_new"), sent)
    row = AdoptedValue.objects.get(quantity="residual_pressure_factor")
    assert "does not count yet" in client.get(reverse("adopted_list")).content.decode()
    client.force_login(world.users["signatory"])
    address = reverse("adopted_confirm", args=[row.pk])
    assert "1.15" not in client.get(address).content.decode()
    wrong = client.post(address, {"again": "1.51"})
    assert "Read 1.51" in wrong.content.decode()
    client.post(address, {"again": "1.15"})
    assert counting(world) == {"residual_pressure_factor": row}


def test_a_property_needs_its_material(world, client):
    client.force_login(world.engineer)
    sent = {
        "operator": world.operator.pk,
        "quantity": "tension_yield_mpa",
        "value": "310",
        "document": "MIL-HDBK-5J",
        "page": "3-71",
    }
    answer = client.post(reverse("adopted_new"), sent).content.decode()
    assert "Name the material" in answer
    assert 'value="310"' in answer
    assert not AdoptedValue.objects.filter(quantity="tension_yield_mpa").exists()
