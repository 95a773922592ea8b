"""What blended and drilled skin share: stress-life left, and which life governs.

Here for one constant cycle per flight; `spectrum` has it for a flight's counted cycles.
"""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from repairs.analysis.errors import within
from repairs.analysis.growth.laws import StressCycle
from repairs.analysis.inputs import Inputs
from repairs.analysis.inspection import intervals
from repairs.analysis.note import Note
from repairs.analysis.stress_life.curves import (
    NO_FINITE_LIFE,
    StressLifeCurve,
    StressLifeFamily,
)
from repairs.analysis.stress_life.mean_stress import (
    MEAN_STRESS,
    Strengths,
    compared,
)
from repairs.analysis.stress_life.policies import write_made_factors
from repairs.analysis.types import (
    Curve,
    Grade,
    Interval,
    Life,
    Mark,
    NetStress,
    Reference,
)

CLAD_ON_BARE = (
    "Clad panel on a bare stress-life curve and no factor for cladding with a source: "
    "barred from approval until a clad curve or such a factor is recorded."
)
RANGE_NOT_RECORDED = (
    "The tested range of stress ratio and life is not recorded with the stress-life "
    "curves."
)
MEDIAN = (
    "Stress-life curves are the median life of small specimens until they part: no "
    "allowable, and no life to a crack that an inspection finds."
)
ERROR_HELD = (
    "The curve's standard error holds lots and laboratories and is no scatter of one "
    "batch; it is not stacked on the scatter factor."
)
NOT_UNLIMITED = "Stress-life: {words}."
LIFE_USED_UP = "The life before the damage was already used up on this curve."
NOT_COUNTED = "Life already used is not counted, by the engineer's recorded reason: {}."
BOTH_NEEDED = (
    "The threshold is the smaller of stress-life and growth, and one of them has no "
    "scatter factor: no threshold; needs an engineer."
)
LIFE_BAND = 3.0
DRAWN_POWERS = tuple(float(power) for power in np.linspace(3, 8, 41))
"""Powers of ten of the lives that are drawn [-]."""
BAND = Reference(
    "leave-one-out test of ln S on ln Kt on the 2024-T3 curves: life within a factor 3",
    Grade.RECORDED,
)

INPUTS = ("stress_life", "skin_cycles", "clad", "tension_strength", "yield_strength")


@dataclass(frozen=True, slots=True)
class StressLife:
    """Mean stress-life left, None where the curve gives no finite life.

    `curves` has the stress-life curve with this cycle's point on it.
    """

    remaining: float | None
    remark: str
    curves: tuple[Curve, ...] = ()


def stress_life_left(
    inputs: Inputs, note: Note, kt: float, after: StressCycle, before: StressCycle
) -> StressLife:
    """Return the life left at the new stress and Kt, less the share already used.

    Parameters
    ----------
    inputs, note
        Of the evaluation.
    kt
        Stress-concentration factor on net stress now [-]; 1 before.
    after, before
        Cycle on the net section now, and on the undamaged section [MPa].
    """
    family = inputs.family()
    assert family is not None, "evaluate() has checked that stress_life is there"
    check_below_yield(inputs, after.maximum)
    write_curves(note, family, kt)
    new = family.cycles(kt, NetStress(after.maximum), after.ratio)
    old = family.cycles(1.0, NetStress(before.maximum), before.ratio)
    _write_life(note, "N_after", f"Kt {kt:.3f}, ln S on ln Kt", after, new)
    _write_life(note, "N_before", "Kt 1, undamaged section", before, old)
    write_compared(inputs, note, kt, after)
    drawn = (stress_life_curve(family, kt, after, new),)
    if new is None:
        note.warn(NOT_UNLIMITED.format(words=NO_FINITE_LIFE))
        return StressLife(None, NO_FINITE_LIFE, drawn)
    new = less_clad(inputs, note, new)
    share = share_used(inputs, note, old)
    left = max(0.0, 1 - share) * new
    note.step(
        "N_left",
        "(1 − n / N_before) N_after",
        f"(1 − {share:.4f}) {new:,.0f}",
        left,
        "cycles",
    )
    write_band(note, left, "cycles")
    return StressLife(left, "", drawn)


def stress_life_curve(
    family: StressLifeFamily, kt: float, cycle: StressCycle, cycles: float | None
) -> Curve:
    """Return the curve at a Kt and stress ratio, with the life of one cycle on it.

    A cycle without a finite life is a level below the curve, not a point on it.
    """
    point = Mark(f"{cycle.maximum:.1f} MPa", cycle.maximum, cycles)
    return Curve(
        "stress_life",
        "Stress-life",
        f"mean cycles to failure, Kt {kt:.2f}, R {cycle.ratio:g}",
        "cycles",
        "largest stress on the net section",
        "MPa",
        tuple(
            (float(10**power), float(family.max_stress(kt, power, cycle.ratio)))
            for power in DRAWN_POWERS
        ),
        (point,),
    )


def check_below_yield(inputs: Inputs, maximum: float) -> None:
    """Refuse a largest stress on the net section above yield: curves end there."""
    within(
        "Largest stress on the net section, MPa",
        maximum,
        0,
        inputs.number("yield_strength").value,
        "stress-life curves end at yield",
        "Another method is needed.",
    )


def write_curves(note: Note, family: StressLifeFamily, kt: float) -> None:
    """Write down the curves used at a Kt and at Kt 1, and what is not known of them."""
    used = dict.fromkeys((*family.bracket(kt), *family.bracket(1.0)))
    if any(curve.ratios is None for curve in used):
        note.warn(RANGE_NOT_RECORDED)
    for curve in used:
        _write_curve(note, curve)
    note.text(MEDIAN)
    if any(curve.standard_error is not None for curve in used):
        note.text(ERROR_HELD)


