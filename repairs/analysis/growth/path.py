"""One growing through crack: its strength, its life, its threshold, its curves.

A method builds the path of its geometry (factor, strength, how far it is valid); what
follows from a path is the same for every geometry and stands here once.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field, replace

import numpy as np

from repairs.analysis.errors import OutOfRangeError
from repairs.analysis.growth import beside
from repairs.analysis.growth.blocks import EQUIVALENT
from repairs.analysis.growth.by_cycle import End, SequenceGrowth
from repairs.analysis.growth.law_end import LAW_ENDS, law_end
from repairs.analysis.growth.laws import (
    FormanLaw,
    GrowthLaw,
    RecordedLaw,
    StressCycle,
)
from repairs.analysis.growth.separable import (
    SEPARABLE,
    GrowthTable,
    critical_length,
    history_of,
)
from repairs.analysis.inputs import Inputs
from repairs.analysis.inspection import intervals
from repairs.analysis.loads.panel_loads import PanelLoads
from repairs.analysis.loads.shell import Requirement
from repairs.analysis.note import Note
from repairs.analysis.strength.residual import Strength
from repairs.analysis.types import (
    ROOT_1000,
    Curve,
    Interval,
    Life,
    Margin,
    Mark,
    Result,
    UltimateKept,
)

CURVE_POINTS = 60
SHORTEST = 1e-3
"""Share of the largest length from which a law's end is looked for."""
BEYOND = "not lost where the method ends, at {what} ({length:.1f} mm)"
LOST_ALREADY = "lost already at the size evaluated"
PER_FLIGHT = "per flight"
RETARDED = "until {name} strength is lost, with retardation"
WALKER = "da/dN = C [ΔK / (1 − R)^(1 − γ)]^m, ΔK in MPa√m"
FORMAN = "da/dN = C ΔK^m / [(1 − R) Kc − ΔK], ΔK in MPa√m"
NO_SECOND = "The other recorded growth law gives no life to compare: {why}"
OTHER_LAW = "the other recorded growth law, for comparison"
RESIDUAL, ULTIMATE = "residual", "static ultimate"


@dataclass(frozen=True)
class CrackPath:
    """A through crack that grows: lengths are those the factor is defined on [mm].

    `scale` turns such a length into the one people measure: 2 for a half-length. Below
    `smallest` the factor is not known and nothing is drawn; at `kinks` its slope or
    curvature jumps. `largest` is never beyond the end of its growth law.
    """

    symbol: str
    scale: float
    factor: Callable[[float], float]
    strength: Callable[[float], Strength]
    loads: PanelLoads
    law: RecordedLaw
    largest: float
    end_of_method: str
    section: str = "gross"
    smallest: float = 0.0
    kinks: tuple[float, ...] = ()
    _tables: dict[RecordedLaw, GrowthTable] = field(
        init=False, default_factory=dict, compare=False, repr=False
    )

    def __post_init__(self) -> None:
        top, low = self.loads.cycle.maximum, max(self.smallest, SHORTEST * self.largest)
        end = law_end(self.law, self.factor, top, low, self.largest)
        if end is not None:
            object.__setattr__(self, "largest", end)
            object.__setattr__(self, "end_of_method", LAW_ENDS)

    def lost_at(self, requirement: Requirement, start: float) -> float | None:
        """Return the length where a requirement is lost, None if not in range."""
        return critical_length(
            lambda length: self.strength(length).stress,
            requirement.governing[0],
            start,
            max(start, self.largest),
        )

    def growth(self, law: RecordedLaw | None = None) -> tuple[GrowthLaw, StressCycle]:
        """Return the law and the cycle [MPa] of a crack's growth in a flight here."""
        return self.loads.flown.growth(law or self.law)

    def cycles(self, start: float, end: float, law: RecordedLaw | None = None) -> float:
        """Return cycles of growth from one length to another."""
        if start == end:
            return 0.0
        return self._table(start, end, law or self.law).life(start, end)

    def history(self, start: float, end: float) -> tuple[tuple[float, float], ...]:
        """Return (cycles, length) from one length to another."""
        return history_of(self._table(start, end, self.law), start, end)

    def _table(self, low: float, high: float, law: RecordedLaw) -> GrowthTable:
        """Return a growth table of these lengths, one for all lives where it can be.

        A law may end before the method does, as Forman's: then as far as is asked.
        """
        kept = self._tables.get(law)
        if kept is not None and kept.low <= low and high <= kept.high:
            return kept
        flown, cycle = self.growth(law)
        wide = max(high, self.largest)
        try:
            made = GrowthTable(flown, self.factor, cycle, low, wide, self.kinks)
        except OutOfRangeError:
            made = GrowthTable(flown, self.factor, cycle, low, high, self.kinks)
        self._tables[law] = made
        return made


