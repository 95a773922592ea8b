"""Stiffened sheet: parts against closed forms, the whole against digitised charts.

Charts: crack between stiffeners, stiffening 0.3, fastener pitch 1/12 of the stiffener
pitch, digitised in a public university worksheet (after Poe). Their fasteners' size and
flexibility are not printed, so they are bracketed by rigid and by flexible ones.
"""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import quad

from repairs.analysis.errors import OutOfRangeError
from repairs.analysis.intensity import stiffened_sheet as ss
from repairs.analysis.intensity.stiffened_sheet import CrackCentre, StiffenedSheet
from repairs.analysis.types import INCH, KSI, HalfLength

MODULUS = 10_500 * KSI


def sheet(stiffening: float = 0.3, flexibility: float = 0.0, **changes: float):
    """The worksheet's panel: b 10, t 0.063, p 0.833, fastener 5/16 in."""
    pitch, thickness = 10 * INCH, 0.063 * INCH
    values = {
        "thickness": thickness,
        "modulus": MODULUS,
        "poisson": 0.33,
        "pitch": pitch,
        "stiffener_area": stiffening / (1 - stiffening) * pitch * thickness,
        "stiffener_modulus": MODULUS,
        "fastener_pitch": 0.833 * INCH,
        "fastener_diameter": 5 / 16 * INCH,
        "flexibility": flexibility,
    }
    return StiffenedSheet(**{**values, **changes})


SWIFT = (5 + 0.8 * (0.3125 / 0.063) * 2) / (MODULUS * 5 / 16 * INCH)
"""Flexibility of an aluminium fastener after Swift, both sheets 0.063 in [mm/N]."""


def at(share: float, panel: StiffenedSheet, centre=CrackCentre.MID_BAY):
    return ss.stiffened_crack(panel, HalfLength(share * panel.pitch), centre)


def test_stiffening_of_the_worksheet():
    # Printed: A_st 0.27, b 10, t 0.063 in gives mu = 0.3.
    assert sheet(stiffener_area=0.27 * INCH**2).stiffening == pytest.approx(0.3)


@pytest.mark.parametrize(
    ("share", "factor", "stiffener"),
    [
        (0.1, 0.995, 1.0),
        (0.2, 0.98, 1.05),
        (0.3, 0.94, 1.125),
        (0.4, 0.87, 1.25),
        (0.5, 0.60, 1.6),
        (0.6, 0.41, 1.8),
        (0.7, 0.45, 2.0),
        (0.8, 0.49, 2.15),
        (0.9, 0.52, 2.25),
        (1.0, 0.54, 2.4),
    ],
)
def test_digitised_charts_lie_between_rigid_and_flexible_fasteners(
    share, factor, stiffener
):
    rigid, soft = at(share, sheet()), at(share, sheet(flexibility=SWIFT))
    assert rigid.factor * 0.97 < factor < soft.factor * 1.03
    assert soft.stiffener * 0.97 < stiffener < rigid.stiffener * 1.03


def test_digitised_fastener_loads_lie_between_as_well():
    # L_R on S b t at a/b 0.6, 0.8 and 1.0.
    for share, load in ((0.6, 0.16), (0.8, 0.21), (1.0, 0.24)):
        rigid, soft = at(share, sheet()), at(share, sheet(flexibility=SWIFT))
        unit = sheet().pitch * sheet().thickness
        assert soft.fastener_area / unit < load < rigid.fastener_area / unit * 1.03


def one_place(x: float, y: float) -> ss._Fasteners:
    return ss._Fasteners(np.array([x]), np.array([y]), 1)


