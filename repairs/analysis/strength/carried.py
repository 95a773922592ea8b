"""A member with its section and material: the load kind it carries chooses the checks.

A member may carry several kinds at once; each is checked by itself and the least margin
governs. Compression with bending is checked together where the centroid has shifted;
other loads together are for `interaction`.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import TypeVar

from repairs.analysis.errors import InputError
from repairs.analysis.strength import members, panels
from repairs.analysis.strength.checks import Check, Demand, MemberMaterial
from repairs.analysis.strength.load_kinds import LoadKind, Structure, checks_for
from repairs.analysis.strength.section import Rectangle, Section, properties
from repairs.analysis.strength.torsion import Wall
from repairs.analysis.types import Sourced

LACKS = "A member that carries {kind} needs its {part}. Enter it."
SEVERAL = (
    "Several load kinds act on this member ({kinds}); each is checked by itself, their "
    "action together is not."
)


Point = tuple[float, float]
"""A point of the section, x and y [mm]."""
Part = TypeVar("Part")


@dataclass(frozen=True, slots=True)
class Member:
    """What is left of a member, and what its checks need; None = not given.

    Parameters
    ----------
    section, material
        Rectangles left and strengths.
    held
        Whether skin or web hold it against bending by a load off its centroid.
    load_at
        Point the axial load acts through [mm]: the centroid before damage.
    hole_area
        Holes of the worst row [mm^2].
    column
        Length, fixity, crippling of what is left.
    web
        The web that carries shear.
    pulls_up
        Whether bending pulls at +y.
    shape_factor
        Stated plastic shape factor.
    walls, enclosed
        Thin walls in torsion, and the cell's area [mm^2] if it is still closed.
    """

    section: Section
    material: MemberMaterial
    held: bool
    load_at: Point
    hole_area: float
    column: members.Column | None = None
    web: panels.Web | None = None
    pulls_up: bool | None = None
    shape_factor: Sourced | None = None
    walls: tuple[Wall, ...] | None = None
    enclosed: float | None = None

    @property
    def line(self) -> Point | None:
        """Where the axial load acts, None for a member that is held [mm]."""
        return None if self.held else self.load_at


def damaged(whole: Section, cuts: tuple[Rectangle, ...]) -> tuple[Section, Point]:
    """Return what cuts leave of a section, and where its load goes on acting.

    Parameters
    ----------
    whole
        Section before the damage [mm].
    cuts
        Thickness lost, flange removed, hole, as rectangles [mm].

    Returns
    -------
    tuple of (Section, point)
        Section left and the centroid before damage [mm].

    Notes
    -----
    Range: something is left.

    References
    ----------
    .. [1] See `section.SECTION`.
    """
    before = properties(whole)
    left = whole
    for cut in cuts:
        left = left.without(cut)
    return left, (before.x, before.y)


def _given(part: Part | None, kind: LoadKind, name: str) -> Part:
    if part is None:
        raise InputError(LACKS.format(kind=kind, part=name))
    return part


def _tension(member: Member, demand: Demand) -> tuple[Check, ...]:
    return members.tension_checks(
        member.section, member.material, demand, member.hole_area, member.line
    )


def _compression(member: Member, demand: Demand) -> tuple[Check, ...]:
    column = _given(member.column, LoadKind.COMPRESSION, "length, ends and crippling")
    return members.compression_checks(
        member.section, member.material, demand, column, member.line
    )


def _bending(member: Member, demand: Demand) -> tuple[Check, ...]:
    column = _given(member.column, LoadKind.BENDING, "crippling strength")
    pulls_up = _given(member.pulls_up, LoadKind.BENDING, "direction of the moment")
    return members.bending_checks(
        member.section,
        member.material,
        demand,
        column.crippling,
        pulls_up=pulls_up,
        shape_factor=member.shape_factor,
    )


def _shear(member: Member, demand: Demand) -> tuple[Check, ...]:
    web = _given(member.web, LoadKind.SHEAR, "web")
    return panels.shear_checks(web, member.material, demand)


def _torsion(member: Member, demand: Demand) -> tuple[Check, ...]:
    walls = _given(member.walls, LoadKind.TORSION, "walls")
    return members.torsion_checks(walls, member.enclosed, member.material, demand)


_BY_KIND: dict[LoadKind, Callable[[Member, Demand], tuple[Check, ...]]] = {
    LoadKind.TENSION: _tension,
    LoadKind.COMPRESSION: _compression,
    LoadKind.BENDING: _bending,
    LoadKind.SHEAR: _shear,
    LoadKind.TORSION: _torsion,
}


@dataclass(frozen=True, slots=True)
class Carried:
    """All checks of a member, and what they leave unsaid."""

    checks: tuple[Check, ...]
    warnings: tuple[str, ...]


def checks_of(member: Member, demands: Mapping[LoadKind, Demand]) -> Carried:
    """Return the checks of a member by the kinds of load it carries.

    Parameters
    ----------
    member
        What is left of it [mm], [MPa].
    demands
        Load by kind at limit and ultimate [N], [N mm].

    Returns
    -------
    Carried
        Checks of every kind in turn; see `checks.governing`.

    Notes
    -----
    Range of each check. A kind without checks is refused, as is a part not given.

    References
    ----------
    .. [1] See `load_kinds.CHECKS`.
    """
    found: list[Check] = []
    for kind, demand in demands.items():
        checks_for(Structure.MEMBER, kind)
        found += _BY_KIND[kind](member, demand)
    several = (SEVERAL.format(kinds=", ".join(demands)),) if len(demands) > 1 else ()
    return Carried(tuple(found), several)
