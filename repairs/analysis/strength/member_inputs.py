"""From the record's inputs to a member's checks, by the load kind it carries.

The record gives the section that is left as numbers (area, second moment, extreme
fibre), not as rectangles, so a shift of the centroid is known only as "held against
bending" and is warned of.
"""

from __future__ import annotations

import math

from repairs.analysis.errors import InputError, within
from repairs.analysis.inputs import SPECS, Inputs
from repairs.analysis.note import Note
from repairs.analysis.strength import buckling, columns
from repairs.analysis.strength.checks import Check, Level, governing
from repairs.analysis.strength.load_kinds import (
    LoadKind,
    Mechanism,
    Structure,
    checks_for,
)
from repairs.analysis.strength.members import NET_AREA
from repairs.analysis.strength.section import SECTION
from repairs.analysis.types import Reference, Sourced

HELD = (
    "The member is taken as held against bending by a load off its centroid: skin or "
    "web must hold it. Otherwise give its section as rectangles."
)
LONG_WEB = "The web is taken as long and simply supported, the least it can be."
NO_TWIST = "Twisting of an open section and sideways buckling are not checked."
ZERO_LOAD = "Input {name} is zero. Enter the load the member carries."

_FORCE = ("member_limit_force", "ultimate_factor", "member_area", "member_lost_area")
NEEDED: dict[LoadKind, tuple[str, ...]] = {
    LoadKind.TENSION: (*_FORCE, "tension_strength", "yield_strength"),
    LoadKind.COMPRESSION: (
        *_FORCE,
        "member_inertia",
        "member_length",
        "member_fixity",
        "member_crippling",
        "modulus",
        "compression_yield",
    ),
    LoadKind.BENDING: (
        "member_limit_moment",
        "ultimate_factor",
        "member_inertia",
        "member_extreme_fibre",
        "member_crippling",
        "tension_strength",
        "yield_strength",
        "compression_yield",
    ),
    LoadKind.SHEAR: (
        "member_limit_shear",
        "ultimate_factor",
        "member_width",
        "member_thickness",
        "modulus",
        "poisson",
        "shear_strength",
        "yield_strength",
    ),
}
"""Inputs by load kind; torsion and pressure have no member method on the record."""


def needed(kind: LoadKind) -> tuple[str, ...]:
    """Return the inputs a member of a load kind needs; no method is refused."""
    checks_for(Structure.MEMBER, kind)
    if kind not in NEEDED:
        raise InputError(
            f"A member in {kind} has no method on recorded numbers. Needs an engineer."
        )
    return NEEDED[kind]


def member_checks(kind: LoadKind, inputs: Inputs, note: Note) -> tuple[Check, ...]:
    """Write down and return the checks of a damaged member.

    Parameters
    ----------
    kind
        Load kind the member carries.
    inputs
        Those of `needed`.
    note
        Takes every step and warning.

    Returns
    -------
    tuple of Check
        At limit and at ultimate [MPa]; see `governing`.

    Notes
    -----
    Range of the formulas called.

    References
    ----------
    .. [1] See `members`, `columns`, `buckling`.
    """
    needed(kind)
    made = {
        LoadKind.TENSION: _tension,
        LoadKind.COMPRESSION: _compression,
        LoadKind.BENDING: _bending,
        LoadKind.SHEAR: _shear,
    }[kind](inputs, note)
    for check in made:
        note.step(
            "MS",
            f"{check.mechanism}, {check.level}: allowable / applied - 1",
            f"{check.allowable:.2f} / {check.applied:.2f} - 1",
            check.margin,
            "-",
            check.reference,
        )
    note.text(f"Governing: {governing(made).mechanism}.")
    return made


def _read(inputs: Inputs, note: Note, symbol: str, name: str) -> float:
    return note.given(symbol, SPECS[name].title, inputs.number(name))


def _loads(inputs: Inputs, note: Note, symbol: str, name: str) -> tuple[float, float]:
    limit = abs(_read(inputs, note, symbol, name))
    factor = _read(inputs, note, "k_ult", "ultimate_factor")
    if limit == 0:
        raise InputError(ZERO_LOAD.format(name=name))
    return limit, factor * limit


def _force(inputs: Inputs, note: Note, sign: int) -> tuple[float, float]:
    kind = LoadKind.TENSION if sign > 0 else LoadKind.COMPRESSION
    within(
        f"Limit force along its load kind, {kind}, N",
        sign * inputs.number("member_limit_force").value,
        1e-9,
        1e12,
        "tension is positive",
        "Correct the sign of the force or the load kind.",
    )
    return _loads(inputs, note, "P_lim", "member_limit_force")


