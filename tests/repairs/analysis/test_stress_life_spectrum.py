"""Stress-life left under a flight's cycles, and what its note says."""

from __future__ import annotations

import numpy as np
import pytest

from repairs.analysis.errors import OutOfRangeError
from repairs.analysis.growth.laws import StressCycle
from repairs.analysis.note import Note
from repairs.analysis.stress_life.curves import StressLifeCurve, StressLifeFamily
from repairs.analysis.stress_life.damage_sum import Below, BelowLastTerm, NetCycles
from repairs.analysis.stress_life.left import stress_life_left
from repairs.analysis.stress_life.spectrum import spectrum_life_left
from repairs.analysis.types import KSI, Grade, GrossStress, Sourced
from tests.repairs.analysis.cases import (
    BLEND,
    CURVES,
    FTY,
    SHEET_CURVES,
    inputs,
    recorded,
    said,
)

FLOWN = inputs(BLEND, skin_cycles=recorded(1_000, "cycles"))
FLIGHT = NetCycles.of_maximum(np.array([16, 12, 10]) * KSI, [0, 0.2, 0.35], [1, 10, 30])
CONTINUED = BelowLastTerm(
    Below.SLOPE, Sourced(1e6, "cycles", "longest life tested, invented", Grade.RECORDED)
)
AS_THE_CURVE = BelowLastTerm(Below.NONE)


def left(given=FLOWN, kt=4.0, after=FLIGHT, below=AS_THE_CURVE):
    note = Note()
    return spectrum_life_left(given, note, kt, after, FLIGHT, below=below), note


def test_one_cycle_per_flight_is_the_constant_cycle():
    given, note = inputs(BLEND), Note()
    once = NetCycles.of_maximum([150.0], [0.0], [1.0])
    cycle = StressCycle(GrossStress(150.0), 0.0)
    constant = stress_life_left(given, note, 1.3, cycle, cycle).remaining
    found = spectrum_life_left(
        given, Note(), 1.3, once, once, below=AS_THE_CURVE
    ).remaining
    assert found == pytest.approx(constant, rel=1e-6)


def test_the_worked_example_less_what_was_flown():
    # 234 955 flights at Kt 4, recomputed independently; the flown 1 000 at Kt 1 take
    # nothing, for no cycle of the flight is above the last term there.
    result, note = left()
    assert result.remaining == pytest.approx(234_955, abs=10)
    assert any("30.00 of 41.00 cycles per flight" in w for w in note.warnings)
    assert not note.barred


def test_not_choosing_bars_where_cycles_lie_below_the_last_term():
    result, note = left(below=None)
    assert result.remaining == pytest.approx(234_955, abs=10)
    assert any("barred from approval until it is chosen" in b for b in note.barred)
    # With every cycle on the curve there is nothing to choose.
    high = NetCycles.of_maximum([20 * KSI], [0.0], [1])
    _, quiet = left(after=high, below=None)
    assert not quiet.barred


def test_a_continued_curve_is_shorter_and_written_down():
    plain, _ = left()
    result, note = left(below=CONTINUED)
    assert result.remaining < plain.remaining
    said_so = [line for line in note.lines if "continued" in line.formula]
    assert any("longest life tested" in line.source for line in said_so)


def test_where_nothing_counts_there_is_no_life_in_words():
    low = NetCycles.of_maximum([3 * KSI], [0.0], [500])
    result, note = left(after=low)
    assert result.remaining is None
    assert "not unlimited life" in result.remark
    assert any("not unlimited life" in w for w in note.warnings)


def test_the_note_shows_the_cycles_that_do_most_and_the_sum():
    _, note = left()
    rows = [line for line in note.lines if line.symbol == "n/N"]
    assert [line.value for line in rows] == sorted(
        (line.value for line in rows), reverse=True
    )
    (total,) = [line for line in note.lines if line.symbol == "D_after"]
    assert total.value == pytest.approx(sum(line.value for line in rows))
    assert any("not a chance of one half" in line.formula for line in note.lines)
    assert any(
        "to" in line.substitution for line in note.lines if "band" in line.formula
    )


def test_other_mean_stress_forms_stand_beside_and_change_nothing():
    _, note = left()
    (shown,) = [line for line in note.lines if "for comparison only" in line.formula]
    # The cycle that does most: 16 ksi from zero, amplitude and mean 55.16 MPa; Goodman
    # 55.16 / (1 - 55.16 / 420.58) = 63.5 MPa, by hand.
    assert "Goodman 63.5" in shown.substitution
    assert "Smith-Watson-Topper 78.0" in shown.substitution
    assert shown.value is None


def test_above_yield_it_is_refused():
    hot = NetCycles.of_maximum([FTY * 1.01], [0.0], [1])
    with pytest.raises(OutOfRangeError, match="end at yield"):
        left(after=hot)


def test_above_the_highest_kt_it_is_refused():
    with pytest.raises(OutOfRangeError, match="curves recorded"):
        left(kt=5.01)


def test_life_already_used_and_cladding_count_as_for_one_cycle():
    strong = NetCycles.of_maximum([40 * KSI], [0.0], [1])
    note = Note()
    # 40 ksi, R 0, Kt 1: 403 930 cycles (log 5.6063); half of it flown.
    given = inputs(BLEND, skin_cycles=recorded(201_965, "cycles"))
    result = spectrum_life_left(given, note, 1.0, strong, strong, below=AS_THE_CURVE)
    assert result.remaining == pytest.approx(201_965, rel=1e-3)
    _, barred = left(given=inputs(BLEND, clad=said("yes")))
    assert any("Clad panel on a bare" in b for b in barred.barred)
    halved = inputs(
        BLEND,
        skin_cycles=recorded(0, "cycles"),
        clad=said("yes"),
        clad_life_factor=recorded(2.0, "-"),
    )
    assert left(given=halved)[0].remaining == pytest.approx(234_955 / 2, abs=5)


def test_a_curve_from_memory_bars_the_result():
    rows = [
        StressLifeCurve(*row, KSI, "from memory", Grade.MEMORY) for row in SHEET_CURVES
    ]
    family = StressLifeFamily("2024-T3", "bare sheet", False, tuple(rows))
    _, note = left(given=inputs(BLEND, stress_life=family))
    assert note.source_from_memory
    assert note.barred
    assert not left()[1].source_from_memory


def test_what_is_known_of_the_curves_is_written_down():
    rows = [
        StressLifeCurve(
            *row, KSI, "figure", Grade.QUOTED, 0.38, (-1.0, 0.5), 2.286
        )
        for row in SHEET_CURVES
    ]  # fmt: skip
    family = StressLifeFamily("2024-T3", "bare sheet", False, tuple(rows))
    _, note = left(given=inputs(BLEND, stress_life=family))
    (shown,) = [line for line in note.lines if line.symbol == "curve, Kt 4"]
    assert "R -1 to 0.5 tested" in shown.substitution
    assert "2.29 mm thick" in shown.substitution
    assert "standard error of log N 0.38" in shown.substitution
    assert any("not stacked on the scatter factor" in x.formula for x in note.lines)
    assert not any("tested range" in w for w in note.warnings)
    assert any("tested range" in w for w in left()[1].warnings)
    assert CURVES.curves[0].ratios is None
