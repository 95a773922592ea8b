"""A crack round a pressurised skin: never from pressure alone."""

from __future__ import annotations

import json
import math

import pytest
import rainflow as library
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import solve_ivp

from repairs.analysis.loads.flown import Flown, ground_level
from repairs.analysis.spectra.recorded import RecordedSpectrum
from repairs.analysis.spectra.wing_sequence import GROUND_RATIO
from repairs.analysis.surroundings import Obstacle, ObstacleKind
from repairs.analysis.types import KSI, KSI_ROOT_INCH, Outcome
from tests.outside import outside
from tests.repairs.analysis.cases import (
    KC,
    LAW,
    PSI,
    RADIUS,
    THICKNESS,
    around,
    recorded,
    said,
)
from tests.repairs.analysis.crack_cases import ROUND, found, line, unknown
from tests.repairs.analysis.test_recorded_spectrum import wing

METHOD = "pressurised-skin-circumferential-crack"
TITLE = "Circumferential through crack in pressurised skin"
AXIAL = 8.5 * PSI * RADIUS / THICKNESS / 2
TOP, LOW = AXIAL + 1.8 * 25, -0.3 * 25


def slowness(a: float, n: float) -> list[float]:
    """da/dN by Walker for R < 0, written again: only the tension part counts."""
    del n
    k = TOP * math.sqrt(math.pi * a / math.cos(math.pi * a / 2000))
    return [1 / (LAW.coefficient * k**LAW.exponent)]


@pytest.mark.parametrize(
    "name",
    [
        "limit_longitudinal_stress",
        "mean_longitudinal_stress",
        "flight_smallest_share",
        "flight_largest_share",
        "panel_width",
    ],
)
@pytest.mark.parametrize("evaluate", [found, unknown])
def test_pressure_alone_never_gives_a_number_and_what_is_missing_is_named(
    evaluate, name
):
    result = evaluate(METHOD, ROUND, **{name: None})
    assert result.outcome is Outcome.MISSING_INPUT
    assert [m.name for m in result.missing] == [name]
    assert result.residual_strength_mpa is None
    assert result.life_cycles is None


def test_stress_is_half_of_hoop_with_bending_on_top():
    result = found(METHOD, ROUND)
    assert line(result, "σ") == pytest.approx(TOP)
    # Limit bending with pressure governs over 1.15 times the pressure alone.
    assert result.required_residual_mpa == pytest.approx(AXIAL + 80)
    relief = 8.6 * PSI * RADIUS / THICKNESS / 2
    assert result.ultimate_mpa == pytest.approx(1.5 * (relief + 80))


def test_lives_agree_with_an_independent_integration():
    result = found(METHOD, ROUND)
    for life, mark in zip(result.lives, result.curves[1].marks, strict=True):
        end = mark.y / 2
        solved = solve_ivp(slowness, (12.0, end), [0.0], rtol=1e-10, atol=1e-6)
        outside(
            TITLE,
            source="cycle rate integrated by a Runge-Kutta solver",
            given=f"2a 24 to {2 * end:.0f} mm, {LOW:g} to {TOP:.1f} MPa",
            published=float(solved.y[0, -1]),
            computed=life.cycles,
            unit="cycles",
            absolute=1.0,
            route="another method",
        )


def test_critical_length_is_where_fracture_meets_the_requirement():
    # Wide panel: a = (Kc / S)^2 / pi but for the width, which shortens it by 4 %.
    result = found(METHOD, ROUND)
    end = result.curves[1].marks[0].y / 2
    outside(
        TITLE,
        source="K = S√(πa) set equal to Kc, no width correction",
        given=f"Kc {KC / KSI_ROOT_INCH:.0f} ksi√in, ultimate "
        f"{result.ultimate_mpa / KSI:.1f} ksi, panel 2000 mm wide",
        published=(KC / result.ultimate_mpa) ** 2 / math.pi,
        computed=end,
        unit="mm",
        rel=0.05,
        route="closed form",
    )


def test_there_is_no_bulging_and_the_shell_factor_stands_beside():
    result = found(METHOD, ROUND)
    assert not [row for row in result.note if row.symbol == "F_b"]
    assert line(result, "F_sh") > 1
    flat = TOP * math.sqrt(math.pi * 12 / math.cos(math.pi * 12 / 2000))
    assert line(result, "K_max") == pytest.approx(flat / math.sqrt(1000))


@pytest.mark.parametrize(
    ("change", "test"),
    [
        ({"element": said("stringer")}, "structural item"),
        ({"pressurised": said("no")}, "panel is pressurised"),
        ({"crack_direction": said("longitudinal")}, "direction of the crack"),
        ({"crack_origin": said("fastener_hole")}, "where the crack starts"),
        ({"centre_stiffener": said("broken_stiffener")}, "stiffener under the crack"),
        ({"thickness": recorded(80.0, "mm")}, "radius over thickness"),
        ({"mean_longitudinal_stress": recorded(-20.0, "MPa")}, "1 g stress"),
    ],
)
def test_each_applicability_test_refuses_without_a_number(change, test):
    result = found(METHOD, ROUND, **change)
    assert result.outcome is Outcome.NOT_COVERED
    assert any(test in warning for warning in result.warnings)
    assert result.margin_residual is None


def test_it_keeps_its_distance_across_the_skin_as_well():
    # 3 sqrt(R t) = 133.9 mm; the middle is 140 mm away, the tip 128 mm.
    above = Obstacle(ObstacleKind.CUTOUT, "X", 200.0, 300.0, 140.0, 400.0)
    result = found(METHOD, ROUND, surroundings=around(obstacles=(above,)))
    assert result.outcome is Outcome.NOT_COVERED
    assert "128.0 mm to cut-out X" in result.warnings[0]


