"""Strength of a flat panel or web by the kind of load it carries.

A thickness lost is taken as lost over the whole panel, which a local blend is not:
stresses at buckling fall with its square, loads with its cube.
"""

from __future__ import annotations

from dataclasses import dataclass

from repairs.analysis.errors import within
from repairs.analysis.strength import buckling, columns, interaction
from repairs.analysis.strength.checks import Check, Demand, Level, MemberMaterial
from repairs.analysis.strength.load_kinds import Mechanism


@dataclass(frozen=True, slots=True)
class Web:
    """A web or panel in shear: both sides and the thickness left [mm], its edges."""

    length: float
    depth: float
    thickness: float
    edges: buckling.Edges


def web_buckling_stress(web: Web, material: MemberMaterial) -> float:
    """Return the shear stress at which a web buckles, yield included [MPa].

    Parameters
    ----------
    web, material
        Geometry [mm] and strengths [MPa].

    Returns
    -------
    float
        Johnson's parabola on the elastic stress with shear yield as cut-off.

    Notes
    -----
    Range of `buckling.shear_coefficient`.

    References
    ----------
    .. [1] See `buckling.SHEAR_K`, `buckling.JOHNSON`.
    """
    k = buckling.shear_coefficient(web.edges, web.length, web.depth)
    shorter = min(web.length, web.depth)
    elastic = buckling.plate_stress(
        k, material.modulus, material.poisson, web.thickness, shorter
    )
    return buckling.johnson(elastic, material.shear_yield)


def shear_checks(
    web: Web, material: MemberMaterial, demand: Demand
) -> tuple[Check, ...]:
    """Return the checks of a web in shear.

    Parameters
    ----------
    web, material, demand
        Geometry [mm], strengths [MPa], shear force over the depth [N].

    Returns
    -------
    tuple of Check
        Ultimate shear; buckling, to be resisted at ultimate.

    Notes
    -----
    Range of `web_buckling_stress`. A web that may buckle carries on by diagonal
    tension, which has no method here.

    References
    ----------
    .. [1] Even shear flow over the depth; see `buckling.SHEAR_K`.
    """
    stress = demand.ultimate / (web.depth * web.thickness)
    return (
        Check(
            Mechanism.SHEAR_ULTIMATE,
            Level.ULTIMATE,
            stress,
            material.shear_ultimate,
            material.reference,
        ),
        Check(
            Mechanism.SHEAR_BUCKLING,
            Level.ULTIMATE,
            stress,
            web_buckling_stress(web, material),
            buckling.SHEAR_K,
        ),
    )


def tension_checks(
    web: Web, material: MemberMaterial, demand: Demand, hole_width: float
) -> tuple[Check, ...]:
    """Return the static checks of a panel in tension along its length, uncracked.

    Parameters
    ----------
    web, material, demand
        Geometry [mm], strengths [MPa], force over the width [N].
    hole_width
        Sum of hole diameters in the worst row [mm].

    Returns
    -------
    tuple of Check
        Net section at ultimate, yield at limit.

    Notes
    -----
    Range holes below 90 % of the width. A crack, or a hole that may crack, has methods
    of its own.

    References
    ----------
    .. [1] Load over the net section.
    """
    lost = within("Holes over width", hole_width / web.depth, 0, 0.9, "a net section")
    net = web.depth * web.thickness * (1 - lost)
    return (
        Check(
            Mechanism.NET_SECTION,
            Level.ULTIMATE,
            demand.ultimate / net,
            material.tension_ultimate,
            material.reference,
        ),
        Check(
            Mechanism.TENSION_YIELD,
            Level.LIMIT,
            demand.limit / net,
            material.tension_yield,
            material.reference,
        ),
    )


@dataclass(frozen=True, slots=True)
class Rivets:
    """Pitch along the load [mm] and fixity of the heads [-], chosen or stated."""

    pitch: float
    fixity: float


def panel_buckling_stress(web: Web, material: MemberMaterial) -> float:
    """Return the compression stress at which a panel buckles, yield included [MPa].

    Parameters
    ----------
    web, material
        Geometry [mm], load along the length; strengths [MPa].

    Returns
    -------
    float
        Johnson's parabola on the elastic stress with compression yield as cut-off.

    Notes
    -----
    Range of `buckling.compression_coefficient`.

    References
    ----------
    .. [1] See `buckling.COMPRESSION_K`, `buckling.JOHNSON`.
    """
    k = buckling.compression_coefficient(
        web.edges, web.length, web.depth, material.poisson
    )
    elastic = buckling.plate_stress(
        k, material.modulus, material.poisson, web.thickness, web.depth
    )
    return buckling.johnson(elastic, material.compression_yield)


def compression_checks(
    web: Web, material: MemberMaterial, demand: Demand, rivets: Rivets | None
) -> tuple[Check, ...]:
    """Return the checks of a panel in compression along its length.

    Parameters
    ----------
    web, material, demand
        Geometry [mm], strengths [MPa], force over the width [N].
    rivets
        Those that hold it to its stiffeners; None = no rivets.

    Returns
    -------
    tuple of Check
        Panel buckling and buckling between rivets at ultimate, yield at limit.

    Notes
    -----
    Range of both stresses. A panel that may buckle is checked as effective width with
    its stiffener instead.

    References
    ----------
    .. [1] See `buckling.COMPRESSION_K`, `columns.INTER_RIVET`.
    """
    area = web.depth * web.thickness
    stress = demand.ultimate / area
    found = [
        Check(
            Mechanism.COMPRESSION_BUCKLING,
            Level.ULTIMATE,
            stress,
            panel_buckling_stress(web, material),
            buckling.COMPRESSION_K,
        )
    ]
    if rivets is not None:
        between = columns.inter_rivet_stress(
            material.modulus,
            material.poisson,
            web.thickness,
            rivets.pitch,
            rivets.fixity,
            material.compression_yield,
            material.shape,
        )
        found.append(
            Check(
                Mechanism.INTER_RIVET,
                Level.ULTIMATE,
                stress,
                between,
                columns.INTER_RIVET,
            )
        )
    found.append(
        Check(
            Mechanism.COMPRESSION_YIELD,
            Level.LIMIT,
            demand.limit / area,
            material.compression_yield,
            material.reference,
        )
    )
    return tuple(found)


def compression_and_shear(
    web: Web, material: MemberMaterial, compression: Demand, shear: Demand
) -> Check:
    """Return the buckling check of a panel under compression and shear together.

    Parameters
    ----------
    web, material
        Geometry [mm], strengths [MPa].
    compression, shear
        Forces over the width [N].

    Returns
    -------
    Check
        By the published parabola, at ultimate.

    Notes
    -----
    Range of both stresses; long plates.

    References
    ----------
    .. [1] See `interaction.INTERACTIONS`.
    """
    name = "plate: compression and shear"
    area = web.depth * web.thickness
    allowable = panel_buckling_stress(web, material)
    pressed = compression.ultimate / area
    margin = interaction.combined_margin(
        name,
        pressed / allowable,
        shear.ultimate / area / web_buckling_stress(web, material),
    )
    return Check(
        Mechanism.COMBINED_BUCKLING,
        Level.ULTIMATE,
        pressed,
        allowable,
        interaction.interaction(name).reference,
        margin,
    )
