r"""Damage removed by a smooth blend: static strength, stress-life and growth.

Thickness that counts is the smallest measured, less the gauge's uncertainty, cladding
not counted; depth sums with earlier blends at the location. The dish concentrates the
stress of the section that is left:

.. math:: K_t = 1 + 2\sqrt{d/\rho},\qquad \rho = \frac{w^2 + d^2}{2d}

with w half of the *full* length of the blend. The governing threshold is the smaller
of stress-life over its factor and growth of a flaw assumed to remain over its own.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace

from repairs.analysis.errors import within
from repairs.analysis.growth.path import curves, grow, repeat_after, with_margins
from repairs.analysis.inputs import Inputs
from repairs.analysis.inspection import intervals
from repairs.analysis.inspection.flaws import (
    AssumedFlaw,
    FlawKind,
    FlawLocation,
    rogue_flaw,
)
from repairs.analysis.loads import panel_loads
from repairs.analysis.loads.panel_loads import PanelLoads
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods.sheet import flaw_start, sheet_of
from repairs.analysis.methods.skin_crack import clearance, shell_tests
from repairs.analysis.note import Note
from repairs.analysis.strength import residual as rs
from repairs.analysis.stress_life import left as fatigue
from repairs.analysis.surroundings import ObstacleKind
from repairs.analysis.types import (
    Applicability,
    Grade,
    GrossStress,
    Interval,
    Reference,
    Result,
    Use,
)

NOTCH = Reference(
    "Inglis 1913, elliptical notch, as in public benchmark text (2:1 hole gives 5)",
    Grade.QUOTED,
)
DISH = Reference("Circular arc through both ends and the bottom, geometry", Grade.PRINT)
ECCENTRIC = Reference(
    "Strip with its centroid moved by d/2 and free to bend: upper bound, statics",
    Grade.PRINT,
)
SECTION = "net section, ultimate"
ON_LEFT = "on the thickness left"
ALL_REMOVED = "a blend leaves material"
MORE_THAN_MEASURED = (
    "Depths of this and earlier blends sum to more than the measured loss: the sum is "
    "used."
)
REQUIRED: tuple[str, ...] = (
    "element",
    "pressurised",
    "damage_removed",
    "surroundings",
    "thickness",
    "remaining_thickness",
    "gauge_uncertainty",
    "blend_length",
    "earlier_depth",
    "panel_length",
    "toughness",
    "growth_law",
    "life_base",
    "accumulated_cycles",
    *fatigue.INPUTS,
)


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs; a clad panel needs its cladding."""
    del use
    clad = ("clad_thickness",) if inputs.word("clad") == "yes" else ()
    return REQUIRED + panel_loads.needed(inputs) + clad


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    del use
    around = inputs.surroundings()
    if inputs.word("pressurised") == "yes":
        distances = shell_tests(inputs)
    else:
        distances = tuple(
            apply.clear_of(around, kind, 1.0, "does not reach it")
            for kind in ObstacleKind
        )
    return (
        apply.word_is(inputs, "element", "structural item", "skin"),
        apply.word_is(inputs, "damage_removed", "all damage removed", "yes"),
        *distances,
    )


def notch_factor(depth: float, full_length: float) -> float:
    r"""Return Kt of a smooth dish, :math:`1 + 2\sqrt{d/\rho}`.

    Parameters
    ----------
    depth
        Total depth d [mm].
    full_length
        Full length of the blend, 2w [mm]; a 20:1 blend has 2w/d = 20.

    Returns
    -------
    float
        Kt on the stress of the section that is left [-].

    Notes
    -----
    Range 0 < d <= w. Two-dimensional groove: a round dish is below it.

    References
    ----------
    .. [1] See `NOTCH`.
    """
    w = full_length / 2
    within("Depth over half of the blend's length", depth / w, 0, 1, "a shallow dish")
    radius = (w**2 + depth**2) / (2 * depth)
    return 1 + 2 * math.sqrt(depth / radius)


@dataclass(frozen=True, slots=True)
class Section:
    """What a blend leaves [mm]: nominal, carrying before and after, total depth."""

    nominal: float
    before: float
    left: float
    depth: float


