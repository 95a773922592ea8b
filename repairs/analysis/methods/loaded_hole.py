r"""A fastener hole that is loaded: bypass and bearing parts together.

.. math::
    K = \sigma\sqrt{\pi c}\Bigl[(1 - \lambda)F_{by} + \lambda\frac{W_0}{D}F_{br}\Bigr]

:math:`\lambda` is the share of the strip's load that the fastener takes, stated by an
engineer; without it nothing is computed. Holes of joint rows belong here. Statically
the net section is checked, and the bearing if its allowable is stated.
"""

from __future__ import annotations

from dataclasses import replace

from repairs.analysis.errors import OutOfRangeError
from repairs.analysis.inputs import SPECS, Inputs
from repairs.analysis.loads.panel_loads import PanelLoads
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods import hole_loads
from repairs.analysis.methods.hole import UNCRACKED, cracks_of, static
from repairs.analysis.methods.hole_geometry import (
    GEOMETRY,
    Hole,
    crack_tests,
    cracked,
    read_hole,
    slender_test,
    state_needed,
    strip_name,
)
from repairs.analysis.methods.hole_growth import with_assumed_flaw, with_known_crack
from repairs.analysis.note import Note
from repairs.analysis.stress_life import left as fatigue
from repairs.analysis.stress_life.flown import flown_life_left
from repairs.analysis.stress_life.severity import (
    NO_CREDIT,
    SEVERITY,
    LoadedHole,
    severity_factor,
)
from repairs.analysis.types import (
    Applicability,
    MissingInput,
    Result,
    UltimateKept,
    Use,
)

NEAREST_EDGE = 1.5
"""Edge distance over hole diameter below which bearing allowables do not hold [-]."""
BEARING_NOT_CHECKED = "bearing at the hole"
NO_BEARING = (
    "Bearing at the hole is not checked: its allowable at e/D {ratio:.2f} is not "
    "recorded."
)
NEAR_EDGE = (
    "Bearing at the hole is not checked: e/D is {ratio:.2f}, and bearing allowables "
    "hold from 1.5 on."
)
NO_STRESS_LIFE = (
    "No stress-life at the loaded hole: {why} The growth life stands alone."
)
LAP_BENDING = (
    "Bending of a single lap is not recorded and not counted; a joint's first row may "
    "see half to one and a half times the membrane stress more."
)


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs; a load transfer is never assumed."""
    more = state_needed(inputs, use, UNCRACKED)
    known = (*GEOMETRY, strip_name(inputs), "load_transfer")
    return tuple(dict.fromkeys((*known, *hole_loads.needed(inputs), *more)))


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    return (
        apply.word_is(inputs, "element", "structural item", "skin"),
        apply.word_is(inputs, "hole_load", "load of a fastener on the hole", "loaded"),
        slender_test(inputs),
        *crack_tests(inputs, use),
    )


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Evaluate the hole, cracked or not; the tests have passed."""
    found = hole_loads.loads_at_hole(inputs, note)
    transfer = note.given(
        "λ", SPECS["load_transfer"].title, inputs.number("load_transfer")
    )
    hole = read_hole(inputs, note, cracks_of(inputs, use), transfer)
    note.step("σ_br/σ", "λ W₀ / D", "", hole.at.bearing, "-")
    note.warn(LAP_BENDING)
    hole = with_bearing(inputs, note, hole)
    path = hole.path(found, inputs)
    if cracked(inputs, use):
        done = with_known_crack(inputs, note, hole, path, draft)
    else:
        left = _stress_life(inputs, note, found, hole)
        draft = static(inputs, note, found, hole, draft)
        done = with_assumed_flaw(inputs, use, note, hole, path, left, draft)
    return done if hole.bearing_strength else without_bearing(inputs, done)


def with_bearing(inputs: Inputs, note: Note, hole: Hole) -> Hole:
    """Read the bearing allowable of this edge distance, or say why it is not used."""
    ratio = inputs.number("edge_distance").value / hole.at.diameter
    note.step("e/D", "edge distance over hole diameter", "", ratio, "-")
    given = inputs.maybe("bearing_strength")
    if given is None or ratio < NEAREST_EDGE:
        words = NO_BEARING if ratio >= NEAREST_EDGE else NEAR_EDGE
        note.warn(words.format(ratio=ratio), bars=True)
        return hole
    return replace(
        hole,
        bearing_strength=note.given("F_bru", SPECS["bearing_strength"].title, given),
    )


def without_bearing(inputs: Inputs, done: Result) -> Result:
    """Say that the bearing check is open: ultimate strength is then not shown."""
    kept = done.ultimate_kept
    lacking: tuple[MissingInput, ...] = inputs.missing(("bearing_strength",))
    return replace(
        done,
        missing=(*done.missing, *lacking),
        cases_not_checked=(*done.cases_not_checked, BEARING_NOT_CHECKED),
        ultimate_kept=UltimateKept.NOT_SHOWN if kept is UltimateKept.YES else kept,
    )


def _stress_life(
    inputs: Inputs, note: Note, found: PanelLoads, hole: Hole
) -> fatigue.StressLife:
    """Return the stress-life at the hole; outside its curves say so and give none."""
    at = hole.at
    net = found.on_section(1 - hole.gone).flown
    try:
        gross = severity_factor(
            LoadedHole(at.diameter, at.width, hole.thickness, at.strip, at.transfer)
        )
        kt = gross * (1 - hole.gone)
        note.step(
            "SSF",
            "K_tb θ λ W₀/D + K_tg (1 − λ), on gross stress",
            f"Kt on net stress {kt:.3f}",
            gross,
            "-",
            SEVERITY,
        )
        note.text(NO_CREDIT)
        return flown_life_left(inputs, note, kt, net, found.flown)
    except OutOfRangeError as refusal:
        words = NO_STRESS_LIFE.format(why=refusal)
        note.warn(words)
        return fatigue.StressLife(None, words)
