r"""Skin crack between or across stiffeners: which of skin, stiffener, fastener governs.

.. math:: K = F_{st}\,F_b\,F_w\,\sigma\sqrt{\pi a}

F_st, the load on the stiffeners and on their fasteners follow from displacement
compatibility of sheet, stiffeners and fasteners. A crack along a pressurised shell
crosses frames, any other crosses stringers. Bulging is that of a plain shell unless the
factor between stiffeners is stated with its source.

An arrest at the next stiffener is written beside and given no credit: the strength is
the least that any length on the way bears. With a broken stiffener at the middle the
arrest at both neighbours is the two-bay criterion.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

from repairs.analysis.growth.path import margin_table
from repairs.analysis.inputs import Inputs
from repairs.analysis.inspection.flaws import FlawLocation, rogue_flaw
from repairs.analysis.intensity import through as si
from repairs.analysis.intensity.stiffened_sheet import (
    COMPATIBILITY,
    CrackCentre,
    StiffenedSheet,
)
from repairs.analysis.intensity.stiffened_table import stiffened_table
from repairs.analysis.loads import panel_loads
from repairs.analysis.loads.longitudinal import (
    longitudinal_loads,
    longitudinal_needed,
    reach_needed,
)
from repairs.analysis.loads.panel_loads import PanelLoads
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods import flat_crack
from repairs.analysis.methods.crack_case import (
    SKIN_INPUTS,
    CrackCase,
    alone,
    away_from_edges,
    crack_needed,
    evaluated,
    half_length_of,
    mean_tension,
    measured_half,
    reach_of,
    spectrum_reach,
    tips_clear,
)
from repairs.analysis.methods.sheet import flaw_start, found_start, sheet_of
from repairs.analysis.methods.skin_crack import clearance, clearance_rule, thin_shell
from repairs.analysis.methods.stiffened_skin import StiffenedSkin, stated_bulging
from repairs.analysis.note import Note
from repairs.analysis.strength import residual as rs
from repairs.analysis.strength import stiffened as sp
from repairs.analysis.surroundings import ObstacleKind
from repairs.analysis.types import (
    ROOT_1000,
    Applicability,
    Margin,
    Result,
    Use,
)

REQUIRED: tuple[str, ...] = (
    *SKIN_INPUTS,
    "crack_direction",
    "modulus",
    "poisson",
    "centre_stiffener",
    "stiffener_modulus",
    "stiffener_strength",
    "fastener_pitch",
    "fastener_diameter",
    "fastener_flexibility",
    "fastener_strength",
)
OF_PANEL = (sp.SKIN, sp.STIFFENER, sp.FASTENER)
FULL_BULGING = (
    "Bulging of a plain shell at every length; whole stiffeners hold the edges down, "
    "so a factor stated with its source may be lower."
)
NO_ARREST = "No arrest at the next stiffener is shown: {why}."
NOT_REACHED = "the solution ends before it, or the fracture does not stop there"
NO_CREDIT = "Arrest is written beside and gives no credit: the least strength governs."
ARREST = "arrest at the next stiffener: {what}"
TWO_BAY = "two-bay crack with the middle stiffener broken: {what}"


@dataclass(frozen=True, slots=True)
class Layout:
    """What a crack's direction decides: what it crosses, and the panel's size along."""

    stiffener: str
    width: str
    loads: tuple[str, ...]
    curved: bool


def layout(inputs: Inputs) -> Layout:
    """Return what it crosses: frames along a pressurised shell, else stringers."""
    if inputs.word("pressurised") != "yes":
        needed = flat_crack.loads_needed(inputs)
        return Layout("stringer", "panel_length", needed, curved=False)
    if inputs.word("crack_direction") == "circumferential":
        needed = (*longitudinal_needed(inputs), *reach_needed(inputs))
        return Layout("stringer", "panel_width", needed, curved=False)
    return Layout("frame", "panel_length", panel_loads.PRESSURE_INPUTS, curved=True)


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs for a use."""
    placed = layout(inputs)
    sizes = (f"{placed.stiffener}_area", f"{placed.stiffener}_pitch", placed.width)
    every = (*REQUIRED, *sizes, *placed.loads, *crack_needed(inputs, use))
    return tuple(dict.fromkeys(every))


