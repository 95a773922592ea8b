r"""Corrosion that is still there: pits as one flaw, and the thickness they cost.

Fatigue cracks start at clusters of pits, not at the deepest alone. So the whole patch,
at its greatest depth and over its whole length, is taken as one sharp semi-elliptical
surface flaw (Newman and Raju); where the patch is longer than that solution reaches, as
an edge crack across the thickness. A flaw also holds every shallower one of its length,
so that the deepest that counts as long is a bound for deeper ones too, and a deeper
patch is never the better. Murakami's square root of the area stands beside it.
A flaw of that depth holds the loss of thickness too: the two are not added, the lesser
strength holds.

Exfoliation, intergranular attack and stress corrosion are refused: how far they reach
is not what is seen.
"""

from __future__ import annotations

from dataclasses import replace

from repairs.analysis.growth.path import with_found_lives, with_margins
from repairs.analysis.inputs import Inputs
from repairs.analysis.intensity import through as si
from repairs.analysis.intensity.part_through import (
    SURFACE_ANGLES,
    SURFACE_CRACK,
    PartThrough,
    surface_crack,
)
from repairs.analysis.intensity.small_defect import (
    LONG_DEFECT,
    MURAKAMI,
    semi_ellipse_area,
    surface_defect_intensity,
)
from repairs.analysis.loads import panel_loads
from repairs.analysis.loads.panel_loads import PanelLoads
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods import depth_flaw
from repairs.analysis.methods.flat_crack import kind_is_not
from repairs.analysis.methods.section_left import (
    FOUND_INPUTS,
    Section,
    as_found,
    found_section,
    lesser,
    needed,
    place_tests,
    static_strength,
    still_there,
)
from repairs.analysis.methods.sheet import (
    STRENGTH_AS_THROUGH,
    sheet_of,
    surface_start,
    write_strength,
)
from repairs.analysis.methods.skin_crack import clearance
from repairs.analysis.note import Note
from repairs.analysis.types import (
    ROOT_1000,
    Applicability,
    Grade,
    Reference,
    Result,
    Use,
)

REQUIRED: tuple[str, ...] = (
    "element",
    "pressurised",
    "clad",
    "corrosion_type",
    "surroundings",
    "thickness",
    "damage_length",
    "panel_length",
    *FOUND_INPUTS,
    *depth_flaw.INPUTS,
)
HIDDEN = ("exfoliation", "intergranular", "stress_corrosion", "fretting")
CALCULABLE = (
    "an attack whose depth is what is seen; of exfoliation, intergranular attack, "
    "stress corrosion or fretting the strength left cannot be calculated: remove it "
    "first"
)
CLUSTER = Reference(
    "Kim, Burns and Gangloff 2009: cracks start at clusters of pits that act as one "
    "semi-elliptical notch; here the whole patch, a bound",
    Grade.QUOTED,
)
PIT_AS_CRACK = Reference(
    "Materials Science and Engineering A 1996, from pitting to fatigue crack growth in "
    "2024-T3, abstract: a pit as an equivalent semi-elliptical surface crack",
    Grade.QUOTED,
)
PIT_WORDS = "pit taken as a crack of its size, from the first cycle"
NOT_DEEPEST = "the whole patch as one flaw, not its deepest pit alone"
STILL_CORRODING = (
    "Corrosion goes on while it is not removed: sizes are those of the day it was "
    "measured."
)
SLENDEREST, DEEPEST = 0.2, 2.0
"""Depth over half-length the surface-crack solution reaches [-]."""
SHALLOWER = (
    "Beside it the deepest flaw of this length that counts as long, a/c = 0.2: the "
    "lesser of both holds."
)
TOO_LONG = "longer than the surface-crack solution reaches: edge crack across t"


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs."""
    del use
    return REQUIRED + panel_loads.needed(inputs) + needed(inputs)


def calculable(inputs: Inputs) -> Applicability:
    """Test that the attack is of a kind whose depth is what is measured."""
    test, word = "type of corrosion", inputs.word("corrosion_type")
    if word is None or word == "unknown":
        return Applicability(test, word or apply.NOT_RECORDED, CALCULABLE, None)
    return Applicability(test, word.replace("_", " "), CALCULABLE, word not in HIDDEN)


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    return (
        apply.word_is(inputs, "element", "structural item", "skin"),
        as_found(inputs, use),
        still_there(inputs),
        calculable(inputs),
        kind_is_not(inputs, ("compression", "shear", "torsion")),
        *place_tests(inputs),
    )


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the corroded skin as it was found; the tests have passed."""
    del use
    found = panel_loads.panel_loads(inputs, note)
    section = found_section(inputs, note)
    draft = static_strength(inputs, note, found, section, draft)
    note.warn(STILL_CORRODING)
    length = note.given("L", "length of the corrosion", inputs.number("damage_length"))
    half = max(length / 2, section.flaw / DEEPEST)
    note.step("c", "L / 2", NOT_DEEPEST, half, "mm", CLUSTER)
    note.step("", PIT_WORDS, "", None, "", PIT_AS_CRACK)
    on_sound = found.on_section(section.sound / section.nominal)
    _write_murakami(note, on_sound, section.flaw, half)
    if section.flaw / half < SLENDEREST:
        note.text(f"a/c = {section.flaw / half:.3f}: {TOO_LONG}.")
        return depth_flaw.evaluated(inputs, note, found, section, draft)
    shaped = _as_surface_flaw(inputs, note, on_sound, section, half, draft)
    note.text(SHALLOWER)
    held = section.with_flaw(SLENDEREST * half)
    return _worse(shaped, depth_flaw.evaluated(inputs, note, found, held, draft))


