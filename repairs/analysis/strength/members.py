"""Strength of a member by the kind of load it carries.

Every function returns the checks of one load kind; the least margin governs. Damage
enters through the section that is left: its area, shifted centroid and second moments.
"""

from __future__ import annotations

from dataclasses import dataclass

from repairs.analysis.errors import within
from repairs.analysis.strength import buckling, columns, interaction, torsion
from repairs.analysis.strength.checks import Check, Demand, Level, MemberMaterial
from repairs.analysis.strength.load_kinds import Mechanism
from repairs.analysis.strength.section import (
    SECTION,
    Section,
    fibre_stress,
    properties,
)
from repairs.analysis.types import Grade, Reference, Sourced

NET_AREA = Reference("Load over the net section, elementary", Grade.DERIVED)


def tension_checks(
    section: Section,
    material: MemberMaterial,
    demand: Demand,
    hole_area: float,
    load_at: tuple[float, float] | None,
) -> tuple[Check, ...]:
    """Return the checks of a member in tension.

    Parameters
    ----------
    section
        What is left of it.
    material, demand
        Strengths [MPa] and force [N].
    hole_area
        Area of fastener holes in the worst row [mm^2].
    load_at
        Point the load acts through, as the centroid before damage [mm]; None = the
        member is held against bending, or the load follows its centroid.

    Returns
    -------
    tuple of Check
        Net section, yield; with `load_at` the fibre stress of the shift.

    Notes
    -----
    Range hole area below 90 % of the section. With a shift the fibre stress is elastic
    and the member free to bend: an upper bound.

    References
    ----------
    .. [1] See `NET_AREA`, `section`.
    """
    area = properties(section).area
    net = area * (
        1 - within("Hole area over section", hole_area / area, 0, 0.9, "a net section")
    )
    found = [
        Check(
            Mechanism.NET_SECTION,
            Level.ULTIMATE,
            demand.ultimate / net,
            material.tension_ultimate,
            NET_AREA,
        ),
        Check(
            Mechanism.TENSION_YIELD,
            Level.LIMIT,
            demand.limit / net,
            material.tension_yield,
            NET_AREA,
        ),
    ]
    if load_at is not None:
        fibre = fibre_stress(section, demand.ultimate, at=load_at).largest
        found.append(
            Check(
                Mechanism.SHIFTED_TENSION,
                Level.ULTIMATE,
                fibre * area / net,
                material.tension_ultimate,
                SECTION,
            )
        )
    return tuple(found)


@dataclass(frozen=True, slots=True)
class Column:
    """Free length [mm], end fixity [-], crippling of the section left [MPa]."""

    length: float
    fixity: float
    crippling: Sourced


def compression_checks(
    section: Section,
    material: MemberMaterial,
    demand: Demand,
    column: Column,
    load_at: tuple[float, float] | None,
) -> tuple[Check, ...]:
    """Return the checks of a member in compression.

    Parameters
    ----------
    section, material, demand
        What is left, strengths [MPa], force [N].
    column
        Length, fixity and crippling strength of what is left.
    load_at
        As in `tension_checks`; the shift bends the column and its thrust adds to it.

    Returns
    -------
    tuple of Check
        Column, crippling, yield; with `load_at` the column bent by the shift.

    Notes
    -----
    Range of `columns.column_stress`. Holes filled with fasteners carry compression.
    Twisting of open sections is not in it.

    References
    ----------
    .. [1] See `columns.JOHNSON_COLUMN`, `interaction.BEAM_COLUMN`.
    """
    own = properties(section)
    crippling = min(column.crippling.value, material.compression_yield)
    euler = columns.euler_stress(
        material.modulus, own.least_gyration, column.length, column.fixity
    )
    strength = buckling.johnson(euler, crippling)
    stress = demand.ultimate / own.area
    cut_off = Reference(column.crippling.source, column.crippling.grade)
    found = [
        Check(
            Mechanism.COLUMN, Level.ULTIMATE, stress, strength, columns.JOHNSON_COLUMN
        ),
        Check(Mechanism.CRIPPLING, Level.ULTIMATE, stress, crippling, cut_off),
        Check(
            Mechanism.COMPRESSION_YIELD,
            Level.LIMIT,
            demand.limit / own.area,
            material.compression_yield,
            material.reference,
        ),
    ]
    if load_at is not None:
        pressed = -fibre_stress(section, -demand.ultimate, at=load_at).smallest
        together = interaction.beam_column_margin(
            stress / strength, max(pressed - stress, 0.0) / crippling, stress / euler
        )
        found.append(
            Check(
                Mechanism.SHIFTED_COLUMN,
                Level.ULTIMATE,
                pressed,
                crippling,
                interaction.BEAM_COLUMN,
                together,
            )
        )
    return tuple(found)