def no_break_assumed(inputs: Inputs, use: Use) -> Applicability:
    """Test that structure without known crack has no broken stiffener."""
    word = inputs.word("centre_stiffener")
    broken = word == "broken_stiffener" and use is Use.NO_KNOWN_CRACK
    return Applicability(
        "stiffener at the middle of the crack",
        word.replace("_", " ") if word else apply.NOT_RECORDED,
        "whole, where no crack is known",
        None if word is None else not broken,
    )


def place_tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Test the distances from cut-outs, joints and repairs; frames do not count."""
    if inputs.word("pressurised") != "yes":
        keep, rule = (lambda a: 2 * a), flat_crack.LIGAMENT_RULE
        return (
            flat_crack.kind_is_not(inputs, ("compression", *flat_crack.IN_SHEAR)),
            tips_clear(inputs, use, keep, rule),
            flat_crack.opened(inputs),
        )
    clear, rule = clearance(inputs), clearance_rule(inputs)
    if inputs.word("crack_direction") == "circumferential":
        tips = tips_clear(inputs, use, lambda a: clear, rule)
        return (tips, thin_shell(inputs), mean_tension(inputs))
    around = inputs.surroundings()
    kinds = (apply.clear_of(around, kind, clear, rule) for kind in ObstacleKind)
    return (*kinds, thin_shell(inputs))


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    return (
        apply.word_is(inputs, "element", "structural item", "skin"),
        apply.word_among(
            inputs, "crack_direction", "direction of the crack", flat_crack.STRAIGHT
        ),
        away_from_edges(inputs),
        alone(inputs, use),
        no_break_assumed(inputs, use),
        *place_tests(inputs, use),
    )


def loads_of(inputs: Inputs, note: Note) -> PanelLoads:
    """Write down and return the loads across the crack."""
    if inputs.word("pressurised") != "yes":
        return flat_crack.loads_of(inputs, note)
    if inputs.word("crack_direction") == "circumferential":
        return longitudinal_loads(inputs, note, spectrum_reach(inputs))
    return panel_loads.panel_loads(inputs, note)


def reach(inputs: Inputs) -> tuple[float, str]:
    """Return how far half a crack is followed [mm], and what ends it; frames do not."""
    if inputs.word("pressurised") != "yes":
        return reach_of(inputs, lambda distance: distance / 3)
    keep = clearance(inputs) or 0.0
    if inputs.word("crack_direction") == "circumferential":
        return reach_of(inputs, lambda distance: distance - keep)
    around = inputs.surroundings()
    assert around is not None, "evaluate() has checked the surroundings"
    return replace(around, bay=None).largest_half_length(keep)


def skin_of(inputs: Inputs, note: Note) -> StiffenedSkin:
    """Write skin, stiffeners and fasteners down and return them with their table."""
    placed = layout(inputs)
    thickness = inputs.number("thickness").value
    sheet = sheet_of(
        inputs,
        note,
        thickness,
        width_from=placed.width,
        curved=placed.curved,
        stiffened=True,
    )

    def given(symbol: str, title: str, name: str) -> float:
        return note.given(symbol, title, inputs.number(name))

    kind = placed.stiffener
    stiffened = StiffenedSheet(
        thickness,
        given("E", "modulus of the skin", "modulus"),
        given("ν", "Poisson's ratio", "poisson"),
        given("b", f"{kind} pitch", f"{kind}_pitch"),
        given("A_st", f"section area of a {kind}", f"{kind}_area"),
        given("E_st", "modulus of the stiffener", "stiffener_modulus"),
        given("p", "fastener pitch along the stiffener", "fastener_pitch"),
        given("d", "fastener diameter", "fastener_diameter"),
        given("f", "flexibility of one fastener", "fastener_flexibility"),
    )
    panel = sp.StiffenedPanel(
        sheet.toughness,
        stiffened.modulus,
        stiffened.stiffener_modulus,
        given("F_st,u", "strength of the stiffener", "stiffener_strength"),
        given("P_u", "shear strength of one fastener", "fastener_strength"),
    )
    centre = CrackCentre(inputs.word("centre_stiffener") or "")
    note.step("μ", "A_st E_st / (A_st E_st + b t E)", "", stiffened.stiffening, "-")
    table = stiffened_table(stiffened, centre)
    bulging = stated_bulging(inputs, note)
    if bulging is None and sheet.radius is not None:
        note.text(FULL_BULGING)
    return StiffenedSkin(sheet, panel, stiffened, centre, table, bulging)


def write_strength(
    skin: StiffenedSkin, loads: PanelLoads, note: Note, a: float
) -> rs.Strength:
    """Write K, the loads on stiffener and fastener and every strength at a size."""
    alone, factor, pitch = skin.alone(a), skin.factor(a), skin.stiffened.pitch
    shown = f"a/b = {a / pitch:.4f}, {skin.centre.replace('_', ' ')}"
    unit = pitch * skin.sheet.thickness
    note.step(
        "F_st", "K over K without stiffeners", shown, alone.factor, "-", COMPATIBILITY
    )
    note.step(
        "L",
        "stiffener's load over its load far away",
        shown,
        alone.stiffener,
        "-",
        COMPATIBILITY,
    )
    note.step(
        "L_R",
        "largest fastener load over σ b t",
        shown,
        alone.fastener_area / unit,
        "-",
        COMPATIBILITY,
    )
    note.step(
        "F_b F_w",
        "bulging times width",
        f"a = {a:.2f}",
        factor / alone.factor,
        "-",
        si.SECANT,
    )
    top = loads.cycle.maximum
    note.step(
        "K_max",
        "σ F_st F_b F_w √(π a)",
        f"{top:.2f} · {factor:.4f} · √(π · {a:.2f})",
        si.intensity(factor, top, a) / ROOT_1000,
        "MPa√m",
    )
    strength = skin.strength(a)
    for what, stress in strength.each:
        if stress is not None:
            source = sp.DIAGRAM if what in OF_PANEL else None
            note.step("S", what, f"a = {a:.2f}", stress, "MPa", source)
    note.step(
        "S",
        f"residual strength, gross: {strength.governing}",
        "",
        strength.stress,
        "MPa",
    )
    return strength


def write_arrest(
    skin: StiffenedSkin, loads: PanelLoads, note: Note, a: float, title: str
) -> tuple[Margin, ...]:
    """Write what stops a skin fracture, and return its margins; no credit is given."""
    found = skin.arrest(a)
    if found is None:
        note.text(NO_ARREST.format(why=NOT_REACHED))
        return ()
    words = TWO_BAY if skin.centre is CrackCentre.BROKEN_STIFFENER else ARREST
    _write_stop(found, note, words)
    peak = rs.Strength(
        found.peak.stress,
        found.peak.governing,
        ((words.format(what=found.peak.governing), found.peak.stress),),
    )
    return margin_table(loads, peak, title)


def _write_stop(found: sp.Arrest, note: Note, words: str) -> None:
    note.step(
        "S_cr",
        "least strength of the skin before the stiffener",
        f"2a = {2 * found.at:.1f}",
        found.critical,
        "MPa",
        sp.DIAGRAM,
    )
    holds = "arrested" if found.holds else "not arrested"
    note.step(
        "S_arr",
        words.format(what=found.peak.governing),
        f"2a = {2 * found.arrested_at:.1f}; {holds}",
        found.peak.stress,
        "MPa",
        sp.DIAGRAM,
    )
    note.text(NO_CREDIT)


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the crack, or skin without known crack; the tests have passed."""
    loads = loads_of(inputs, note)
    skin = skin_of(inputs, note)
    start = half_length_of(inputs, use)
    assert start is not None, "evaluate() has checked the sizes"
    path = skin.path(loads, start, *reach(inputs))
    margins = write_arrest(skin, loads, note, start, draft.title)
    flaw = rogue_flaw(FlawLocation.ELSEWHERE, skin.sheet.thickness)
    case = CrackCase(
        path,
        lambda a: write_strength(skin, loads, note, a),
        lambda: measured_half(inputs, note),
        lambda a: found_start(inputs, skin.sheet, path, note, a),
        lambda: flaw_start(skin.sheet, path, note, flaw),
    )
    return evaluated(inputs, use, note, replace(draft, margins=margins), case)
