"""One full set of inputs per registered method, for rules that hold for all of them."""

from __future__ import annotations

from repairs.analysis.inputs import Value
from repairs.analysis.types import Use
from tests.repairs.analysis.cases import BLEND, CRACK, HOLE, recorded, said
from tests.repairs.analysis.crack_cases import (
    DRILLED,
    EDGE,
    FLAT,
    ROUND,
    SKEW,
    STIFFENERS,
)
from tests.repairs.analysis.test_corrosion_found import PITS
from tests.repairs.analysis.test_hole_row import ROW
from tests.repairs.analysis.test_loaded_hole import CRACKED, LOADED
from tests.repairs.analysis.test_member_crack import AT_HOLE
from tests.repairs.analysis.test_member_crack import CRACKED as FLANGE
from tests.repairs.analysis.test_member_section import MEMBER, SEVERED
from tests.repairs.analysis.test_nick import NICK, NOTCH
from tests.repairs.analysis.test_scratch_found import SCRATCH
from tests.repairs.analysis.test_screening import DENT
from tests.repairs.analysis.test_thinned_crack import THINNED
from tests.repairs.analysis.test_thinned_panel import PRESSED
from tests.repairs.analysis.test_wear import WORN

SCREENED = ("dent", "crease", "bird-strike", "lightning", "heat")
"""Damage that is screened: no number ever comes of it."""
CASES: dict[str, dict[str, Value]] = {
    "pressurised-skin-longitudinal-crack": CRACK,
    "pressurised-skin-circumferential-crack": ROUND,
    "pressurised-skin-skew-crack": SKEW,
    "unpressurised-skin-crack": FLAT,
    "stiffened-skin-crack": {**CRACK, **STIFFENERS},
    "edge-crack": EDGE,
    "stop-drilled-crack": {
        **CRACK,
        **DRILLED,
        "crack_length": recorded(10.0, "mm"),
    },
    "corrosion-blend-out": BLEND,
    "corrosion-as-found": PITS,
    "scratch-as-found": SCRATCH,
    "nick-as-found": NICK,
    "nick-blended": NOTCH,
    "wear-as-found": WORN,
    "crack-in-corroded-skin": THINNED,
    "thinned-panel-buckling": PRESSED,
    "open-or-trimmed-hole": {**HOLE, **CRACKED},
    "loaded-fastener-hole": {**LOADED, **CRACKED},
    "row-of-cracked-holes": ROW,
    "failed-member": SEVERED,
    "damaged-member-section": MEMBER,
    "cracked-member-flange": FLANGE,
    "cracked-member-hole": AT_HOLE,
}
SCREENING: dict[str, dict[str, Value]] = {
    f"{kind}-screening": {**DENT, "damage_type": said(kind.replace("-", "_"))}
    for kind in SCREENED
}
KNOWN_DAMAGE = (
    "stop-drilled-crack",
    "corrosion-as-found",
    "scratch-as-found",
    "nick-as-found",
    "wear-as-found",
    "crack-in-corroded-skin",
    "failed-member",
    "damaged-member-section",
)
"""Methods of damage that was found: none speaks of structure without it."""
RUNS = tuple(
    (name, use)
    for name in CASES
    for use in Use
    if use is Use.FOUND_DAMAGE or name not in KNOWN_DAMAGE
)
