r"""Damage removed by a smooth blend: static strength, stress-life and growth.

Thickness that counts is the smallest measured, less the gauge's uncertainty, cladding
not counted; depth sums with earlier blends at the location. The dish concentrates the
stress of the section that is left:

.. math:: K_t = 1 + 2\sqrt{d/\rho},\qquad \rho = \frac{w^2 + d^2}{2d}

with w half of the *full* length of the blend. The governing threshold is the smaller
of stress-life over its factor and growth of a flaw assumed to remain over its own.
"""

from __future__ import annotations

from repairs.analysis.inputs import Inputs
from repairs.analysis.loads import panel_loads
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods import rework_lives
from repairs.analysis.methods.section_left import (
    Section,
    blended_section,
    needed,
    place_tests,
    static_strength,
)
from repairs.analysis.methods.sheet import flaw_start, sheet_of
from repairs.analysis.methods.skin_crack import clearance
from repairs.analysis.note import Note
from repairs.analysis.stress_life.flown import flown_life_left
from repairs.analysis.stress_life.notches import NOTCH, notch_factor
from repairs.analysis.types import Applicability, Result, Use

ON_LEFT = "on the thickness left"
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
    *rework_lives.COUNTED,
    *rework_lives.INPUTS,
)


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs; a clad panel needs its cladding."""
    del use
    return REQUIRED + panel_loads.needed(inputs) + needed(inputs)


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    del use
    return (
        apply.word_is(inputs, "element", "structural item", "skin"),
        apply.word_is(inputs, "damage_removed", "all damage removed", "yes"),
        *place_tests(inputs),
    )


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the blended skin; all damage is removed and the tests have passed."""
    found = panel_loads.panel_loads(inputs, note)
    section = blended_section(inputs, note)
    length = note.given("L", "full length of the blend", inputs.number("blend_length"))
    return dished(inputs, use, note, draft, found, section, length)


def dished(
    inputs: Inputs,
    use: Use,
    note: Note,
    draft: Result,
    found: panel_loads.PanelLoads,
    section: Section,
    length: float,
    base: str | None = None,
) -> Result:
    """Evaluate skin with a smooth dish of a full length [mm]; see `with_lives`."""
    draft = static_strength(inputs, note, found, section, draft)
    on_left = found.on_section(section.share)
    kt = notch_factor(section.depth, length)
    note.step(
        "Kt",
        "1 + 2√(d/ρ), ρ = ((L/2)² + d²) / 2d",
        f"L/d = {length / section.depth:.1f}, full length over total depth",
        kt,
        "-",
        NOTCH,
    )
    before = found.on_section(section.before / section.nominal).flown
    left = flown_life_left(inputs, note, kt, on_left.flown, before)
    sheet = sheet_of(inputs, note, section.left)
    path = sheet.path(on_left, inputs, clearance(inputs), ON_LEFT)
    flaw = rework_lives.assumed_flaw(inputs, section.left)
    start = flaw_start(sheet, path, note, flaw)
    rework_lives.write_cautions(inputs, note)
    return rework_lives.with_lives(
        inputs, use, note, path, start, left, draft, base=base
    )
