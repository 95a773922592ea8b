r"""Skin in compression or shear that has lost thickness: when it buckles.

.. math:: \sigma_{cr} = k\,\frac{\pi^2 E}{12(1 - \nu^2)}\Bigl(\frac{t_l}{b}\Bigr)^2

on the thickness left, as if the whole panel between its stiffeners were so thin, with
simply supported edges and Johnson's parabola under yield. The load per width is what
it was, so that the margin falls with the cube of the thickness. A panel that may
buckle carries on in its stiffeners, which is not in this method.
"""

from __future__ import annotations

import math
from dataclasses import replace

from repairs.analysis.growth.laws import StressCycle
from repairs.analysis.growth.path import ultimate_kept, with_margins
from repairs.analysis.inputs import Inputs
from repairs.analysis.loads import panel_loads
from repairs.analysis.loads import shell as loads
from repairs.analysis.loads.panel_loads import PanelLoads
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods.corrosion_found import calculable
from repairs.analysis.methods.section_left import (
    FOUND_INPUTS,
    Section,
    blended_section,
    found_section,
    needed,
)
from repairs.analysis.note import Note
from repairs.analysis.strength import buckling
from repairs.analysis.strength import residual as rs
from repairs.analysis.strength.load_kinds import LoadKind, Mechanism
from repairs.analysis.types import Applicability, GrossStress, Result, Use

SIMPLE = buckling.Edges.SIMPLE
PANEL_INPUTS = (
    "element",
    "load_kind",
    "clad",
    "thickness",
    "frame_pitch",
    "stringer_pitch",
    "modulus",
    "poisson",
)
BLENDED_INPUTS = ("remaining_thickness", "gauge_uncertainty", "earlier_depth")
OF_KIND = {
    LoadKind.COMPRESSION: ("limit_longitudinal_stress", "compression_yield"),
    LoadKind.SHEAR: ("limit_shear_stress", "yield_strength", "shear_strength"),
}
BETWEEN_STIFFENERS = (
    "The whole panel between its stiffeners is taken as thin as its thinnest spot, "
    "with simply supported edges: a local loss costs less."
)
NO_DIAGONAL_TENSION = (
    "A panel that may buckle carries on in its stiffeners; that is not in this method."
)
NO_LIFE_HERE = "Strength only: no life follows from buckling."
COMBINED = "compression and shear together"


def removed(inputs: Inputs) -> bool:
    """Return whether the damage was blended out."""
    return inputs.word("damage_removed") == "yes"


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs by the kind of load and the state."""
    del use
    kind = inputs.word("load_kind")
    of_kind = next((names for key, names in OF_KIND.items() if key == kind), ())
    lost = BLENDED_INPUTS if removed(inputs) else FOUND_INPUTS
    return (*PANEL_INPUTS, *of_kind, *lost, *needed(inputs))


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    del use
    corroded = inputs.word("damage_type") == "corrosion" and not removed(inputs)
    return (
        apply.word_is(inputs, "element", "structural item", "skin"),
        apply.word_among(inputs, "load_kind", "kind of load", tuple(OF_KIND)),
        *((calculable(inputs),) if corroded else ()),
    )


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Compare buckling on the thickness left with what the panel carries."""
    del use
    section = (blended_section if removed(inputs) else found_section)(inputs, note)
    note.text(BETWEEN_STIFFENERS)
    shear = inputs.word("load_kind") == LoadKind.SHEAR
    name = OF_KIND[LoadKind.SHEAR if shear else LoadKind.COMPRESSION][0]
    limit = abs(note.given("σ_lim", "limit stress, nominal", inputs.number(name)))
    factor = note.given(
        "k_ult", "factor of static ultimate", inputs.number("ultimate_factor")
    )
    residual, ultimate = loads.unpressurised_requirements(GrossStress(limit), factor)
    carried = PanelLoads(residual, ultimate, StressCycle(GrossStress(limit), 0.0))
    panel_loads.write_requirements(carried, note)
    each = (
        _in_shear(inputs, note, section) if shear else _pressed(inputs, note, section)
    )
    strength = rs.weakest(
        {what: GrossStress(stress * section.share) for what, stress in each.items()}
    )
    note.step(
        "S",
        f"strength, gross: σ t_left / t, {strength.governing}",
        f"t_left / t = {section.share:.4f}",
        strength.stress,
        "MPa",
    )
    for caution in (NO_DIAGONAL_TENSION, NO_LIFE_HERE):
        note.warn(caution)
    filled = with_margins(carried, note, strength, draft)
    return _not_all_checked(filled)


def _pressed(inputs: Inputs, note: Note, section: Section) -> dict[str, float]:
    """Write the stress at which the panel buckles in compression down."""
    length, width = _sides(inputs, note)
    poisson = inputs.number("poisson").value
    k = buckling.compression_coefficient(SIMPLE, length, width, poisson)
    note.step("k", "(m b/a + a / m b)², least", "", k, "-", buckling.COMPRESSION_K)
    cut_off = note.given(
        "F_cy", "compression yield strength", inputs.number("compression_yield")
    )
    stress = _buckling(inputs, note, k, section.left, width, cut_off)
    return {Mechanism.COMPRESSION_BUCKLING: stress}


def _in_shear(inputs: Inputs, note: Note, section: Section) -> dict[str, float]:
    """Write the stresses at which the panel buckles and fails in shear down."""
    sides = _sides(inputs, note)
    k = buckling.shear_coefficient(SIMPLE, *sides)
    note.step("k", "5.35 + 4 (b/a)²", "", k, "-", buckling.SHEAR_K)
    yields = note.given(
        "F_ty", "tension yield strength", inputs.number("yield_strength")
    )
    cut_off = yields / math.sqrt(3)
    stress = _buckling(inputs, note, k, section.left, min(sides), cut_off)
    ultimate = note.given(
        "F_su", "shear ultimate strength", inputs.number("shear_strength")
    )
    return {Mechanism.SHEAR_BUCKLING: stress, Mechanism.SHEAR_ULTIMATE: ultimate}


def _sides(inputs: Inputs, note: Note) -> tuple[float, float]:
    length = note.given("a", "pitch of frames or ribs", inputs.number("frame_pitch"))
    width = note.given("b", "pitch of stringers", inputs.number("stringer_pitch"))
    return length, width


def _buckling(
    inputs: Inputs, note: Note, k: float, left: float, width: float, cut_off: float
) -> float:
    modulus = note.given("E", "modulus of elasticity", inputs.number("modulus"))
    poisson = note.given("ν", "Poisson's ratio", inputs.number("poisson"))
    elastic = buckling.plate_stress(k, modulus, poisson, left, width)
    note.step(
        "σ_e",
        "k π² E / (12 (1 − ν²)) (t_left / b)²",
        f"{left:.3f} / {width:.1f}",
        elastic,
        "MPa",
        buckling.PLATE,
    )
    stress = buckling.johnson(elastic, cut_off)
    note.step(
        "σ_cr",
        "Johnson's parabola under yield",
        f"{elastic:.1f}, {cut_off:.1f}",
        stress,
        "MPa",
        buckling.JOHNSON,
    )
    return stress


def _not_all_checked(filled: Result) -> Result:
    """Loads that act together are not checked: ultimate kept is never a yes."""
    margin = filled.margin_ultimate or 0.0
    return replace(
        filled,
        ultimate_kept=ultimate_kept(margin, (COMBINED,)),
        cases_not_checked=(COMBINED,),
    )
