"""Link-up against the worked values of the public notes and against limits."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.intensity import through as si
from repairs.analysis.strength import link_up as lu
from repairs.analysis.strength import residual as rs
from repairs.analysis.types import INCH, EdgeLength, GrossStress, HalfLength


def worked(inches: float) -> lu.Ligament:
    """Lead half-length 4 in W 36, next crack 0.02 at a 0.25 in hole (inputs there)."""
    a = HalfLength(4 * INCH)
    lead = lu.LeadCrack(a, si.centre_crack_secant(a, 36 * INCH))
    return lu.Ligament(
        lead, lu.NextCrack(EdgeLength(0.02 * INCH), 2.5308), inches * INCH
    )


@pytest.mark.parametrize(
    ("inches", "swift", "corrected"),
    [(1.0, 28.365, 21.615), (0.5, 20.057, 18.236)],
)
def test_2024_of_the_public_notes(inches, swift, corrected):
    # Sy 42 ksi; recomputed independently from the notes' inputs.
    ligament = worked(inches)
    assert lu.swift_link_up(ligament, 42) == pytest.approx(swift, abs=6e-4)
    found = lu.corrected_link_up(ligament, 42, "2024-T3, A-basis")
    assert found == pytest.approx(corrected, abs=1e-3)


@pytest.mark.parametrize(
    ("inches", "swift", "corrected"),
    [(1.0, 45.25, 18.71), (0.5, 32.00, 16.86), (0.25, 22.62, 13.82)],
)
def test_7075_of_the_public_notes(inches, swift, corrected):
    # Sy 67 ksi.
    ligament = worked(inches)
    assert lu.swift_link_up(ligament, 67) == pytest.approx(swift, abs=6e-3)
    found = lu.corrected_link_up(ligament, 67, "7075, A-basis")
    assert found == pytest.approx(corrected, abs=6e-3)


def test_a_correction_that_would_raise_the_stress_is_refused():
    # Worked value 15.982 at 0.25 in would lie above Swift's 14.183.
    with pytest.raises(InputError, match="would raise"):
        lu.corrected_link_up(worked(0.25), 42, "2024-T3, A-basis")


def test_an_unknown_alloy_is_refused():
    with pytest.raises(InputError, match="7075, B-basis"):
        lu.corrected_link_up(worked(1.0), 42, "6061")


@given(st.floats(1.0, 60.0), st.floats(0.1, 4.0))
def test_the_zones_fill_the_ligament_at_that_stress(length, small):
    # Second route: K of both cracks, Irwin's radius of each, their sum.
    lead = lu.LeadCrack(HalfLength(100.0), 1.05)
    other = lu.NextCrack(EdgeLength(small), 1.8)
    stress = lu.swift_link_up(lu.Ligament(lead, other, length), 300)
    if stress == 300:
        return
    zones = sum(
        (si.intensity(f, stress, c) / 300) ** 2 / (2 * math.pi)
        for f, c in ((1.05, 100.0), (1.8, small))
    )
    assert zones == pytest.approx(length, rel=1e-9)


@given(st.floats(1.0, 50.0), st.floats(1.01, 2.0))
def test_a_shorter_ligament_is_weaker_and_a_larger_zone_too(length, more):
    lead, other = lu.LeadCrack(HalfLength(150.0), 1.0), lu.NextCrack(EdgeLength(1), 2)
    short = lu.Ligament(lead, other, length)
    long = lu.Ligament(lead, other, length * more)
    assert lu.swift_link_up(short, 300) < lu.swift_link_up(long, 300)
    assert lu.swift_link_up(short, 300, 2.0) == pytest.approx(
        lu.swift_link_up(short, 300) / math.sqrt(2)
    )


def test_the_ligament_is_measured_from_tip_to_tip():
    lead, other = lu.LeadCrack(HalfLength(50.0), 1.0), lu.NextCrack(EdgeLength(2), 2)
    found = lu.Ligament.between(lead, other, 70.0, 4.8)
    assert found.length == pytest.approx(70 - 50 - 2 - 2.4)


def test_cracks_that_have_joined_are_refused():
    lead, other = lu.LeadCrack(HalfLength(50.0), 1.0), lu.NextCrack(EdgeLength(2), 2)
    with pytest.raises(OutOfRangeError, match="as one"):
        lu.Ligament.between(lead, other, 54.0, 4.8)


def test_link_up_comes_before_fracture_in_the_tough_sheet_and_after_in_the_other():
    # Notes' comparison, L 1 in: Kc 120 gives 32.81 ksi, Kc 60 gives 16.41.
    a, factor = 4.0, math.sqrt(1 / math.cos(math.pi * 4 / 36))
    ligament = worked(1.0)
    for toughness, fracture, stress, governing in (
        (120, 32.81, 42, lu.LINK_UP),
        (60, 16.41, 67, rs.FRACTURE),
    ):
        alone = rs.fracture_strength(toughness, factor, a)
        assert alone == pytest.approx(fracture, abs=6e-3)
        found = lu.multiple_site_strength(
            lu.swift_link_up(ligament, stress),
            alone,
            rs.net_section_yield(stress, 8.5, 36),
        )
        assert found.governing == governing
        assert len(found.each) == 3


def test_strength_is_never_above_yield():
    lead, other = lu.LeadCrack(HalfLength(2.0), 1.0), lu.NextCrack(EdgeLength(0.1), 2)
    assert lu.swift_link_up(lu.Ligament(lead, other, 90.0), 300) == GrossStress(300)
