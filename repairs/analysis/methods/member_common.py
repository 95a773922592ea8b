"""What methods of structural members share: which items, and what is static only."""

from __future__ import annotations

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


def warn_static(inputs: Inputs, note: Note) -> None:
    """Say that a result is static only, and what that is on a PSE or FCS."""
    note.warn(STATIC_ONLY)
    word = inputs.word("criticality")
    if word in (None, "unknown"):
        note.warn(CLASS_UNKNOWN)
    if word != "secondary":
        note.warn(STAGE_ONE)
