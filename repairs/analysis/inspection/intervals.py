"""From a growth life to lives, threshold and repeat, with factors, caps and words.

A threshold runs from an assumed flaw to the critical size, a repeat from the detectable
to the critical size; neither ever starts at a crack that was found. Each has one base,
and two bases are never compared: what counts since new, since a release and from the
last accomplishment stay apart.

References
----------
.. [1] Structures Bulletin EN-SB-12-003 (2012), page 1: inspections at one half of the
   growth time of an assumed flaw to critical.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

from repairs.analysis.errors import InputError, within
from repairs.analysis.inputs import SPECS, Inputs
from repairs.analysis.inspection.flaws import Cap, capped, whole_cycles
from repairs.analysis.note import Note
from repairs.analysis.scatter.factors import FatiguePolicy, Multiplied
from repairs.analysis.types import Grade, Interval, Life, MissingInput, Sourced

SINCE_NEW = "since new"
FROM_FINDING = "from finding"
LAST_DONE = "last accomplishment"
NO_FACTOR = "No scatter factor ({what} not recorded): no {result}; needs an engineer."
NO_DETECTABLE = (
    "No detectable size recorded for the inspection method: no repeat interval."
)
TOO_LATE = (
    "The detectable size ({size:.1f} mm) is not below the critical size "
    "({critical:.1f} mm): no repeat interval; needs an engineer."
)
NO_VALIDITY = "No limit of validity recorded: the interval is not cut down to it."
NOTHING_LEFT = "{cap} leaves no cycles: no interval; needs an engineer."
SEVERITY_OUTSIDE = (
    "The {what} does not contain the severity of the spectrum: average usage is "
    "assumed."
)
OTHER_LIFE = (
    "The {what} is made for another life ({made_for}) than the one it divides here."
)
AS_A_STEP = (
    "The detectable size counts as always found, and nothing smaller ever: record the "
    "method's detection curve, and the chance of the whole plan is given beside."
)
MADE_FOR = {
    "stress_life_policy": Multiplied.ANALYSIS_MEDIAN,
    "growth_policy": Multiplied.GROWTH,
    "repeat_policy": Multiplied.GROWTH,
}
"""What life each policy divides; a policy in words of its own is taken at its word."""
NEVER_FROM_A_CRACK = (
    "No interval counts from a crack that was found. Repair it, or show its life as "
    "that of known damage."
)
BASES_DIFFER = (
    "Intervals {bases} are not comparable. Keep each with its own base, or convert "
    "them by the counters at each base."
)
FOUND_DAMAGE_LIFE = (
    "Life of known damage: not an inspection interval and no leave to fly with it."
)


def _guidance(factor: float, source: str, grade: Grade) -> FatiguePolicy:
    return FatiguePolicy(Sourced(factor, "-", source, grade), Multiplied.GROWTH)


_HANDBOOK = "JSSG-2006 Table XXXIII, as in the USAF Damage Tolerant Design Handbook, "
PUBLISHED_GROWTH_FACTORS: dict[str, FatiguePolicy] = {
    "one half of the growth to critical": _guidance(
        2.0, "Structures Bulletin EN-SB-12-003 (2012), page 1", Grade.PRINT
    ),
    "depot inspection": _guidance(2.0, _HANDBOOK + "1.3.7.2.10", Grade.QUOTED),
    "walk-around visual": _guidance(5.0, _HANDBOOK + "1.3.7.2.10", Grade.QUOTED),
}
"""Divisors of growth life in military guidance, by name; none is a default."""


@dataclass(frozen=True, slots=True)
class Factored:
    """A life over its factor; None where the policy is missing."""

    factor: float | None
    cycles: float | None

    @property
    def whole(self) -> int | None:
        """Cycles rounded down."""
        return None if self.cycles is None else whole_cycles(self.cycles)


def over_factor(
    inputs: Inputs, note: Note, cycles: float | None, policy_name: str, result: str
) -> Factored:
    """Divide a life by the policy's factor; without one say so and give nothing."""
    policy = inputs.policy(policy_name)
    what = SPECS[policy_name].title
    if policy is None:
        note.warn(NO_FACTOR.format(what=what, result=result))
        return Factored(None, None)
    factor = note.given("f", f"{what}, multiplies {policy.multiplies}", policy.factor)
    if policy.multiplies in {*Multiplied} - {MADE_FOR[policy_name]}:
        note.warn(OTHER_LIFE.format(what=what, made_for=policy.multiplies), bars=True)
    if policy.severity_inside is False:
        note.warn(SEVERITY_OUTSIDE.format(what=what))
    if cycles is None:
        return Factored(factor, None)
    value = note.step(
        "N/f",
        "life over factor",
        f"{cycles:,.0f} / {factor:g}",
        cycles / factor,
        "cycles",
    )
    return Factored(factor, value)


