r"""A crack in the flange or web of a member that carries tension or bending.

.. math:: K = F(a/b)\,\sigma\sqrt{\pi a},\qquad \sigma = P/A\ \text{or}\ Mc/I

as an edge crack in a strip b wide with free ends, under even tension of the largest
stress: a crack inside the width and a web in bending are borne better than that.
Nothing is counted on the rest of the member taking over.
"""

from __future__ import annotations

from dataclasses import dataclass

from repairs.analysis.growth.path import (
    CrackPath,
    Start,
    write_law,
)
from repairs.analysis.inputs import SPECS, Inputs
from repairs.analysis.inspection.flaws import FlawLocation, rogue_flaw
from repairs.analysis.intensity import through as si
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods import member_stress
from repairs.analysis.methods.crack_case import CrackCase, evaluated
from repairs.analysis.methods.member_common import own_needed
from repairs.analysis.note import Note
from repairs.analysis.strength import residual as rs
from repairs.analysis.types import (
    ROOT_1000,
    Applicability,
    EdgeLength,
    Result,
    Use,
)

LARGEST_SHARE = 0.95 * (1 - 1e-9)
"""End of the edge crack's range, just inside."""
COMMON = (
    "element",
    "load_kind",
    "member_width",
    "yield_strength",
    "tension_strength",
    "toughness",
    "growth_law",
)
MEASURED = ("crack_origin", "crack_length", "crack_length_uncertainty")
SISTER = ("member_thickness", "life_base", "accumulated_cycles")
AS_EDGE = "The crack is taken as starting at the edge, with its whole length."
FLAW_AT_EDGE = (
    "The flaw is taken at the edge, through the thickness, half as long as the assumed "
    "flaw is from tip to tip."
)


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs."""
    sizes = SISTER if use is Use.NO_KNOWN_CRACK else MEASURED
    names = (*COMMON, *member_stress.needed(inputs), *sizes)
    return own_needed(inputs, names)


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    away = apply.word_is_not(
        inputs, "crack_origin", "where the crack starts", "fastener_hole"
    )
    return (
        *member_stress.tests(inputs, use),
        *((away,) if use is Use.FOUND_DAMAGE else ()),
    )


@dataclass(frozen=True)
class Flange:
    """A strip b wide with an edge crack, under even tension [mm, MPa]."""

    width: float
    yield_strength: float
    ultimate: float
    toughness: float

    def factor(self, a: float) -> float:
        """Return F of the edge crack [-]."""
        return si.edge_crack_tada(EdgeLength(a), self.width)

    def strength(self, a: float) -> rs.Strength:
        """Return residual strength on the stress of the whole section."""
        return rs.weakest(
            {
                rs.FRACTURE: rs.fracture_strength(self.toughness, self.factor(a), a),
                rs.COLLAPSE: rs.edge_crack_collapse(
                    self.yield_strength, self.ultimate, a, self.width
                ),
                rs.NET_SECTION: rs.net_section_yield(
                    self.yield_strength, a, self.width
                ),
            }
        )


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the crack, or the flange without known crack; the tests have passed."""
    loads = member_stress.member_loads(inputs, use, note)
    flange = Flange(
        note.given("b", SPECS["member_width"].title, inputs.number("member_width")),
        note.given("F_ty", "tension yield strength", inputs.number("yield_strength")),
        note.given(
            "F_tu", "tension ultimate strength", inputs.number("tension_strength")
        ),
        note.toughness(inputs.number("toughness")),
    )
    law = inputs.law()
    assert law is not None, "evaluate() has checked the growth law"
    write_law(note, law)
    path = CrackPath(
        "a",
        1.0,
        flange.factor,
        flange.strength,
        loads,
        law,
        LARGEST_SHARE * flange.width,
        "the range of the edge crack",
    )
    case = CrackCase(
        path,
        lambda a: _write(path, note, a),
        lambda: _measured(inputs, note),
        Start,
        lambda: _assumed(inputs, note),
    )
    return evaluated(inputs, use, note, draft, case)


def _measured(inputs: Inputs, note: Note) -> float:
    """Return the edge crack that bounds the one measured [mm]."""
    length = note.given("a", "measured length", inputs.number("crack_length"))
    more = note.given("u", "its uncertainty", inputs.number("crack_length_uncertainty"))
    note.text(AS_EDGE)
    return length + more


def _write(path: CrackPath, note: Note, a: float) -> rs.Strength:
    """Write K and every strength down; return the one that governs."""
    factor, top = path.factor(a), path.loads.cycle.maximum
    note.step(
        "F", "edge crack, free ends", f"a = {a:.2f} mm", factor, "-", si.EDGE_TADA
    )
    note.step(
        "K_max",
        "σ F √(π a)",
        f"{top:.2f} · {factor:.4f} · √(π · {a:.2f})",
        si.intensity(factor, top, a) / ROOT_1000,
        "MPa√m",
    )
    strength = path.strength(a)
    for what, stress in strength.each:
        note.step("S", what, "", stress, "MPa")
    return strength


def _assumed(inputs: Inputs, note: Note) -> Start:
    """Return the flaw assumed at the edge."""
    thickness = note.given(
        "t", SPECS["member_thickness"].title, inputs.number("member_thickness")
    )
    flaw = rogue_flaw(FlawLocation.ELSEWHERE, thickness)
    note.step("a₀", FLAW_AT_EDGE, "", flaw.length / 2, "mm", flaw.reference)
    return Start(flaw.length / 2)