@pytest.mark.parametrize("height", [0.2, 0.5, 1.0, 3.0])
def test_forces_on_the_axis_give_the_handbook_k(height):
    # Tada: forces P pulling apart at (0, ±y) give K = P/sqrt(pi a) a/sqrt(a2 + y2)
    # [1 + (1 + nu)/2 y2/(a2 + y2)], plane stress; ours pull together.
    panel = sheet(thickness=1.0)
    found = ss._force_intensity(panel, one_place(0.0, height), np.array([1.0]))
    square = 1 + height**2
    shape = 1 + (1 + 0.33) / 2 * height**2 / square
    expected = -shape / math.sqrt(math.pi * square)
    assert found[0, 0] == pytest.approx(expected, rel=1e-5)


def test_crack_displacement_is_westergaards():
    # v(0, y) that the crack adds under S: (S/E)[2 sqrt(a2 + y2) - (1 + nu) y2 /
    # sqrt(a2 + y2) - (1 - nu) y].
    panel = sheet(thickness=1.0, modulus=1.0)
    for y in (0.3, 1.0, 2.5):
        _, remote = ss._crack_compliance(panel, one_place(0.0, y), HalfLength(1.0))
        root = math.hypot(1.0, y)
        exact = 2 * root - 1.33 * y**2 / root - 0.67 * y
        assert -remote[0] == pytest.approx(exact, rel=1e-5)


def test_kelvin_stress_carries_half_the_force_on_each_side():
    total, _ = quad(
        lambda x: float(ss._kelvin_stress(np.array(x), np.array(1.0), 0.33)),
        -np.inf,
        np.inf,
    )
    assert total == pytest.approx(-0.5, rel=1e-9)


def test_without_stiffeners_there_is_no_effect():
    panel = sheet(stiffening=1e-6)
    assert at(0.7, panel).factor == pytest.approx(1.0, abs=1e-3)


def test_a_larger_model_changes_little(monkeypatch):
    small = at(0.8, sheet())
    monkeypatch.setattr(ss, "OUTSIDE", 9)
    assert at(0.8, sheet()).factor == pytest.approx(small.factor, rel=0.01)


def test_a_broken_stiffener_raises_k_and_an_intact_one_lowers_it():
    for share in (0.2, 0.5, 0.9):
        broken = at(share, sheet(), CrackCentre.BROKEN_STIFFENER)
        intact = at(share, sheet(), CrackCentre.INTACT_STIFFENER)
        assert intact.factor < 1 < broken.factor or share > 0.7
        assert intact.factor < broken.factor


def test_a_broken_stiffener_hands_its_load_to_the_sheet_and_the_next_ones():
    # Two-bay crack: the next stiffeners carry more than with the centre intact.
    broken = at(1.0, sheet(), CrackCentre.BROKEN_STIFFENER)
    intact = at(1.0, sheet(), CrackCentre.INTACT_STIFFENER)
    assert broken.factor > 1.2 * intact.factor


@settings(max_examples=4, deadline=None)
@given(st.floats(0.05, 0.6), st.floats(1.1, 1.5), st.floats(0.1, 1.2))
def test_more_stiffening_lowers_k(stiffening, more, share):
    weak, strong = sheet(stiffening), sheet(min(0.8, stiffening * more))
    assert at(share, strong).factor < at(share, weak).factor


@settings(max_examples=4, deadline=None)
@given(st.floats(0.55, 1.2), st.floats(0.1, 1.0))
def test_softer_fasteners_raise_k_and_unload_the_stiffener(share, part):
    stiff, soft = sheet(flexibility=SWIFT * part / 2), sheet(flexibility=SWIFT * part)
    assert at(share, soft).factor > at(share, stiff).factor
    assert at(share, soft).stiffener < at(share, stiff).stiffener


@pytest.mark.parametrize(
    "call",
    [
        lambda: at(2.3, sheet()),
        lambda: at(0.01, sheet()),
        lambda: at(math.nan, sheet()),
        lambda: sheet(fastener_pitch=1.0),
        lambda: sheet(flexibility=-1.0),
    ],
)
def test_outside_the_model_it_refuses(call):
    with pytest.raises(OutOfRangeError):
        call()
