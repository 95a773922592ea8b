"""Limit load factors of the rules and loads along the section."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.loads import longitudinal, panel_loads, small_cabin
from repairs.analysis.loads import manoeuvre as man
from repairs.analysis.loads import shell as loads
from repairs.analysis.note import Note
from repairs.analysis.types import Grade, GrossStress
from tests.outside import outside
from tests.repairs.analysis.cases import PSI, SHELL, inputs, recorded, said

C = man.Category
REACH = longitudinal.SpectrumReach(recorded(-0.3, "-"), recorded(1.6, "-"))
TURNED = {
    **SHELL,
    "limit_longitudinal_stress": recorded(80.0, "MPa"),
    "mean_longitudinal_stress": recorded(25.0, "MPa"),
}


@pytest.mark.parametrize(
    ("pounds", "factor"),
    [(4118, 3.80), (10_000, 3.30), (20_000, 2.90), (50_000, 2.50), (60_000, 2.50)],
)
def test_transport_factor_by_weight(pounds, factor):
    outside(
        "Limit manoeuvring load factor, transport",
        source="14 CFR 25.337(b), its formula by hand",
        given=f"{pounds:,} lb",
        published=factor,
        computed=man.manoeuvre_limits(pounds, C.TRANSPORT).positive,
        rel=1e-4,
        route="closed form",
    )


def test_the_bounds_printed_in_the_rule():
    for pounds, bound in ((300_000, 2.5), (1_000, 3.8)):
        found = man.manoeuvre_limits(pounds, C.TRANSPORT)
        outside(
            "Limit manoeuvring load factor, bounds",
            source="14 CFR 25.337(b), text of April 2026",
            given=f"{pounds:,} lb",
            published=bound,
            computed=found.positive,
            rel=1e-12,
        )
        assert found.reference.grade is Grade.PRINT


@pytest.mark.parametrize(
    ("category", "positive", "negative"),
    [(C.NORMAL, 3.8, -1.52), (C.UTILITY, 4.4, -1.76), (C.ACROBATIC, 6.0, -3.0)],
)
def test_small_categories(category, positive, negative):
    found = man.manoeuvre_limits(2_500, category)
    for sign, value, computed in (
        ("positive", positive, found.positive),
        ("negative", negative, found.negative),
    ):
        outside(
            f"Limit manoeuvring load factor, {category}",
            source="Public question bank on 23.337",
            given=f"2,500 lb, {sign}",
            published=value,
            computed=computed,
            rel=1e-9,
            route="quoted",
        )
    with pytest.raises(OutOfRangeError, match="small"):
        man.manoeuvre_limits(20_000, category)


def test_a_heavy_commuter_has_less_than_the_normal_maximum():
    found = man.manoeuvre_limits(19_000, C.NORMAL)
    assert found.positive == pytest.approx(2.1 + 24 / 29)
    assert found.negative == pytest.approx(-0.4 * found.positive)


@given(st.floats(1_000, 1e6), st.floats(1.01, 2))
def test_a_heavier_aeroplane_never_needs_more(pounds, more):
    here = man.manoeuvre_limits(pounds, C.TRANSPORT).positive
    there = man.manoeuvre_limits(pounds * more, C.TRANSPORT).positive
    assert 2.5 <= there <= here <= 3.8


def test_the_factor_of_safety_was_read_in_print():
    assert loads.ULTIMATE_FACTOR.grade is Grade.PRINT
    assert loads.RESIDUAL_PRESSURE_FACTOR.grade is Grade.MEMORY
    assert loads.PROOF_FACTOR_ABOVE_45000_FT.grade is Grade.MEMORY


def test_the_older_fail_safe_rule_has_a_1_15_of_its_own():
    pressures = loads.CabinPressures(5.5 * PSI, 0.2 * PSI, 5.8 * PSI)
    asked = small_cabin.fail_safe_requirement(pressures, 800, 1.0, GrossStress(60.0))
    hoop = 5.7 * PSI * 800
    assert asked.governing[0] == pytest.approx(1.15 * (hoop + 0.75 * 60))
    considered = recorded(1.0, "-")
    slow = small_cabin.fail_safe_requirement(
        pressures, 800, 1.0, GrossStress(60.0), considered
    )
    assert slow.governing[0] == pytest.approx(hoop + 45)
    unknown = small_cabin.fail_safe_requirement(pressures, 800, 1.0, None)
    assert len(unknown.not_checked) == 1
    factors = (small_cabin.DYNAMIC_FACTOR, loads.RESIDUAL_PRESSURE_FACTOR)
    assert factors[0].value == factors[1].value
    assert factors[0].source != factors[1].source


def test_loads_across_a_circumferential_crack_by_hand():
    note = Note()
    found = longitudinal.loads_across("circumferential", inputs(TURNED), note, REACH)
    normal, relief = (p * PSI * 1422.4 / (2 * 1.4) for p in (8.5, 8.6))
    assert found.residual.governing[0] == pytest.approx(normal + 80)
    assert found.ultimate.governing[0] == pytest.approx(1.5 * (relief + 80))
    stresses = {c.title: c.stress for c in found.residual.cases}
    assert min(stresses.values()) == pytest.approx(1.15 * normal)
    assert found.cycle.maximum == pytest.approx(1.6 * 25 + normal)
    assert found.cycle.ratio == pytest.approx(-0.3 * 25 / found.cycle.maximum)
    assert found.not_checked == ()
    assert longitudinal.BENDING_ADDS in note.warnings


def test_pressure_alone_is_refused_around_the_section():
    with pytest.raises(InputError, match="one to two decades"):
        longitudinal.loads_across("circumferential", inputs(TURNED), Note())
    bare = inputs(TURNED, limit_longitudinal_stress=None)
    with pytest.raises(InputError, match="limit_longitudinal_stress"):
        longitudinal.loads_across("circumferential", bare, Note(), REACH)
    assert "mean_longitudinal_stress" in longitudinal.longitudinal_needed(bare)


def test_an_unpressurised_panel_along_the_section():
    quiet = inputs(TURNED, pressurised=said("no"))
    found = longitudinal.longitudinal_loads(quiet, Note(), REACH)
    assert found.residual.governing[0] == 80.0
    assert found.ultimate.governing[0] == 120.0
    assert (found.cycle.maximum, found.cycle.ratio) == (
        pytest.approx(40.0),
        pytest.approx(-0.3 / 1.6),
    )
    assert longitudinal.longitudinal_needed(quiet) == longitudinal.LONGITUDINAL_INPUTS


def test_the_direction_chooses_the_stress():
    along = longitudinal.loads_across("longitudinal", inputs(TURNED), Note())
    assert along == panel_loads.panel_loads(inputs(TURNED), Note())
    around = longitudinal.loads_across("circumferential", inputs(TURNED), Note(), REACH)
    assert around.cycle.maximum != along.cycle.maximum
    with pytest.raises(InputError, match="diagonal"):
        longitudinal.loads_across("diagonal", inputs(TURNED), Note(), REACH)


@given(st.floats(10, 100), st.floats(1, 50))
def test_more_bending_asks_for_more_strength(limit, more):
    def asked(stress: float) -> float:
        changed = inputs(TURNED, limit_longitudinal_stress=recorded(stress, "MPa"))
        found = longitudinal.longitudinal_loads(changed, Note(), REACH)
        return found.ultimate.governing[0]

    assert asked(limit + more) >= asked(limit)


def test_a_spectrum_below_one_g_is_refused():
    with pytest.raises(OutOfRangeError, match="Largest over 1 g"):
        longitudinal.SpectrumReach(recorded(-0.3, "-"), recorded(0.9, "-"))


def test_frames_on_the_record_are_shown_beside_and_relieve_nothing():
    framed = inputs(
        SHELL,
        frame_area=recorded(225.8, "mm2"),
        frame_pitch=recorded(508.0, "mm"),
        stringer_area=recorded(129.0, "mm2"),
        stringer_pitch=recorded(200.0, "mm"),
        poisson=recorded(0.33, "-"),
    )
    note, bare = Note(), Note()
    assert panel_loads.panel_loads(framed, note) == panel_loads.panel_loads(
        inputs(SHELL), bare
    )
    beside = {line.symbol: line.value for line in note.lines}
    whole = 8.5 * PSI * 1422.4 / 1.4
    assert beside["σ_mean"] < 0.85 * whole
    assert beside["σ_mid"] == pytest.approx(whole, rel=0.01)
    assert len(note.lines) == len(bare.lines) + 2
