"""The older fail-safe rule of small pressurised aeroplanes, kept apart by intent.

Its 1.15 is a dynamic factor at the failure of an element, on pressure *and* flight
loads; the 1.15 of transport residual strength is on pressure alone, other loads
omitted. Both happen to be the same number; neither stands for the other.
"""

from __future__ import annotations

from repairs.analysis.loads.shell import (
    CabinPressures,
    LoadCase,
    Requirement,
    hoop_stress,
)
from repairs.analysis.types import Grade, GrossStress, Sourced

_RULE = "14 CFR 23.571(b) at amendment 23-48, read in a copy of its text"
DYNAMIC_FACTOR = Sourced(
    1.15, "-", f"{_RULE}: unless dynamic effects are otherwise considered", Grade.PRINT
)
LIMIT_SHARE = Sourced(
    0.75, "-", f"{_RULE}: of the limit load factor at V_C", Grade.PRINT
)
FAIL_SAFE = (
    "{dynamic:g} × ({share:g} × limit flight loads at V_C + normal operating "
    "differential + external aerodynamic pressure), an element failed"
)


def fail_safe_requirement(
    pressures: CabinPressures,
    radius: float,
    thickness: float,
    flight: GrossStress | None,
    dynamic: Sourced = DYNAMIC_FACTOR,
) -> Requirement:
    """Return the strength asked of a small cabin with one element failed.

    Parameters
    ----------
    pressures
        Normal operating and external differential [MPa]; relief is not used.
    radius, thickness
        Of the skin [mm].
    flight
        Gross stress from limit flight loads at V_C [MPa]; None = not recorded, so the
        case is not checked.
    dynamic
        The rule's factor, or 1.0 with its source where dynamics are considered.

    Returns
    -------
    Requirement
        Ultimate by the rule: no further factor.

    Notes
    -----
    Range of `hoop_stress`. Aeroplanes certified to this rule only.

    References
    ----------
    .. [1] See `DYNAMIC_FACTOR`, `LIMIT_SHARE`.
    """
    normal = hoop_stress(pressures.normal + pressures.external, radius, thickness)
    title = FAIL_SAFE.format(dynamic=dynamic.value, share=LIMIT_SHARE.value)
    stress = (
        None
        if flight is None
        else GrossStress(dynamic.value * (normal + LIMIT_SHARE.value * flight))
    )
    return Requirement("fail-safe, small cabin", (LoadCase(title, stress),))
