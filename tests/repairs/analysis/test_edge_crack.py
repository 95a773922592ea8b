"""A crack from an edge: the worked panels of three alloys, bending, corners."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import solve_ivp

from repairs.analysis.types import INCH, KSI, KSI_ROOT_INCH, Outcome
from tests.outside import outside
from tests.repairs.analysis.cases import LAW, recorded, said
from tests.repairs.analysis.crack_cases import EDGE, found, line, unknown

METHOD = "edge-crack"
TITLE = "Crack from an edge"
NOTES = "edge-cracked panels of three alloys, inputs of public university notes"
ALLOYS = {"7178-T6": (43, 74), "7075-T6": (68, 63), "2024-T3": (144, 42)}


def worked(alloy: str, length: float):
    """A panel 6 in wide; toughness and yield as the notes give them, length in inches.

    Ultimate is set high, so that collapse does not hide what is compared.
    """
    toughness, strength = ALLOYS[alloy]
    return found(
        METHOD,
        EDGE,
        strip_width=recorded(6 * INCH, "mm"),
        crack_length=recorded(length * INCH, "mm"),
        toughness=recorded(toughness * KSI_ROOT_INCH, "MPa*sqrt(mm)"),
        yield_strength=recorded(strength * KSI, "MPa"),
        tension_strength=recorded(2.5 * strength * KSI, "MPa"),
    )


@pytest.mark.parametrize(
    ("alloy", "length", "fracture", "net"),
    [
        ("7178-T6", 0.5, 29.50, 67.83),
        ("7178-T6", 1.0, 18.70, 61.67),
        ("7178-T6", 2.0, 9.61, 49.33),
        ("7075-T6", 0.5, 46.66, 57.75),
        ("7075-T6", 1.0, 29.57, 52.50),
        ("7075-T6", 2.0, 15.19, 42.00),
        ("2024-T3", 0.5, 98.80, 38.50),
        ("2024-T3", 1.0, 62.62, 35.00),
        ("2024-T3", 2.0, 32.17, 28.00),
    ],
)
def test_worked_panels_of_three_alloys(alloy, length, fracture, net):
    each = {
        margin.mechanism: margin.strength / KSI
        for margin in worked(alloy, length).margins
    }
    given = f"{alloy}, W 6 in, crack {length:g} in"
    outside(
        TITLE,
        source=f"{NOTES}; fracture by their polynomial",
        given=f"{given}, fracture",
        published=fracture,
        computed=each["fracture"],
        unit="ksi",
        rel=0.015,
        route="another method",
    )
    outside(
        TITLE,
        source=f"{NOTES}; net section",
        given=f"{given}, net-section yield",
        published=net,
        computed=each["net-section yield"],
        unit="ksi",
        rel=3e-4,
        route="closed form",
    )


def test_tough_sheet_is_governed_by_its_section_and_not_by_k():
    # K alone would be 2.6 times unconservative for 2024 at half an inch.
    result = worked("2024-T3", 0.5)
    assert result.governing == "net-section yield"
    fracture = next(m.strength for m in result.margins if m.mechanism == "fracture")
    assert fracture / result.residual_strength_mpa == pytest.approx(2.57, abs=0.05)
    assert worked("7178-T6", 0.5).governing == "fracture"


def test_with_its_own_ultimate_the_bending_of_a_one_sided_crack_collapses_it():
    result = found(METHOD, EDGE, crack_length=recorded(50.0, "mm"))
    x, flow = 50 / 150, (45 + 61) / 2 * KSI
    each = {m.mechanism: m.strength for m in result.margins}
    exact = flow * (math.sqrt(x * x + (1 - x) ** 2) - x)
    assert each["plastic collapse"] == pytest.approx(exact)
    assert each["plastic collapse"] < each["net-section yield"]


def bent(length: float, **changes):
    crack = recorded(length, "mm")
    return found(METHOD, EDGE, load_kind=said("bending"), crack_length=crack, **changes)


def test_bending_is_on_the_outer_fibre():
    # At a/W 0.3 the quartic fit of public notes gives 1.1219, the Tada form 1.0978.
    assert line(bent(45.0), "F") == pytest.approx(1.0978, abs=1e-4)
    result = bent(45.0)
    assert result.curves[0].y_label == "strength, outer fibre"
    net = next(m.strength for m in result.margins if m.mechanism == "net-section yield")
    assert net == pytest.approx(45 * KSI * 0.7**2)
    tension = found(METHOD, EDGE, crack_length=recorded(45.0, "mm"))
    assert line(tension, "F") == pytest.approx(1.6551, abs=1e-4)


def test_a_short_edge_crack_has_the_free_surface_factor_in_both():
    for result in (bent(0.05), found(METHOD, EDGE, crack_length=recorded(0.05, "mm"))):
        outside(
            TITLE,
            source="Tada, Paris and Irwin: edge of a half-plane, 1.1215",
            given=f"crack 0.05 mm, strip 150 mm, {result.curves[0].y_label}",
            published=1.1215,
            computed=line(result, "F"),
            rel=1e-3,
            route="quoted",
        )


def test_lives_agree_with_an_independent_integration():
    result = found(METHOD, EDGE)

    def slowness(a: float, n: float) -> list[float]:
        x = math.pi * a / 300
        shape = 0.752 + 2.02 * a / 150 + 0.37 * (1 - math.sin(x)) ** 3
        factor = math.sqrt(math.tan(x) / x) * shape / math.cos(x)
        k = 80 * factor * math.sqrt(math.pi * a)
        return [1 / (LAW.coefficient * k**LAW.exponent)]

    for life, mark in zip(result.lives, result.curves[1].marks, strict=True):
        solved = solve_ivp(slowness, (24.0, mark.y), [0.0], rtol=1e-10, atol=1e-6)
        assert life.cycles == pytest.approx(solved.y[0, -1], abs=1)


CORNER = {"crack_origin": said("cut_out_corner")}


def test_a_corner_without_its_local_stress_is_not_covered():
    result = found(METHOD, EDGE, **CORNER)
    assert result.outcome is Outcome.NOT_COVERED
    assert "local stress at the corner of the cut-out" in result.warnings[0]
    assert "stated, with its source" in result.warnings[0]


def test_a_corner_with_it_carries_the_local_stress():
    result = found(METHOD, EDGE, **CORNER, corner_stress_ratio=recorded(1.6, "-"))
    plain = found(METHOD, EDGE)
    assert result.required_residual_mpa == pytest.approx(1.6 * 150)
    assert line(result, "K_max") == pytest.approx(1.6 * line(plain, "K_max"))
    assert result.life_cycles < plain.life_cycles


@pytest.mark.parametrize(
    ("change", "test"),
    [
        ({"element": said("stringer")}, "structural item"),
        ({"pressurised": said("yes")}, "panel is pressurised"),
        ({"crack_origin": said("skin")}, "where the crack starts"),
        ({"load_kind": said("shear")}, "kind of load"),
        ({"load_kind": said("compression")}, "kind of load"),
        ({"strip_width": recorded(25.0, "mm")}, "crack length over strip width"),
    ],
)
def test_where_it_does_not_apply_it_says_why(change, test):
    result = found(METHOD, EDGE, **change)
    assert result.outcome is Outcome.NOT_COVERED
    assert any(test in warning for warning in result.warnings)


@pytest.mark.parametrize("name", ["strip_width", "load_kind", "toughness"])
def test_what_is_missing_is_named(name):
    result = found(METHOD, EDGE, **{name: None})
    assert result.outcome is Outcome.MISSING_INPUT
    assert name in [m.name for m in result.missing]


def test_an_edge_without_known_crack_has_threshold_and_repeat():
    result = unknown(METHOD, EDGE)
    assert line(result, "a₀") == pytest.approx(0.05 * INCH)
    assert result.threshold.uncapped == result.lives[0].cycles // 2
    assert result.repeat is not None


@settings(max_examples=15, deadline=None)
@given(st.floats(2, 60), st.floats(1.02, 1.6), st.sampled_from(["tension", "bending"]))
def test_a_longer_crack_is_never_stronger_and_never_lives_longer(length, more, kind):
    both = [
        found(METHOD, EDGE, load_kind=said(kind), crack_length=recorded(size, "mm"))
        for size in (length, length * more)
    ]
    assert both[1].residual_strength_mpa < both[0].residual_strength_mpa
    assert both[1].life_cycles <= both[0].life_cycles


@settings(max_examples=10, deadline=None)
@given(st.floats(40, 300), st.floats(1.02, 1.6))
def test_a_wider_strip_is_never_weaker(width, more):
    narrow = found(METHOD, EDGE, strip_width=recorded(width, "mm"))
    wide = found(METHOD, EDGE, strip_width=recorded(width * more, "mm"))
    assert wide.residual_strength_mpa > narrow.residual_strength_mpa
    assert wide.life_cycles >= narrow.life_cycles
