r"""A nick in a sheet's edge, blended out: a smooth notch at the edge.

.. math:: K_t = 1.0217\,\Bigl(1 + 2\sqrt{d/\rho}\Bigr),\qquad
          \rho = \frac{w^2 + d^2}{2d}

on the stress of the section left, w half of the blend's full length along the edge and
d its depth with that of earlier blends there. A flaw assumed to remain at its root
grows as an edge crack of notch and flaw together. The threshold is the smaller of
stress-life and growth, each over its factor.
"""

from __future__ import annotations

from repairs.analysis.growth.path import CrackPath, Start, with_margins
from repairs.analysis.inputs import Inputs
from repairs.analysis.inspection.flaws import FlawLocation, rogue_flaw
from repairs.analysis.loads import panel_loads
from repairs.analysis.loads.panel_loads import PanelLoads
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods import rework_lives
from repairs.analysis.methods.edge_crack import strip_of
from repairs.analysis.methods.nick_found import (
    STRIP_INPUTS,
    strip_tests,
    write_edge_distance,
)
from repairs.analysis.methods.section_left import (
    ECCENTRIC,
    SECTION,
    earlier_depth,
    eccentricity_bound,
)
from repairs.analysis.note import Note
from repairs.analysis.strength import residual as rs
from repairs.analysis.stress_life.flown import flown_life_left
from repairs.analysis.stress_life.notches import EDGE_NOTCH, edge_notch_factor
from repairs.analysis.types import Applicability, GrossStress, Reference, Result, Use

REQUIRED: tuple[str, ...] = (
    *STRIP_INPUTS,
    "damage_removed",
    "blend_depth",
    "blend_length",
    "earlier_depth",
    *rework_lives.COUNTED,
    *rework_lives.INPUTS,
)
NOTCH_AND_FLAW = "notch and assumed flaw together, as an edge crack"


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs."""
    del use
    return tuple(dict.fromkeys((*REQUIRED, *panel_loads.needed(inputs))))


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    del use
    return (
        apply.word_is(inputs, "element", "structural item", "skin"),
        apply.word_is(inputs, "damage_removed", "all damage removed", "yes"),
        *strip_tests(inputs),
        apply.word_is(inputs, "load_kind", "load of a notch's solution", "tension"),
    )


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the notch; all damage is removed and the tests have passed."""
    found = panel_loads.panel_loads(inputs, note)
    strip = strip_of(inputs, note)
    path = strip.path(found)
    depth = note.given("d", "depth of this blend", inputs.number("blend_depth"))
    depth += earlier_depth(inputs, note)
    length = note.given("L", "full length of the blend", inputs.number("blend_length"))
    draft = _static(note, found, strip.tension_strength, depth, strip.width, draft)
    kt = edge_notch_factor(depth, length)
    note.step(
        "Kt",
        "1.0217 (1 + 2√(d/ρ)), ρ = ((L/2)² + d²) / 2d",
        f"L/d = {length / depth:.1f}, full length over total depth",
        kt,
        "-",
        EDGE_NOTCH,
    )
    net = found.on_section(1 - depth / strip.width)
    left = flown_life_left(inputs, note, kt, net.flown, found.flown)
    write_edge_distance(inputs, note)
    start = _start(inputs, note, path, depth, strip.thickness)
    rework_lives.write_cautions(inputs, note)
    return rework_lives.with_lives(inputs, use, note, path, start, left, draft)


def _static(
    note: Note,
    found: PanelLoads,
    ultimate: float,
    depth: float,
    width: float,
    draft: Result,
) -> Result:
    """Fill margins of the width left, and write the bound of its bending beside."""
    left = width - depth
    gross = GrossStress(ultimate * left / width)
    note.step(
        "S",
        "F_tu (W − d) / W, gross",
        f"{ultimate:.1f} · {left:.2f} / {width:.2f}",
        gross,
        "MPa",
    )
    filled = with_margins(found, note, rs.Strength(gross, SECTION), draft)
    bound, stress = eccentricity_bound(depth, left), found.ultimate.governing[0]
    note.step(
        "M_ult,e",
        "margin, static ultimate, of a strip free to bend: 1 + 3d / (W − d)",
        f"{gross:.1f} / ({stress:.1f} · {bound:.3f}) − 1",
        gross / (stress * bound) - 1,
        "-",
        ECCENTRIC,
    )
    return filled


def _start(
    inputs: Inputs, note: Note, path: CrackPath, depth: float, thickness: float
) -> Start:
    """Write down the flaw assumed at the root: adopted, else that of an edge."""
    given = inputs.maybe("assumed_flaw")
    flaw = rogue_flaw(FlawLocation.HOLE, thickness)
    size, reference = flaw.length, flaw.reference
    if given is not None:
        size, reference = given.value, Reference(given.source, given.grade)
    length = min(depth + size, path.largest)
    note.step(
        "a₀",
        NOTCH_AND_FLAW,
        f"{depth:.2f} + {size:.2f}",
        length,
        "mm",
        reference,
    )
    return Start(length)
