r"""Multiple-site damage: when the ligament between two cracks gives way.

A lead crack and a small crack ahead of it join when their plastic zones touch,
:math:`r_a + r_l = L`, with L the ligament from *tip to tip* and
:math:`r = \frac{m}{2\pi}(K/S_y)^2`:

.. math:: S = S_y\sqrt{\frac{2L}{m\,(a\,\beta_a^2 + l\,\beta_l^2)}}

m = 1 is Irwin's radius (Swift's criterion, default); m = 2 his whole zone, for which
the strength is :math:`1/\sqrt2` of it. Test-based corrections of Swift's stress are
kept by name.

References
----------
.. [1] Swift's ligament criterion and its corrections, in public university notes.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from repairs.analysis.errors import UNKNOWN_FORM, InputError, within
from repairs.analysis.strength.residual import (
    FRACTURE,
    NET_SECTION,
    Strength,
    weakest,
)
from repairs.analysis.types import (
    INCH,
    EdgeLength,
    Grade,
    GrossStress,
    HalfLength,
    Reference,
)

LINK_UP = "link-up of lead crack and next crack"
SWIFT = Reference(
    "Swift, ligament between plastic zones of Irwin's radius, in public university "
    "notes",
    Grade.QUOTED,
)
CORRECTIONS_SOURCE = Reference(
    "Test-based corrections of Swift's link-up stress, in public university notes; the "
    "range of ligaments tested is not given there",
    Grade.QUOTED,
)
WOULD_RAISE = (
    "At a ligament of {ligament:.2f} mm the correction {name} would raise Swift's "
    "stress. Its range was not read: use Swift's stress there."
)


@dataclass(frozen=True, slots=True)
class LeadCrack:
    """The long crack: half-length a [mm] and its F on sqrt(pi a) [-]."""

    half_length: HalfLength
    factor: float


@dataclass(frozen=True, slots=True)
class NextCrack:
    """The small crack ahead: length from its hole's *edge* and F on that length.

    Taking the length from the hole's centre with a factor of the edge length gives
    strengths 8 % low; the other way round they are high.
    """

    c_edge: EdgeLength
    factor: float


@dataclass(frozen=True, slots=True)
class Ligament:
    """Lead crack, next crack and the ligament from tip to tip [mm]."""

    lead: LeadCrack
    other: NextCrack
    length: float

    @classmethod
    def between(
        cls, lead: LeadCrack, other: NextCrack, hole_offset: float, diameter: float
    ) -> Ligament:
        """Make it from where the next hole's centre lies, from the lead's centre.

        Parameters
        ----------
        lead, other
            The cracks; the next one points towards the lead crack.
        hole_offset
            Centre of the next hole from the centre of the lead crack [mm].
        diameter
            Hole diameter [mm].
        """
        reach = lead.half_length + other.c_edge + diameter / 2
        return cls(lead, other, hole_offset - reach)

    def __post_init__(self) -> None:
        within(
            "Ligament from tip to tip, mm",
            self.length,
            1e-6,
            1e5,
            "cracks that have not joined",
            "Treat the cracks as one.",
        )


def swift_link_up(
    ligament: Ligament, yield_stress: float, zone: float = 1.0
) -> GrossStress:
    r"""Return the gross stress at which the plastic zones of both cracks touch [1]_.

    Parameters
    ----------
    ligament
        The two cracks and what is between them [mm].
    yield_stress
        Tension yield strength, of the basis the correction names [MPa].
    zone
        m: 1 for Irwin's radius (Swift), 2 for his whole zone [-].

    Returns
    -------
    GrossStress
        Stress [MPa]; not above yield.

    Notes
    -----
    Range L > 0, 1 <= m <= 2.5 (2.47 is the strip-yield zone). Tests of 2024-T3
    gave less: the correction takes a quarter off at L = 1 in, a tenth at 0.5 in.

    References
    ----------
    .. [1] See `SWIFT`.
    """
    within("Plastic zone over Irwin's radius", zone, 1, 2.5, "published zones")
    touching = _touching(ligament, yield_stress) / math.sqrt(zone)
    return GrossStress(min(touching, yield_stress))


def _touching(ligament: Ligament, yield_stress: float) -> float:
    """Return Swift's stress, which may lie above yield [MPa]."""
    lead, other = ligament.lead, ligament.other
    drive = lead.half_length * lead.factor**2 + other.c_edge * other.factor**2
    return yield_stress * math.sqrt(2 * ligament.length / drive)


@dataclass(frozen=True, slots=True)
class Correction:
    """Divisor of Swift's stress: constant + slope x, x = ln L or L, L in inches."""

    name: str
    constant: float
    slope: float
    logarithmic: bool

    def divisor(self, length: float) -> float:
        """Return what Swift's stress is divided by, ligament in mm [-]."""
        inches = length / INCH
        term = math.log(inches) if self.logarithmic else inches
        return self.constant + self.slope * term


CORRECTIONS: dict[str, Correction] = {
    c.name: c
    for c in (
        Correction("2024-T3, A-basis", 1.3123, 0.3065, logarithmic=True),
        Correction("2024-T3, B-basis", 1.3502, 0.3054, logarithmic=True),
        Correction("2524, A-basis", 0.9683, 0.1905, logarithmic=True),
        Correction("2524, B-basis", 1.0719, 0.2024, logarithmic=True),
        Correction("7075, A-basis", 1.377, 1.042, logarithmic=False),
        Correction("7075, B-basis", 1.417, 1.073, logarithmic=False),
    )
}


def corrected_link_up(
    ligament: Ligament, yield_stress: float, correction: str
) -> GrossStress:
    """Return Swift's link-up stress over a test-based correction [1]_.

    Parameters
    ----------
    ligament
        The two cracks and what is between them [mm].
    yield_stress
        Yield strength of the basis the correction's name says [MPa].
    correction
        Name of one of `CORRECTIONS`: alloy and basis.

    Returns
    -------
    GrossStress
        Stress [MPa]; not above yield.

    Notes
    -----
    Range: only where it lowers the stress (2024-T3: L above about 9 mm); where the
    fit would raise it, it is refused, its tested range not being known.

    References
    ----------
    .. [1] See `CORRECTIONS_SOURCE`.
    """
    if correction not in CORRECTIONS:
        known = ", ".join(CORRECTIONS)
        raise InputError(UNKNOWN_FORM.format(name=correction, known=known))
    divisor = CORRECTIONS[correction].divisor(ligament.length)
    if divisor < 1:
        raise InputError(WOULD_RAISE.format(ligament=ligament.length, name=correction))
    return GrossStress(min(_touching(ligament, yield_stress) / divisor, yield_stress))


def multiple_site_strength(
    link_up: GrossStress, fracture: GrossStress, net_section: GrossStress
) -> Strength:
    """Return which gives way first: the ligament, the lead crack, or the section.

    Parameters
    ----------
    link_up
        Stress at link-up [MPa].
    fracture
        Stress at fracture of the lead crack as if alone [MPa].
    net_section
        Stress at yield of what all cracks and holes leave [MPa].

    Returns
    -------
    Strength
        Gross stress, the mechanism that governs, and each.

    Notes
    -----
    Range of the three. After link-up the lead crack ends in the next hole or beyond:
    whether the panel stands that is the same question again, with the longer crack.

    References
    ----------
    .. [1] See the module.
    """
    return weakest({LINK_UP: link_up, FRACTURE: fracture, NET_SECTION: net_section})
