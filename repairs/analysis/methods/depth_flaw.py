r"""A long sharp flaw in the thickness: an edge crack across it.

.. math:: K = F(a/t)\,\sigma\sqrt{\pi a}

with a the depth, t the thickness the flaw lies in, and Tada's factor for a strip that
is free to bend, which is the bound of a surface flaw that is never longer than endless
and of skin that is never freer than that. Depth alone grows; the flaw is not followed
once it is nearly through.
"""

from __future__ import annotations

from repairs.analysis.growth.laws import StressCycle
from repairs.analysis.growth.path import (
    CrackPath,
    with_found_lives,
    with_margins,
    write_law,
)
from repairs.analysis.inputs import Inputs
from repairs.analysis.intensity import through as si
from repairs.analysis.loads.panel_loads import PanelLoads
from repairs.analysis.methods.section_left import Section, lesser
from repairs.analysis.note import Note
from repairs.analysis.strength import residual as rs
from repairs.analysis.types import (
    ROOT_1000,
    EdgeLength,
    Grade,
    GrossStress,
    Reference,
    Result,
)

INPUTS = ("yield_strength", "tension_strength", "toughness", "growth_law")
DEEPEST = 0.95 * (1 - 1e-9)
ON_SOUND = "on the thickness the flaw lies in"
SHEET_TOUGHNESS = (
    "Toughness is the sheet's for a through crack; that of a flaw in the thickness may "
    "be lower."
)
SMALL_FLAW = (
    "Flaws this small may grow faster than a long-crack law says, and below its "
    "threshold: no threshold is used."
)
SCRATCHED = Reference(
    "Talia and Talia 1997, scratched 2024-T3 clad sheet, abstract on a public page",
    Grade.QUOTED,
)
LOSS_OF_LIFE = (
    "published tests: scratches 0.1 mm deep in sheet 1.016 mm thick cost up to 95 % of "
    "the life"
)


def depth_path(
    inputs: Inputs, note: Note, thick: float, loads: PanelLoads
) -> CrackPath:
    """Write what a flaw in the thickness needs, and return its path [mm]."""
    yields = note.given(
        "F_ty", "tension yield strength", inputs.number("yield_strength")
    )
    toughness = note.toughness(inputs.number("toughness"))
    law = inputs.law()
    assert law is not None, "evaluate() has checked that growth_law is there"
    write_law(note, law)

    def factor(depth: float) -> float:
        return si.edge_crack_tada(EdgeLength(depth), thick)

    def strength(depth: float) -> rs.Strength:
        candidates: dict[str, GrossStress | None] = {
            rs.FRACTURE: rs.fracture_strength(toughness, factor(depth), depth),
            rs.NET_SECTION: rs.net_section_yield(yields, depth, thick),
        }
        return rs.weakest(candidates)

    return CrackPath(
        "a",
        1.0,
        factor,
        strength,
        loads,
        law,
        DEEPEST * thick,
        "nearly through the thickness",
        ON_SOUND,
    )


def write_cautions(inputs: Inputs, note: Note, delta_k: float) -> None:
    """Write what is known of small flaws, and the threshold beside for information."""
    given = inputs.maybe("growth_threshold")
    if given is not None:
        note.beside(
            "ΔK_th",
            "long-crack threshold, for information; not used",
            f"ΔK = {delta_k / ROOT_1000:.2f} MPa√m",
            given.value / ROOT_1000,
            "MPa√m",
            Reference(given.source, given.grade),
        )
    note.warn(SMALL_FLAW)


def write_depth_strength(
    inputs: Inputs, note: Note, path: CrackPath, thick: float, depth: float
) -> rs.Strength:
    """Write K and every strength of a depth, and return the one that governs."""
    factor, cycle = path.factor(depth), path.loads.cycle
    note.step(
        "F",
        "edge crack across the thickness, free to bend",
        f"a/t = {depth:.3f} / {thick:.3f}",
        factor,
        "-",
        si.EDGE_TADA,
    )
    largest = si.intensity(factor, cycle.maximum, depth)
    note.step(
        "K_max",
        "σ F √(π a)",
        f"{cycle.maximum:.2f} · {factor:.4f} · √(π · {depth:.3f})",
        largest / ROOT_1000,
        "MPa√m",
    )
    write_cautions(inputs, note, largest * swing(cycle))
    note.text(SHEET_TOUGHNESS)
    strength = path.strength(depth)
    for what, stress in strength.each:
        note.step("S", f"{what}, {ON_SOUND}", f"a = {depth:.3f}", stress, "MPa")
    note.step("S", f"strength: {strength.governing}", "", strength.stress, "MPa")
    return strength


def swing(cycle: StressCycle) -> float:
    """Return the share of the largest stress that opens a flaw in a cycle [-]."""
    return 1 - max(cycle.ratio, 0.0)


def evaluated(
    inputs: Inputs, note: Note, loads: PanelLoads, section: Section, draft: Result
) -> Result:
    """Fill margins, the worse of flaw and thinned section, and the flaw's lives.

    `loads` are stresses on the nominal thickness; `draft` has the section's margins.
    """
    thick = section.sound
    on_sound = loads.on_section(thick / section.nominal)
    path = depth_path(inputs, note, thick, on_sound)
    strength = write_depth_strength(inputs, note, path, thick, section.flaw)
    flawed = with_margins(on_sound, note, strength, draft)
    return with_found_lives(inputs, note, path, section.flaw, lesser(draft, flawed))
