r"""Residual strength of a cracked sheet: the smallest of what can end it.

.. math:: S_{res} = \min\Bigl(\frac{K_c}{F\sqrt{\pi a}},\; S_y\frac{A_{net}}{A},\;
          \text{short-crack line}\Bigr)

All on gross stress, to be compared with a required gross stress.

References
----------
.. [1] Feddersen, ASTM STP 486, the three-region construct, in public university notes.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from repairs.analysis.errors import within
from repairs.analysis.types import Grade, GrossStress, HalfLength, Reference

FRACTURE = "fracture"
NET_SECTION = "net-section yield"
SHORT_CRACK = "short-crack line"
FEDDERSEN = Reference(
    "Feddersen, three-region construct, in public university notes", Grade.QUOTED
)


@dataclass(frozen=True, slots=True)
class Strength:
    """A residual strength on gross stress [MPa] and what governs it."""

    stress: GrossStress
    governing: str


def fracture_strength(toughness: float, factor: float, length: float) -> GrossStress:
    r"""Return the gross stress at fracture, :math:`K_c/(F\sqrt{\pi a})`.

    Parameters
    ----------
    toughness
        Kc of this thickness, width and direction [MPa*sqrt(mm)].
    factor
        F of the crack [-].
    length
        Length F is defined on [mm].

    Returns
    -------
    GrossStress
        Stress [MPa].

    Notes
    -----
    Range of `factor`. Kc is a property of sheet and width, not of the alloy alone.

    References
    ----------
    .. [1] A published worked example: Kc 140, a 0.4, F 1.161 gives 107.6 ksi.
    """
    return GrossStress(toughness / (factor * math.sqrt(math.pi * length)))


def net_section_yield(yield_stress: float, removed: float, width: float) -> GrossStress:
    """Return the gross stress at which the section left yields.

    Parameters
    ----------
    yield_stress
        Tension yield strength [MPa].
    removed
        Width taken away by crack and hole [mm].
    width
        Full width [mm].

    Returns
    -------
    GrossStress
        Stress [MPa].

    Notes
    -----
    Range 0 <= removed < width.

    References
    ----------
    .. [1] Equilibrium.
    """
    share = within("Width removed over width", removed / width, 0, 1, "a section")
    return GrossStress(yield_stress * (1 - share))


def short_crack_line(
    toughness: float, yield_stress: float, half_length: HalfLength, width: float
) -> GrossStress | None:
    r"""Return Feddersen's short-crack line, None where it does not hold.

    Straight from :math:`(0, S_y)` to where it touches :math:`K_c/\sqrt{\pi a}` at
    :math:`S = \tfrac23 S_y`, :math:`2a_1 = (9/2\pi)(K_c/S_y)^2`.

    Parameters
    ----------
    toughness
        Kc [MPa*sqrt(mm)].
    yield_stress
        Tension yield strength [MPa].
    half_length
        Half-length a of a centre crack [mm].
    width
        Full width W [mm].

    Returns
    -------
    GrossStress or None
        Stress [MPa]; None for 2a > 2a_1, or a panel narrower than
        :math:`(27/2\pi)(K_c/S_y)^2`, where K governs nowhere.

    Notes
    -----
    Range: centre crack, infinite-width K.

    References
    ----------
    .. [1] See `FEDDERSEN`.
    """
    scale = (toughness / yield_stress) ** 2 / (2 * math.pi)
    touch = 9 * scale
    crack = 2 * half_length
    if crack > touch or width < 27 * scale:
        return None
    return GrossStress(yield_stress * (1 - crack / touch / 3))


def weakest(candidates: dict[str, GrossStress | None]) -> Strength:
    """Return the smallest of the named strengths, leaving out those without one."""
    named = [(v, k) for k, v in candidates.items() if v is not None]
    stress, governing = min(named)
    return Strength(stress, governing)


def wide_sheet_long_line(
    toughness: float, half_length: HalfLength, width: float
) -> GrossStress:
    r"""Return Feddersen's long-crack line, to zero strength at :math:`2a = W`.

    Parameters
    ----------
    toughness
        Kc [MPa*sqrt(mm)].
    half_length
        Half-length a [mm].
    width
        Full width W [mm].

    Returns
    -------
    GrossStress
        Stress [MPa].

    Notes
    -----
    Range W/3 <= 2a <= W. Used as a check of the secant form.

    References
    ----------
    .. [1] See `FEDDERSEN`.
    """
    share = within("Crack over width", 2 * half_length / width, 1 / 3, 1, "long cracks")
    touching = toughness / math.sqrt(math.pi * width / 6)
    return GrossStress(touching * (1 - share) * 1.5)
