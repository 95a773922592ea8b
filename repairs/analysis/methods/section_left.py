"""What a loss of thickness leaves of a skin: its section, its strength, what changes.

Thickness that counts is the smallest measured, less the gauge's uncertainty, cladding
not counted; depths of this damage and of earlier blends at the location add up.
"""

from __future__ import annotations

from dataclasses import dataclass, replace

from repairs.analysis.errors import within
from repairs.analysis.growth.path import with_margins
from repairs.analysis.inputs import Inputs
from repairs.analysis.loads.panel_loads import PanelLoads
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods.skin_crack import shell_tests
from repairs.analysis.note import Note
from repairs.analysis.strength import residual as rs
from repairs.analysis.strength.load_kinds import LOSS, LoadKind
from repairs.analysis.surroundings import ObstacleKind
from repairs.analysis.types import (
    Applicability,
    Grade,
    GrossStress,
    Reference,
    Result,
    Use,
)

ECCENTRIC = Reference(
    "Strip with its centroid moved by d/2 and free to bend: upper bound, statics",
    Grade.DERIVED,
)
SECTION = "net section, ultimate"
MATERIAL_LEFT = "a rework or wear leaves material"
SUM_DEEPER = (
    "Depths of this and earlier blends sum to more than the measured loss: the sum is "
    "used."
)
LOSS_DEEPER = (
    "The smallest thickness measured says more is lost than the depth: it is used."
)
BUCKLES = (
    "The panel carries {kind}: its buckling is a method of its own. A margin MS of the "
    "whole thickness becomes (1 + MS) {share:.3f} − 1 if the loss covers the panel."
)
BEARING = (
    "Bearing and edge distance of fasteners in the thinned skin are not checked: their "
    "loads are not recorded. Bearing strength falls with the thickness."
)
NO_FASTENER = "No fastener lies in the thinned skin, by the distance recorded."
FOUND_INPUTS = ("damage_depth", "damage_depth_uncertainty", "earlier_depth")
KNOWN_ONLY = "damage as found: it has a life, no threshold and no repeat"


@dataclass(frozen=True, slots=True)
class Section:
    """What is left [mm]: nominal, carrying before and after, total depth.

    `depth` is that of all losses from the surface the skin had when new; `flaw` that of
    the damage that is still there, 0 after a rework.
    """

    nominal: float
    before: float
    left: float
    depth: float
    flaw: float = 0.0

    @property
    def share(self) -> float:
        """Thickness left over nominal [-]."""
        return self.left / self.nominal

    @property
    def sound(self) -> float:
        """Thickness the flaw lies in: what is left and the flaw's own depth [mm]."""
        return self.left + self.flaw

    def with_flaw(self, flaw: float) -> Section:
        """Return the same sound thickness with a shallower flaw in it [mm]."""
        return replace(self, left=self.sound - flaw, flaw=flaw)


def needed(inputs: Inputs) -> tuple[str, ...]:
    """Return what a clad panel needs more."""
    return ("clad_thickness",) if inputs.word("clad") == "yes" else ()


def blended_section(inputs: Inputs, note: Note) -> Section:
    """Write down and return the section a blend leaves."""
    nominal = inputs.number("thickness").value
    measured = note.given(
        "t_min", "smallest thickness measured", inputs.number("remaining_thickness")
    )
    gauge = note.given(
        "u", "uncertainty of the gauge", inputs.number("gauge_uncertainty")
    )
    added = gauge + earlier_depth(inputs, note)
    given = inputs.maybe("blend_depth")
    if given is not None:
        added += note.given("d", "depth of this blend", given)
    depth = nominal - measured + gauge
    if added > depth + 1e-9:
        note.warn(SUM_DEEPER)
        depth = added
    note.step(
        "d_tot",
        "t − t_min + u, or the sum of depths if larger",
        f"{nominal:.3f} − {measured:.3f} + {gauge:.3f}",
        depth,
        "mm",
    )
    return _left(inputs, note, nominal, depth, 0.0)


def found_section(inputs: Inputs, note: Note) -> Section:
    """Write down and return the section left by damage that is still there."""
    nominal = inputs.number("thickness").value
    flaw = note.given(
        "d", "greatest depth of the damage", inputs.number("damage_depth")
    )
    flaw += note.given(
        "u_d", "its uncertainty", inputs.number("damage_depth_uncertainty")
    )
    earlier = earlier_depth(inputs, note)
    measured, gauge = (
        inputs.maybe(name) for name in ("remaining_thickness", "gauge_uncertainty")
    )
    if measured is not None and gauge is not None:
        thinnest = note.given("t_min", "smallest thickness measured", measured)
        thinnest -= note.given("u", "uncertainty of the gauge", gauge)
        if nominal - thinnest > flaw + earlier + 1e-9:
            note.warn(LOSS_DEEPER)
            flaw = nominal - thinnest - earlier
    note.step(
        "d_tot",
        "d + u_d + d_e, or what is measured to be lost if more",
        f"{flaw:.3f} + {earlier:.3f}",
        flaw + earlier,
        "mm",
    )
    return _left(inputs, note, nominal, flaw + earlier, flaw)


def earlier_depth(inputs: Inputs, note: Note) -> float:
    """Write down and return what earlier blends at the location took [mm]."""
    return note.given(
        "d_e", "depth of earlier blends here", inputs.number("earlier_depth")
    )


