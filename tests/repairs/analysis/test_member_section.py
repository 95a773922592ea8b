"""A damaged member: its section left, a failed one, and what the record must say."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from repairs.analysis.assessment import Part, assess
from repairs.analysis.registry import evaluate
from repairs.analysis.types import KSI, Outcome, UltimateKept, Use
from tests.outside import outside
from tests.repairs.analysis.cases import FTU, FTY, inputs, recorded, said

SECTION, FAILED = "damaged-member-section", "failed-member"
MEMBER = {
    "element": said("stringer"),
    "criticality": said("principal"),
    "damage_type": said("corrosion"),
    "load_kind": said("tension"),
    "member_area": recorded(130.0, "mm2"),
    "member_lost_area": recorded(13.0, "mm2"),
    "member_limit_force": recorded(18_000.0, "N"),
    "member_inertia": recorded(9000.0, "mm4"),
    "member_extreme_fibre": recorded(15.0, "mm"),
    "member_length": recorded(508.0, "mm"),
    "member_fixity": recorded(1.5, "-"),
    "member_limit_moment": recorded(60_000.0, "N*mm"),
    "member_limit_shear": recorded(2_000.0, "N"),
    "member_width": recorded(30.0, "mm"),
    "member_thickness": recorded(1.6, "mm"),
    "member_crippling": recorded(240.0, "MPa"),
    "yield_strength": recorded(FTY, "MPa"),
    "tension_strength": recorded(FTU, "MPa"),
    "compression_yield": recorded(280.0, "MPa"),
    "shear_strength": recorded(260.0, "MPa"),
    "modulus": recorded(72_000.0, "MPa"),
    "poisson": recorded(0.33, "-"),
}
SEVERED = {
    **MEMBER,
    "member_failed": said("yes"),
    "neighbour_count": recorded(2, "-"),
    "neighbour_strength": recorded(50_000.0, "N"),
    "neighbour_limit_force": recorded(18_000.0, "N"),
    "dynamic_factor": recorded(1.0, "-"),
}
USE = Use.FOUND_DAMAGE


PRESSED = {
    "load_kind": said("compression"),
    "member_limit_force": recorded(-18_000.0, "N"),
}


def member(**changes):
    return evaluate(SECTION, USE, inputs(MEMBER, **changes))


def severed(**changes):
    return evaluate(FAILED, USE, inputs(SEVERED, **changes))


def by_mechanism(result) -> dict[tuple[str, str], float]:
    return {(m.mechanism, m.case): m.value for m in result.margins}


# The section that is left


def test_tension_is_load_over_the_net_section():
    result = member()
    found = by_mechanism(result)
    stress = 18_000 / 117
    assert result.outcome is Outcome.COMPUTED
    assert found["net section in tension", "1.5 × limit load"] == pytest.approx(
        FTU / (1.5 * stress) - 1
    )
    assert found["net-section yield in tension", "limit load"] == pytest.approx(
        FTY / stress - 1
    )
    assert result.margin_ultimate == pytest.approx(FTU / (1.5 * stress) - 1)


def test_a_column_agrees_with_the_textbook():
    # Euler 1.5 pi^2 E I / (A L^2) and Johnson's parabola on crippling, by hand.
    result = member(**PRESSED)
    euler = 1.5 * math.pi**2 * 72_000 * 9000 / 117 / 508**2
    column = 240 * (1 - 240 / (4 * euler)) if euler > 120 else euler
    outside(
        "Damaged member as a column",
        source="Euler and Johnson, recomputed by hand",
        given="E 72 GPa, I 9000 mm4, A 117 mm2, L 508 mm, c 1.5, Fcc 240 MPa, 27 kN",
        published=column / (27_000 / 117) - 1,
        computed=by_mechanism(result)["column", "1.5 × limit load"],
        rel=1e-9,
        route="closed form",
    )


def test_bending_is_moment_times_fibre_over_inertia():
    result = member(load_kind=said("bending"))
    stress = 60_000 * 15 / 9000
    found = by_mechanism(result)
    assert found["extreme fibre at yield", "limit load"] == pytest.approx(
        280 / stress - 1
    )
    assert found["extreme fibre in compression", "1.5 × limit load"] == pytest.approx(
        240 / (1.5 * stress) - 1
    )


def test_a_web_in_shear_buckles_before_it_shears():
    result = member(load_kind=said("shear"), member_thickness=recorded(0.5, "mm"))
    assert result.governing == "web buckling in shear"


@pytest.mark.parametrize(
    ("kind", "names"),
    [
        ("tension", {"member_limit_force", "member_area", "member_lost_area"}),
        ("compression", {"member_inertia", "member_length", "member_fixity"}),
        ("bending", {"member_limit_moment", "member_extreme_fibre"}),
        ("shear", {"member_limit_shear", "member_width", "member_thickness"}),
    ],
)
def test_what_the_load_kind_needs_is_missing_with_where_to_enter_it(kind, names):
    lacking = dict.fromkeys(names)
    result = member(load_kind=said(kind), **lacking)
    assert result.outcome is Outcome.MISSING_INPUT
    missing = {m.name: m.where for m in result.missing}
    assert names == set(missing)
    assert all("stated input" in where for where in missing.values())
    assert result.margin_ultimate is None


def test_a_kind_of_load_without_checks_is_not_covered():
    for kind in ("torsion", "pressure"):
        result = member(load_kind=said(kind))
        assert result.outcome is Outcome.NOT_COVERED
        assert result.governing == "kind of load the structure carries"


def test_no_load_and_no_section_left_are_refused_in_words():
    assert member(member_limit_force=recorded(0.0, "N")).outcome is Outcome.NOT_COVERED
    gone = member(member_lost_area=recorded(130.0, "mm2"))
    assert gone.outcome is Outcome.NOT_COVERED
    assert "130" in gone.warnings[0]


def test_a_static_result_says_what_it_is():
    for word, stage in (("principal", True), ("unknown", True), ("secondary", False)):
        warnings = " ".join(member(criticality=said(word)).warnings)
        assert "Static only" in warnings
        assert ("stage 1 only" in warnings) is stage
    assert "taken as PSE" in " ".join(member(criticality=None).warnings)


def test_a_static_result_has_neither_life_nor_interval():
    for use in Use:
        result = evaluate(SECTION, use, inputs(MEMBER))
        assert result.lives == ()
        assert result.threshold is result.repeat is None


def test_what_was_not_checked_leaves_ultimate_not_shown():
    result = member()
    assert result.margin_ultimate > 0
    assert result.cases_not_checked == ("tension with the centroid shifted",)
    assert result.ultimate_kept is UltimateKept.NOT_SHOWN
    weak = member(member_limit_force=recorded(60_000.0, "N"))
    assert weak.ultimate_kept is UltimateKept.NO


@settings(max_examples=20, deadline=None)
@given(
    st.sampled_from(["tension", "compression"]),
    st.floats(0.0, 50.0),
    st.floats(1.0, 40.0),
)
def test_more_area_lost_is_weaker(kind, lost, more):
    load = PRESSED if kind == "compression" else {}
    one = member(**load, member_lost_area=recorded(lost, "mm2"))
    two = member(**load, member_lost_area=recorded(lost + more, "mm2"))
    assert two.margin_ultimate < one.margin_ultimate
    assert two.margin_residual < one.margin_residual


# A failed member


def test_two_neighbours_share_the_failed_members_load():
    result = severed()
    # Each carries its own 18 kN and half of 18 kN: 27 kN at limit.
    assert result.margin_residual == pytest.approx(50 / 27 - 1)
    assert result.margin_ultimate == pytest.approx(50 / 40.5 - 1)
    assert "neighbour" in result.governing


def test_one_neighbour_takes_all_of_it():
    result = severed(neighbour_count=recorded(1, "-"))
    assert result.margin_residual == pytest.approx(50 / 36 - 1)
    assert result.ultimate_kept is UltimateKept.NO
    assert any("follow" in w for w in result.warnings)


def test_the_factor_at_failure_is_stated_and_counts():
    assert severed(dynamic_factor=None).outcome is Outcome.MISSING_INPUT
    sudden = severed(dynamic_factor=recorded(1.15, "-"))
    assert sudden.margin_residual == pytest.approx(50 / (27 * 1.15) - 1)


def test_three_neighbours_are_not_this_method():
    result = severed(neighbour_count=recorded(3, "-"))
    assert result.outcome is Outcome.NOT_COVERED


def test_a_failed_member_has_no_section_left():
    values = inputs(SEVERED)
    assert evaluate(SECTION, USE, values).outcome is Outcome.NOT_COVERED
    whole = assess(USE, values)
    parts = {a.result.method: a.part for a in whole.answers}
    assert parts[FAILED] is Part.ANSWERS
    assert parts[SECTION] is Part.NOT_APPLICABLE


def test_a_corroded_member_is_answered_by_its_section_alone():
    whole = assess(USE, inputs(MEMBER, member_failed=said("no")))
    answers = [a.result.method for a in whole.answers if a.part is Part.ANSWERS]
    assert answers == [SECTION]
    assert whole.result.margin_ultimate == member().margin_ultimate
    assert not any("not answered" in w for w in whole.result.warnings)


def test_skin_asks_no_member_method_and_a_fairing_none():
    for element in ("skin", "fairing", "other"):
        asked = assess(USE, inputs(MEMBER, element=said(element))).answers
        assert not {SECTION, FAILED} & {a.result.method for a in asked}


def test_units_of_strength_are_megapascal():
    assert member().residual_strength_mpa in (
        pytest.approx(45 * KSI),
        pytest.approx(61 * KSI),
    )
