r"""Mean stress: the fully reversed amplitude that a cycle is worth, for comparison.

With amplitude :math:`S_a`, mean :math:`S_m` and :math:`S_{max} = S_a + S_m`,

.. math::
    \text{Goodman}\; \frac{S_a}{1 - S_m/F_{tu}}\qquad
    \text{Gerber}\; \frac{S_a}{1 - (S_m/F_{tu})^2}\qquad
    \text{Morrow}\; \frac{S_a}{1 - S_m/\sigma_f'}\qquad
    \text{Soderberg}\; \frac{S_a}{1 - S_m/F_{ty}}

.. math::
    \text{SWT}\; \sqrt{S_{max} S_a}\qquad
    \text{Walker}\; S_{max}^{1-\gamma} S_a^{\gamma}

A handbook curve carries its own mean-stress exponent, and a life is computed with that;
these values stand beside it and never replace it. A compressive mean gets no credit in
the first four: it is taken as zero. The last two have no value where nothing pulls.

References
----------
.. [1] Dowling, Mechanical Behavior of Materials, chapter 9, as in public university
   notes on aircraft fatigue.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

from repairs.analysis.errors import InputError, within
from repairs.analysis.types import Grade, Reference

MEAN_STRESS = Reference(
    "Goodman, Gerber, Morrow, Soderberg, Smith-Watson-Topper and Walker, as in public "
    "university notes on aircraft fatigue",
    Grade.QUOTED,
)
NO_TENSION = (
    "The largest stress is {maximum:.4g} MPa: nothing pulls, and {method} has no value "
    "there. It is no life and no damage; leave the cycle out by name."
)


def goodman(amplitude: float, mean: float, ultimate: float) -> float:
    """Return Sa / (1 - Sm/Ftu) [MPa].

    Parameters
    ----------
    amplitude, mean
        Half the range, and the mean [MPa].
    ultimate
        Tension ultimate strength in the direction of the stress [MPa].

    Returns
    -------
    float
        Fully reversed amplitude of the same life [MPa].

    Notes
    -----
    Range Sm < Ftu; Sm < 0 is taken as 0.

    References
    ----------
    .. [1] See `MEAN_STRESS`.
    """
    return _amplitude(amplitude) / (1 - _share(mean, ultimate))


def gerber(amplitude: float, mean: float, ultimate: float) -> float:
    """Return Sa / (1 - (Sm/Ftu)^2) [MPa].

    Parameters
    ----------
    amplitude, mean, ultimate
        As `goodman` [MPa].

    Returns
    -------
    float
        Fully reversed amplitude of the same life [MPa].

    Notes
    -----
    Range as `goodman`. The square would punish a compressive mean like a tensile one.

    References
    ----------
    .. [1] See `MEAN_STRESS`.
    """
    return _amplitude(amplitude) / (1 - _share(mean, ultimate) ** 2)


def morrow(amplitude: float, mean: float, fracture: float) -> float:
    """Return Sa / (1 - Sm/sf') [MPa].

    Parameters
    ----------
    amplitude, mean
        As `goodman` [MPa].
    fracture
        True fracture strength, or the fatigue strength coefficient sf' [MPa]; not Ftu.

    Returns
    -------
    float
        Fully reversed amplitude of the same life [MPa].

    Notes
    -----
    Range Sm < sf'; Sm < 0 is taken as 0.

    References
    ----------
    .. [1] See `MEAN_STRESS`.
    """
    return _amplitude(amplitude) / (1 - _share(mean, fracture))


def soderberg(amplitude: float, mean: float, yield_stress: float) -> float:
    """Return Sa / (1 - Sm/Fty) [MPa].

    Parameters
    ----------
    amplitude, mean
        As `goodman` [MPa].
    yield_stress
        Tension yield strength [MPa].

    Returns
    -------
    float
        Fully reversed amplitude of the same life [MPa].

    Notes
    -----
    Range Sm < Fty; Sm < 0 is taken as 0. The most careful of the six, and no rule.

    References
    ----------
    .. [1] See `MEAN_STRESS`.
    """
    return _amplitude(amplitude) / (1 - _share(mean, yield_stress))


def smith_watson_topper(amplitude: float, mean: float) -> float:
    """Return sqrt(Smax Sa) [MPa].

    Parameters
    ----------
    amplitude, mean
        As `goodman` [MPa].

    Returns
    -------
    float
        Fully reversed amplitude of the same life [MPa].

    Notes
    -----
    Range Smax > 0. A compressive mean gets credit here, as published.

    References
    ----------
    .. [1] See `MEAN_STRESS`.
    """
    return math.sqrt(_tension(amplitude, mean, "Smith-Watson-Topper") * amplitude)


def walker(amplitude: float, mean: float, gamma: float) -> float:
    """Return Smax^(1-gamma) Sa^gamma [MPa].

    Parameters
    ----------
    amplitude, mean
        As `goodman` [MPa].
    gamma
        Walker's exponent of stress-life [-]; a handbook curve's A3 is one. Not the
        exponent of crack growth, which is another number.

    Returns
    -------
    float
        Fully reversed amplitude of the same life [MPa].

    Notes
    -----
    Range Smax > 0, 0 <= gamma <= 1; gamma 1/2 is Smith-Watson-Topper.

    References
    ----------
    .. [1] See `MEAN_STRESS`.
    """
    within("Walker's exponent", gamma, 0, 1, "stress-life")
    largest = _tension(amplitude, mean, "Walker")
    return float(largest ** (1 - gamma) * amplitude**gamma)


def _amplitude(amplitude: float) -> float:
    return within("Stress amplitude, MPa", amplitude, 0, 1e4, "half a range")


def _share(mean: float, strength: float) -> float:
    """Mean over strength, below 1; a compressive mean is taken as zero."""
    within("Strength, MPa", strength, 1, 1e4, "a strength")
    within("Mean stress, MPa", mean, -1e4, strength * (1 - 1e-9), "below the strength")
    return max(0.0, mean) / strength


def _tension(amplitude: float, mean: float, method: str) -> float:
    maximum = _amplitude(amplitude) + mean
    if maximum <= 0:
        raise InputError(NO_TENSION.format(maximum=maximum, method=method))
    return maximum


@dataclass(frozen=True, slots=True)
class Strengths:
    """What the forms divide by, None where it is not recorded [MPa, gamma -]."""

    ultimate: float
    yield_stress: float
    fracture: float | None = None
    gamma: float | None = None


def compared(
    amplitude: float, mean: float, strengths: Strengths
) -> dict[str, float | None]:
    """Return what a cycle is worth by every form whose strength is known.

    Parameters
    ----------
    amplitude, mean
        Half the range, and the mean [MPa].
    strengths
        Strengths and exponent with which to compare.

    Returns
    -------
    dict of str to float or None
        Fully reversed amplitudes by name [MPa]; None where a form has no value.

    Notes
    -----
    Range of the forms. For comparison only: no life is computed from these.

    References
    ----------
    .. [1] See `MEAN_STRESS`.
    """
    found: dict[str, float | None] = {
        "Goodman": goodman(amplitude, mean, strengths.ultimate),
        "Gerber": gerber(amplitude, mean, strengths.ultimate),
        "Soderberg": soderberg(amplitude, mean, strengths.yield_stress),
    }
    if strengths.fracture is not None:
        found["Morrow"] = morrow(amplitude, mean, strengths.fracture)
    pulls = amplitude + mean > 0
    found["Smith-Watson-Topper"] = (
        smith_watson_topper(amplitude, mean) if pulls else None
    )
    if strengths.gamma is not None:
        found["Walker"] = walker(amplitude, mean, strengths.gamma) if pulls else None
    return found
