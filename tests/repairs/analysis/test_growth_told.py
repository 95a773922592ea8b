"""What the note and the curves say of growth through a sequence."""

from __future__ import annotations

import numpy as np
import pytest

from repairs.analysis.growth import blocks, by_cycle, retardation, told
from repairs.analysis.growth import two_directions as td
from repairs.analysis.growth.laws import WalkerLaw
from repairs.analysis.growth.plastic_zone import StressState
from repairs.analysis.intensity.holes import hole_single
from repairs.analysis.note import Note
from repairs.analysis.types import Grade, Reference

TEST = Reference("twelve sheets of the test", Grade.RECORDED)
LAW = WalkerLaw.from_ksi_root_inch(1.67e-9, 3.273, 0.618, TEST)
PATH = td.FlawPath(
    td.corner_at_hole(3.0, 3.0, 100.0), lambda c: hole_single(c, 6.0, 200.0), 3.0, 30.0
)
STRESSES = np.tile([0.0, 90.0, 20.0, 70.0], 50)
STRESSES[1] = 130.0
BLOCK = blocks.CycleBlock.from_turning_points(STRESSES, 50)
MODELS = [
    retardation.Wheeler(1.4, 320.0, StressState.PLANE_STRESS, TEST),
    retardation.Willenborg(95.0, 2.5, 320.0, StressState.PLANE_STRAIN, TEST),
]


def life_of(model: retardation.Retardation | None):
    following = by_cycle.Following(10**6, retardation=model)
    return by_cycle.life_by_cycle(LAW, BLOCK, PATH, (1.27, 1.27), following), following


def test_without_a_model_nothing_of_retardation_is_said():
    life, following = life_of(None)
    note = Note()
    told.write_sequence_life(note, life, following)
    assert [line.symbol for line in note.lines] == ["", "", "N_bt", "N"]
    assert note.lines[-1].value == life.unretarded.flights
    assert note.warnings == ()
    assert [curve.key for curve in told.growth_curves(life, BLOCK)] == ["growth"]


@pytest.mark.parametrize("model", MODELS, ids=lambda model: type(model).__name__)
def test_a_retarded_life_stands_beside_with_its_evidence_and_cautions(model):
    life, following = life_of(model)
    assert life.retarded.flights > life.unretarded.flights
    note = Note()
    told.write_sequence_life(note, life, following)
    beside = note.lines[-1]
    assert (beside.symbol, beside.value) == ("N_ret", life.retarded.flights)
    assert "twelve sheets of the test" in beside.substitution
    assert beside.source == model.reference.source
    assert retardation.BESIDE in note.warnings
    # The life does not rest on the model, whatever the grade of its source.
    assert not note.source_from_memory
    life_line = next(line for line in note.lines if line.symbol == "N")
    assert life_line.value == life.unretarded.flights


def test_curves_run_from_the_flaw_to_the_end_in_flights():
    life, _ = life_of(MODELS[0])
    plain, retarded = told.growth_curves(life, BLOCK)
    for curve, growth in ((plain, life.unretarded), (retarded, life.retarded)):
        assert curve.points[0] == (0, 1.27)
        assert curve.points[-1][1] == growth.length
        assert growth.flights <= curve.points[-1][0] < growth.flights + 1
    assert retarded.key == "growth_retarded"
