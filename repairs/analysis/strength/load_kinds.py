r"""Which checks a panel or a member needs by the kind of load it carries, as data.

And what a loss of thickness does to a margin that is known: with :math:`t_r` what is
left of the thickness, :math:`(1 + MS)\,t_r^{p} - 1`, p by what governs.
"""

from __future__ import annotations

from enum import StrEnum

from repairs.analysis.errors import InputError, within
from repairs.analysis.types import Grade, Reference

NOT_CARRIED = (
    "A {structure} that carries {kind} has no checks here. Choose one of: {known}, or "
    "needs an engineer."
)
LOSS = Reference(
    "Thickness scaling: membrane t, bending of a plate t^2, buckling load t^3",
    Grade.DERIVED,
)


class LoadKind(StrEnum):
    """The kind of load a panel or member carries."""

    TENSION = "tension"
    COMPRESSION = "compression"
    SHEAR = "shear"
    BENDING = "bending"
    TORSION = "torsion"
    PRESSURE = "pressure"


class Structure(StrEnum):
    """A sheet between stiffeners, or a bar-like member."""

    PANEL = "panel"
    MEMBER = "member"


class Mechanism(StrEnum):
    """One way to fail or to yield; each is checked at its own load level."""

    NET_SECTION = "net section in tension"
    SHIFTED_TENSION = "tension with the centroid shifted"
    TENSION_YIELD = "net-section yield in tension"
    COLUMN = "column"
    SHIFTED_COLUMN = "column with the centroid shifted"
    CRIPPLING = "crippling"
    COMPRESSION_YIELD = "yield in compression"
    COMPRESSION_BUCKLING = "panel buckling in compression"
    INTER_RIVET = "buckling between rivets"
    SHEAR_ULTIMATE = "ultimate shear"
    SHEAR_BUCKLING = "web buckling in shear"
    COMBINED_BUCKLING = "panel buckling in compression and shear"
    FIBRE_ULTIMATE = "extreme fibre in tension"
    FIBRE_YIELD = "extreme fibre at yield"
    FIBRE_CRIPPLING = "extreme fibre in compression"
    TORSION_SHEAR = "shear of torsion"
    CRACK_RESIDUAL = "residual strength with the damage as a crack"


_M = Mechanism
CHECKS: dict[tuple[Structure, LoadKind], tuple[Mechanism, ...]] = {
    (Structure.MEMBER, LoadKind.TENSION): (
        _M.NET_SECTION,
        _M.SHIFTED_TENSION,
        _M.TENSION_YIELD,
    ),
    (Structure.MEMBER, LoadKind.COMPRESSION): (
        _M.COLUMN,
        _M.SHIFTED_COLUMN,
        _M.CRIPPLING,
        _M.COMPRESSION_YIELD,
    ),
    (Structure.MEMBER, LoadKind.SHEAR): (_M.SHEAR_ULTIMATE, _M.SHEAR_BUCKLING),
    (Structure.MEMBER, LoadKind.BENDING): (
        _M.FIBRE_ULTIMATE,
        _M.FIBRE_YIELD,
        _M.FIBRE_CRIPPLING,
    ),
    (Structure.MEMBER, LoadKind.TORSION): (_M.TORSION_SHEAR,),
    (Structure.PANEL, LoadKind.TENSION): (
        _M.NET_SECTION,
        _M.TENSION_YIELD,
        _M.CRACK_RESIDUAL,
    ),
    (Structure.PANEL, LoadKind.PRESSURE): (
        _M.NET_SECTION,
        _M.TENSION_YIELD,
        _M.CRACK_RESIDUAL,
    ),
    (Structure.PANEL, LoadKind.COMPRESSION): (
        _M.COMPRESSION_BUCKLING,
        _M.INTER_RIVET,
        _M.COMPRESSION_YIELD,
    ),
    (Structure.PANEL, LoadKind.SHEAR): (_M.SHEAR_ULTIMATE, _M.SHEAR_BUCKLING),
}


def checks_for(structure: Structure, kind: LoadKind) -> tuple[Mechanism, ...]:
    """Return the checks a structure of a load kind needs; none known is refused."""
    found = CHECKS.get((structure, kind))
    if found is None:
        known = ", ".join(k for s, k in CHECKS if s is structure)
        raise InputError(
            NOT_CARRIED.format(structure=structure, kind=kind, known=known)
        )
    return found


_LOSS_POWER = {
    Mechanism.NET_SECTION: 1,
    Mechanism.TENSION_YIELD: 1,
    Mechanism.SHEAR_ULTIMATE: 1,
    Mechanism.COMPRESSION_YIELD: 1,
    Mechanism.FIBRE_ULTIMATE: 2,
    Mechanism.FIBRE_YIELD: 2,
    Mechanism.COMPRESSION_BUCKLING: 3,
    Mechanism.SHEAR_BUCKLING: 3,
    Mechanism.INTER_RIVET: 3,
}
"""Power of thickness in the load borne; fibres are those of a plate bent flatwise."""


def margin_after_loss(margin: float, left: float, governed_by: Mechanism) -> float:
    r"""Return a known margin after a loss of thickness, :math:`(1 + MS)t_r^p - 1`.

    Parameters
    ----------
    margin
        Margin of the whole thickness [-].
    left
        Thickness left over thickness [-].
    governed_by
        What the margin is of: membrane p = 1, plate bending 2, buckling 3.

    Returns
    -------
    float
        Margin on load [-].

    Notes
    -----
    Range 0.3 <= t_r <= 1. Loss over the whole panel: a local blend costs less. The
    governing check may change; each known margin is scaled.

    References
    ----------
    .. [1] See `LOSS`.
    """
    within("Thickness left over thickness", left, 0.3, 1, "a blended panel")
    if governed_by not in _LOSS_POWER:
        raise InputError(f"The margin of {governed_by} does not go by thickness alone.")
    return (1 + margin) * left ** _LOSS_POWER[governed_by] - 1
