"""Mean-stress forms against print and a library, and their traps."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.stress_life import mean_stress as ms
from repairs.analysis.stress_life.curves import StressLifeCurve
from repairs.analysis.types import KSI, Grade, NetStress
from tests.outside import outside

SOLUTIONS = (
    "Shigley's Mechanical Engineering Design, 8th edition, solutions manual, "
    "chapter 6, page 167, in a public copy"
)
LIBRARY = "fatpy, a public fatigue library: values of its own tests"


@pytest.mark.parametrize(
    ("problem", "amplitude", "mean", "ultimate", "published"),
    [
        ("6-28", 272.7, 454.5, 1000, 499.9),
        ("6-29, first loading", 140, 280, 590, 266.5),
        ("6-29, second loading", 275, 75, 590, 315.0),
    ],
)
def test_goodman_in_print(problem, amplitude, mean, ultimate, published):
    outside(
        "Goodman: fully reversed amplitude",
        source=f"{SOLUTIONS}, problem {problem}",
        given=f"amplitude {amplitude}, mean {mean}, F_tu {ultimate} MPa",
        published=published,
        computed=ms.goodman(amplitude, mean, ultimate),
        unit="MPa",
        rel=3e-4,
    )


@pytest.mark.parametrize(
    ("name", "form", "arguments", "published"),
    [
        ("Goodman", ms.goodman, (180, 100, 700), 210.0),
        ("Gerber", ms.gerber, (180, 100, 700), 183.8),
        ("Morrow", ms.morrow, (180, 100, 770), 206.9),
        ("Smith-Watson-Topper", ms.smith_watson_topper, (290, 10), 294.958),
    ],
)
def test_a_library_gives_the_same(name, form, arguments, published):
    outside(
        f"{name}: fully reversed amplitude",
        source=LIBRARY,
        given="amplitude, mean, strength: " + ", ".join(map(str, arguments)) + " MPa",
        published=published,
        computed=form(*arguments),
        unit="MPa",
        rel=4e-4,
        route="library",
    )


def test_soderberg_of_a_library_and_its_closed_form():
    outside(
        "Soderberg: fully reversed amplitude",
        source="ffpack, a public fatigue library: a value of its own tests",
        given="0 to 2 MPa, F_ty 2 MPa",
        published=2.0,
        computed=ms.soderberg(1, 1, 2),
        unit="MPa",
        rel=1e-12,
        route="library",
    )
    # Computed independently: 100 / (1 - 100/300).
    assert ms.soderberg(100, 100, 300) == pytest.approx(150.0)


def test_walker_at_one_half_is_smith_watson_topper_from_zero():
    outside(
        "Walker: fully reversed amplitude",
        source="Smith-Watson-Topper at R = 0 is S_max/√2",
        given="0 to 200 MPa, exponent 1/2",
        published=200 / math.sqrt(2),
        computed=ms.walker(100, 100, 0.5),
        unit="MPa",
        rel=1e-12,
        route="closed form",
    )
    # Computed independently: 200^0.35 100^0.65.
    assert ms.walker(100, 100, 0.65) == pytest.approx(127.46, abs=5e-3)


@given(st.floats(20, 300), st.floats(-0.9, 0.9), st.floats(0.3, 0.8))
def test_a_handbook_curve_is_walker_with_its_own_exponent(maximum, ratio, exponent):
    curve = StressLifeCurve(1.0, 10, 3, exponent, 0, KSI, "a test", Grade.RECORDED)
    amplitude, mean = maximum * (1 - ratio) / 2, maximum * (1 + ratio) / 2
    by_walker = 2**exponent * ms.walker(amplitude, mean, exponent)
    found = curve.equivalent(NetStress(maximum), ratio) * KSI
    assert found == pytest.approx(by_walker, rel=1e-9)


@given(st.floats(1, 200))
def test_without_a_mean_every_form_gives_the_amplitude(amplitude):
    found = ms.compared(amplitude, 0, ms.Strengths(480, 330, 700, 0.56))
    assert len(found) == 6
    for value in found.values():
        assert value == pytest.approx(amplitude)


@given(st.floats(1, 200), st.floats(1, 250), st.floats(0.1, 40))
def test_more_tension_is_never_worth_less(amplitude, mean, more):
    strengths = ms.Strengths(480, 330, 700, 0.56)
    less = ms.compared(amplitude, mean, strengths)
    found = ms.compared(amplitude, mean + more, strengths)
    for name, value in found.items():
        assert value > less[name]
    assert found["Gerber"] < found["Goodman"] < found["Soderberg"]
    assert found["Morrow"] < found["Goodman"]


def test_a_compressive_mean_gets_no_credit():
    assert ms.goodman(100, -150, 480) == 100
    assert ms.gerber(100, -150, 480) == 100
    assert ms.morrow(100, -150, 700) == 100
    assert ms.soderberg(100, -150, 330) == 100


def test_where_nothing_pulls_two_forms_have_no_value():
    for form in (
        lambda: ms.smith_watson_topper(50, -60),
        lambda: ms.walker(50, -50, 0.5),
    ):
        with pytest.raises(InputError, match="nothing pulls"):
            form()
    found = ms.compared(50, -60, ms.Strengths(480, 330, gamma=0.5))
    assert found["Smith-Watson-Topper"] is None
    assert found["Walker"] is None
    assert found["Goodman"] == 50
    assert "Morrow" not in found


def test_what_cannot_be_is_refused():
    with pytest.raises(OutOfRangeError, match="Mean stress"):
        ms.goodman(100, 480, 480)
    with pytest.raises(OutOfRangeError, match="amplitude"):
        ms.gerber(-1, 0, 480)
    with pytest.raises(OutOfRangeError, match="exponent"):
        ms.walker(100, 0, 1.2)
    with pytest.raises(OutOfRangeError, match="Strength"):
        ms.soderberg(100, 0, math.nan)
