"""Every method that takes a recorded spectrum: one cycle a flight, and tendencies."""

from __future__ import annotations

import itertools

import pytest

from repairs.analysis.inputs import Value
from repairs.analysis.registry import evaluate
from repairs.analysis.types import Outcome, Result, Use
from tests.repairs.analysis.cases import HOLE, inputs, recorded, said
from tests.repairs.analysis.crack_cases import EDGE, FLAT, OF_PRESSURE
from tests.repairs.analysis.test_hole_row import LEAD
from tests.repairs.analysis.test_loaded_hole import CRACKED as AT_FASTENER
from tests.repairs.analysis.test_loaded_hole import LOADED
from tests.repairs.analysis.test_member_crack import AT_HOLE, CRACKED
from tests.repairs.analysis.test_recorded_spectrum import (
    BLENDED,
    NO_CYCLE,
    sequence,
)
from tests.repairs.analysis.test_stop_drilled import WING

FOUND, NONE_KNOWN = Use.FOUND_DAMAGE, Use.NO_KNOWN_CRACK
PANEL = {
    "pressurised": said("no"),
    "limit_flight_stress": recorded(110.0, "MPa"),
    "panel_length": recorded(500.0, "mm"),
}


def on_wing(base: dict[str, Value], **more: Value) -> dict[str, Value]:
    return {**{k: v for k, v in base.items() if k not in OF_PRESSURE}, **PANEL, **more}


CASES: dict[str, tuple[str, dict[str, Value], Use]] = {
    "crack": ("unpressurised-skin-crack", FLAT, FOUND),
    "skin": ("unpressurised-skin-crack", FLAT, NONE_KNOWN),
    "edge": ("edge-crack", EDGE, FOUND),
    "stop-drilled": ("stop-drilled-crack", WING, FOUND),
    "hole": ("open-or-trimmed-hole", on_wing(HOLE), NONE_KNOWN),
    "loaded hole": ("loaded-fastener-hole", on_wing(LOADED), NONE_KNOWN),
    "cracked hole": ("loaded-fastener-hole", on_wing(LOADED, **AT_FASTENER), FOUND),
    "row": ("row-of-cracked-holes", LEAD, FOUND),
    "blend": ("corrosion-blend-out", BLENDED, NONE_KNOWN),
    "flange": ("cracked-member-flange", CRACKED, FOUND),
    "member hole": ("cracked-member-hole", AT_HOLE, FOUND),
}


def flown(case: str, points: list[float]) -> Result:
    method, base, use = CASES[case]
    given = sequence(points_mpa=points, flights=1)
    return evaluate(method, use, inputs(base, **NO_CYCLE, spectrum=given))


@pytest.mark.parametrize("case", CASES)
def test_a_spectrum_of_one_cycle_is_that_cycle(case):
    method, base, use = CASES[case]
    cycle = {
        "cycle_max_stress": recorded(50.0, "MPa"),
        "cycle_ratio": recorded(0.1, "-"),
    }
    constant = evaluate(method, use, inputs(base, **cycle))
    spectrum = flown(case, [5.0, 50.0])
    assert constant.outcome is Outcome.COMPUTED, constant.warnings
    assert spectrum.outcome is Outcome.COMPUTED, spectrum.warnings
    assert spectrum.margins == constant.margins
    for one, other in zip(spectrum.lives, constant.lives, strict=True):
        assert one.title == other.title
        assert (one.cycles is None) == (other.cycles is None)
        if one.cycles is not None:
            assert one.cycles == pytest.approx(other.cycles, rel=1e-6, abs=1)


@pytest.mark.parametrize("case", CASES)
def test_more_cycles_or_higher_ones_never_lengthen_a_life(case):
    plain = [5.0, 50.0]
    each = (plain, [*plain, 20.0, 40.0], [*plain, 20.0, 40.0, 8.0, 55.0])
    for shorter in zip(*(flown(case, points).lives for points in each), strict=True):
        cycles = [life.cycles for life in shorter]
        for before, after in itertools.pairwise(cycles):
            assert before is None or after is None or after <= before
    first, *_, last = (flown(case, points) for points in each)
    assert last.life_cycles < first.life_cycles
    shown = [line for line in last.note if line.unit == "flights"]
    assert shown
