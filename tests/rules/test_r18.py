"""R18: no tolerance on a directive (unless it says so itself), on airworthiness
limitations and certification maintenance requirements, nor on life limits.

The Dutch authority's leaflet on permitted variations to maintenance programmes (ILT)
excepts these from every variation; read as quoted in public, not in print.
"""

from __future__ import annotations

import pytest

from fleet.models import LifeLimit
from repairs.models import RequirementLimit
from repairs.services.requirement_draft import LimitEntry
from tests import due_rows as make
from tests.repairs.test_inspections import raised, refused, repair

pytestmark = pytest.mark.django_db
PROGRAMME = "AMP 3.2: 10 % of the repeat"


def repeat(source: str = PROGRAMME) -> LimitEntry:
    return LimitEntry("repeat", "250 FC", tolerance="25 FC", tolerance_source=source)


@pytest.mark.parametrize("kind", ["limitation", "repair"])
def test_no_source_grants_one_on_limitations_and_damage_tolerance(kind):
    fixed = repair(make.aircraft())
    for source in (PROGRAMME, "", "the limitation itself"):
        (problem,) = refused(fixed, repeat(source), requirement_class=kind)
        assert "Tolerance 25 FC is not possible on a requirement of class" in problem
    assert not RequirementLimit.objects.exists()


@pytest.mark.parametrize("source", [PROGRAMME, "", "the directive"])
def test_a_programme_grants_none_on_a_directive(source):
    directive = make.document("AD 2024-0099")
    (problem,) = refused(
        repair(make.aircraft()),
        repeat(source),
        requirement_class="directive",
        source_document=directive,
    )
    assert "only where the directive itself grants it" in problem
    assert "AD 2024-0099" in problem


def test_a_directive_grants_it_in_its_own_paragraph():
    requirement = raised(
        repair(make.aircraft()),
        repeat("AD 2024-0099, paragraph (g)(2)"),
        requirement_class="directive",
        source_document=make.document("AD 2024-0099"),
    )
    row = requirement.limits.get()
    assert (row.tolerance, row.tolerance_source[:12]) == (25, "AD 2024-0099")


def test_a_directive_without_its_document_grants_nothing():
    (problem,) = refused(
        repair(make.aircraft()), repeat("paragraph (g)"), requirement_class="directive"
    )
    assert "name the directive" in problem


@pytest.mark.parametrize("kind", ["programme", "operator", "corrosion"])
def test_elsewhere_the_programme_may_grant_one_and_is_named(kind):
    fixed = repair(make.aircraft())
    made = raised(fixed, repeat(), requirement_class=kind)
    assert made.limits.get().tolerance_source == PROGRAMME
    (problem,) = refused(fixed, repeat(""), requirement_class=kind)
    assert "needs the programme that grants it" in problem


def test_a_life_limit_has_no_place_for_a_tolerance():
    columns = {field.name for field in LifeLimit._meta.concrete_fields}
    assert {"value", "document", "effective_from"} <= columns
    assert not {name for name in columns if "toler" in name or "window" in name}
