"""Members and panels by load kind: hand values, what governs, damage, the table."""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.note import Note
from repairs.analysis.strength import load_kinds, member_inputs, members, panels
from repairs.analysis.strength.buckling import Edges
from repairs.analysis.strength.checks import (
    Check,
    Demand,
    Level,
    MemberMaterial,
    basis_allowed,
    governing,
)
from repairs.analysis.strength.load_kinds import LoadKind, Mechanism, Structure
from repairs.analysis.strength.section import Rectangle, Section, properties
from repairs.analysis.strength.torsion import Wall
from repairs.analysis.types import KSI, Grade, Reference
from tests.outside import outside
from tests.repairs.analysis.cases import inputs, recorded

# 7075-T6 bare sheet 0.040 to 0.125 in, A values, L: MIL-HDBK-5J table 3.7.6.0(b1).
HANDBOOK = Reference("MIL-HDBK-5J table 3.7.6.0(b1)", Grade.PRINT)
METAL = MemberMaterial(
    10_500 * KSI, 0.33, 78 * KSI, 70 * KSI, 69 * KSI, 47 * KSI, "A", HANDBOOK
)
ANGLE = Section((Rectangle(0, 2, 0, 40), Rectangle(2, 40, 0, 2)))
CENTRE = (properties(ANGLE).x, properties(ANGLE).y)
CRIPPLING = recorded(240.0, "MPa")
COLUMN = members.Column(400.0, 1.0, CRIPPLING)
WEB = panels.Web(300.0, 150.0, 1.6, Edges.SIMPLE)
M = Mechanism


def by_name(checks: tuple[Check, ...]) -> dict[Mechanism, Check]:
    return {check.mechanism: check for check in checks}


def test_tension_of_an_angle_by_hand():
    # 156 mm2 less 2 x 4.9 of a hole = 146.2; 50 kN ultimate, 33.3 kN limit.
    got = by_name(
        members.tension_checks(ANGLE, METAL, Demand(33_333, 50_000), 9.8, None)
    )
    outside(
        "Member in tension, net section: margin",
        source="Force over net area, by hand",
        given="angle 40 x 40 x 2, hole 4.9, 50 kN, F_tu 537.8 MPa",
        published=537.791 / (50_000 / 146.2) - 1,
        computed=got[M.NET_SECTION].margin,
        rel=1e-5,
        route="closed form",
    )
    assert got[M.TENSION_YIELD].applied == pytest.approx(228.0, abs=0.05)
    whole = by_name(members.tension_checks(ANGLE, METAL, Demand(0, 1), 0, CENTRE))
    assert whole[M.SHIFTED_TENSION].applied == pytest.approx(1 / 156)


def test_a_trimmed_leg_bends_a_free_member_in_tension():
    left = ANGLE.without(Rectangle(30, 40, 0, 2))
    load = Demand(20_000, 30_000)
    free = by_name(members.tension_checks(left, METAL, load, 0, CENTRE))
    held = by_name(members.tension_checks(left, METAL, load, 0, None))
    assert free[M.NET_SECTION].margin == held[M.NET_SECTION].margin
    assert free[M.SHIFTED_TENSION].margin < held[M.NET_SECTION].margin - 0.2
    assert governing(tuple(free.values())).mechanism is M.SHIFTED_TENSION


@given(st.floats(1, 30), st.floats(0, 5))
def test_more_cut_away_is_never_stronger_in_tension(cut, more):
    def margin(width: float) -> float:
        left = ANGLE.without(Rectangle(40 - width, 41, -1, 2))
        load = Demand(20_000, 30_000)
        checks = members.tension_checks(left, METAL, load, 0, None)
        return governing(checks).margin

    assert margin(cut + more) <= margin(cut) + 1e-12


def test_compression_of_an_angle_by_hand():
    # Least I of 40 x 40 x 2 is 9951.5 mm4 (independent library), A 156: rho 7.987.
    got = by_name(
        members.compression_checks(ANGLE, METAL, Demand(8_000, 12_000), COLUMN, None)
    )
    slender = 400 / math.sqrt(9951.487 / 156)
    by_hand = 240 * (1 - 240 * slender**2 / (4 * math.pi**2 * 10_500 * KSI))
    outside(
        "Member in compression, column: allowable",
        source="Johnson's parabola by hand, section by sectionproperties 3.10.2",
        given="angle 40 x 40 x 2, 400 mm, pinned, crippling 240, E 72.4 GPa",
        published=by_hand,
        computed=got[M.COLUMN].allowable,
        unit="MPa",
        rel=1e-6,
        route="closed form",
    )
    assert got[M.COLUMN].margin == pytest.approx(by_hand / (12_000 / 156) - 1)
    assert governing(tuple(got.values())).mechanism is M.COLUMN
    # Without a shift the interaction is the column alone.
    free = by_name(
        members.compression_checks(ANGLE, METAL, Demand(8_000, 12_000), COLUMN, CENTRE)
    )
    assert free[M.SHIFTED_COLUMN].margin == pytest.approx(got[M.COLUMN].margin)


