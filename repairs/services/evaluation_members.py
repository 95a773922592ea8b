"""What the record says of a structural member, where that is hit and not the skin.

The panel under the place is skin: its material, kind of load and cycle are not the
member's. The member's own are stated inputs; of the panel's material only if stated.
"""

from __future__ import annotations

from collections.abc import Iterable, MutableMapping

from repairs.analysis.input_specs import Where
from repairs.analysis.inputs import SPECS, Value
from repairs.analysis.methods.member_common import OWN, SAME_MATERIAL
from repairs.analysis.types import Sourced, Stated
from repairs.models.columns import Element

OF_SKIN = frozenset({Element.SKIN, Element.FAIRING, Element.OTHER, Element.UNKNOWN})
OF_PANEL = frozenset(
    {
        "load_kind",
        "cycle_max_stress",
        "cycle_ratio",
        "limit_flight_stress",
        "ultimate_running_load",
        "thickness",
        "clad",
        "clad_thickness",
    }
)


def without_panel(
    values: MutableMapping[str, Value], element: str, stated: Iterable[str]
) -> None:
    """Leave out what the skin's panel says when a member is hit, unless stated so."""
    if element in OF_SKIN or not element:
        return
    same = values.get(SAME_MATERIAL)
    shared = isinstance(same, Stated) and same.value == "yes"
    kept = frozenset(stated)
    for name in tuple(values):
        of_material = SPECS[name].where is Where.MATERIAL and not shared
        if (name in OF_PANEL or of_material) and name not in kept:
            del values[name]
    for own, name in OWN.items():
        value = values.get(own)
        if isinstance(value, Sourced):
            values[name] = value