@dataclass(frozen=True, slots=True)
class Start:
    """Where a path begins: its length, and cycles before it is a through crack."""

    length: float
    cycles_before: float = 0.0


@dataclass(frozen=True, slots=True)
class Grown:
    """Growth to the loss of a requirement, or to where the method ends."""

    end: float
    cycles: float
    remark: str
    retarded: SequenceGrowth | None = None
    """The same with retardation, for comparison."""


def write_law(note: Note, law: RecordedLaw) -> None:
    """Write a growth law's constants down in the unit they are usually read in."""
    if isinstance(law, FormanLaw):
        form, power = FORMAN, law.exponent - 1
        words = f"m = {law.exponent:g}, Kc of the fit = {law.toughness / ROOT_1000:g}"
    else:
        form, power = WALKER, law.exponent
        words = f"m = {law.exponent:g}, γ = {law.gamma:g}"
    if law.remark:
        words += f"; {law.remark}"
    coefficient = law.coefficient * ROOT_1000**power
    note.step("C", form, words, coefficient, "mm/cycle", law.reference)


def grow(
    inputs: Inputs,
    note: Note,
    path: CrackPath,
    start: Start,
    requirement: Requirement,
) -> Grown:
    """Follow the crack to where a requirement is lost, and write it down."""
    lost = path.lost_at(requirement, start.length)
    end = max(start.length, path.largest) if lost is None else lost
    remark = ""
    if lost is None:
        remark = BEYOND.format(what=path.end_of_method, length=path.scale * end)
        note.warn(f"{requirement.name.capitalize()} strength {remark}.")
    elif lost == start.length:
        remark = LOST_ALREADY
    cycles = path.cycles(start.length, end) + start.cycles_before
    shown = f"{path.scale * start.length:.2f} to {path.scale * end:.2f} mm"
    note.step(
        path.symbol,
        f"S = required stress, {requirement.name}",
        remark,
        path.scale * end,
        "mm",
    )
    write_growth(note, path, shown, cycles)
    write_second(inputs, note, path, (start.length, end), shown)
    retarded = None
    if start.length < end and beside.asked(inputs):
        flown, flights = path.loads.flown, cycles - start.cycles_before
        through = beside.Through(
            path.factor, flown, path.law, start.length, end, flights
        )
        retarded = beside.grown_beside(inputs, note, through)
    return Grown(end, cycles, remark, retarded)


def write_second(
    inputs: Inputs, note: Note, path: CrackPath, ends: tuple[float, float], shown: str
) -> None:
    """Write the same growth by the other recorded law, where that law has a rate."""
    law = inputs.law("second_growth_law")
    if law is None:
        return
    try:
        cycles = path.cycles(*ends, law)
    except OutOfRangeError as error:
        note.text(NO_SECOND.format(why=error))
        return
    words = f"{shown}; through crack only"
    note.beside("N′", OTHER_LAW, words, cycles, "cycles", law.reference)


def write_growth(note: Note, path: CrackPath, shown: str, cycles: float) -> None:
    """Write a life down: of one cycle a flight, or of a spectrum's flights."""
    if path.loads.flown.spectrum is None:
        note.step("N", SEPARABLE, shown, cycles, "cycles")
        return
    law, cycle = path.growth()
    words = f"{shown}; the growth of every counted cycle added at each length"
    if law is path.law:
        words = f"{shown}; S_eq = {cycle.maximum:.2f} MPa, from zero, once a flight"
    note.step("N", f"{SEPARABLE}, {PER_FLIGHT}", words, cycles, "flights", EQUIVALENT)


def with_margins(
    found: PanelLoads, note: Note, strength: Strength, draft: Result
) -> Result:
    """Fill strength, both requirements and margins, and whether ultimate is kept."""
    residual, residual_case = found.residual.governing
    ultimate, ultimate_case = found.ultimate.governing
    stress = strength.stress
    margins = (stress / residual - 1, stress / ultimate - 1)
    for symbol, name, margin, required in (
        ("M_res", RESIDUAL, margins[0], residual),
        ("M_ult", ULTIMATE, margins[1], ultimate),
    ):
        note.step(
            symbol, f"margin, {name}", f"{stress:.1f} / {required:.1f} − 1", margin, "-"
        )
    return replace(
        draft,
        governing=strength.governing,
        residual_strength_mpa=stress,
        required_residual_mpa=residual,
        residual_case=residual_case,
        margin_residual=margins[0],
        ultimate_mpa=ultimate,
        ultimate_case=ultimate_case,
        margin_ultimate=margins[1],
        ultimate_kept=ultimate_kept(margins[1], found.ultimate.not_checked),
        margins=(*draft.margins, *margin_table(found, strength, draft.title)),
        cases_not_checked=found.not_checked,
    )


