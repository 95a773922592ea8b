"""Stress-life left under a flight's counted cycles, in flights."""

from __future__ import annotations

from repairs.analysis.growth.laws import StressCycle
from repairs.analysis.inputs import Inputs
from repairs.analysis.note import Note
from repairs.analysis.stress_life.curves import NO_FINITE_LIFE
from repairs.analysis.stress_life.damage_sum import (
    AT_ONE,
    CONTINUED,
    MINER,
    NOT_HALF,
    Below,
    BelowLastTerm,
    DamageSum,
    NetCycles,
    damage_sum,
)
from repairs.analysis.stress_life.left import (
    NOT_UNLIMITED,
    StressLife,
    check_below_yield,
    less_clad,
    share_used,
    write_band,
    write_compared,
    write_curves,
)
from repairs.analysis.types import GrossStress, Sourced

NOT_CHOSEN = (
    "What cycles at or below the last term of the curve count is not chosen: none "
    "counts, as the curve says. Aluminium has no endurance limit under a spectrum: "
    "barred from approval until it is chosen."
)
UNCOUNTED = (
    "{count:,.2f} of {all:,.2f} cycles per flight lie at or below the last term of the "
    "curve and count nothing; that is not unlimited life."
)
ROWS_SHOWN = 5
"""Cycles that do most damage, each written down."""


def spectrum_life_left(
    inputs: Inputs,
    note: Note,
    kt: float,
    after: NetCycles,
    before: NetCycles,
    *,
    below: BelowLastTerm | None = None,
    failure: Sourced = AT_ONE,
) -> StressLife:
    """Return the flights left at the new stress and Kt, less the share already used.

    Parameters
    ----------
    inputs, note
        Of the evaluation.
    kt
        Stress-concentration factor on net stress now [-]; 1 before.
    after, before
        Cycles of one flight on the net section now, and on the undamaged one [MPa].
    below
        What cycles at or below the last term count; None = not chosen, which bars the
        result from approval where there are such cycles.
    failure
        Sum at failure [-].

    Returns
    -------
    StressLife
        Mean flights left, None where nothing counts.

    Notes
    -----
    Range of `damage_sum`. Linear: the order of the cycles does not count.

    References
    ----------
    .. [1] See `MINER`.
    """
    family = inputs.family()
    assert family is not None, "evaluate() has checked that stress_life is there"
    check_below_yield(inputs, max(0.0, float(after.maximum.max())))
    write_curves(note, family, kt)
    choice = below or BelowLastTerm(Below.NONE)
    note.text(f"Cycles at or below the last term: {choice.words}.")
    if choice.join is not None:
        note.given("N_J", "life from which the curve is continued", choice.join)
        note.step("", "curve continued", choice.option, None, "", CONTINUED)
    note.given("D_f", "sum at failure", failure)
    note.text(NOT_HALF.format(value=failure.value))
    new = damage_sum(family, kt, after, choice, failure)
    old = damage_sum(family, 1.0, before, choice, failure)
    _write_sum(note, "after", f"Kt {kt:.3f}, ln S on ln Kt", after, new)
    _write_sum(note, "before", "Kt 1, undamaged section", before, old)
    for row in new.largest(1):
        most = StressCycle(
            GrossStress(float(after.maximum[row])), float(after.ratio[row])
        )
        write_compared(inputs, note, kt, most)
    if new.uncounted:
        every = float(after.count.sum())
        note.warn(UNCOUNTED.format(count=new.uncounted, all=every))
        if below is None:
            note.warn(NOT_CHOSEN, bars=True)
    if new.flights is None:
        note.warn(NOT_UNLIMITED.format(words=NO_FINITE_LIFE))
        return StressLife(None, NO_FINITE_LIFE)
    return StressLife(_left(inputs, note, new.flights, old.flights), "")


def _left(inputs: Inputs, note: Note, new: float, old: float | None) -> float:
    lived = less_clad(inputs, note, new)
    share = share_used(inputs, note, old)
    left = max(0.0, 1 - share) * lived
    note.step(
        "N_left",
        "(1 − n / N_before) N_after",
        f"(1 − {share:.4f}) {lived:,.0f}",
        left,
        "flights",
    )
    write_band(note, left, "flights")
    return left


def _write_sum(
    note: Note, when: str, what: str, cycles: NetCycles, found: DamageSum
) -> None:
    """Write the cycles that do most damage, the sum, and the mean life in flights."""
    total = found.per_flight
    for row in found.largest(ROWS_SHOWN):
        note.step(
            "n/N",
            f"damage of one kind of cycle {when}",
            f"{cycles.count[row]:g} of S_max {cycles.maximum[row]:.1f} MPa net, "
            f"R {cycles.ratio[row]:.3g}: N = {found.lives[row]:,.0f}, "
            f"{found.damage[row] / total:.1%} of the sum",
            float(found.damage[row]),
            "-",
        )
    note.step(
        f"D_{when}",
        f"Σ n/N per flight, {what}",
        f"{cycles.count.sum():,.4g} cycles per flight",
        total,
        "-",
        MINER,
    )
    note.step(
        f"N_{when}",
        "mean stress-life, D_f / D",
        NO_FINITE_LIFE if found.flights is None else "",
        found.flights,
        "flights",
    )