def test_the_shift_of_a_trimmed_leg_weakens_a_column():
    left = ANGLE.without(Rectangle(34, 40, 0, 2))
    load = Demand(8_000, 12_000)
    free = by_name(members.compression_checks(left, METAL, load, COLUMN, CENTRE))
    held = by_name(members.compression_checks(left, METAL, load, COLUMN, None))
    assert free[M.SHIFTED_COLUMN].margin < held[M.COLUMN].margin
    assert Mechanism.SHIFTED_COLUMN not in held
    assert governing(tuple(free.values())).mechanism is M.SHIFTED_COLUMN


@given(st.floats(1_000, 20_000), st.floats(1.05, 2))
def test_more_compression_leaves_less(force, more):
    def margin(size: float) -> float:
        load = Demand(size / 1.5, size)
        left = ANGLE.without(Rectangle(34, 40, 0, 2))
        return governing(
            members.compression_checks(left, METAL, load, COLUMN, CENTRE)
        ).margin

    assert margin(force * more) < margin(force)


def test_bending_of_a_rectangle_by_hand():
    # 10 x 40: Z = 2666.7 mm3; 1 kN m ultimate gives 375 MPa.
    bar = Section((Rectangle(0, 10, 0, 40),))
    load = Demand(0.6e6, 1e6)
    got = by_name(
        members.bending_checks(bar, METAL, load, recorded(400, "MPa"), pulls_up=True)
    )
    outside(
        "Member in bending, extreme fibre: margin",
        source="M/Z by hand",
        given="bar 10 x 40, 1 kN m, F_tu 537.8 MPa",
        published=537.791 / 375 - 1,
        computed=got[M.FIBRE_ULTIMATE].margin,
        rel=1e-5,
        route="closed form",
    )
    assert got[M.FIBRE_YIELD].applied == pytest.approx(225)
    assert got[M.FIBRE_YIELD].allowable == pytest.approx(69 * KSI)
    assert got[M.FIBRE_CRIPPLING].margin == pytest.approx(400 / 375 - 1)


def test_plastic_bending_only_with_a_stated_shape_factor():
    bar = Section((Rectangle(0, 10, 0, 40),))
    load = Demand(0.6e6, 1e6)
    stated = recorded(1.5, "-")
    got = by_name(
        members.bending_checks(
            bar, METAL, load, CRIPPLING, pulls_up=True, shape_factor=stated
        )
    )
    # Fully plastic: F_ty b h^2/4 = 1.5 F_ty Z.
    plastic = 70 * KSI * 10 * 40**2 / 4
    assert got[M.FIBRE_ULTIMATE].margin == pytest.approx(plastic / 1e6 - 1)
    with pytest.raises(OutOfRangeError, match="Shape factor"):
        members.bending_checks(
            bar, METAL, load, CRIPPLING, pulls_up=True,
            shape_factor=recorded(2.5, "-"),
        )  # fmt: skip


def test_a_blended_flange_turns_with_the_sign_of_the_moment():
    tee = Section((Rectangle(-20, 20, 38, 40), Rectangle(-1, 1, 0, 38)))
    left = tee.without(Rectangle(-21, 21, 39.5, 41))
    load = Demand(60_000, 100_000)

    def margins(section: Section, up: bool) -> float:
        checks = members.bending_checks(section, METAL, load, CRIPPLING, pulls_up=up)
        return governing(checks).margin

    assert margins(left, True) < margins(tee, True)
    assert margins(left, False) < margins(tee, False)


def test_a_web_in_shear_by_hand():
    # k = 5.35 + 4/4 = 6.35; 0.92299 k E (t/b)^2; shear yield 70/sqrt 3 ksi.
    got = by_name(panels.shear_checks(WEB, METAL, Demand(8_000, 12_000)))
    elastic = 6.35 * math.pi**2 / 12 / (1 - 0.33**2) * 10_500 * KSI * (1.6 / 150) ** 2
    assert elastic < 70 * KSI / math.sqrt(3) / 2
    outside(
        "Web in shear, buckling: margin",
        source="Classical plate formula by hand",
        given="300 x 150 x 1.6 mm, 12 kN over the depth",
        published=elastic / 50 - 1,
        computed=got[M.SHEAR_BUCKLING].margin,
        rel=1e-9,
        route="closed form",
    )
    assert got[M.SHEAR_ULTIMATE].margin == pytest.approx(47 * KSI / 50 - 1)