def _worse(shaped: Result, long: Result) -> Result:
    """Return the lives of the one that lives less, with the worse margins of both."""
    margins = lesser(shaped, long)
    lived = min(shaped, long, key=lambda result: result.life_cycles or 0)
    return replace(
        margins,
        lives=lived.lives,
        life_cycles=lived.life_cycles,
        life_after_factor_cycles=lived.life_after_factor_cycles,
        curves=lived.curves,
    )


def _write_murakami(note: Note, loads: PanelLoads, depth: float, half: float) -> None:
    area = semi_ellipse_area(depth, half)
    note.beside("area", "π a c / 2, at most 10 a²", "", area, "mm2", LONG_DEFECT)
    stress = loads.cycle.maximum
    note.beside(
        "K_M",
        "0.65 σ √(π √area), for comparison",
        f"0.65 · {stress:.2f} · √(π √{area:.4f})",
        surface_defect_intensity(stress, area) / ROOT_1000,
        "MPa√m",
        MURAKAMI,
    )


def _as_surface_flaw(
    inputs: Inputs,
    note: Note,
    loads: PanelLoads,
    section: Section,
    half: float,
    draft: Result,
) -> Result:
    """Evaluate a short patch as a surface flaw that grows through, then on."""
    sheet = sheet_of(inputs, note, section.sound)
    path = sheet.path(loads, inputs, clearance(inputs), depth_flaw.ON_SOUND)
    flaw = PartThrough(section.flaw, half, section.sound)
    cycle, largest = loads.cycle, 0.0
    for angle in SURFACE_ANGLES:
        factor = surface_crack(flaw, sheet.width / 2, angle)
        k = si.intensity(factor, cycle.maximum, section.flaw)
        largest = max(largest, k)
        note.step(
            f"K, {angle:g}°",
            "σ (F/√Q) √(π a), from the surface",
            f"{cycle.maximum:.2f} · {factor:.4f} · √(π · {section.flaw:.3f})",
            k / ROOT_1000,
            "MPa√m",
            SURFACE_CRACK,
        )
    depth_flaw.write_cautions(inputs, note, largest * depth_flaw.swing(cycle))
    note.text(STRENGTH_AS_THROUGH)
    strength = write_strength(sheet, path, note, half)
    worse = lesser(draft, with_margins(loads, note, strength, draft))
    start = surface_start(sheet, path, note, section.flaw, half)
    return with_found_lives(
        inputs, note, path, start.length, worse, start.cycles_before
    )