def bending_checks(
    section: Section,
    material: MemberMaterial,
    moment_x: Demand,
    crippling: Sourced,
    *,
    pulls_up: bool,
    shape_factor: Sourced | None = None,
) -> tuple[Check, ...]:
    r"""Return the checks of a member bent about its x axis.

    Parameters
    ----------
    section, material
        What is left, strengths [MPa].
    moment_x
        Bending moment [N mm].
    crippling
        Strength of the compressed flange [MPa].
    pulls_up
        Whether the fibres at +y are in tension.
    shape_factor
        Plastic over elastic moment, stated with its source; None = elastic. With it the
        ultimate stress on the elastic fibre is the factor times F_ty.

    Returns
    -------
    tuple of Check
        Tension fibre, yield of either fibre, compressed fibre.

    Notes
    -----
    Range 1 <= shape factor <= 2. Unsymmetric sections bend askew; the product of
    inertia is in the stresses. Sideways buckling of the beam is not in it.

    References
    ----------
    .. [1] See `section.SECTION`.
    """
    sign = 1.0 if pulls_up else -1.0
    top = fibre_stress(section, 0.0, sign * moment_x.ultimate)
    limit = fibre_stress(section, 0.0, sign * moment_x.limit)
    allowable, origin = material.tension_ultimate, SECTION
    if shape_factor is not None:
        factor = within("Shape factor", shape_factor.value, 1, 2, "a plastic moment")
        allowable = factor * material.tension_yield
        origin = Reference(shape_factor.source, shape_factor.grade)
    flange = min(crippling.value, material.compression_yield)
    pulled = limit.largest / material.tension_yield
    pressed = -limit.smallest / material.compression_yield
    worst = (
        (limit.largest, material.tension_yield)
        if pulled >= pressed
        else (-limit.smallest, material.compression_yield)
    )
    return (
        Check(Mechanism.FIBRE_ULTIMATE, Level.ULTIMATE, top.largest, allowable, origin),
        Check(Mechanism.FIBRE_YIELD, Level.LIMIT, *worst, SECTION),
        Check(
            Mechanism.FIBRE_CRIPPLING,
            Level.ULTIMATE,
            -top.smallest,
            flange,
            Reference(crippling.source, crippling.grade),
        ),
    )


def torsion_checks(
    walls: tuple[torsion.Wall, ...],
    enclosed: float | None,
    material: MemberMaterial,
    demand: Demand,
) -> tuple[Check, ...]:
    """Return the check of a thin section in torsion.

    Parameters
    ----------
    walls
        Of the section left.
    enclosed
        Area within the middle line of a closed cell [mm^2]; None = open, as after a cut
        through a wall.
    material, demand
        Strengths [MPa], torque [N mm].

    Returns
    -------
    tuple of Check
        Shear stress against ultimate shear.

    Notes
    -----
    Range of `torsion`. Walls that buckle in shear are checked by `web_buckling_stress`.

    References
    ----------
    .. [1] See `torsion.BREDT`, `torsion.OPEN`.
    """
    if enclosed is None:
        found, origin = torsion.open_torsion(demand.ultimate, walls), torsion.OPEN
    else:
        found = torsion.closed_torsion(demand.ultimate, enclosed, walls)
        origin = torsion.BREDT
    return (
        Check(
            Mechanism.TORSION_SHEAR,
            Level.ULTIMATE,
            found.stress,
            material.shear_ultimate,
            origin,
        ),
    )