@given(st.floats(0.8, 3), st.floats(0.5, 0.99))
def test_a_thinner_panel_is_weaker_in_every_check(thickness, share):
    def margins(t: float) -> list[float]:
        web = panels.Web(300, 150, t, Edges.SIMPLE)
        load = Demand(4_000, 6_000)
        rivets = panels.Rivets(25.0, 3.0)
        return [
            *(c.margin for c in panels.shear_checks(web, METAL, load)),
            *(c.margin for c in panels.compression_checks(web, METAL, load, rivets)),
            panels.compression_and_shear(web, METAL, load, load).margin,
        ]

    for thin, thick in zip(margins(thickness * share), margins(thickness), strict=True):
        assert thin < thick


def test_a_panel_in_compression_names_what_governs():
    load = Demand(4_000, 6_000)
    got = panels.compression_checks(WEB, METAL, load, panels.Rivets(25.0, 3.0))
    assert governing(got).mechanism is M.COMPRESSION_BUCKLING
    wide = panels.compression_checks(WEB, METAL, load, panels.Rivets(120.0, 1.0))
    assert governing(wide).mechanism is M.INTER_RIVET
    both = panels.compression_and_shear(WEB, METAL, load, Demand(0, 0))
    assert both.margin == pytest.approx(governing(got).margin)


def test_torsion_of_a_cut_cell():
    walls = (Wall(58.5, 1.5), Wall(38.5, 1.5)) * 2
    load = Demand(1e5, 1.5e5)
    (closed,) = members.torsion_checks(walls, 58.5 * 38.5, METAL, load)
    (cut,) = members.torsion_checks(walls, None, METAL, load)
    assert closed.applied == pytest.approx(1.5e5 / (2 * 58.5 * 38.5 * 1.5))
    assert cut.margin < 0 < closed.margin


def made(structure: Structure, kind: LoadKind) -> set[Mechanism]:
    load = Demand(1_000, 1_500)
    if structure is Structure.PANEL:
        rivets = panels.Rivets(25.0, 3.0)
        found = {
            LoadKind.SHEAR: panels.shear_checks(WEB, METAL, load),
            LoadKind.COMPRESSION: panels.compression_checks(WEB, METAL, load, rivets),
        }[kind]
    else:
        found = {
            LoadKind.TENSION: members.tension_checks(ANGLE, METAL, load, 0, CENTRE),
            LoadKind.COMPRESSION: members.compression_checks(
                ANGLE, METAL, load, COLUMN, CENTRE
            ),
            LoadKind.SHEAR: panels.shear_checks(WEB, METAL, load),
            LoadKind.BENDING: members.bending_checks(
                ANGLE, METAL, load, CRIPPLING, pulls_up=True
            ),
            LoadKind.TORSION: members.torsion_checks((Wall(60, 2),), None, METAL, load),
        }[kind]
    return {check.mechanism for check in found}


@pytest.mark.parametrize(
    ("structure", "kind"),
    [
        key
        for key, needs in load_kinds.CHECKS.items()
        if Mechanism.CRACK_RESIDUAL not in needs
    ],
)
def test_the_table_and_the_functions_ask_the_same(structure, kind):
    assert made(structure, kind) == set(load_kinds.checks_for(structure, kind))


def test_a_load_kind_without_checks_is_refused():
    with pytest.raises(InputError, match="needs an engineer"):
        load_kinds.checks_for(Structure.MEMBER, LoadKind.PRESSURE)
    with pytest.raises(InputError, match="needs an engineer"):
        load_kinds.checks_for(Structure.PANEL, LoadKind.TORSION)


@pytest.mark.parametrize(
    ("left", "mechanism", "margin"),
    [
        (0.90, M.NET_SECTION, 0.215),
        (0.90, M.FIBRE_YIELD, 0.0935),
        (0.90, M.COMPRESSION_BUCKLING, -0.01585),
        (0.95, M.COMPRESSION_BUCKLING, 0.15746),
        (0.80, M.FIBRE_YIELD, -0.136),
        (0.80, M.SHEAR_BUCKLING, -0.3088),
    ],
)
def test_what_a_loss_of_thickness_does_to_a_margin(left, mechanism, margin):
    outside(
        "Margin after loss of thickness",
        source="1.35 t_r^p - 1, p = 1, 2, 3, by hand",
        given=f"margin 0.35, {left:.0%} left, {mechanism}",
        published=margin,
        computed=load_kinds.margin_after_loss(0.35, left, mechanism),
        absolute=1e-4,
        route="closed form",
    )


