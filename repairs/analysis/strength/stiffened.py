r"""Residual strength of a stiffened skin: skin, stiffener or fastener, whichever first.

.. math::
    S_{skin} = \frac{K_c}{F\sqrt{\pi a}},\qquad
    S_{st} = \frac{S_u\,E}{L\,E_s},\qquad
    S_{fast} = \frac{P_u}{A_f}

all on the skin's gross stress far from the crack; F, L and :math:`A_f` are the effect
of the stiffeners at that crack length. A skin fracture that runs into a stiffener may
be arrested: the strength is then the peak of the skin's curve beyond, or what the
stiffener or its fasteners bear on the way there, if that is less.

References
----------
.. [1] Vlieger; Swift; Poe: residual-strength diagram of a stiffened panel, in public
   university notes.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from scipy.optimize import minimize_scalar

from repairs.analysis.errors import AnalysisError, within
from repairs.analysis.intensity.stiffened_sheet import (
    CrackCentre,
    StiffenedCrack,
    StiffenedSheet,
    stiffened_crack,
)
from repairs.analysis.strength.residual import (
    Strength,
    fracture_strength,
    weakest,
)
from repairs.analysis.types import Grade, GrossStress, HalfLength, Reference

SKIN = "skin fracture"
STIFFENER = "stiffener strength"
FASTENER = "fastener strength"
DIAGRAM = Reference(
    "Residual-strength diagram of a stiffened panel (Vlieger, Swift), in public "
    "university notes",
    Grade.QUOTED,
)
NOT_RISING = (
    "The crack lengths {low:.1f} to {high:.1f} mm hold no arrest: the skin's strength "
    "only falls. Ask over a range that takes in the next stiffener."
)
TRIAL_POINTS = 16

Effect = Callable[[HalfLength], StiffenedCrack]
"""The effect of the stiffeners at a half-length: computed, or read from charts."""


@dataclass(frozen=True, slots=True)
class StiffenedPanel:
    """What a stiffened skin is made of, beyond its geometry.

    Parameters
    ----------
    toughness
        Kc of the skin [MPa*sqrt(mm)].
    skin_modulus, stiffener_modulus
        E and E_s [MPa].
    stiffener_strength
        Stress at which a stiffener fails [MPa].
    fastener_strength
        Load at which one fastener fails [N].
    """

    toughness: float
    skin_modulus: float
    stiffener_modulus: float
    stiffener_strength: float
    fastener_strength: float


@dataclass(frozen=True, slots=True)
class Arrest:
    """What becomes of a skin fracture: where it may stop, and what the panel bears.

    `critical` and `at` are the smallest skin strength before the stiffener [MPa, mm];
    `peak` the panel's strength at the arrest, `arrested_at` its half-length [mm].
    """

    critical: GrossStress
    at: HalfLength
    peak: Strength
    arrested_at: HalfLength

    @property
    def holds(self) -> bool:
        """Whether a fracture at the weakest length is arrested."""
        return self.peak.stress >= self.critical

    def meets(self, required: GrossStress) -> bool:
        """Whether the panel bears a required residual stress with this damage."""
        return self.peak.stress >= required


def effect_of(sheet: StiffenedSheet, centre: CrackCentre) -> Effect:
    """Return the computed effect of the stiffeners as a function of half-length."""

    def effect(half_length: HalfLength) -> StiffenedCrack:
        return stiffened_crack(sheet, half_length, centre)

    return effect


def panel_strength(
    panel: StiffenedPanel, effect: StiffenedCrack, half_length: HalfLength
) -> Strength:
    """Return the strength at one crack length, and which element governs.

    Parameters
    ----------
    panel
        Strengths and moduli.
    effect
        F, stiffener and fastener loads at this length.
    half_length
        Half-length a [mm].

    Returns
    -------
    Strength
        Skin stress far from the crack [MPa], the element that governs, and each.

    Notes
    -----
    Range of `effect`. Elastic up to each failure. A fastener without load sets no
    strength.

    References
    ----------
    .. [1] See `DIAGRAM`.
    """
    ratio = panel.skin_modulus / panel.stiffener_modulus
    within("Stiffener load over its load far away", effect.stiffener, 0, 100, "a load")
    skin = fracture_strength(panel.toughness, effect.factor, half_length)
    stiffener = GrossStress(panel.stiffener_strength * ratio / effect.stiffener)
    fastener = (
        GrossStress(panel.fastener_strength / effect.fastener_area)
        if effect.fastener_area > 0
        else None
    )
    return weakest({SKIN: skin, STIFFENER: stiffener, FASTENER: fastener})


def arrest(
    panel: StiffenedPanel, effect: Effect, low: HalfLength, high: HalfLength
) -> Arrest:
    """Follow a skin fracture to the next stiffener, and say whether it is arrested.

    Parameters
    ----------
    panel
        Strengths and moduli.
    effect
        Effect of the stiffeners on half-length.
    low, high
        Half-lengths to look between [mm]; the next stiffener must lie between.

    Returns
    -------
    Arrest
        Smallest skin strength, the panel's strength at the arrest, both lengths.

    Notes
    -----
    Range of `effect`. Static arrest: the energy of a running crack is not counted.

    References
    ----------
    .. [1] See `DIAGRAM`.
    """

    def skin(length: float) -> float:
        half = HalfLength(length)
        return fracture_strength(panel.toughness, effect(half).factor, half)

    lengths = [float(a) for a in np.linspace(low, high, TRIAL_POINTS)]
    trials = [skin(a) for a in lengths]
    rise = [j for j in range(1, TRIAL_POINTS) if trials[j] > trials[j - 1]]
    if not rise:
        raise AnalysisError(NOT_RISING.format(low=low, high=high))
    crest = max(range(rise[0], TRIAL_POINTS), key=lambda j: trials[j])
    weakest_at = _extreme(skin, lengths, rise[0] - 1)
    arrested_at = _extreme(lambda a: -skin(a), lengths, crest)
    return Arrest(
        GrossStress(skin(weakest_at)),
        weakest_at,
        panel_strength(panel, effect(arrested_at), arrested_at),
        arrested_at,
    )


def _extreme(
    value: Callable[[float], float], lengths: list[float], near: int
) -> HalfLength:
    """Return where a function is smallest, next to a trial point [mm]."""
    low, high = lengths[max(0, near - 1)], lengths[min(len(lengths) - 1, near + 1)]
    found = minimize_scalar(
        value, bounds=(low, high), method="bounded", options={"xatol": 1e-3 * high}
    )
    return HalfLength(float(found.x))


def two_bay_strength(
    sheet: StiffenedSheet, panel: StiffenedPanel, bulging: Callable[[float], float]
) -> Arrest:
    """Return the strength with a skin crack over two bays and the middle member broken.

    The crack runs from the broken stiffener to both neighbours, which must arrest it;
    what they bear there is to be no less than the required residual stress.

    Parameters
    ----------
    sheet
        Sheet, stiffeners and fasteners.
    panel
        Strengths and moduli.
    bulging
        Factor on K of half-length [-]; 1 for a flat panel. At an intact neighbour it
        is near 1: the member holds the edges down.

    Returns
    -------
    Arrest
        Smallest skin strength on the way, and the panel's strength at the arrest.

    Notes
    -----
    Range 0.5 to 1.2 stiffener pitches of half-length. Cracks in the skin ahead (many
    sites) are not counted: they lower the arrest.

    References
    ----------
    .. [1] Swift, Damage tolerance capability (1994): a two-bay skin crack with a broken
       central stiffener, sustained at limit load; read in a public copy.
    """

    def effect(half_length: HalfLength) -> StiffenedCrack:
        found = stiffened_crack(sheet, half_length, CrackCentre.BROKEN_STIFFENER)
        return StiffenedCrack(
            found.factor * bulging(half_length), found.stiffener, found.fastener_area
        )

    return arrest(
        panel, effect, HalfLength(0.5 * sheet.pitch), HalfLength(1.2 * sheet.pitch)
    )
