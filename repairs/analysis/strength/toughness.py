r"""Fracture toughness of sheet: what a number holds for, and the effect of thickness.

Kc is no property of an alloy. It carries thickness, width, direction, whether the sheet
was kept from buckling, and whether it is apparent (first crack length with the largest
load) or at instability (last crack length with it); a number used elsewhere is refused.

References
----------
.. [1] ASTM E399: plane strain needs t and a >= 2.5 (K/Sy)^2. ASTM E561: net-section
   stress below yield. Both limits from memory of the standards' text.
.. [2] Irwin's and the exponential (Vroman) form of Kc on thickness; from memory. No
   constants of an alloy were read: they are inputs with a source.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from enum import StrEnum

from repairs.analysis.errors import InputError, within
from repairs.analysis.types import Grade, GrossStress, Reference, Sourced

PLANE_STRAIN = Reference(
    "ASTM E399, size for plane strain, in public university notes", Grade.QUOTED
)
IRWIN = Reference(
    "Irwin, Kc = KIc sqrt(1 + 1.4 beta^2); from memory, unverified", Grade.MEMORY
)
EXPONENTIAL = Reference(
    "Exponential (Vroman) form of Kc on thickness; from memory, unverified",
    Grade.MEMORY,
)
OTHER_SHEET = (
    "This toughness is for {own}; the sheet has {asked}. Enter one measured on such a "
    "sheet."
)
LARGEST_BETA = 3.0


class Meaning(StrEnum):
    """Which crack length and load a toughness was worked out from."""

    APPARENT = "apparent"
    AT_INSTABILITY = "at_instability"


@dataclass(frozen=True, slots=True)
class Toughness:
    """Kc with what it was measured on.

    Parameters
    ----------
    value
        Kc [MPa*sqrt(mm)] with its source.
    thinnest, thickest
        Thickness it holds for [mm].
    width
        Width of the panel tested [mm]; wider panels have a higher Kc, so it may be
        used for them.
    direction
        Load and crack direction, as "L-T".
    meaning
        Apparent or at instability.
    held_flat
        Whether buckling of the crack's edges was prevented.
    """

    value: Sourced
    thinnest: float
    thickest: float
    width: float
    direction: str
    meaning: Meaning
    held_flat: bool

    def of_sheet(
        self, thickness: float, width: float, direction: str, *, held_flat: bool
    ) -> float:
        """Return Kc if it was measured on such a sheet, else refuse.

        Parameters
        ----------
        thickness, width
            Sheet thickness and panel width [mm].
        direction
            Load and crack direction.
        held_flat
            Whether the structure keeps the crack's edges from buckling.

        Returns
        -------
        float
            Kc [MPa*sqrt(mm)].

        Notes
        -----
        A sheet free to buckle has lost up to 40 % of its strength in tests.

        References
        ----------
        .. [1] Dawicke, Gullerud and Hampton, NASA (2024-T3, 0.063 in), in an abstract.
        """
        mend = "Enter one measured on such a sheet."
        within(
            "Sheet thickness, mm",
            thickness,
            self.thinnest,
            self.thickest,
            "range of this toughness",
            mend,
        )
        within("Panel width, mm", width, self.width, 1e6, "width tested", mend)
        if direction != self.direction:
            raise InputError(OTHER_SHEET.format(own=self.direction, asked=direction))
        if self.held_flat and not held_flat:
            raise InputError(
                OTHER_SHEET.format(
                    own="a sheet kept from buckling", asked="free crack edges"
                )
            )
        return self.value.value


def plane_strain_size(toughness: float, yield_stress: float) -> float:
    """Return the thickness from which a toughness is plane strain [mm].

    Parameters
    ----------
    toughness
        KIc [MPa*sqrt(mm)].
    yield_stress
        Tension yield strength [MPa].

    Returns
    -------
    float
        2.5 (KIc/Sy)^2 [mm].

    Notes
    -----
    Range of positive numbers.

    References
    ----------
    .. [1] See `PLANE_STRAIN`.
    """
    within("Toughness, MPa√mm", toughness, 1e-9, 1e6, "a metal")
    within("Yield strength, MPa", yield_stress, 1e-9, 1e5, "a metal")
    return 2.5 * (toughness / yield_stress) ** 2


def net_section_valid(
    stress: GrossStress, removed: float, width: float, yield_stress: float
) -> bool:
    """Return whether a K-based strength keeps the section left below yield.

    Parameters
    ----------
    stress
        Gross stress at fracture [MPa].
    removed, width
        Width taken by crack and hole, and full width [mm].
    yield_stress
        Tension yield strength [MPa].

    Returns
    -------
    bool
        True where the fracture stress is usable; else net-section yield governs.

    Notes
    -----
    Range 0 <= removed < width.

    References
    ----------
    .. [1] ASTM E561, as in the module.
    """
    share = within("Width removed over width", removed / width, 0, 1, "a section")
    return stress < yield_stress * (1 - share)


def irwin_toughness(
    plane_strain: float, yield_stress: float, thickness: float
) -> float:
    r"""Return Kc of a sheet from KIc after Irwin [1]_.

    .. math:: K_c = K_{Ic}\sqrt{1 + 1.4\beta^2},\quad
              \beta = \frac1t\Bigl(\frac{K_{Ic}}{S_y}\Bigr)^2

    Parameters
    ----------
    plane_strain
        KIc [MPa*sqrt(mm)].
    yield_stress
        Tension yield strength [MPa].
    thickness
        Sheet thickness t [mm].

    Returns
    -------
    float
        Kc [MPa*sqrt(mm)].

    Notes
    -----
    Range beta <= 3: the form grows without bound for thin sheet.

    References
    ----------
    .. [1] See `IRWIN` (from memory, unverified).
    """
    ratio = (plane_strain / yield_stress) ** 2 / thickness
    beta = within(
        "(KIc/Sy)^2 over thickness",
        ratio,
        0,
        LARGEST_BETA,
        "Irwin's form",
        "Enter a toughness measured on this sheet.",
    )
    return plane_strain * math.sqrt(1 + 1.4 * beta**2)


@dataclass(frozen=True, slots=True)
class ThicknessConstants:
    """A_k and B_k of one alloy and direction [-], with their source."""

    decay: Sourced
    rise: Sourced


def exponential_toughness(
    plane_strain: float,
    yield_stress: float,
    thickness: float,
    constants: ThicknessConstants,
) -> float:
    r"""Return Kc of a sheet from KIc by the exponential form [1]_.

    .. math:: K_c = K_{Ic}\Bigl[1 + B_k e^{-(A_k t/t_0)^2}\Bigr],\quad
              t_0 = 2.5\,(K_{Ic}/S_y)^2

    Parameters
    ----------
    plane_strain
        KIc [MPa*sqrt(mm)].
    yield_stress
        Tension yield strength [MPa].
    thickness
        Sheet thickness t [mm].
    constants
        A_k and B_k with their source; there is no default.

    Returns
    -------
    float
        Kc [MPa*sqrt(mm)].

    Notes
    -----
    Range t > 0, 0 <= B_k <= 5. Between KIc and (1 + B_k) KIc.

    References
    ----------
    .. [1] See `EXPONENTIAL` (from memory, unverified).
    """
    rise = within("B_k", constants.rise.value, 0, 5, "the form's constants")
    share = within("Thickness, mm", thickness, 1e-3, 500, "a sheet or plate")
    share *= constants.decay.value / plane_strain_size(plane_strain, yield_stress)
    return plane_strain * (1 + rise * math.exp(-(share**2)))