def margin_table(
    found: PanelLoads, strength: Strength, method: str
) -> tuple[Margin, ...]:
    """Return every mechanism beside every case, those not checked included."""
    mechanisms = strength.each or ((strength.governing, strength.stress),)
    return tuple(
        Margin(method, what, f"{requirement.name}: {case.title}", stress, case.stress)
        for requirement in (found.residual, found.ultimate)
        for case in requirement.cases
        for what, stress in mechanisms
        if stress is not None
    )


def ultimate_kept(margin: float, not_checked: tuple[str, ...]) -> UltimateKept:
    """Answer no from any case; yes only where every case was checked."""
    if margin < 0:
        return UltimateKept.NO
    return UltimateKept.NOT_SHOWN if not_checked else UltimateKept.YES


def with_found_lives(
    inputs: Inputs,
    note: Note,
    path: CrackPath,
    length: float,
    draft: Result,
    cycles_before: float = 0.0,
) -> Result:
    """Fill lives to where ultimate and residual are lost; never an interval.

    `cycles_before` are those until the crack is through at `length` [cycles].
    """
    note.warn(intervals.FOUND_DAMAGE_LIFE)
    start = Start(length, cycles_before)
    lives: list[Life] = []
    compared: list[Life] = []
    for requirement in (path.loads.ultimate, path.loads.residual):
        grown = grow(inputs, note, path, start, requirement)
        title = f"until {requirement.name} strength is lost"
        lives.append(
            intervals.life(title, grown.cycles, intervals.FROM_FINDING, grown.remark)
        )
        if grown.retarded is not None:
            title = RETARDED.format(name=requirement.name)
            compared.append(_compared(title, grown.retarded, cycles_before))
    shortest = min(lives, key=lambda item: item.cycles or 0)
    factored = intervals.over_factor(
        inputs, note, shortest.cycles, "growth_policy", "life after factor"
    )
    return replace(
        draft,
        lives=(*lives, *compared),
        life_cycles=shortest.cycles,
        life_base=shortest.base,
        life_after_factor_cycles=factored.whole,
        scatter_factor=factored.factor,
        curves=curves(path, length, intervals.FROM_FINDING),
    )


def _compared(title: str, retarded: SequenceGrowth, before: float) -> Life:
    """Return a retarded life, which never governs; none where it was not reached."""
    reached = retarded.end is End.REACHED
    remark = beside.NOT_USED if reached else f"{retarded.end}; {beside.NOT_USED}"
    flights = retarded.flights + before if reached else None
    return intervals.life(title, flights, intervals.FROM_FINDING, remark)


def repeat_after(
    inputs: Inputs, note: Note, path: CrackPath, critical: float
) -> Interval | None:
    """Return the repeat interval: detectable to critical size over its factor."""
    return intervals.repeat_interval(
        inputs,
        note,
        critical,
        lambda measured: measured / path.scale,
        lambda begin: path.cycles(begin, critical),
    )


def curves(path: CrackPath, start: float, base: str) -> tuple[Curve, ...]:
    """Return residual strength on crack length, and crack length on cycles."""
    stop = max(path.largest, start * 1.0001)
    first = max(start / 2, min(start, path.smallest))
    lengths = [float(a) for a in np.linspace(first, stop, CURVE_POINTS)]
    both = (path.loads.ultimate, path.loads.residual)
    lost = [(r.name, path.lost_at(r, start)) for r in both]
    end = max(start * 1.0001, lost[-1][1] or stop)
    history = path.history(start, end)
    now = path.strength(start).stress
    return (
        Curve(
            "residual_strength",
            "Residual strength",
            f"crack length {path.symbol}",
            "mm",
            f"strength, {path.section}",
            "MPa",
            tuple((path.scale * a, float(path.strength(a).stress)) for a in lengths),
            (
                *(Mark(r.name, r.governing[0]) for r in both),
                Mark(f"{path.scale * start:.1f} mm", now, path.scale * start),
            ),
        ),
        Curve(
            "growth",
            "Growth",
            f"flight cycles {base}",
            "cycles",
            f"crack length {path.symbol}",
            "mm",
            tuple((cycles, path.scale * a) for cycles, a in history),
            tuple(
                Mark(f"{name} lost", path.scale * a)
                for name, a in lost
                if a is not None
            ),
        ),
    )
