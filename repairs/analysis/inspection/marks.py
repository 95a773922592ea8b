"""Inspections marked along a growth curve, written into the note; the risk left."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from repairs.analysis.errors import AnalysisError, within
from repairs.analysis.inspection.looks import (
    Growth,
    Look,
    Phase,
    look_times,
    pod_at,
    together,
)
from repairs.analysis.inspection.plan import CUMULATIVE, Found, detect
from repairs.analysis.note import Note
from repairs.analysis.types import Curve, Mark, Reference

NO_ONE_ROW = (
    "A random phase is no one row of inspections. Draw the worst phase or the schedule."
)
ALWAYS = "{title}: taken as done at every repeat and always in the right place."
CAUTIONS = (
    "Looks at one crack are not independent: the same eyes, access and wrong place "
    "repeat. The share never inspected is where that enters; it is no better than its "
    "source.",
    "A detection curve from trials with prepared flaws is not the curve of a ramp at "
    "night.",
    "The size found nine times in ten is not a size above which all is found.",
    "The chance that there is a crack is an input; without fleet data an opinion.",
    "A small probability does not approve anything: the damage-tolerance requirement "
    "stands by itself.",
)
"""Printed with every risk."""


@dataclass(frozen=True, slots=True)
class InspectionMark:
    """One inspection on the growth curve, for drawing.

    `size` is that of the growth [mm], `seen` what the method sees of it [mm]; `pod`
    holds the chance that it is done; `cumulative` is the chance found by then, by all.
    """

    title: str
    cycles: float
    size: float
    seen: float
    pod: float
    cumulative: float


@dataclass(frozen=True, slots=True)
class Risk:
    """Chance that a crack is there and becomes critical unfound, with its cautions."""

    probability: float
    cautions: tuple[str, ...] = CAUTIONS


def inspection_marks(
    growth: Growth, looks: tuple[Look, ...], phase: Phase
) -> tuple[InspectionMark, ...]:
    """Return the inspections along the middle growth curve, in order of cycles.

    Parameters
    ----------
    growth, looks
        As `plan.detect`.
    phase
        Worst phase or schedule.

    Returns
    -------
    tuple of InspectionMark
        Sizes [mm], chances [-]; empty where no look comes before the critical size.

    Notes
    -----
    Range of `plan.detect`; without scatter of life.

    References
    ----------
    .. [1] See `plan.CUMULATIVE`.
    """
    if phase is Phase.RANDOM:
        raise AnalysisError(NO_ONE_ROW)
    rows: list[tuple[float, int, float]] = []
    for which, look in enumerate(looks):
        times = look_times(growth, look, phase, np.ones(1))[:, 0, 0]
        pods = pod_at(growth, look, times)
        rows += [
            (float(t), which, float(p))
            for t, p in zip(times, pods, strict=True)
            if 0 < t < growth.life
        ]
    missed = [np.ones(1) for _ in looks]
    marks = []
    for cycles, which, pod in sorted(rows):
        missed[which] = missed[which] * (1 - pod)
        marks.append(
            InspectionMark(
                looks[which].title,
                cycles,
                float(np.interp(cycles, growth.cycles, growth.size)),
                float(np.interp(cycles, growth.cycles, looks[which].seen)),
                pod,
                1 - float(together(looks, missed)[0]),
            )
        )
    return tuple(marks)


def inspection_curve(growth: Growth, looks: tuple[Look, ...], phase: Phase) -> Curve:
    """Return the growth curve with its inspections marked, ready to draw; as above."""
    marks = tuple(
        Mark(
            f"{mark.title}: POD {mark.pod:.2f}, found by then {mark.cumulative:.4f}",
            mark.size,
            mark.cycles,
        )
        for mark in inspection_marks(growth, looks, phase)
    )
    points = tuple(zip(growth.cycles.tolist(), growth.size.tolist(), strict=True))
    return Curve(
        "inspections",
        f"Crack size and inspections, {phase}",
        f"Cycles {growth.base}",
        "cycles",
        "Crack size",
        "mm",
        points,
        marks,
    )


def write_plan(note: Note, growth: Growth, looks: tuple[Look, ...]) -> Found:
    """Write a plan and its chance of detection down, line by line; as `plan.detect`."""
    for look in looks:
        study = look.curve.study
        reference = Reference(study.source, study.grade)
        what = f"{look.title}: {study.size}, {study.flaws} flaws tried"
        tried = f"{study.smallest:g} to {study.largest:g} mm tried"
        note.step("a50", f"{what}, found half the time", tried, look.curve.a50, "mm",
                  reference)  # fmt: skip
        note.step("a90", f"{what}, found nine times in ten", tried, look.curve.a90,
                  "mm", reference)  # fmt: skip
        first = "none" if look.threshold is None else f"{look.threshold:,} cycles"
        note.step("I", f"{look.title}: repeat", f"threshold {first}", look.interval,
                  "cycles")  # fmt: skip
        note.given("d", f"{look.title}: chance that it is done there", look.done)
        note.given("q", f"{look.title}: share never inspected there", look.never)
        if look.done.value == 1 and look.never.value == 0:
            note.warn(ALWAYS.format(title=look.title))
    if growth.log_deviation is not None:
        note.given("s", "standard deviation of log10 life", growth.log_deviation)
    found = detect(growth, looks)
    formula = "1 - [q + (1 - q) Π (1 - d POD)]"
    for symbol, phase in (
        ("P_det", Phase.RANDOM),
        ("P_worst", Phase.WORST),
        ("P_plan", Phase.SCHEDULE),
    ):
        note.step(symbol, f"{formula}, {phase}", f"growth to {growth.life:,.0f}",
                  found.at(phase), "-", CUMULATIVE)  # fmt: skip
    note.step("P_miss", "1 - P_det", f"1 - {found.mean:.5f}", found.missed, "-")
    for line in found.stated:
        note.text(line)
    return found


def risk(crack_present: float, found: Found) -> Risk:
    r"""Return :math:`P_f = P(crack)\,(1 - P_{det})`, mean over phase and scatter.

    Parameters
    ----------
    crack_present
        Chance that the crack is there at all, from fleet data or stated [-].
    found
        How the plan does.

    Returns
    -------
    Risk
        Probability [-] with its cautions.

    Notes
    -----
    Range 0 to 1. Of this crack in one aircraft, over one growth to critical.

    References
    ----------
    .. [1] Product of two probabilities, independent as assumed.
    """
    within("Chance that the crack is there", crack_present, 0, 1, "a probability")
    return Risk(crack_present * found.missed)
