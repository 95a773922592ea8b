r"""Residual strength of a cracked sheet: the smallest of what can end it.

.. math:: S_{res} = \min\Bigl(\frac{K_c}{F\sqrt{\pi a}},\; S_y\frac{A_{net}}{A},\;
          \text{short-crack line}\Bigr)

All on gross stress, to be compared with a required gross stress.

References
----------
.. [1] Feddersen, ASTM STP 486, the three-region construct, in public university notes.
.. [2] Limit load of a notched strip on flow stress: equilibrium.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, field

from repairs.analysis.errors import AnalysisError, within
from repairs.analysis.types import Grade, GrossStress, HalfLength, Reference

FRACTURE = "fracture"
NET_SECTION = "net-section yield"
SHORT_CRACK = "short-crack line"
LONG_CRACK = "long-crack line"
COLLAPSE = "plastic collapse"
NO_STRENGTH = "None of {names} gives a strength here. Enter what at least one needs."
FEDDERSEN = Reference(
    "Feddersen, three-region construct, in public university notes", Grade.QUOTED
)


@dataclass(frozen=True, slots=True)
class Strength:
    """A residual strength on gross stress [MPa], what governs it, and each mechanism.

    `each` has every mechanism asked, None where it sets no strength.
    """

    stress: GrossStress
    governing: str
    each: tuple[tuple[str, GrossStress | None], ...] = field(default=(), compare=False)


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
    Range of `factor`, length above 0. Kc is a property of sheet and width, not of the
    alloy alone.

    References
    ----------
    .. [1] A published worked example: Kc 140, a 0.4, F 1.161 gives 107.6 ksi.
    """
    within("Crack length, mm", length, 1e-12, 1e6, "a crack")
    within("Factor F", factor, 1e-9, 1e6, "a crack that opens")
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
    if not named:
        raise AnalysisError(
            NO_STRENGTH.format(names=", ".join(candidates) or "nothing")
        )
    stress, governing = min(named)
    return Strength(stress, governing, tuple(candidates.items()))


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


def plastic_collapse(
    yield_stress: float, ultimate: float, removed: float, width: float
) -> GrossStress:
    """Return the gross stress at which the section left flows, on flow stress.

    Parameters
    ----------
    yield_stress, ultimate
        Tension yield and ultimate strength [MPa]; flow stress is their mean.
    removed, width
        Width taken away by crack and hole, and full width [mm].

    Returns
    -------
    GrossStress
        Stress [MPa].

    Notes
    -----
    Range 0 <= removed < width, ultimate >= yield. Cracks symmetric in the width: a
    crack from one edge also bends the section and collapses sooner.

    References
    ----------
    .. [1] Equilibrium; the mean as flow stress is common practice.
    """
    within("Ultimate over yield", ultimate / yield_stress, 1, 5, "a metal")
    share = within("Width removed over width", removed / width, 0, 1, "a section")
    return GrossStress((yield_stress + ultimate) / 2 * (1 - share))


def edge_crack_collapse(
    yield_stress: float, ultimate: float, length: float, width: float
) -> GrossStress:
    r"""Return the gross stress at collapse of a strip with one edge crack.

    .. math:: S = S_f\,\Bigl[\sqrt{x^2 + (1 - x)^2} - x\Bigr],\quad x = a/W

    Parameters
    ----------
    yield_stress, ultimate
        Tension yield and ultimate strength [MPa]; flow stress is their mean.
    length, width
        Crack length from the edge and full width [mm].

    Returns
    -------
    GrossStress
        Stress [MPa].

    Notes
    -----
    Range 0 <= a/W < 1, load through the middle of the full width, free ends.

    References
    ----------
    .. [1] Two-block equilibrium of force and moment in the section left.
    """
    within("Ultimate over yield", ultimate / yield_stress, 1, 5, "a metal")
    x = within("Edge crack length over width", length / width, 0, 1, "a section")
    share = math.sqrt(x**2 + (1 - x) ** 2) - x
    return GrossStress((yield_stress + ultimate) / 2 * share)


def feddersen(
    toughness: float, yield_stress: float, half_length: HalfLength, width: float
) -> Strength:
    """Return the strength of a centre crack by Feddersen's whole construct.

    Both straight lines and the fracture curve between them; a panel too narrow for
    that is governed by net-section yield.

    Parameters
    ----------
    toughness
        Kc [MPa*sqrt(mm)].
    yield_stress
        Tension yield strength [MPa].
    half_length
        Half-length a [mm].
    width
        Full width W [mm].

    Returns
    -------
    Strength
        Gross stress, the region that governs, and each.

    Notes
    -----
    Range 0 < 2a <= W. Infinite-width K inside: the lines stand for the width. Between
    a third and seven tenths of the width up to 10 % above the secant form.

    References
    ----------
    .. [1] See `FEDDERSEN`.
    """
    crack = 2 * half_length
    share = within("Crack over width", crack / width, 1e-9, 1, "a centre crack")
    narrowest = 27 / (2 * math.pi) * (toughness / yield_stress) ** 2
    if width < narrowest:
        net = net_section_yield(yield_stress, crack, width)
        return Strength(net, NET_SECTION, ((NET_SECTION, net),))
    if share >= 1 / 3:
        long = wide_sheet_long_line(toughness, half_length, width)
        return Strength(long, LONG_CRACK, ((LONG_CRACK, long),))
    short = short_crack_line(toughness, yield_stress, half_length, width)
    fracture = fracture_strength(toughness, 1, half_length)
    return weakest({FRACTURE: fracture, SHORT_CRACK: short})