def _left(inputs: Inputs, note: Note) -> float:
    area = _read(inputs, note, "A", "member_area")
    lost = _read(inputs, note, "ΔA", "member_lost_area")
    if not 0 <= lost < area:
        raise InputError(
            f"Lost area reads {lost:.4g} mm2 of {area:.4g} mm2. Enter what was lost."
        )
    return area - lost


def _origin(value: Sourced) -> Reference:
    return Reference(value.source, value.grade)


def _tension(inputs: Inputs, note: Note) -> tuple[Check, ...]:
    limit, ultimate = _force(inputs, note, 1)
    area = _left(inputs, note)
    note.warn(HELD)
    return (
        Check(
            Mechanism.NET_SECTION,
            Level.ULTIMATE,
            ultimate / area,
            _read(inputs, note, "F_tu", "tension_strength"),
            NET_AREA,
        ),
        Check(
            Mechanism.TENSION_YIELD,
            Level.LIMIT,
            limit / area,
            _read(inputs, note, "F_ty", "yield_strength"),
            NET_AREA,
        ),
    )


def _compression(inputs: Inputs, note: Note) -> tuple[Check, ...]:
    limit, ultimate = _force(inputs, note, -1)
    area = _left(inputs, note)
    inertia = _read(inputs, note, "I", "member_inertia")
    length = _read(inputs, note, "L", "member_length")
    fixity = _read(inputs, note, "c", "member_fixity")
    modulus = _read(inputs, note, "E", "modulus")
    compression = _read(inputs, note, "F_cy", "compression_yield")
    crippling = min(_read(inputs, note, "F_cc", "member_crippling"), compression)
    column = columns.column_stress(
        modulus, math.sqrt(inertia / area), length, fixity, crippling
    )
    note.warn(HELD)
    note.warn(NO_TWIST)
    stress = ultimate / area
    return (
        Check(Mechanism.COLUMN, Level.ULTIMATE, stress, column, columns.JOHNSON_COLUMN),
        Check(
            Mechanism.CRIPPLING,
            Level.ULTIMATE,
            stress,
            crippling,
            _origin(inputs.number("member_crippling")),
        ),
        Check(
            Mechanism.COMPRESSION_YIELD,
            Level.LIMIT,
            limit / area,
            compression,
            NET_AREA,
        ),
    )


def _bending(inputs: Inputs, note: Note) -> tuple[Check, ...]:
    limit, ultimate = _loads(inputs, note, "M_lim", "member_limit_moment")
    inertia = _read(inputs, note, "I", "member_inertia")
    fibre = _read(inputs, note, "c", "member_extreme_fibre")
    tension = _read(inputs, note, "F_ty", "yield_strength")
    compression = _read(inputs, note, "F_cy", "compression_yield")
    crippling = min(_read(inputs, note, "F_cc", "member_crippling"), compression)
    note.warn(NO_TWIST)
    at_limit, at_ultimate = limit * fibre / inertia, ultimate * fibre / inertia
    return (
        Check(
            Mechanism.FIBRE_ULTIMATE,
            Level.ULTIMATE,
            at_ultimate,
            _read(inputs, note, "F_tu", "tension_strength"),
            SECTION,
        ),
        Check(
            Mechanism.FIBRE_YIELD,
            Level.LIMIT,
            at_limit,
            min(tension, compression),
            SECTION,
        ),
        Check(
            Mechanism.FIBRE_CRIPPLING,
            Level.ULTIMATE,
            at_ultimate,
            crippling,
            _origin(inputs.number("member_crippling")),
        ),
    )


def _shear(inputs: Inputs, note: Note) -> tuple[Check, ...]:
    _, ultimate = _loads(inputs, note, "V_lim", "member_limit_shear")
    depth = _read(inputs, note, "h", "member_width")
    thickness = _read(inputs, note, "t", "member_thickness")
    modulus = _read(inputs, note, "E", "modulus")
    poisson = _read(inputs, note, "ν", "poisson")
    shear_yield = _read(inputs, note, "F_ty", "yield_strength") / math.sqrt(3)
    k = buckling.shear_coefficient(buckling.Edges.SIMPLE, 1e6 * depth, depth)
    elastic = buckling.plate_stress(k, modulus, poisson, thickness, depth)
    note.warn(LONG_WEB)
    stress = ultimate / (depth * thickness)
    return (
        Check(
            Mechanism.SHEAR_ULTIMATE,
            Level.ULTIMATE,
            stress,
            _read(inputs, note, "F_su", "shear_strength"),
            NET_AREA,
        ),
        Check(
            Mechanism.SHEAR_BUCKLING,
            Level.ULTIMATE,
            stress,
            buckling.johnson(elastic, shear_yield),
            buckling.SHEAR_K,
        ),
    )
