"""The loaded fastener hole: two parts of K, bearing, stress at the edge of the hole."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from repairs.analysis.errors import OutOfRangeError
from repairs.analysis.intensity import holes as hi
from repairs.analysis.intensity import loaded_hole as lh
from repairs.analysis.intensity.part_through import PartThrough, corner_crack_at_hole
from repairs.analysis.registry import evaluate
from repairs.analysis.stress_life.severity import (
    LoadedHole,
    hole_kt,
    severity_factor,
)
from repairs.analysis.surroundings import Obstacle, ObstacleKind
from repairs.analysis.types import ROOT_1000, EdgeLength, Outcome, UltimateKept, Use
from tests.outside import outside
from tests.repairs.analysis.cases import FTU, HOLE, around, inputs, recorded, said

METHOD = "loaded-fastener-hole"
LOADED = {
    **HOLE,
    "hole_load": said("loaded"),
    "load_transfer": recorded(0.3, "-"),
    "bearing_strength": recorded(820.0, "MPa"),
    "hole_diameter": recorded(4.83, "mm"),
    "strip_width": recorded(25.4, "mm"),
    "edge_distance": recorded(12.7, "mm"),
}
CRACKED = {
    "hole_cracked": said("yes"),
    "both_sides": said("no"),
    "crack_direction": said("longitudinal"),
    "edge_crack_length": recorded(2.0, "mm"),
    "edge_crack_uncertainty": recorded(0.2, "mm"),
}


def hole(use: Use = Use.NO_KNOWN_CRACK, **changes):
    return evaluate(METHOD, use, inputs(LOADED, **changes))


def found(**changes):
    return hole(Use.FOUND_DAMAGE, **{**CRACKED, **changes})


def at(transfer: float, cracks: int = 1) -> lh.CrackedHole:
    return lh.CrackedHole(4.83, 25.4, cracks, transfer, 25.4)


# K of through cracks


@pytest.mark.parametrize(("transfer", "published"), [(0.308, 11.764), (0.0, 10.842)])
def test_two_cracks_under_a_pin_agree_with_half_superposition(transfer, published):
    # The width terms used by hand were the secants alone.
    case = lh.CrackedHole(2 * 2.4257, 19.05, 2, transfer, 19.05)
    k = lh.through_factor(EdgeLength(1.27), case) * 82.737 * math.sqrt(math.pi * 1.27)
    outside(
        "Two cracks at a fastener hole, bypass and bearing",
        source="Newman 1976 and half of a splitting pair, recomputed by hand",
        given=f"r 2.4257, c 1.27, W 19.05 mm, 82.737 MPa, load transfer {transfer:g}",
        published=published,
        computed=k / ROOT_1000,
        unit="MPa√m",
        rel=3e-3,
        route="another method",
    )


def test_without_transfer_the_factor_is_that_of_an_open_hole():
    c = EdgeLength(2.0)
    assert lh.through_factor(c, at(0.0)) == hi.hole_single(c, 4.83, 25.4)
    assert lh.through_factor(c, at(0.0, 2)) == hi.hole_double(c, 4.83, 25.4)


def test_all_of_the_load_on_the_pin_is_the_handbooks_bearing_case():
    c = EdgeLength(2.0)
    bearing = hi.hole_single_bearing(c, 4.83, 25.4) * 25.4 / 4.83
    assert lh.through_factor(c, at(1.0)) == pytest.approx(bearing)


@settings(max_examples=30, deadline=None)
@given(st.floats(0.05, 5.0), st.floats(0.0, 0.9), st.integers(1, 2))
def test_a_larger_transfer_raises_k_of_a_short_crack(c, transfer, cracks):
    # Up to D/W 0.25 and cracks of a hole's radius the bearing part is the larger one.
    c = EdgeLength(min(c, 2.4))
    less = lh.through_factor(c, at(transfer, cracks))
    assert lh.through_factor(c, at(transfer + 0.1, cracks)) > less


def test_two_short_cracks_join_without_a_step():
    edge = 0.1 * 4.83 / 2
    below = lh.through_factor(EdgeLength(edge * (1 - 1e-6)), at(0.5, 2))
    above = lh.through_factor(EdgeLength(edge * (1 + 1e-6)), at(0.5, 2))
    assert below == pytest.approx(above, rel=1e-5)


def test_a_transfer_above_one_is_refused():
    with pytest.raises(OutOfRangeError, match="Load transfer"):
        lh.through_factor(EdgeLength(1.0), at(1.2))


def test_a_corner_crack_without_transfer_is_newman_and_raju():
    crack = PartThrough(1.0, 1.0, 2.4)
    wide = lh.CrackedHole(4.83, 50.0)
    assert lh.corner_factor(crack, wide, 80) == corner_crack_at_hole(
        crack, 2.415, 25.0, 80
    )
    under = lh.CrackedHole(4.83, 50.0, 1, 0.3, 25.4)
    assert lh.corner_factor(crack, under, 80) > lh.corner_factor(crack, wide, 80)


# Stress at the edge of the hole


@pytest.mark.parametrize(
    ("transfer", "published"), [(0.3081, 4.562), (1.0, 7.555), (0.0, 3.229)]
)
def test_severity_of_the_worked_joint(transfer, published):
    outside(
        "Stress severity factor at a fastener hole",
        source="Jarfall's factor with bearing curves of Niu, fig. 7.7, digitised in "
        "public; Kt of Heywood; alpha and beta 1",
        given=f"W/D 4, t/D 0.336, single shear, load transfer {transfer:g}",
        published=published,
        computed=severity_factor(LoadedHole(1.0, 4.0, 0.336, 4.0, transfer)),
        rel=0.005,
        route="quoted",
    )


@pytest.mark.parametrize("share", [0.1, 0.15, 0.2, 0.25, 0.3])
def test_peak_under_a_pin_agrees_with_the_handbooks_crack_of_no_length(share):
    # K of a vanishing crack is 1.122 times the peak; single shear at t/D 0.2 apart.
    crack = hi.hole_single_bearing(EdgeLength(1e-9), share, 1.0) / 1.122
    peak = severity_factor(LoadedHole(share, 1.0, 0.0, share, 1.0)) / 1.197
    assert peak == pytest.approx(crack, rel=0.06)


@given(st.floats(0.05, 0.5), st.floats(0.0, 2.9), st.floats(0.0, 0.9))
def test_severity_grows_with_transfer_and_with_a_bending_pin(share, slender, transfer):
    def factor(t: float, moved: float) -> float:
        return severity_factor(LoadedHole(share, 1.0, t * share, 1.0, moved))

    assert factor(slender, transfer + 0.1) > factor(slender, transfer) - 1e-12
    assert factor(2.95, transfer) >= factor(slender, transfer)


def test_severity_outside_the_digitised_curves_is_refused():
    with pytest.raises(OutOfRangeError, match="bearing"):
        severity_factor(LoadedHole(1.0, 25.0, 0.3, 25.0, 0.3))


# The method


def test_without_the_load_transfer_nothing_is_computed():
    for result in (hole(load_transfer=None), found(load_transfer=None)):
        assert result.outcome is Outcome.MISSING_INPUT
        missing = {m.name: m for m in result.missing}
        assert "stated input" in missing["load_transfer"].where
        assert result.residual_strength_mpa is None


def test_a_hole_in_a_joint_row_is_covered_once_its_transfer_is_stated():
    lap = Obstacle(ObstacleKind.JOINT, "LAP S-12R", 0, 508, -10, 10)
    result = found(surroundings=around(3.0, (lap,)))
    assert result.outcome is Outcome.COMPUTED
    assert result.threshold is result.repeat is None
    assert [li.base for li in result.lives] == ["from finding"] * 2


def test_net_section_and_bearing_are_both_checked():
    result = hole()
    strengths = {m.mechanism: m.strength for m in result.margins}
    assert strengths["net section, ultimate"] == pytest.approx(FTU * (1 - 4.83 / 25.4))
    assert strengths["bearing at the hole"] == pytest.approx(820 * 4.83 / (0.3 * 25.4))


def test_bearing_without_its_allowable_is_open_and_bars():
    result = found(bearing_strength=None)
    assert result.outcome is Outcome.COMPUTED
    assert "bearing_strength" in [m.name for m in result.missing]
    assert "bearing at the hole" in result.cases_not_checked
    assert result.ultimate_kept is not UltimateKept.YES
    assert any("Bearing" in w for w in result.barred)


def test_bearing_near_an_edge_is_open_though_an_allowable_is_stated():
    result = found(hole_diameter=recorded(9.0, "mm"))
    assert any("from 1.5 on" in w for w in result.barred)


def test_a_wide_strip_leaves_the_stress_life_out_in_words():
    result = hole(
        strip_width=recorded(200.0, "mm"), edge_distance=recorded(100.0, "mm")
    )
    assert result.outcome is Outcome.COMPUTED
    assert result.lives[0].cycles is None
    assert "No stress-life" in result.lives[0].remark
    assert result.threshold is not None


def test_the_stress_life_is_read_at_severity_over_the_net_section():
    result = hole()
    line = next(li for li in result.note if li.symbol == "SSF")
    x = 4.83 / 25.4
    share = 0.7 * hole_kt(4.83, 25.4) / (1 - x)
    assert line.value > share
    assert f"{line.value * (1 - x):.3f}" in line.substitution


@settings(max_examples=12, deadline=None)
@given(st.floats(0.05, 0.3), st.floats(1.1, 1.6))
def test_a_larger_transfer_never_lengthens_a_life(transfer, more):
    less = found(load_transfer=recorded(transfer, "-"))
    larger = found(load_transfer=recorded(transfer * more, "-"))
    assert larger.life_cycles <= less.life_cycles
    assert larger.residual_strength_mpa <= less.residual_strength_mpa


def test_the_threshold_is_from_the_flaw_assumed_at_the_hole():
    result = hole(detectable_length=recorded(4.0, "mm"))
    assert any("assumed corner flaw" in line.formula for line in result.note)
    assert result.threshold.uncapped is not None
    assert result.repeat.uncapped is not None
    assert result.curves
