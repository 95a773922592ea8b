"""Assumed flaws of the published tables, bases, rounding and caps.

60 000 flights to critical, 20 000 to detectable: threshold 30 000, repeat 20 000 with a
factor of 2 and 13 333 with 3, by hand.
"""

from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.inputs import Inputs
from repairs.analysis.inspection import intervals
from repairs.analysis.inspection.flaws import (
    Cap,
    FlawKind,
    FlawLocation,
    capped,
    continuing_flaw,
    in_service_flaw,
    rogue_flaw,
)
from repairs.analysis.note import Note
from repairs.analysis.types import INCH, Grade, Interval, Sourced
from tests.outside import outside
from tests.repairs.analysis import cases


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
    outside(
        "Flaw assumed in new structure",
        source=flaw.reference.source,
        given=f"{location}, thickness {inches:.3f} in: length of the {kind} crack",
        published=length,
        computed=flaw.length / INCH,
        unit="in",
        rel=1e-9,
        route="quoted",
    )
    assert flaw.reference.grade is Grade.QUOTED
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


def test_every_other_hole_has_a_crack_of_typical_quality():
    flaw = continuing_flaw(1.6)
    outside(
        "Flaw assumed at every other hole",
        source=flaw.reference.source,
        given="radius of the corner crack",
        published=0.005,
        computed=flaw.length / INCH,
        unit="in",
        rel=1e-9,
        route="quoted",
    )
    assert (flaw.kind, flaw.depth) == (FlawKind.CORNER, flaw.length)
    assert flaw.length < rogue_flaw(FlawLocation.HOLE, 1.6).length
    with pytest.raises(OutOfRangeError, match="corner crack"):
        continuing_flaw(0.1)


def test_a_depot_inspection_leaves_a_quarter_inch_beyond_what_covers():
    flaw = in_service_flaw(1.6, 0.0)
    outside(
        "Flaw assumed after a depot inspection",
        source=flaw.reference.source,
        given="penetrant or ultrasonic, uncovered length of the through crack",
        published=0.25,
        computed=flaw.length / INCH,
        unit="in",
        rel=1e-9,
        route="quoted",
    )
    under_head = in_service_flaw(1.6, 3.2)
    assert under_head.length == pytest.approx(3.2 + 6.35)
    assert (under_head.kind, under_head.depth) == (FlawKind.THROUGH, 1.6)


@pytest.mark.parametrize("thickness", [0.0, -1.0, math.nan, math.inf])
def test_what_is_no_thickness_has_no_flaw(thickness):
    for flaw in (
        lambda: rogue_flaw(FlawLocation.HOLE, thickness),
        lambda: continuing_flaw(thickness),
        lambda: in_service_flaw(thickness, 0.0),
    ):
        with pytest.raises(OutOfRangeError, match="Thickness"):
            flaw()


def given_inputs(factor: float, **more: float) -> Inputs:
    numbers = {"detectable_length": (12.7, "mm"), "accumulated_cycles": (0, "cycles")}
    for name, value in more.items():
        numbers[name] = (value, "cycles")
    return Inputs(
        {name: cases.recorded(*pair) for name, pair in numbers.items()}
        | {
            "growth_policy": cases.policy(factor),
            "repeat_policy": cases.policy(factor),
        }
    )


def repeat_of(inputs: Inputs, critical: float = 50.0) -> tuple[Interval | None, Note]:
    """Growth of 40 000 cycles from the detectable size on."""
    note = Note()
    found = intervals.repeat_interval(
        inputs, note, critical, lambda size: size, lambda _: 40_000.0
    )
    return found, note


@pytest.mark.parametrize(("factor", "cycles"), [(2, 20_000), (3, 13_333)])
def test_repeat_runs_from_detectable_to_critical_and_is_rounded_down(factor, cycles):
    found, _ = repeat_of(given_inputs(factor, validity_cycles=90_000))
    assert found == Interval(cycles, cycles, "", intervals.LAST_DONE)


def test_threshold_runs_from_the_assumed_flaw():
    inputs, note = given_inputs(2, validity_cycles=90_000), Note()
    factored = intervals.over_factor(inputs, note, 60_000.0, "growth_policy", "")
    found = intervals.interval(inputs, note, factored.cycles, "since new", "N_thr")
    assert found == Interval(30_000, 30_000, "", "since new")


def test_the_cap_that_cut_is_named_and_counts_from_the_base():
    inputs = given_inputs(2, validity_cycles=25_000)
    note = Note()
    new = intervals.interval(inputs, note, 30_000.0, intervals.SINCE_NEW, "N")
    assert new is not None
    assert (new.cycles, new.cap) == (25_000, "limit of validity")
    flown = Inputs(
        inputs.values | {"accumulated_cycles": cases.recorded(20_000, "cycles")}
    )
    found, _ = repeat_of(flown)
    assert found is not None
    assert (found.cycles, found.uncapped) == (5_000, 20_000)
    assert found.cap == "what is left to limit of validity"


def test_no_interval_counts_from_a_crack_that_was_found():
    with pytest.raises(InputError, match="crack that was found"):
        intervals.interval(
            given_inputs(2), Note(), 5_000.0, intervals.FROM_FINDING, "N"
        )


def test_without_detectable_size_or_factor_there_is_no_repeat():
    bare = Inputs({"repeat_policy": cases.policy(2)})
    found, note = repeat_of(bare)
    assert found is None
    assert intervals.NO_DETECTABLE in note.warnings
    sized = Inputs({"detectable_length": cases.recorded(12.7, "mm")})
    found, note = repeat_of(sized)
    assert found is None
    assert any("No scatter factor" in line for line in note.warnings)


def test_a_detectable_size_beyond_the_critical_gives_no_repeat():
    found, note = repeat_of(given_inputs(2), critical=12.7)
    assert found is None
    assert any("not below the critical" in line for line in note.warnings)


def test_two_bases_are_never_merged():
    new = Interval(30_000, 30_000, "", intervals.SINCE_NEW)
    shorter = Interval(20_000, 30_000, "class", intervals.SINCE_NEW)
    release = Interval(10_000, 10_000, "", "since release of R-1")
    assert intervals.shortest((new, shorter)) == shorter
    nothing = Interval(None, 500, "limit of validity", intervals.SINCE_NEW)
    assert intervals.shortest((new, nothing)) == nothing
    with pytest.raises(InputError, match="since new and since release of R-1"):
        intervals.shortest((new, release))


def test_the_detectable_size_includes_what_the_head_covers():
    visible = Sourced(6.35, "mm", "table", Grade.QUOTED)
    head = Sourced(3.2, "mm", "drawing", Grade.RECORDED)
    found = intervals.detectable_size(visible, head)
    assert found.value == pytest.approx(9.55)
    assert (found.grade, found.source) == (
        Grade.QUOTED,
        "table; covered part: drawing",
    )
    remembered = Sourced(0.0, "mm", "memory", Grade.MEMORY)
    assert intervals.detectable_size(visible, remembered).grade is Grade.MEMORY
    with pytest.raises(OutOfRangeError, match="Covered"):
        intervals.detectable_size(visible, Sourced(-1, "mm", "a slip", Grade.RECORDED))


def test_published_divisors_of_growth_are_chosen_by_name():
    factors = intervals.PUBLISHED_GROWTH_FACTORS
    assert factors["walk-around visual"].factor.value == 5
    assert factors["depot inspection"].factor.value == 2
    half = factors["one half of the growth to critical"]
    assert (half.factor.value, half.factor.grade) == (2, Grade.PRINT)
