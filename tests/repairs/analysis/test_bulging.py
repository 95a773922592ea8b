"""Bulging of cracks in cylinders: print, independent recomputation, the other forms."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.intensity import bulging as bl
from repairs.analysis.intensity import through as si
from repairs.analysis.types import (
    INCH,
    KSI,
    KSI_ROOT_INCH,
    Grade,
    GrossStress,
    HalfLength,
    Sourced,
)


def test_worked_cylinder_with_the_selectable_folias_form():
    # p 8.6 psi, R 56, t 0.047, a 1.0 in; recomputed independently: 22.057.
    radius, thickness, a = 56 * INCH, 0.047 * INCH, HalfLength(INCH)
    stress = GrossStress(8.6e-3 * KSI * 56 / 0.047)
    parameter = bl.shell_parameter(a, radius, thickness)
    assert parameter == pytest.approx(0.6164, abs=5e-5)
    beta = bl.bulging_folias(parameter)
    k = si.intensity(beta, stress, a) / KSI_ROOT_INCH
    assert k == pytest.approx(22.057, rel=1e-4)


def test_handbook_bulging_worked_case():
    # Shell parameter 0.5812: beta 1.3128, recomputed independently.
    assert bl.bulging_handbook(0.5812) == pytest.approx(1.3128, abs=5e-5)


@pytest.mark.parametrize(
    ("parameter", "percent"), [(0.25, 5.9), (0.5, 9.5), (1, 10.5), (2, 6.7), (3, 4.2)]
)
def test_handbook_bulging_is_above_folias_by_the_stated_percentage(parameter, percent):
    forms = bl.bulging_handbook(parameter) / bl.bulging_folias(parameter)
    assert 100 * (forms - 1) == pytest.approx(percent, abs=0.06)


@pytest.mark.parametrize(
    ("parameter", "folias", "tada", "erdogan"),
    [
        (0.25, 1.0385, 1.0383, 1.0508),
        (1.0, 1.4972, 1.5000, 1.5241),
        (3.0, 3.3469, 3.3000, 3.2239),
        (5.0, 4.8926, 5.1000, 4.9630),
    ],
)
def test_selectable_forms_table(parameter, folias, tada, erdogan):
    # Recomputed independently from the remembered forms.
    assert bl.bulging_folias(parameter) == pytest.approx(folias, abs=6e-5)
    assert bl.bulging_tada(parameter) == pytest.approx(tada, abs=6e-5)
    assert bl.bulging_erdogan(parameter) == pytest.approx(erdogan, abs=6e-5)


@given(st.floats(0.0, 5.0))
def test_linear_shell_forms_agree_and_the_default_is_not_the_lowest(parameter):
    others = [
        form.factor(parameter)
        for name, form in bl.BULGING_FORMS.items()
        if name != "handbook"
    ]
    assert max(others) < 1.06 * min(others)
    assert bl.bulging_form().factor(parameter) > 0.998 * min(others)


def test_the_default_is_the_form_read_in_print():
    form = bl.bulging_form()
    assert form.name == "handbook"
    assert form.reference.grade is Grade.PRINT
    others = [f for f in bl.BULGING_FORMS.values() if f is not form]
    assert all(f.reference.grade is Grade.MEMORY for f in others)


def test_a_form_nobody_knows_is_refused_with_the_names():
    with pytest.raises(InputError, match="erdogan-kibler"):
        bl.bulging_form("newest")


@given(st.floats(0.0, 5.0))
def test_circumferential_factor_follows_the_other_handbook(gamma):
    # Tada: sqrt(1 + 0.3225 g^2) to g = 1, then 0.9 + 0.25 g; from memory.
    tada = math.sqrt(1 + 0.3225 * gamma**2) if gamma <= 1 else 0.9 + 0.25 * gamma
    assert bl.circumferential_factor(gamma) == pytest.approx(tada, rel=0.035)


def test_circumferential_factor_as_printed():
    # Table 12.29 as quoted, gamma = 1 and 4.
    assert bl.circumferential_factor(1.0) == pytest.approx(1.1501, abs=1e-9)
    assert bl.circumferential_factor(4.0) == pytest.approx(1.9375, abs=1e-9)


@given(st.floats(0.0, 4.9))
def test_a_circumferential_crack_bulges_less_than_a_longitudinal_one(gamma):
    around = bl.circumferential_factor(gamma)
    assert 1 <= around <= bl.bulging_handbook(gamma) + 1e-12
    assert bl.circumferential_factor(gamma + 0.1) > around - 0.013


def test_a_circumferential_crack_needs_a_bending_stress():
    a, pressure = HalfLength(25.0), GrossStress(35.0)
    with pytest.raises(InputError, match="bending stress"):
        bl.circumferential_intensity(
            a, 1880, 1.2, bl.LongitudinalStress(pressure, None)
        )
    bending = Sourced(90.0, "MPa", "an invented load report", Grade.RECORDED)
    found = bl.circumferential_intensity(
        a, 1880, 1.2, bl.LongitudinalStress(pressure, bending)
    )
    gamma = 25 / math.sqrt(1880 * 1.2)
    plain = 125.0 * math.sqrt(math.pi * 25)
    assert found == pytest.approx(plain * (1 + 0.1501 * gamma**1.5), rel=1e-12)


@pytest.mark.parametrize(
    "call",
    [
        lambda: bl.bulging_handbook(5.1),
        lambda: bl.bulging_folias(math.nan),
        lambda: bl.bulging_tada(-0.1),
        lambda: bl.bulging_erdogan(1.0, 0.6),
        lambda: bl.circumferential_factor(5.01),
    ],
)
def test_outside_its_range_a_solution_refuses(call):
    with pytest.raises(OutOfRangeError, match="outside"):
        call()
