"""What methods of structural members share: which items, and what is static only."""

from __future__ import annotations

from collections.abc import Iterable

from repairs.analysis.inputs import Inputs
from repairs.analysis.methods import applicability as apply
from repairs.analysis.note import Note
from repairs.analysis.types import Applicability

MEMBERS = (
    "stringer",
    "frame_cap",
    "frame_web",
    "shear_clip",
    "floor_beam",
    "seat_track",
    "bulkhead",
    "spar_cap",
    "spar_web",
    "rib",
    "keel_beam",
    "door_structure",
    "fitting",
)
OWN = {
    "member_yield": "yield_strength",
    "member_ultimate": "tension_strength",
    "member_compression_yield": "compression_yield",
    "member_shear_strength": "shear_strength",
    "member_modulus": "modulus",
    "member_poisson": "poisson",
    "member_toughness": "toughness",
}
"""A member's own numbers as stated, and the input of the methods each of them is."""
STATED_AS = {name: own for own, name in OWN.items()}
SAME_MATERIAL = "member_of_panel_material"
STATIC_ONLY = (
    "Static only: strength at limit and ultimate load, no fatigue life and no damage "
    "tolerance from this method."
)
STAGE_ONE = (
    "On a PSE or FCS a static result is stage 1 only: damage-tolerance data are "
    "pending."
)
CLASS_UNKNOWN = (
    "Whether this member is PSE, FCS or secondary is not recorded: it is taken as PSE."
)


def is_member(inputs: Inputs) -> Applicability:
    """Test that the item hit is a member, not skin or fairing."""
    return apply.word_among(inputs, "element", "structural item", MEMBERS)


def own_needed(inputs: Inputs, names: Iterable[str]) -> tuple[str, ...]:
    """Return the inputs needed, a material's numbers as a member's are stated.

    A growth law is not stated: it is the panel's where the material is the same.
    """
    found: list[str] = []
    for name in names:
        if name in inputs:
            found.append(name)
            continue
        if name == "growth_law" and SAME_MATERIAL not in inputs:
            found.append(SAME_MATERIAL)
        found.append(STATED_AS.get(name, name))
    return tuple(dict.fromkeys(found))


def warn_static(inputs: Inputs, note: Note) -> None:
    """Say that a result is static only, and what that is on a PSE or FCS."""
    note.warn(STATIC_ONLY)
    word = inputs.word("criticality")
    if word in (None, "unknown"):
        note.warn(CLASS_UNKNOWN)
    if word != "secondary":
        note.warn(STAGE_ONE)
