"""A member that has failed: what its neighbours carry, and whether they bear it.

Neighbours are alike and lie on both sides, or on one; skin and web between them take
nothing. They carry their own limit load and the failed one's, times the factor at its
failure. Static only.
"""

from __future__ import annotations

from dataclasses import replace

from repairs.analysis.errors import within
from repairs.analysis.growth.path import ultimate_kept
from repairs.analysis.inputs import SPECS, Inputs
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods.member_common import is_member, warn_static
from repairs.analysis.note import Note
from repairs.analysis.strength.load_paths import (
    LOAD_SHARE,
    Member,
    Redistribution,
    failed_member,
)
from repairs.analysis.types import Applicability, Margin, Result, Sourced, Use

FAILED = "failed member"
HELD_STRAIGHT = (
    "Neighbours are taken as equally stiff and held straight by skin or web, which "
    "themselves take none of the load."
)
SEVERED = "The member carries nothing: repair it before further flight."
FORCES = ("tension", "compression")
NEIGHBOURS = (
    "member_limit_force",
    "neighbour_count",
    "neighbour_strength",
    "neighbour_limit_force",
    "dynamic_factor",
    "ultimate_factor",
    "member_area",
)
BOTH = (1.0, 2.0)


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs."""
    del inputs, use
    return ("element", "member_failed", "load_kind", *NEIGHBOURS)


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    del use
    count = inputs.maybe("neighbour_count")
    counted = None if count is None else count.value in BOTH
    value = apply.NOT_RECORDED if count is None else f"{count.value:g}"
    return (
        is_member(inputs),
        apply.word_is(inputs, "member_failed", "member has failed", "yes"),
        apply.word_among(inputs, "load_kind", SPECS["load_kind"].title, FORCES),
        Applicability(SPECS["neighbour_count"].title, value, "1 or 2", counted),
    )


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Share the failed member's load out; the tests have passed."""
    del use

    def given(symbol: str, name: str) -> float:
        return note.given(symbol, SPECS[name].title, inputs.number(name))

    own = abs(given("P", "member_limit_force"))
    count = round(given("n", "neighbour_count"))
    strength = given("P_u", "neighbour_strength")
    other = abs(given("P_n", "neighbour_limit_force"))
    given("k_dyn", "dynamic_factor")
    factor = given("k_ult", "ultimate_factor")
    area = given("A", "member_area")
    note.warn(HELD_STRAIGHT)
    note.warn(SEVERED)
    warn_static(inputs, note)
    members = (
        Member(FAILED, 1.0, 0.0, strength),
        *(Member(f"neighbour {i + 1}", 1.0, 0.0, strength) for i in range(count)),
    )
    total = within(
        "Limit force of the failed member and its neighbours, N",
        own + count * other,
        1e-9,
        1e12,
        "a load",
        "Enter the loads they carry.",
    )
    dynamic = inputs.number("dynamic_factor")
    shares = {
        case: _share(note, members, times * total, dynamic, case)
        for case, times in (("limit load", 1.0), (f"{factor:g} × limit load", factor))
    }
    return _filled(draft, shares, strength, area)


def _share(
    note: Note,
    members: tuple[Member, ...],
    load: float,
    dynamic: Sourced,
    case: str,
) -> Redistribution:
    """Fail the member at one load level and write down what follows."""
    found = failed_member(members, FAILED, load, 0.0, dynamic, held_straight=True)
    note.step(
        "MS",
        f"strength of a neighbour over its load − 1, {case}",
        f"{load * dynamic.value:,.0f} N on {len(members) - 1}; governs: "
        f"{found.governing}",
        found.margin,
        "-",
        LOAD_SHARE,
    )
    if not found.holds:
        note.warn(
            f"At {case} the rest does not hold: after the failed member "
            f"{', '.join(found.followed)} follow."
        )
    return found


def _filled(
    draft: Result, shares: dict[str, Redistribution], strength: float, area: float
) -> Result:
    """Fill strengths and margins as stress on the failed member's section."""
    (at_limit, limit), (at_ultimate, ultimate) = shares.items()
    stress = strength / area

    def required(found: Redistribution) -> float:
        return stress / (1 + found.margin)

    return replace(
        draft,
        governing=f"{ultimate.governing} after the {FAILED}",
        residual_strength_mpa=stress,
        required_residual_mpa=required(limit),
        residual_case=at_limit,
        margin_residual=limit.margin,
        ultimate_mpa=required(ultimate),
        ultimate_case=at_ultimate,
        margin_ultimate=ultimate.margin,
        ultimate_kept=ultimate_kept(ultimate.margin, ()),
        margins=tuple(
            Margin(draft.title, found.governing, case, stress, required(found))
            for case, found in shares.items()
        ),
    )
