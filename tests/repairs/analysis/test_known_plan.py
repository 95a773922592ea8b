"""The plan an evaluation proposes, judged by a recorded detection curve."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from scipy.stats import norm

from repairs.analysis.assessment import assess
from repairs.analysis.inputs import Inputs
from repairs.analysis.inspection.detection import (
    SizeMeaning,
    Study,
    Technique,
    log_normal,
)
from repairs.analysis.inspection.known import Detection, growth_of
from repairs.analysis.types import Grade, Sourced, Use
from tests.repairs.analysis.cases import SHELL, recorded, said

STUDY = Study(
    Technique.PENETRANT,
    SizeMeaning.BEYOND_COVER,
    0.1,
    500.0,
    60,
    "a trial",
    Grade.PRINT,
)


def detection(half_found: float = 3.0, done: float = 1.0) -> Detection:
    curve = log_normal(math.log(half_found), 0.5, STUDY)
    return Detection("penetrant", curve, 0.0, recorded(done, "-"), recorded(0.0, "-"))


CRACK = SHELL | {
    "damage_type": said("crack"),
    "crack_origin": said("skin"),
    "crack_direction": said("longitudinal"),
    "life_base": said("since new"),
    "accumulated_cycles": recorded(10_000, "cycles"),
    "validity_cycles": recorded(90_000, "cycles"),
    "detectable_length": recorded(12.7, "mm"),
}


def judged(**changes: object):
    values = CRACK | {"detection": detection(), **changes}
    return assess(Use.NO_KNOWN_CRACK, Inputs(values)).result


def test_the_chance_is_one_less_the_product_of_misses_along_the_schedule():
    """Against the product written out by hand from the same growth curve."""
    result = judged()
    growth = growth_of(result, None)
    assert growth is not None
    looks = np.arange(result.threshold_cycles, growth.life, result.repeat_cycles)
    sizes = np.interp(looks, growth.cycles, growth.size)
    missed = np.prod(1 - norm.cdf((np.log(sizes) - math.log(3.0)) / 0.5))
    assert result.plan.scheduled == pytest.approx(1 - missed, abs=1e-9)
    assert growth.life == pytest.approx(result.life_cycles, abs=1.5)


def test_the_plan_stands_in_the_note_and_on_a_curve_of_its_own():
    result = judged()
    numbers = [line.number for line in result.note]
    assert numbers == sorted(set(numbers))
    assert {"P_det", "P_worst", "P_miss"} <= {line.symbol for line in result.note}
    marked = next(c for c in result.curves if c.key == "inspections")
    assert marked.marks


def test_a_better_look_and_a_surer_one_find_more():
    assert judged().plan.mean >= judged(detection=detection(half_found=10)).plan.mean
    assert judged().plan.mean > judged(detection=detection(done=0.6)).plan.mean


def test_a_target_gives_the_longest_repeat_that_meets_it_or_says_none_does():
    met = judged(detection_target=recorded(0.9, "-"))
    assert met.plan.longest >= 1
    never = replace(detection(), never=recorded(0.5, "-"))
    missed = judged(detection=never, detection_target=recorded(0.9, "-"))
    assert missed.plan.longest is None
    assert any("0.9" in warning for warning in missed.warnings)


def test_scatter_of_the_growth_life_is_counted_when_the_policy_states_it():
    policy = replace(CRACK["repeat_policy"], log_deviation=0.14)
    scattered = judged(repeat_policy=policy)
    assert scattered.plan.worst < judged().plan.worst
    assert "s" in {line.symbol for line in scattered.note}


def test_found_damage_and_a_method_without_a_curve_have_no_plan():
    values = CRACK | {
        "detection": detection(),
        "crack_length": recorded(24.0, "mm"),
        "crack_length_uncertainty": recorded(0.5, "mm"),
    }
    assert assess(Use.FOUND_DAMAGE, Inputs(values)).result.plan is None
    assert assess(Use.NO_KNOWN_CRACK, Inputs(CRACK)).result.plan is None


def test_a_curve_from_memory_bars_the_result():
    study = replace(STUDY, grade=Grade.MEMORY)
    curve = log_normal(math.log(3.0), 0.5, study)
    asked = replace(detection(), curve=curve)
    assert judged(detection=asked).source_from_memory
    assert isinstance(asked.done, Sourced)


def test_a_plan_of_absurdly_many_looks_is_not_judged_and_says_so():
    policy = replace(CRACK["repeat_policy"], factor=recorded(100.0, "-"))
    result = judged(repeat_policy=policy, class_maximum=recorded(1.0, "cycles"))
    assert result.plan is None
    assert any("is not calculated" in warning for warning in result.warnings)
