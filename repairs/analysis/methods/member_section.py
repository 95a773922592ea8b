r"""A damaged member: the section that is left against limit and ultimate load.

The kind of load the member carries chooses the checks: net section and yield in
tension; column, crippling and yield in compression; the fibres in bending; strength and
buckling of the web in shear. Static only: no life follows from it.
"""

from __future__ import annotations

import math
from dataclasses import replace

from repairs.analysis.growth.path import ultimate_kept
from repairs.analysis.inputs import SPECS, Inputs
from repairs.analysis.methods import applicability as apply
from repairs.analysis.methods.member_common import is_member, own_needed, warn_static
from repairs.analysis.note import Note
from repairs.analysis.strength.checks import Check, Level, governing
from repairs.analysis.strength.load_kinds import LoadKind, Structure, checks_for
from repairs.analysis.strength.member_inputs import NEEDED, member_checks, needed
from repairs.analysis.types import Applicability, Margin, Result, Use

LIMIT_LOAD = "limit load"
ULTIMATE_LOAD = "{factor:g} × limit load"
LOADS = ("member_limit_force", "member_limit_moment", "member_limit_shear")


def required(inputs: Inputs, use: Use) -> tuple[str, ...]:
    """Return the inputs this method needs; the kind of load decides."""
    del use
    kind = inputs.word("load_kind")
    loads = needed(LoadKind(kind)) if kind in NEEDED else ()
    return own_needed(inputs, ("element", "load_kind", *loads))


def tests(inputs: Inputs, use: Use) -> tuple[Applicability, ...]:
    """Run the applicability tests on what the record says."""
    del use
    failed = inputs.word("member_failed") == "yes"
    whole = apply.word_is(inputs, "member_failed", "member has failed", "no")
    return (
        is_member(inputs),
        apply.word_among(inputs, "load_kind", SPECS["load_kind"].title, tuple(NEEDED)),
        *((whole,) if failed else ()),
        *_left(inputs),
        *_loaded(inputs),
    )


def _loaded(inputs: Inputs) -> tuple[Applicability, ...]:
    """Test that a recorded load of this kind is not zero."""
    kind = inputs.word("load_kind")
    names = needed(LoadKind(kind)) if kind in NEEDED else ()
    found = ((name, inputs.maybe(name)) for name in LOADS if name in names)
    return tuple(
        Applicability(
            SPECS[name].title,
            f"{load.value:g} {load.unit}",
            "not zero",
            load.value != 0,
        )
        for name, load in found
        if load is not None
    )


def _left(inputs: Inputs) -> tuple[Applicability, ...]:
    """Test that something of the section is left, where both areas are recorded."""
    area, lost = inputs.maybe("member_area"), inputs.maybe("member_lost_area")
    if area is None or lost is None:
        return ()
    value, wanted = f"{lost.value:g} of {area.value:g} mm2", "less than the section"
    met = 0 <= lost.value < area.value
    return (Applicability(SPECS["member_lost_area"].title, value, wanted, met),)


def compute(inputs: Inputs, use: Use, note: Note, draft: Result) -> Result:
    """Check the section that is left; the tests have passed."""
    del use
    kind = LoadKind(inputs.word("load_kind") or "")
    made = member_checks(kind, inputs, note)
    warn_static(inputs, note)
    factor = inputs.number("ultimate_factor").value
    return with_checks(kind, made, factor, draft)


def with_checks(
    kind: LoadKind, made: tuple[Check, ...], factor: float, draft: Result
) -> Result:
    """Fill strengths and margins from checks at limit and at ultimate.

    At limit load the mechanisms of ultimate load hold too, at the limit stress.
    """
    ultimate = tuple(c for c in made if c.level is Level.ULTIMATE)
    limit = tuple(c for c in made if c.level is Level.LIMIT) + tuple(
        replace(c, level=Level.LIMIT, applied=c.applied / factor) for c in ultimate
    )
    worst, least = governing(ultimate), governing(limit)
    done = {check.mechanism for check in made}
    undone = tuple(str(m) for m in checks_for(Structure.MEMBER, kind) if m not in done)
    lead = worst if worst.margin <= least.margin else least
    cases = {
        Level.LIMIT: LIMIT_LOAD,
        Level.ULTIMATE: ULTIMATE_LOAD.format(factor=factor),
    }
    return replace(
        draft,
        governing=str(lead.mechanism),
        residual_strength_mpa=least.allowable,
        required_residual_mpa=least.applied,
        residual_case=LIMIT_LOAD,
        margin_residual=_finite(least),
        ultimate_mpa=worst.applied,
        ultimate_case=cases[Level.ULTIMATE],
        margin_ultimate=_finite(worst),
        ultimate_kept=ultimate_kept(worst.margin, undone),
        margins=tuple(
            Margin(
                draft.title,
                str(check.mechanism),
                cases[check.level],
                check.allowable,
                check.applied,
            )
            for check in (*limit, *ultimate)
        ),
        cases_not_checked=undone,
    )


def _finite(check: Check) -> float | None:
    return check.margin if math.isfinite(check.margin) else None
