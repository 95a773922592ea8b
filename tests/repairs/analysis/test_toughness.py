"""Toughness: validity, thickness forms, refusal of a number from another sheet."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.strength import toughness as to
from repairs.analysis.types import Grade, GrossStress, Sourced


def invented(value: float, unit: str = "-") -> Sourced:
    return Sourced(value, unit, "an invented data sheet", Grade.RECORDED)


ONES = to.ThicknessConstants(invented(1.0), invented(1.0))


@pytest.mark.parametrize(
    ("thickness", "irwin", "exponential"),
    [(0.125, 46.6, 51.1), (0.25, 33.0, 44.2), (0.5, 28.6, 31.4), (1.0, 27.4, 27.0)],
)
def test_thickness_table(thickness, irwin, exponential):
    # KIc 27 ksi*sqrt(in), Sy 70 ksi, A_k = B_k = 1; recomputed independently, to the
    # printed figure.
    assert to.irwin_toughness(27, 70, thickness) == pytest.approx(irwin, abs=0.06)
    found = to.exponential_toughness(27, 70, thickness, ONES)
    assert found == pytest.approx(exponential, abs=0.06)


def test_plane_strain_size_of_a_plate_alloy():
    # 7075-T7351 L-T average 30 ksi*sqrt(in) (MIL-HDBK-5, quoted), Sy 57: 0.69 in.
    assert to.plane_strain_size(30, 57) == pytest.approx(0.6925, abs=1e-3)


@given(st.floats(0.1, 10.0), st.floats(1.01, 2.0))
def test_thicker_is_never_tougher_and_tends_to_plane_strain(thickness, more):
    for form in (
        lambda t: to.irwin_toughness(27, 70, t),
        lambda t: to.exponential_toughness(27, 70, t, ONES),
    ):
        assert 27 <= form(thickness * more) <= form(thickness)
    assert to.irwin_toughness(27, 70, 100.0) == pytest.approx(27, rel=1e-3)


def test_irwins_form_is_refused_for_thin_sheet():
    with pytest.raises(OutOfRangeError, match="measured on this sheet"):
        to.irwin_toughness(27, 70, 0.04)


def test_net_section_must_stay_below_yield():
    assert to.net_section_valid(GrossStress(100.0), 50, 200, 320)
    assert not to.net_section_valid(GrossStress(250.0), 50, 200, 320)


SHEET = to.Toughness(
    invented(4000.0, "MPa*sqrt(mm)"),
    1.0,
    2.0,
    400.0,
    "L-T",
    to.Meaning.APPARENT,
    held_flat=True,
)


def test_a_toughness_is_given_for_the_sheet_it_was_measured_on():
    assert SHEET.of_sheet(1.6, 500.0, "L-T", held_flat=True) == 4000.0


@pytest.mark.parametrize(
    ("thickness", "width", "direction", "held_flat", "word"),
    [
        (2.5, 500.0, "L-T", True, "thickness"),
        (1.6, 300.0, "L-T", True, "width"),
        (1.6, 500.0, "T-L", True, "T-L"),
        (1.6, 500.0, "L-T", False, "buckling"),
    ],
)
def test_a_toughness_of_another_sheet_is_refused(
    thickness, width, direction, held_flat, word
):
    with pytest.raises((InputError, OutOfRangeError), match=word):
        SHEET.of_sheet(thickness, width, direction, held_flat=held_flat)
