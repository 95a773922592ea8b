"""Fitted held against required, layer by layer, and what a difference asks for.

The published case: a doubler of .080 in was fitted where .090 in was required (ASRS
report 972902). That a temper is part of the material is trade practice.
"""

from __future__ import annotations

from dataclasses import dataclass

import pytest
from django.core.exceptions import ValidationError

from fleet.services.people import policy_set
from fleet.units import length_read
from repairs.fitted import differences
from repairs.services.repair_entry import Layer, Required
from tests.factories import BEGAN, NOW
from tests.repair_rows import embody, plan, record


@dataclass(frozen=True)
class Ply:
    number: int = 1
    material_entered: str = "2024-T3 clad"
    thickness_entered: str = ""
    thickness_mm: float | None = None
    material_id: int | None = None


def ply(material: str, thickness: str = "", number: int = 1, key=None) -> Ply:
    size = length_read(thickness, unit="in") if thickness else None
    return Ply(number, material, thickness, size, key)


def said(required: Ply, *fitted: Ply, percent: int = 0) -> str:
    (found,) = differences([required], fitted, percent=percent)
    return found.words


@pytest.mark.parametrize(
    ("required", "fitted", "words"),
    [
        (ply("2024-T3 clad", ".090 in"), ply("2024-T3 clad", ".080 in"),
         "layer 1: .080 in fitted where .090 in required"),
        (ply("2024-T3 clad"), ply("2024-T42 clad"),
         "layer 1: temper T42 fitted where T3 is required"),
        (ply("7075-T6"), ply("2024-T3"),
         "layer 1: 2024-T3 fitted where 7075-T6 is required"),
        (ply("2024-T3 clad", "0.063 in"), ply(" 2024-t3  Clad", "1.6002 mm"), ""),
        (ply("2024-T3 clad", "0.063 in"), ply("2024-T3 clad", "1.6 mm"),
         "layer 1: 1.6 mm fitted where 0.063 in required"),
        (ply("one name", key=7), ply("another name", key=7), ""),
        (ply("2024-T3", "0.063 in"), ply("2024-T3"),
         "layer 1: thickness 0.063 in is required, fitted not recorded"),
        (ply("2024-T3", "0.063 in"), ply("", "0.063 in"),
         "layer 1: 2024-T3 0.063 in is required, fitted not recorded"),
    ],
)  # fmt: skip
def test_material_temper_and_thickness_are_compared(required, fitted, words):
    assert said(required, fitted) == words


def test_a_layer_that_was_not_fitted_is_a_difference():
    assert "fitted not recorded" in said(ply("2024-T3", "0.063 in"))


def test_the_tolerance_is_of_the_required_thickness():
    # 10 % of 0.080 in is 0.008 in: 0.088 in passes, 0.0881 in does not.
    required = ply("2024-T3", "0.080 in")
    assert said(required, ply("2024-T3", "0.088 in"), percent=10) == ""
    assert said(required, ply("2024-T3", "0.0881 in"), percent=10)


REQUIRED = Required("2024-T3 clad", ".090 in", 0.090 * 25.4, page="fig. 202")
FITTED = Layer("2024-T3 clad", ".080 in", 0.080 * 25.4, batch="B-1")
ANSWER = {"reason": "stress report allows it", "document": "ARD-L-0088 p. 3"}


@pytest.mark.django_db
def test_a_difference_is_answered_before_release_and_never_passes_silently(world):
    planned = plan(world, required=(REQUIRED,))
    with pytest.raises(ValidationError, match=r"\.080 in fitted where \.090 in requir"):
        embody(world, planned, required=(REQUIRED,), layers=(FITTED,))
    half = Required("2024-T3 clad", ".090 in", 0.090 * 25.4, reason="it is enough")
    with pytest.raises(ValidationError, match="give the reason, the document"):
        embody(world, planned, required=(half,), layers=(FITTED,))
    whole = Required(
        "2024-T3 clad", ".090 in", 0.090 * 25.4, page="fig. 202",
        answered_by=world.approver, **ANSWER,
    )  # fmt: skip
    repair = embody(world, planned, required=(whole,), layers=(FITTED,))
    row = repair.required.get()
    assert row.difference == "layer 1: .080 in fitted where .090 in required"
    assert row.answer == "stress report allows it (ARD-L-0088 p. 3)"
    assert row.answered_by == world.approver


@pytest.mark.django_db
def test_what_the_plan_required_is_not_left_out_at_the_release(world):
    planned = plan(world, required=(REQUIRED,))
    with pytest.raises(ValidationError, match="ask for 1 layers"):
        embody(world, planned, layers=(FITTED,))


@pytest.mark.django_db
def test_the_tolerance_is_a_policy_row(world):
    policy_set(
        key="fitted_thickness_percent", value=12, unit="percent",
        source="company standard for sheet", grade="practice",
        operator=world.operator, effective_from=BEGAN, at=NOW,
    )  # fmt: skip
    # .080 is 11.1 % below .090.
    assert record(world, required=(REQUIRED,), layers=(FITTED,)).state == "embodied"
