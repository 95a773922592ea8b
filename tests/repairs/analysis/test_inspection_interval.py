"""Assumed flaws of the published table, rounding and caps."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.inspection.flaws import (
    Cap,
    FlawKind,
    FlawLocation,
    capped,
    rogue_flaw,
)
from repairs.analysis.types import INCH


@pytest.mark.parametrize(
    ("location", "inches", "kind", "length", "depth"),
    [
        (FlawLocation.HOLE, 0.050, FlawKind.THROUGH, 0.05, 0.050),
        (FlawLocation.HOLE, 0.051, FlawKind.CORNER, 0.05, 0.05),
        (FlawLocation.ELSEWHERE, 0.125, FlawKind.THROUGH, 0.25, 0.125),
        (FlawLocation.ELSEWHERE, 0.126, FlawKind.SURFACE, 0.25, 0.125),
    ],
)
def test_jssg_table_at_its_edges(location, inches, kind, length, depth):
    flaw = rogue_flaw(location, inches * INCH)
    assert (flaw.kind, flaw.length, flaw.depth) == (
        kind,
        pytest.approx(length * INCH),
        pytest.approx(depth * INCH),
    )


def test_the_smallest_cap_holds_and_both_numbers_are_kept():
    found = capped(
        12_345.9, "since new", (Cap(9_000, "validity"), Cap(10_000, "class"))
    )
    assert (found.cycles, found.uncapped, found.cap) == (9_000, 12_345, "validity")


def test_a_cap_above_the_calculated_value_changes_nothing():
    found = capped(100.7, "since new", (Cap(9_000, "validity"),))
    assert (found.cycles, found.uncapped, found.cap) == (100, 100, "")


def test_past_the_limit_of_validity_there_is_no_interval():
    found = capped(5_000, "last done", (Cap(-3, "validity"),))
    assert found.cycles is None
    assert found.cap == "validity"


@given(st.floats(0, 1e7))
def test_cycles_are_never_rounded_up(cycles):
    found = capped(cycles, "since new", ())
    assert found.cycles is not None
    assert cycles - 1 < found.cycles <= cycles