def _left(
    inputs: Inputs, note: Note, nominal: float, depth: float, flaw: float
) -> Section:
    clad = 0.0
    if inputs.word("clad") == "yes":
        clad = note.given(
            "t_cl", "cladding of one side, not counted", inputs.number("clad_thickness")
        )
    left = within(
        "Thickness left, mm",
        nominal - depth - clad,
        0.01,
        nominal,
        MATERIAL_LEFT,
        "Measure it again.",
    )
    note.step(
        "t_left",
        "t − d_tot − t_cl",
        f"{nominal:.3f} − {depth:.3f} − {clad:.3f}",
        left,
        "mm",
    )
    return Section(nominal, nominal - 2 * clad, left, max(depth, 1e-6), flaw)


def eccentricity_bound(depth: float, left: float) -> float:
    r"""Return what bending adds to a strip thinned from one side, :math:`1 + 3d/t_l`.

    Parameters
    ----------
    depth, left
        Depth d taken from one side and what is left of the thickness or width [mm].

    Returns
    -------
    float
        Factor on the mean stress of what is left [-]; 1 for a symmetric loss.

    Notes
    -----
    Range d >= 0, left > 0. Upper bound: a strip free to bend, the load in the middle
    of the whole section. Skin held by its surroundings sees less.

    References
    ----------
    .. [1] See `ECCENTRIC`.
    """
    within("Depth over what is left", depth / left, 0, 1e3, "a loss from one side")
    return 1 + 3 * depth / left


def static_strength(
    inputs: Inputs, note: Note, found: PanelLoads, section: Section, draft: Result
) -> Result:
    """Fill static margins of the section left, and write the bending bound beside."""
    ultimate = note.given(
        "F_tu", "tension ultimate strength", inputs.number("tension_strength")
    )
    gross = GrossStress(ultimate * section.share)
    note.step(
        "S",
        "F_tu t_left / t, gross",
        f"{ultimate:.1f} · {section.left:.3f} / {section.nominal:.3f}",
        gross,
        "MPa",
    )
    filled = with_margins(found, note, rs.Strength(gross, SECTION), draft)
    bound = eccentricity_bound(section.depth, section.left)
    stress = found.ultimate.governing[0]
    note.step(
        "M_ult,e",
        "margin, static ultimate, with the bound of eccentricity 1 + 3d / t_left",
        f"{gross:.1f} / ({stress:.1f} · {bound:.3f}) − 1",
        gross / (stress * bound) - 1,
        "-",
        ECCENTRIC,
    )
    write_stability(inputs, note, section.share)
    write_bearing(inputs, note, section.share)
    return filled


def write_bearing(inputs: Inputs, note: Note, share: float) -> None:
    """Write what is left of bearing, unless the nearest fastener is out of reach."""
    given = inputs.maybe("fastener_distance")
    if given is not None:
        distance = note.given("s_f", "damage to the nearest fastener", given)
        blend, damage = (
            inputs.maybe(name) for name in ("blend_length", "damage_length")
        )
        known = damage.value if damage else 0.0
        beyond = max(0.0, (blend.value - known) / 2) if blend else 0.0
        if distance > beyond:
            note.text(NO_FASTENER)
            return
    note.step(
        "P_br′/P_br", "bearing load left, t_left / t", f"{share:.4f}", share, "-", LOSS
    )
    note.warn(BEARING)


def write_stability(inputs: Inputs, note: Note, share: float) -> None:
    """Write what the loss does to a panel that buckles; other panels say nothing."""
    kind = inputs.word("load_kind")
    if kind not in (LoadKind.COMPRESSION, LoadKind.SHEAR):
        return
    for symbol, power, words in (("σ", 2, "stress"), ("N", 3, "load per width")):
        note.step(
            f"{symbol}_cr′/{symbol}_cr",
            f"buckling {words} left, (t_left / t)^{power}",
            f"{share:.4f}^{power}",
            share**power,
            "-",
            LOSS,
        )
    note.warn(BUCKLES.format(kind=kind, share=share**3))


def lesser(first: Result, second: Result) -> Result:
    """Return the worse of two drafts by their margins, with the margins of both."""

    def worst(draft: Result) -> tuple[float, float]:
        return draft.margin_ultimate or 0.0, draft.margin_residual or 0.0

    chosen = min(first, second, key=worst)
    both = tuple(dict.fromkeys((*first.margins, *second.margins)))
    return replace(chosen, margins=both)


def place_tests(inputs: Inputs) -> tuple[Applicability, ...]:
    """Test what lies round damage in skin, by what the skin is."""
    if inputs.word("pressurised") == "yes":
        return shell_tests(inputs)
    around = inputs.surroundings()
    return tuple(
        apply.clear_of(around, kind, 1.0, "does not reach it") for kind in ObstacleKind
    )


def still_there(inputs: Inputs) -> Applicability:
    """Test that the damage was not removed; where nobody says, it is still there."""
    value = inputs.word("damage_removed")
    shown = value or "not recorded, taken as still there"
    return Applicability("damage still there", shown, "not removed", value != "yes")


def as_found(inputs: Inputs, use: Use) -> Applicability:
    """Test that known damage is evaluated as such, not as skin without crack."""
    test = "what the result is for"
    if use is Use.FOUND_DAMAGE:
        return Applicability(test, "found damage", KNOWN_ONLY, True)
    met = False if inputs.word("element") else None
    return Applicability(test, "structure without known crack", KNOWN_ONLY, met)