def life(title: str, cycles: float | None, base: str, remark: str = "") -> Life:
    """Make a life, rounded down."""
    return Life(title, None if cycles is None else whole_cycles(cycles), base, remark)


def caps(inputs: Inputs, note: Note, base: str) -> tuple[Cap, ...]:
    """Return the ceilings on an interval that counts from `base`.

    The limit of validity is a total since new; counted from anywhere else, what is
    left of it holds.
    """
    found: list[Cap] = []
    maximum = inputs.maybe("class_maximum")
    if maximum:
        found.append(Cap(whole_cycles(maximum.value), maximum.source))
    validity = inputs.maybe("validity_cycles")
    if validity is None:
        note.warn(NO_VALIDITY)
        return tuple(found)
    total = whole_cycles(validity.value)
    if base == SINCE_NEW:
        found.append(Cap(total, "limit of validity"))
        return tuple(found)
    flown = inputs.number("accumulated_cycles").value
    found.append(Cap(total - whole_cycles(flown), "what is left to limit of validity"))
    return tuple(found)


def interval(
    inputs: Inputs, note: Note, cycles: float | None, base: str, symbol: str
) -> Interval | None:
    """Cut an interval down to its caps, and write both numbers down.

    Refuses a base in a found crack.
    """
    if base == FROM_FINDING:
        raise InputError(NEVER_FROM_A_CRACK)
    if cycles is None:
        return None
    found = capped(cycles, base, caps(inputs, note, base))
    note.step(
        symbol,
        f"rounded down, {base}" + (f", cut down to {found.cap}" if found.cap else ""),
        f"calculated {found.uncapped:,}" if found.uncapped is not None else "",
        found.cycles,
        "cycles",
    )
    if found.cycles is None:
        note.warn(NOTHING_LEFT.format(cap=found.cap.capitalize()))
    return found


def detectable_size(visible: Sourced, covered: Sourced) -> Sourced:
    """Return the length a crack has when its visible part is detectable [mm].

    Parameters
    ----------
    visible
        Size the method finds beyond head, doubler or fairing [mm].
    covered
        Part of the crack under them, from where the growth counts [mm]; 0 is stated.

    Returns
    -------
    Sourced
        Their sum, with both sources and the worse grade.

    Notes
    -----
    Range visible > 0, covered >= 0. A repair can hide the crack: its doubler covers.

    References
    ----------
    .. [1] Geometry.
    """
    within("Detectable size, mm", visible.value, 1e-6, 1e4, "a length")
    within("Covered length, mm", covered.value, 0, 1e4, "a length")
    grades = {visible.grade, covered.grade}
    grade = Grade.MEMORY if Grade.MEMORY in grades else visible.grade
    return Sourced(
        visible.value + covered.value,
        "mm",
        f"{visible.source}; covered part: {covered.source}",
        grade,
    )


def shortest(intervals: tuple[Interval, ...]) -> Interval:
    """Return the shortest of intervals with one base; refuse to compare two bases.

    One without cycles, where a cap left nothing, is the shortest.
    """
    bases = sorted({interval.base for interval in intervals})
    if len(bases) != 1:
        raise InputError(BASES_DIFFER.format(bases=" and ".join(bases) or "of no kind"))
    return min(intervals, key=lambda one: -1 if one.cycles is None else one.cycles)


def repeat_interval(
    inputs: Inputs,
    note: Note,
    critical: float,
    start: Callable[[float], float],
    cycles_to_critical: Callable[[float], float],
) -> Interval | None:
    """Return (detectable size to critical size) over the policy's factor, capped.

    `start` turns the detectable length into the length the growth counts in.
    """
    size = inputs.maybe("detectable_length")
    if size is None:
        note.warn(NO_DETECTABLE)
        return None
    detectable = note.given("2a_det", "detectable size with hidden part", size)
    begin = start(detectable)
    if begin >= critical:
        note.warn(
            TOO_LATE.format(size=detectable, critical=detectable * critical / begin)
        )
        return None
    cycles = note.step(
        "N_det",
        "detectable to critical size, ∫ da / (da/dN)",
        f"{begin:.2f} to {critical:.2f} mm",
        cycles_to_critical(begin),
        "cycles",
    )
    if inputs.detection() is None:
        note.text(AS_A_STEP)
    factored = over_factor(inputs, note, cycles, "repeat_policy", "repeat interval")
    return interval(inputs, note, factored.cycles, LAST_DONE, "N_rep")


def still_missing(inputs: Inputs) -> tuple[MissingInput, ...]:
    """Return what threshold and repeat need and the record lacks."""
    return inputs.missing(("growth_policy", "repeat_policy", "detectable_length"))
