"""A nick in an edge: as found a crack, blended a notch; what is refused."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from repairs.analysis.intensity.through import edge_crack_tada
from repairs.analysis.registry import evaluate
from repairs.analysis.stress_life.notches import edge_notch_factor, notch_factor
from repairs.analysis.types import EdgeLength, Grade, Outcome, Sourced, Use
from tests.outside import outside
from tests.repairs.analysis.cases import FTU, SHELL, around, inputs, recorded, said

FOUND, BLENDED = "nick-as-found", "nick-blended"
STRIP = {
    **SHELL,
    "damage_type": said("nick"),
    "pressurised": said("no"),
    "load_kind": said("tension"),
    "nick_at": said("edge"),
    "surroundings": around(bay=None),
    "strip_width": recorded(100.0, "mm"),
    "limit_flight_stress": recorded(120.0, "MPa"),
    "cycle_max_stress": recorded(70.0, "MPa"),
    "cycle_ratio": recorded(0.0, "-"),
    "earlier_depth": recorded(0.0, "mm"),
}
NICK = {
    **STRIP,
    "damage_depth": recorded(1.0, "mm"),
    "damage_depth_uncertainty": recorded(0.2, "mm"),
}
NOTCH = {
    **STRIP,
    "damage_removed": said("yes"),
    "blend_depth": recorded(1.5, "mm"),
    "blend_length": recorded(30.0, "mm"),
    "life_base": said("since rework of F-0001"),
}


def nicked(use: Use = Use.FOUND_DAMAGE, **changes):
    return evaluate(FOUND, use, inputs(NICK, **changes))


def notched(use: Use = Use.NO_KNOWN_CRACK, **changes):
    return evaluate(BLENDED, use, inputs(NOTCH, **changes))


def line(result, symbol: str) -> float:
    return next(li.value for li in result.note if li.symbol == symbol)


def test_notches_against_published_factors():
    outside(
        "Notch at an edge: Kt of a semicircle in a wide strip",
        source="Peterson, chart 2.9, coefficient at r/W = 0, in public code",
        given="depth = radius, shallow against the width",
        published=3.065,
        computed=edge_notch_factor(1.0, 2.0),
        rel=1e-6,
        route="quoted",
    )
    outside(
        "Dish or notch by Inglis: Kt of a semicircular groove",
        source="Peterson, chart 2.9, coefficient at r/W = 0, in public code",
        given="depth = radius",
        published=3.065,
        computed=notch_factor(1.0, 2.0),
        rel=0.025,
        route="quoted",
    )


def peterson_single_u(depth: float, radius: float, width: float) -> float:
    """Peterson, chart 2.9, one U notch, d/r 0.5 to 2, net section; in public code."""
    y, x = depth / radius, depth / width
    root = math.sqrt(y)
    return (
        0.907
        + 2.125 * root
        + 0.023 * y
        + (0.701 - 11.289 * root + 1.708 * y) * x
        + (-0.672 + 18.754 * root - 4.046 * y) * x**2
        + (0.175 - 9.759 * root + 2.365 * y) * x**3
    )


@pytest.mark.parametrize("ratio", [0.5, 0.7, 0.9, 0.999])
def test_the_edge_notch_of_a_wide_strip_by_petersons_chart(ratio):
    # d/rho of an arc: (2 d^2)/(w^2 + d^2); choose w for the ratio wanted.
    w = math.sqrt(2 / ratio - 1)
    outside(
        "Notch at an edge of a wide strip: Kt",
        source="Peterson, chart 2.9, one U notch, coefficient C1, in public code",
        given=f"depth over radius {ratio:g}",
        published=peterson_single_u(1.0, 1 / ratio, 1e9),
        computed=edge_notch_factor(1.0, 2 * w),
        rel=0.02,
        route="quoted",
    )


@pytest.mark.parametrize("share", [0.02, 0.1, 0.2, 0.29])
def test_on_the_section_left_it_is_above_petersons_finite_width(share):
    w = math.sqrt(2 / 0.8 - 1)
    chart = peterson_single_u(1.0, 1 / 0.8, 1 / share)
    assert edge_notch_factor(1.0, 2 * w) >= chart * (1 - 0.005)


def test_a_nick_is_an_edge_crack_of_its_depth_through_the_sheet():
    result = nicked()
    assert result.outcome is Outcome.COMPUTED
    assert line(result, "F") == pytest.approx(edge_crack_tada(EdgeLength(1.2), 100.0))
    deeper = nicked(earlier_depth=recorded(0.8, "mm"))
    assert line(deeper, "F") == pytest.approx(edge_crack_tada(EdgeLength(2.0), 100.0))
    assert result.threshold is result.repeat is None


def test_a_nick_at_a_hole_is_that_holes_crack():
    for result in (nicked(nick_at=said("hole")), notched(nick_at=said("hole"))):
        assert result.outcome is Outcome.NOT_COVERED
        assert "edge distance" in result.warnings[0]
    assert nicked(nick_at=None).outcome is Outcome.MISSING_INPUT


def test_known_nicks_have_no_threshold():
    assert nicked(Use.NO_KNOWN_CRACK).governing == "what the result is for"
    assert nicked(damage_removed=said("yes")).outcome is Outcome.NOT_COVERED


def test_edge_distance_left_is_checked_with_what_is_recorded():
    assert any("not recorded" in w and "Edge distance" in w for w in nicked().warnings)
    short = notched(
        remaining_edge_distance=recorded(5.0, "mm"), hole_diameter=recorded(4.0, "mm")
    )
    assert line(short, "e/D") == pytest.approx(1.25)
    assert any("1.5 hole diameters" in b for b in short.barred)
    enough = notched(
        remaining_edge_distance=recorded(8.0, "mm"), hole_diameter=recorded(4.0, "mm")
    )
    assert not any("1.5 hole diameters" in b for b in enough.barred)


def test_the_blended_nick_has_the_section_left_and_its_bending_bound():
    result = notched()
    assert result.outcome is Outcome.COMPUTED
    assert result.residual_strength_mpa == pytest.approx(FTU * 0.985)
    bound = 1 + 3 * 1.5 / 98.5
    assert line(result, "M_ult,e") == pytest.approx(
        FTU * 0.985 / (180 * bound) - 1, rel=1e-6
    )
    assert line(result, "Kt") == pytest.approx(edge_notch_factor(1.5, 30.0))


def test_growth_starts_with_notch_and_flaw_together():
    published = notched()
    assert line(published, "a₀") == pytest.approx(1.5 + 1.27)
    adopted = Sourced(0.508, "mm", "demo value, invented", Grade.ADOPTED)
    small = notched(assumed_flaw=adopted)
    assert line(small, "a₀") == pytest.approx(2.008)
    assert small.lives[1].cycles > published.lives[1].cycles


def test_repeated_blends_add_up_and_cost_life():
    twice = notched(earlier_depth=recorded(1.0, "mm"))
    once = notched()
    assert line(twice, "Kt") > line(once, "Kt")
    assert twice.lives[1].cycles < once.lives[1].cycles
    assert twice.margin_ultimate < once.margin_ultimate


def test_life_already_used_counts():
    hot = {"cycle_max_stress": recorded(110.0, "MPa")}
    new = notched(**hot, skin_cycles=recorded(0.0, "cycles"))
    old = notched(**hot, skin_cycles=recorded(60_000.0, "cycles"))
    assert old.lives[0].cycles <= new.lives[0].cycles


def test_bending_has_no_notch_solution_here():
    assert notched(load_kind=said("bending")).outcome is Outcome.NOT_COVERED
    assert nicked(load_kind=said("bending")).outcome is Outcome.COMPUTED


@settings(max_examples=10, deadline=None)
@given(st.floats(0.3, 20.0), st.floats(0.2, 10.0))
def test_a_deeper_nick_is_never_better(depth, deeper):
    shallow = nicked(damage_depth=recorded(depth, "mm"))
    deep = nicked(damage_depth=recorded(depth + deeper, "mm"))
    assert deep.margin_residual < shallow.margin_residual
    assert deep.life_cycles <= shallow.life_cycles


@settings(max_examples=10, deadline=None)
@given(st.floats(0.3, 4.0), st.floats(0.2, 4.0))
def test_a_deeper_blend_is_never_better(depth, deeper):
    shallow = notched(blend_depth=recorded(depth, "mm"))
    deep = notched(blend_depth=recorded(depth + deeper, "mm"))
    assert deep.margin_ultimate < shallow.margin_ultimate
    assert deep.lives[1].cycles <= shallow.lives[1].cycles
