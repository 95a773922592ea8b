"""Load sharing by hand: equal springs, a lever, a chain of failures."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.strength import load_paths as lp
from repairs.analysis.types import Grade, Sourced

NONE = Sourced(1.0, "-", "static", Grade.RECORDED)
RULE = Sourced(1.15, "-", "14 CFR 23.571 at amendment 48, quoted", Grade.QUOTED)


def row(*strengths: float, stiffness: float = 1000.0) -> tuple[lp.Member, ...]:
    """Equal members 100 mm apart, called A, B, C ..."""
    return tuple(
        lp.Member("ABCDEFGH"[i], stiffness, 100.0 * i, s)
        for i, s in enumerate(strengths)
    )


def test_three_equal_members_carry_a_third_and_two_a_half():
    loads = lp.shared_loads(row(9, 9, 9), 6.0, 100.0, held_straight=True)
    assert [item.load for item in loads] == pytest.approx([2, 2, 2])
    found = lp.failed_member(row(9, 9, 9), "C", 6.0, 100.0, NONE, held_straight=True)
    assert [item.load for item in found.loads] == pytest.approx([3, 3])
    assert found.holds
    assert found.margin == pytest.approx(2.0)


def test_a_free_section_turns_like_a_lever():
    # Two springs at 0 and 100, load at 75: statics alone gives 1/4 and 3/4.
    loads = lp.shared_loads(row(9, 9), 8.0, 75.0, held_straight=False)
    assert [item.load for item in loads] == pytest.approx([2, 6])


def test_losing_an_outer_member_of_a_free_section_unloads_the_far_one():
    # Members at 0, 100, 200, load at 100; C lost: all of it on B, by statics.
    found = lp.failed_member(row(9, 9, 9), "C", 6.0, 100.0, NONE, held_straight=False)
    assert [item.load for item in found.loads] == pytest.approx([0, 6])


def test_the_rules_dynamic_factor_acts_on_what_is_left():
    found = lp.failed_member(row(9, 9, 9), "A", 6.0, 150.0, RULE, held_straight=True)
    assert [item.load for item in found.loads] == pytest.approx([3.45, 3.45])
    assert found.margin == pytest.approx(9 / 3.45 - 1)


def test_failure_spreads_when_the_next_member_is_too_weak():
    members = row(9, 2.5, 9, 9)
    found = lp.failed_member(members, "A", 9.0, 150.0, NONE, held_straight=True)
    assert not found.holds
    assert found.followed == ("B",)
    assert found.governing == "B"
    assert [item.load for item in found.loads] == pytest.approx([4.5, 4.5])


def test_failure_of_all_leaves_nothing():
    found = lp.failed_member(row(9, 3, 3), "A", 9.0, 50.0, NONE, held_straight=True)
    assert found.followed == ("B", "C")
    assert found.loads == ()
    assert found.margin < 0


@given(
    st.lists(st.floats(100, 5000), min_size=2, max_size=6),
    st.floats(-50, 400),
    st.booleans(),
)
def test_members_balance_the_load_and_its_moment(stiffnesses, place, held):
    members = tuple(
        lp.Member(str(i), k, 70.0 * i, 1e6) for i, k in enumerate(stiffnesses)
    )
    loads = lp.shared_loads(members, 1000.0, place, held_straight=held)
    assert sum(item.load for item in loads) == pytest.approx(1000.0)
    if not held:
        moment = sum(
            item.load * m.place for item, m in zip(loads, members, strict=True)
        )
        assert moment == pytest.approx(1000.0 * place, abs=1e-6 * 1000 * 400)


@given(st.floats(1.0, 2.0), st.floats(1.01, 2.0))
def test_a_stiffer_member_draws_more_load(stiffness, more):
    def share(k: float) -> float:
        members = (lp.Member("A", k, 0, 1e6), lp.Member("B", 1.0, 100, 1e6))
        return lp.shared_loads(members, 10.0, 50, held_straight=True)[0].load

    assert share(stiffness * more) > share(stiffness)


def test_unknown_and_doubled_names_are_refused():
    with pytest.raises(InputError, match="'Z'"):
        lp.failed_member(row(9, 9), "Z", 1.0, 0, NONE, held_straight=True)
    twins = (*row(9), *row(9))
    with pytest.raises(InputError, match="Two members"):
        lp.failed_member(twins, "A", 1.0, 0, NONE, held_straight=True)


def test_a_factor_below_one_is_refused():
    low = Sourced(0.9, "-", "a slip", Grade.RECORDED)
    with pytest.raises(OutOfRangeError, match="Dynamic factor"):
        lp.failed_member(row(9, 9), "A", 1.0, 0, low, held_straight=True)
