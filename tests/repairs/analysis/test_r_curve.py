"""R-curve tangency against the closed form and against a second route."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.optimize import brentq

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.intensity import through as si
from repairs.analysis.strength import r_curve as rc
from repairs.analysis.types import Grade, HalfLength, Reference

INVENTED = Reference("an invented test report", Grade.RECORDED)


def power(scale: float = 100.0, exponent: float = 0.25, end: float = 20.0) -> rc.RCurve:
    return rc.RCurve.power(scale, exponent, end, rc.Extension.EFFECTIVE, INVENTED)


def wide(length: float) -> float:
    return 1.0


@pytest.mark.parametrize(
    ("length", "growth", "toughness", "stress"),
    [
        (0.5, 0.5, 84.09, 47.442),
        (1.0, 1.0, 100.00, 39.894),
        (2.0, 2.0, 118.92, 33.547),
    ],
)
def test_power_curve_in_a_wide_sheet(length, growth, toughness, stress):
    # Tangency by hand: growth 2 n a0/(1 - 2n), K_c = A growth^n.
    found = rc.instability(power(), wide, length, rc.Extension.EFFECTIVE)
    assert found.extension == pytest.approx(growth, rel=1e-4)
    assert found.toughness == pytest.approx(toughness, rel=1e-4)
    assert found.stress == pytest.approx(stress, rel=1e-4)
    assert found.reached
    assert found.remark == ""


@settings(max_examples=20, deadline=None)
@given(st.floats(5.0, 40.0), st.floats(0.1, 0.4))
def test_k_and_the_curve_touch_in_a_strip(half, exponent):
    # Second route: root of the difference of the slopes, finite width 200 mm.
    def factor(a: float) -> float:
        return si.centre_crack_secant(HalfLength(a), 200.0)

    curve = power(1000.0, exponent, 60.0)
    found = rc.instability(curve, factor, half, rc.Extension.EFFECTIVE, 69.9)

    def slopes(more: float) -> float:
        a, step = half + more, 1e-5
        drive = math.log(factor(a + step) ** 2 * (a + step))
        drive -= math.log(factor(a - step) ** 2 * (a - step))
        return exponent / more - drive / (4 * step)

    end = min(60.0, 69.9 - half) - 1e-4
    if slopes(end) > 0:
        assert not found.reached
        return
    more = brentq(slopes, 1e-3, end)
    assert found.extension == pytest.approx(more, rel=1e-3)


def test_data_that_end_too_soon_give_a_lower_bound_and_say_so():
    short = rc.instability(power(end=0.5), wide, 2.0, rc.Extension.EFFECTIVE)
    long = rc.instability(power(), wide, 2.0, rc.Extension.EFFECTIVE)
    assert not short.reached
    assert "lower bound" in short.remark
    assert short.stress < long.stress


def test_measured_points_give_what_the_curve_gave():
    curve = power()
    points = tuple((x, curve.resistance(x)) for x in (0.1, 0.3, 0.6, 1, 2, 4, 8, 16))
    measured = rc.RCurve.measured_points(points, rc.Extension.EFFECTIVE, INVENTED)
    found = rc.instability(measured, wide, 1.0, rc.Extension.EFFECTIVE)
    assert found.stress == pytest.approx(39.894, rel=5e-3)
    assert 0.7 < found.extension < 1.4


def test_stable_growth_rises_to_the_strength():
    found = rc.instability(power(), wide, 1.0, rc.Extension.EFFECTIVE)
    stable = [s for more, s in found.path if more < found.extension]
    assert stable == sorted(stable)
    assert max(s for _, s in found.path) <= found.stress * (1 + 1e-9)


@settings(max_examples=20, deadline=None)
@given(st.floats(0.2, 5.0), st.floats(1.05, 2.0))
def test_longer_is_weaker_yet_its_kc_is_higher(length, more):
    # K_c is not a constant of the sheet: it rises with the length before loading.
    short = rc.instability(power(), wide, length, rc.Extension.EFFECTIVE)
    long = rc.instability(power(), wide, length * more, rc.Extension.EFFECTIVE)
    assert long.stress < short.stress
    assert long.toughness > short.toughness


def test_physical_length_with_an_effective_curve_is_refused():
    with pytest.raises(InputError, match="effective"):
        rc.instability(power(), wide, 1.0, rc.Extension.PHYSICAL)


@pytest.mark.parametrize("exponent", [0.5, 0.0, math.nan])
def test_a_curve_that_cannot_be_touched_is_refused(exponent):
    with pytest.raises(OutOfRangeError):
        power(exponent=exponent)


def test_points_that_do_not_rise_are_refused():
    with pytest.raises(InputError, match="rising"):
        rc.RCurve.measured_points(
            ((1, 5), (2, 4), (3, 6)), rc.Extension.PHYSICAL, INVENTED
        )


def test_no_room_to_grow_is_refused():
    with pytest.raises(OutOfRangeError):
        rc.instability(power(), wide, 10.0, rc.Extension.EFFECTIVE, 9.0)