def _write_curve(note: Note, curve: StressLifeCurve) -> None:
    known = [
        f"stress in units of {curve.stress_unit_mpa:.6g} MPa",
        *([f"specimens {curve.thickness:.2f} mm thick"] if curve.thickness else []),
        *(["R {:g} to {:g} tested".format(*curve.ratios)] if curve.ratios else []),
    ]
    if curve.standard_error is not None:
        known.append(f"standard error of log N {curve.standard_error:g}")
    note.step(
        f"curve, Kt {curve.kt:g}",
        "log N = A₁ − A₂ log(S_eq − A₄), S_eq = S_max (1 − R)^A₃",
        f"A₁ {curve.a1:g}, A₂ {curve.a2:g}, A₃ {curve.a3:g}, A₄ {curve.a4:g}; "
        + ", ".join(known),
        None,
        "",
        Reference(curve.source, curve.grade),
    )


def write_compared(inputs: Inputs, note: Note, kt: float, cycle: StressCycle) -> None:
    """Write what a cycle is worth by the mean-stress forms, for comparison only."""
    family = inputs.family()
    assert family is not None, "evaluate() has checked that stress_life is there"
    below, _ = family.bracket(kt)
    amplitude = cycle.maximum * (1 - cycle.ratio) / 2
    strengths = Strengths(
        inputs.number("tension_strength").value,
        inputs.number("yield_strength").value,
        gamma=below.a3,
    )
    found = compared(amplitude, cycle.maximum - amplitude, strengths)
    worth = ", ".join(
        f"{name} {value:.1f}" for name, value in found.items() if value is not None
    )
    note.step(
        "",
        "fully reversed amplitude of the same life, for comparison only",
        f"S_max {cycle.maximum:.1f} MPa, R {cycle.ratio:.3g}: {worth} MPa; Walker with "
        f"A₃ {below.a3:g} of the curve",
        None,
        "",
        MEAN_STRESS,
    )


def write_band(note: Note, left: float, unit: str) -> None:
    """Write the factor-3 band of an interpolated life beside it."""
    note.step(
        "",
        "band of the interpolated life",
        f"{left / LIFE_BAND:,.0f} to {left * LIFE_BAND:,.0f} {unit}",
        None,
        "",
        BAND,
    )


def _write_life(
    note: Note, symbol: str, what: str, cycle: StressCycle, cycles: float | None
) -> None:
    words = "" if cycles is not None else f"; {NO_FINITE_LIFE}"
    note.step(
        symbol,
        f"mean stress-life, {what}",
        f"S_max {cycle.maximum:.1f} MPa net, R {cycle.ratio:g}{words}",
        cycles,
        "cycles",
    )


def less_clad(inputs: Inputs, note: Note, cycles: float) -> float:
    """Apply a sourced factor for cladding, or bar the result from approval."""
    family = inputs.family()
    if inputs.word("clad") != "yes" or (family is not None and family.clad):
        return cycles
    factor = inputs.maybe("clad_life_factor")
    if factor is None:
        note.warn(CLAD_ON_BARE, bars=True)
        return cycles
    divisor = note.given("k_clad", "life of bare over life of clad", factor)
    return cycles / divisor


def share_used(inputs: Inputs, note: Note, before: float | None) -> float:
    """Return the share of life used, n / N_before; none where N is not finite."""
    reason = inputs.word("life_used_reason")
    if reason:
        note.warn(NOT_COUNTED.format(reason))
        return 0.0
    flown = note.given(
        "n", "flight cycles this skin has flown", inputs.number("skin_cycles")
    )
    share = 0.0 if before is None else flown / before
    if share >= 1:
        note.warn(LIFE_USED_UP)
    return share


@dataclass(frozen=True, slots=True)
class Governing:
    """The smaller of stress-life and growth life, with its factor and threshold."""

    life: Life
    after_factor: int | None
    factor: float | None
    threshold: Interval | None


def governing_life(
    inputs: Inputs,
    note: Note,
    left: StressLife,
    growth: Life,
    base: str,
    *,
    propose: bool,
) -> Governing:
    """Choose the smaller of both lives over their factors; both must have one.

    Known damage gets no threshold: `propose` is False and none is written down.
    """

    def threshold(cycles: float | None) -> Interval | None:
        if not propose:
            return None
        return intervals.interval(inputs, note, cycles, base, "N_thr")

    grown = intervals.over_factor(
        inputs, note, growth.cycles, "growth_policy", "threshold"
    )
    if left.remaining is None:
        return Governing(growth, grown.whole, grown.factor, threshold(grown.cycles))
    life = intervals.life("mean stress-life left", left.remaining, base, left.remark)
    lived = intervals.over_factor(
        inputs, note, left.remaining, "stress_life_policy", "threshold"
    )
    write_made_factors(note, inputs.policy("stress_life_policy"))
    if grown.cycles is None or lived.cycles is None:
        note.warn(BOTH_NEEDED)
        shorter, factored = min(
            ((growth, grown), (life, lived)), key=lambda pair: pair[0].cycles or 0
        )
        return Governing(shorter, factored.whole, factored.factor, None)
    shorter, factored = (
        (life, lived) if lived.cycles <= grown.cycles else (growth, grown)
    )
    return Governing(
        shorter, factored.whole, factored.factor, threshold(factored.cycles)
    )
