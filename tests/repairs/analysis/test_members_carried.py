"""A member as one thing: its load kind chooses the checks, cuts enter by themselves."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.strength import carried, members, panels
from repairs.analysis.strength.buckling import Edges
from repairs.analysis.strength.checks import Demand, MemberMaterial, governing
from repairs.analysis.strength.load_kinds import LoadKind, Mechanism
from repairs.analysis.strength.section import Rectangle, Section, properties
from repairs.analysis.strength.torsion import Wall
from repairs.analysis.types import KSI, Grade, Reference
from tests.repairs.analysis.cases import recorded

HANDBOOK = Reference("MIL-HDBK-5J table 3.7.6.0(b1)", Grade.PRINT)
METAL = MemberMaterial(
    10_500 * KSI, 0.33, 78 * KSI, 70 * KSI, 69 * KSI, 47 * KSI, "A", HANDBOOK
)
ZED = Section(
    (
        Rectangle(-20, 0, 38.4, 40),
        Rectangle(-1.6, 0, 1.6, 38.4),
        Rectangle(-1.6, 18.4, 0, 1.6),
    )
)
COLUMN = members.Column(450.0, 1.5, recorded(260.0, "MPa"))
WEB = panels.Web(450.0, 38.4, 1.6, Edges.SIMPLE)
LOAD = Demand(8_000, 12_000)
MOMENT = Demand(60_000, 90_000)
TWIST = Demand(600, 900)


def member(*cuts: Rectangle, held: bool = False) -> carried.Member:
    left, line = carried.damaged(ZED, cuts)
    return carried.Member(
        left,
        METAL,
        held,
        line,
        0.0,
        column=COLUMN,
        web=WEB,
        pulls_up=True,
        walls=(Wall(38.4, 1.6), Wall(18.4, 1.6), Wall(20, 1.6)),
    )


def worst(which: carried.Member, kind: LoadKind, load: Demand) -> float:
    return governing(carried.checks_of(which, {kind: load}).checks).margin


def test_a_whole_member_has_its_load_on_its_centroid():
    left, line = carried.damaged(ZED, ())
    own = properties(left)
    assert line == (own.x, own.y)
    for kind in (LoadKind.TENSION, LoadKind.COMPRESSION):
        free, held = worst(member(), kind, LOAD), worst(member(held=True), kind, LOAD)
        assert free == pytest.approx(held)


@pytest.mark.parametrize(
    ("kind", "load"),
    [
        (LoadKind.TENSION, LOAD),
        (LoadKind.COMPRESSION, LOAD),
        (LoadKind.BENDING, MOMENT),
    ],
)
@pytest.mark.parametrize(
    "cut",
    [
        Rectangle(-20, 0, 39.6, 40),
        Rectangle(-20, -12, 38.4, 40),
        Rectangle(10, 18.4, 0, 1.6),
    ],
    ids=["flange thinned", "flange trimmed", "other flange trimmed"],
)
def test_damage_never_strengthens_a_member(kind, load, cut):
    # Trimmed on one side an unsymmetric member bends askew; that is in the stresses.
    assert worst(member(cut), kind, load) < worst(member(), kind, load)


def test_one_flange_thinned_by_ten_per_cent_in_tension_by_hand():
    cut = Rectangle(-20, 0, 39.84, 40)
    held = member(cut, held=True)
    area = properties(ZED).area - 20 * 0.16
    assert worst(held, LoadKind.TENSION, LOAD) == pytest.approx(
        min(78 * KSI / (12_000 / area), 70 * KSI / (8_000 / area)) - 1
    )


@given(st.floats(0, 15), st.floats(0.1, 4))
def test_a_deeper_trim_is_weaker_in_compression(trim, more):
    def margin(width: float) -> float:
        return worst(
            member(Rectangle(-21, -20 + width, 38.4, 41)), LoadKind.COMPRESSION, LOAD
        )

    assert margin(trim + more) < margin(trim)


def test_several_kinds_are_checked_each_and_say_so():
    got = carried.checks_of(
        member(),
        {
            LoadKind.COMPRESSION: LOAD,
            LoadKind.BENDING: MOMENT,
            LoadKind.SHEAR: Demand(2_000, 3_000),
            LoadKind.TORSION: TWIST,
        },
    )
    kinds = {check.mechanism for check in got.checks}
    assert {Mechanism.COLUMN, Mechanism.FIBRE_YIELD, Mechanism.SHEAR_BUCKLING} < kinds
    assert "each is checked by itself" in got.warnings[0]
    alone = carried.checks_of(member(), {LoadKind.TENSION: LOAD})
    assert alone.warnings == ()


def test_what_a_kind_needs_and_lacks_is_asked_for():
    left, line = carried.damaged(ZED, ())
    bare = carried.Member(left, METAL, False, line, 0.0)
    for kind, part in (
        (LoadKind.COMPRESSION, "length, ends and crippling"),
        (LoadKind.BENDING, "crippling strength"),
        (LoadKind.SHEAR, "web"),
        (LoadKind.TORSION, "walls"),
    ):
        with pytest.raises(InputError, match=part):
            carried.checks_of(bare, {kind: LOAD})
    with pytest.raises(InputError, match="needs an engineer"):
        carried.checks_of(bare, {LoadKind.PRESSURE: LOAD})


def test_a_panel_in_tension_loses_its_holes():
    skin = panels.Web(500, 100, 1.2, Edges.SIMPLE)
    got = panels.tension_checks(skin, METAL, Demand(20_000, 30_000), 4 * 4.9)
    assert got[0].applied == pytest.approx(30_000 / (1.2 * 80.4))
    assert governing(got).margin == min(check.margin for check in got)
    with pytest.raises(OutOfRangeError, match="net section"):
        panels.tension_checks(skin, METAL, LOAD, 95)
