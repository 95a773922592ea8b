r"""Longitudinal through crack in plain pressurised skin.

.. math:: K = F_b(l)\,F_w\,\frac{pR}{t}\sqrt{\pi a},\qquad l = a/\sqrt{Rt}

with the handbook's bulging factor and the secant width correction; residual strength
is the smallest of fracture, net-section yield and the short-crack line. Growth is one
pressure cycle a flight. No relief by frames, tear straps or stringers.

Valid for skin between frames, joint rows, cut-outs and repairs, both tips at least a
stated multiple of sqrt(R t) from any of them; a growing crack is followed no further
than to where that ceases to hold.
"""

from __future__ import annotations

from dataclasses import replace

from repairs.analysis.growth.path import (
    curves,
    grow,
    repeat_after,
    with_found_lives,
    with_margins,
)
from repairs.analysis.inputs import Inputs
from repairs.analysis.inspection import intervals
from repairs.analysis.inspection.flaws import FlawLocation, rogue_flaw
from repairs.analysis.loads import panel_loads
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods.sheet import flaw_start, sheet_of, write_strength
from repairs.analysis.note import Note
from repairs.analysis.surroundings import ObstacleKind
from repairs.analysis.types import Applicability, FullLength, Result, Use, half

REQUIRED: tuple[str, ...] = (
    "element",
    "pressurised",
    "crack_direction",
    "crack_origin",
    "surroundings",
    "thickness",
    "panel_length",
    *panel_loads.PRESSURE_INPUTS,
    "yield_strength",
    "toughness",
    "growth_law",
)
MEASURED = ("crack_length", "crack_length_uncertainty")
COUNTED = ("accumulated_cycles", "life_base")


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs for a use."""
    del inputs
    return REQUIRED + (MEASURED if use is Use.FOUND_DAMAGE else COUNTED)


def clearance(inputs: Inputs) -> float | None:
    """Return the distance a tip must keep [mm], None while R or t is unknown."""
    radius, thickness = inputs.maybe("radius"), inputs.maybe("thickness")
    if radius is None or thickness is None:
        return None
    multiple = inputs.number("clearance_multiple").value
    return float(multiple * (radius.value * thickness.value) ** 0.5)


def shell_tests(inputs: Inputs) -> tuple[Applicability, ...]:
    """Test the distances and the shape a plain-shell crack solution needs."""
    around, keep = inputs.surroundings(), clearance(inputs)
    rule = f"{inputs.number('clearance_multiple').value:g} sqrt(R t)"
    radius, thickness = inputs.maybe("radius"), inputs.maybe("thickness")
    slender = radius.value / thickness.value if radius and thickness else None
    return (
        *(apply.clear_of(around, kind, keep, rule) for kind in ObstacleKind),
        apply.inside_one_bay(around),
        apply.at_least("thin shell, radius over thickness", slender, 20, ""),
    )


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    del use
    return (
        apply.word_is(inputs, "element", "structural item", "skin"),
        apply.word_is(inputs, "pressurised", "panel is pressurised", "yes"),
        apply.word_is(
            inputs, "crack_direction", "direction of the crack", "longitudinal"
        ),
        apply.word_is_not(
            inputs, "crack_origin", "where the crack starts", "fastener_hole"
        ),
        *shell_tests(inputs),
    )


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the crack, or skin without known crack; the tests have passed."""
    found = panel_loads.panel_loads(inputs, note)
    note.given("c_min", "clearance in √(R t)", inputs.number("clearance_multiple"))
    sheet = sheet_of(inputs, note, inputs.number("thickness").value)
    path = sheet.path(found, inputs, clearance(inputs))
    if use is Use.FOUND_DAMAGE:
        measured = note.given("2a", "measured length", inputs.number("crack_length"))
        more = note.given(
            "u", "its uncertainty", inputs.number("crack_length_uncertainty")
        )
        a = half(FullLength(measured + more))
        note.step("a", "(2a + u) / 2", f"({measured:.2f} + {more:.2f}) / 2", a, "mm")
        strength = write_strength(sheet, path, note, a)
        known = with_margins(found, note, strength, draft)
        return with_found_lives(inputs, note, path, a, known)
    flaw = rogue_flaw(FlawLocation.ELSEWHERE, sheet.thickness)
    start = flaw_start(sheet, path, note, flaw)
    strength = write_strength(sheet, path, note, start.length)
    draft = with_margins(found, note, strength, draft)
    grown = grow(inputs, note, path, start, found.residual)
    base = inputs.word("life_base") or ""
    factored = intervals.over_factor(
        inputs, note, grown.cycles, "growth_policy", "threshold"
    )
    threshold = intervals.interval(inputs, note, factored.cycles, base, "N_thr")
    title = "from the assumed flaw until residual strength is lost"
    life = intervals.life(title, grown.cycles, base, grown.remark)
    return replace(
        draft,
        lives=(life,),
        life_cycles=life.cycles,
        life_base=base,
        life_after_factor_cycles=factored.whole,
        scatter_factor=factored.factor,
        threshold=threshold,
        repeat=repeat_after(inputs, note, path, grown.end),
        missing=intervals.still_missing(inputs),
        curves=curves(path, start.length, base),
    )