def section_of(inputs: Inputs, note: Note) -> Section:
    """Write down and return the section a blend leaves."""
    nominal = inputs.number("thickness").value
    measured = note.given(
        "t_min", "smallest thickness measured", inputs.number("remaining_thickness")
    )
    gauge = note.given(
        "u", "uncertainty of the gauge", inputs.number("gauge_uncertainty")
    )
    earlier = note.given(
        "d_e", "depth of earlier blends here", inputs.number("earlier_depth")
    )
    given = inputs.maybe("blend_depth")
    depth = nominal - measured + gauge
    if given is not None:
        this = note.given("d", "depth of this blend", given)
        if earlier + this + gauge > depth + 1e-9:
            note.warn(MORE_THAN_MEASURED)
            depth = earlier + this + gauge
    elif earlier + gauge > depth + 1e-9:
        note.warn(MORE_THAN_MEASURED)
        depth = earlier + gauge
    clad = 0.0
    if inputs.word("clad") == "yes":
        clad = note.given(
            "t_cl", "cladding of one side, not counted", inputs.number("clad_thickness")
        )
    note.step(
        "d_tot",
        "t − t_min + u, or the sum of depths if larger",
        f"{nominal:.3f} − {measured:.3f} + {gauge:.3f}",
        depth,
        "mm",
    )
    left = within(
        "Thickness left, mm",
        nominal - depth - clad,
        0.01,
        nominal,
        ALL_REMOVED,
        "Measure it again.",
    )
    note.step(
        "t_left",
        "t − d_tot − t_cl",
        f"{nominal:.3f} − {depth:.3f} − {clad:.3f}",
        left,
        "mm",
    )
    return Section(nominal, nominal - 2 * clad, left, max(depth, 1e-6))


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the blended skin; all damage is removed and the tests have passed."""
    found = panel_loads.panel_loads(inputs, note)
    section = section_of(inputs, note)
    draft = _static(inputs, note, found, section, draft)
    on_left = found.on_section(section.left / section.nominal)
    length = note.given("L", "full length of the blend", inputs.number("blend_length"))
    kt = notch_factor(section.depth, length)
    note.step(
        "Kt",
        "1 + 2√(d/ρ), ρ = ((L/2)² + d²) / 2d",
        f"L/d = {length / section.depth:.1f}",
        kt,
        "-",
        NOTCH,
    )
    left = fatigue.stress_life_left(
        inputs,
        note,
        kt,
        on_left.cycle,
        found.on_section(section.before / section.nominal).cycle,
    )
    return _with_growth(inputs, use, note, on_left, section, left, draft)


def _static(
    inputs: Inputs, note: Note, found: PanelLoads, section: Section, draft: Result
) -> Result:
    """Fill static margins of the section left, and write the bending bound beside."""
    ultimate = note.given(
        "F_tu", "tension ultimate strength", inputs.number("tension_strength")
    )
    share = section.left / section.nominal
    gross = GrossStress(ultimate * share)
    note.step(
        "S",
        "F_tu t_left / t, gross",
        f"{ultimate:.1f} · {section.left:.3f} / {section.nominal:.3f}",
        gross,
        "MPa",
    )
    filled = with_margins(found, note, rs.Strength(gross, SECTION), draft)
    bound = 1 + 3 * section.depth / section.left
    stress = found.ultimate.governing[0]
    note.step(
        "M_ult,e",
        "margin, static ultimate, with the bound of eccentricity 1 + 3d / t_left",
        f"{gross:.1f} / ({stress:.1f} · {bound:.3f}) − 1",
        gross / (stress * bound) - 1,
        "-",
        ECCENTRIC,
    )
    return filled


def assumed_flaw(inputs: Inputs, thickness: float) -> AssumedFlaw:
    """Return the flaw assumed to remain: adopted, else the location's published one.

    An adopted size is the depth of a semicircular surface flaw.
    """
    given = inputs.maybe("assumed_flaw")
    if given is None:
        return rogue_flaw(FlawLocation.ELSEWHERE, thickness)
    reference = Reference(given.source, given.grade)
    if given.value >= thickness:
        return AssumedFlaw(FlawKind.THROUGH, 2 * given.value, thickness, reference)
    return AssumedFlaw(FlawKind.SURFACE, 2 * given.value, given.value, reference)


def _with_growth(
    inputs: Inputs,
    use: Use,
    note: Note,
    on_left: PanelLoads,
    section: Section,
    left: fatigue.StressLife,
    draft: Result,
) -> Result:
    """Fill lives, threshold and repeat from stress-life and from growth."""
    sheet = sheet_of(inputs, note, section.left)
    path = sheet.path(on_left, inputs, clearance(inputs), ON_LEFT)
    start = flaw_start(sheet, path, note, assumed_flaw(inputs, section.left))
    grown = grow(inputs, note, path, start, on_left.residual)
    base = inputs.word("life_base") or ""
    growth = intervals.life(
        "growth of the flaw assumed to remain", grown.cycles, base, grown.remark
    )
    propose = use is Use.NO_KNOWN_CRACK
    chosen = fatigue.governing_life(inputs, note, left, growth, base, propose=propose)
    lived = intervals.life("mean stress-life left", left.remaining, base, left.remark)
    repeat: Interval | None = None
    if propose:
        repeat = repeat_after(inputs, note, path, grown.end)
    else:
        note.warn(intervals.FOUND_DAMAGE_LIFE)
    return replace(
        draft,
        lives=(lived, growth),
        life_cycles=chosen.life.cycles,
        life_base=base,
        life_after_factor_cycles=chosen.after_factor,
        scatter_factor=chosen.factor,
        threshold=chosen.threshold,
        repeat=repeat,
        missing=intervals.still_missing(inputs),
        curves=(*curves(path, start.length, base), *left.curves),
    )