def test_a_frame_near_by_does_not_end_it():
    inside = found(METHOD, ROUND, surroundings=around(x=20.0))
    assert inside.outcome is Outcome.COMPUTED


def test_without_known_crack_there_are_threshold_and_repeat():
    result = unknown(METHOD, ROUND)
    assert result.threshold.uncapped == result.lives[0].cycles // 2
    assert result.repeat is not None


NO_SHARES = dict.fromkeys(
    ("mean_longitudinal_stress", "flight_smallest_share", "flight_largest_share")
)


def flown(*flights: tuple[float, ...]) -> RecordedSpectrum:
    """A recorded sequence of flights, each from its ground stress on [MPa]."""
    content = {
        "kind": "sequence",
        "points_mpa": [point for flight in flights for point in flight],
        "flights": len(flights),
        "repeats": True,
        "residue": "repeating",
        "clip_above_mpa": None,
        "clip_below_mpa": None,
        "omit_below_range_mpa": None,
    }
    text = json.dumps(content)
    return RecordedSpectrum.read("measured", "report of the test", text, text)


def along(spectrum: RecordedSpectrum, **changes):
    return found(METHOD, ROUND, spectrum=spectrum, **{**NO_SHARES, **changes})


def test_one_cycle_a_flight_bars_approval_and_a_spectrum_lifts_it():
    words = "until the panel's flight-by-flight spectrum is recorded"
    assert any(words in reason for reason in found(METHOD, ROUND).barred)
    assert not any(words in reason for reason in along(flown((-7.5, 45.0))).barred)


def test_a_spectrum_of_ground_and_top_is_the_one_cycle():
    one, other = found(METHOD, ROUND), along(flown((-7.5, 45.0)))
    assert line(other, "σ_p") == pytest.approx(AXIAL)
    assert [life.cycles for life in other.lives] == [
        pytest.approx(life.cycles, rel=1e-6) for life in one.lives
    ]


FLIGHTS = ((-8.0, 40.0, 15.0, 50.0, 20.0, 35.0), (-5.0, 45.0, 12.0, 30.0))


def test_pressure_is_added_in_flight_and_cycles_between_count():
    # The library counts; without starts of flights no minimum is given pressure.
    result = along(flown(*FLIGHTS))
    assert any("does not tell its flights apart" in w for w in result.warnings)
    points = [point for flight in FLIGHTS for point in flight]
    top = points.index(max(points))
    turned = [*points[top:], *points[: top + 1]]
    rate = 0.0
    for span, mean, count, _, _ in library.extract_cycles(turned):
        high, low = mean + span / 2 + AXIAL, mean - span / 2
        rate += count * LAW.rate(high - low, low / high) / len(FLIGHTS)
    single = LAW.rate(1.0, 0.0)
    equivalent = (rate / single) ** (1 / LAW.exponent)
    for life, mark in zip(result.lives, result.curves[1].marks, strict=True):
        end = mark.y / 2
        solved = solve_ivp(
            lambda a, n: [slowness(a, n)[0] * (TOP / equivalent) ** LAW.exponent],
            (12.0, end),
            [0.0],
            rtol=1e-10,
            atol=1e-6,
        )
        outside(
            TITLE,
            source="flight counted by the rainflow library, rate integrated by a "
            "Runge-Kutta solver",
            given=f"two flights with gusts and pressure, 2a 24 to {2 * end:.0f} mm",
            published=float(solved.y[0, -1]),
            computed=life.cycles,
            unit="flights",
            rel=1e-4,
            route="library",
        )
    alone = along(flown(*((flight[0], max(flight)) for flight in FLIGHTS)))
    assert result.life_cycles < alone.life_cycles


def test_where_flights_are_told_apart_only_the_ground_is_without_pressure():
    given_ = wing(mean=25.0, place="wing_lower_surface")
    level = ground_level(given_)
    assert level == pytest.approx(GROUND_RATIO.value * 25)
    plain, pressed = Flown.of(given_), Flown.of(given_, AXIAL)
    before, after = plain.net_cycles, pressed.net_cycles
    gust = before.maximum * before.ratio > level
    assert 0 < gust.sum() < gust.size
    spans = [cycles.maximum * (1 - cycles.ratio) for cycles in (before, after)]
    assert spans[1][gust] == pytest.approx(spans[0][gust])
    assert spans[1][~gust] == pytest.approx(spans[0][~gust] + AXIAL)
    assert after.maximum == pytest.approx(before.maximum + AXIAL)


@settings(max_examples=10, deadline=None)
@given(st.floats(10, 40), st.floats(1.02, 1.4))
def test_more_bending_never_lives_longer(mean, more):
    low = unknown(METHOD, ROUND, mean_longitudinal_stress=recorded(mean, "MPa"))
    high = unknown(METHOD, ROUND, mean_longitudinal_stress=recorded(mean * more, "MPa"))
    assert high.life_cycles < low.life_cycles


@settings(max_examples=10, deadline=None)
@given(st.floats(0.03, 0.08), st.floats(1.02, 1.4))
def test_a_higher_pressure_is_never_better(pressure, more):
    low = found(METHOD, ROUND, normal_pressure=recorded(pressure, "MPa"))
    high = found(METHOD, ROUND, normal_pressure=recorded(pressure * more, "MPa"))
    assert high.margin_residual < low.margin_residual
    assert high.life_cycles <= low.life_cycles