def test_a_margin_of_a_tenth_is_used_up_by_three_per_cent_in_buckling():
    after = load_kinds.margin_after_loss(0.10, 1 - 0.0313, M.COMPRESSION_BUCKLING)
    assert after == pytest.approx(0, abs=1e-3)
    with pytest.raises(InputError, match="thickness alone"):
        load_kinds.margin_after_loss(0.1, 0.9, M.COLUMN)


def test_b_values_are_not_for_a_single_load_path():
    assert basis_allowed("B", single_load_path=True).met is False
    assert basis_allowed("B", single_load_path=False).met is True
    assert basis_allowed("A", single_load_path=True).met is True
    assert basis_allowed("S", single_load_path=True).met is None


def test_no_load_is_an_infinite_margin_and_no_check_a_refusal():
    checks = members.tension_checks(ANGLE, METAL, Demand(0, 0), 0, None)
    assert governing(checks).margin == math.inf
    with pytest.raises(InputError, match="No check"):
        governing(())
    with pytest.raises(OutOfRangeError):
        Demand(-1, 0)
    with pytest.raises(OutOfRangeError, match="net section"):
        members.tension_checks(ANGLE, METAL, Demand(1, 1), 150, None)


RECORD = {
    "ultimate_factor": recorded(1.5, "-"),
    "member_area": recorded(200, "mm2"),
    "member_lost_area": recorded(20, "mm2"),
    "member_inertia": recorded(18_000, "mm4"),
    "member_extreme_fibre": recorded(15, "mm"),
    "member_length": recorded(500, "mm"),
    "member_fixity": recorded(1.5, "-"),
    "member_crippling": recorded(250, "MPa"),
    "member_width": recorded(120, "mm"),
    "member_thickness": recorded(1.4, "mm"),
    "member_limit_force": recorded(-20_000, "N"),
    "member_limit_moment": recorded(200_000, "N*mm"),
    "member_limit_shear": recorded(5_000, "N"),
    "tension_strength": recorded(480, "MPa"),
    "yield_strength": recorded(400, "MPa"),
    "compression_yield": recorded(390, "MPa"),
    "shear_strength": recorded(290, "MPa"),
    "modulus": recorded(72_000, "MPa"),
    "poisson": recorded(0.33, "-"),
}


@pytest.mark.parametrize("kind", sorted(member_inputs.NEEDED))
def test_a_members_record_gives_checks_of_its_kind(kind):
    note = Note()
    only = {name: RECORD[name] for name in member_inputs.needed(kind)}
    if kind is LoadKind.TENSION:
        only["member_limit_force"] = recorded(20_000, "N")
    found = member_inputs.member_checks(kind, inputs(only), note)
    table = set(load_kinds.checks_for(Structure.MEMBER, kind))
    assert {c.mechanism for c in found} <= table
    assert {Level.LIMIT, Level.ULTIMATE} >= {c.level for c in found}
    assert note.lines[-1].formula.startswith("Governing: ")
    for name in only:
        if name != "ultimate_factor":
            with pytest.raises(InputError, match=name):
                member_inputs.member_checks(kind, inputs(only, **{name: None}), Note())


def test_a_members_record_by_hand():
    found = by_name(
        member_inputs.member_checks(LoadKind.COMPRESSION, inputs(RECORD), Note())
    )
    euler = 1.5 * math.pi**2 * 72_000 * (18_000 / 180) / 500**2
    column = euler if euler < 125 else 250 * (1 - 250 / 4 / euler)
    assert found[M.COLUMN].margin == pytest.approx(column / (30_000 / 180) - 1)
    bent = by_name(
        member_inputs.member_checks(LoadKind.BENDING, inputs(RECORD), Note())
    )
    assert bent[M.FIBRE_ULTIMATE].applied == pytest.approx(3e5 * 15 / 18_000)
    assert bent[M.FIBRE_YIELD].allowable == 390


def test_a_members_record_that_cannot_be():
    with pytest.raises(InputError, match="zero"):
        member_inputs.member_checks(
            LoadKind.SHEAR,
            inputs(RECORD, member_limit_shear=recorded(0, "N")),
            Note(),
        )
    with pytest.raises(InputError, match="Lost area"):
        member_inputs.member_checks(
            LoadKind.COMPRESSION,
            inputs(RECORD, member_lost_area=recorded(200, "mm2")),
            Note(),
        )
    with pytest.raises(OutOfRangeError, match="sign of the force"):
        member_inputs.member_checks(LoadKind.TENSION, inputs(RECORD), Note())
    with pytest.raises(InputError, match="no method on recorded numbers"):
        member_inputs.needed(LoadKind.TORSION)
