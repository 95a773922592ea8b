r"""Log-likelihood of lives known exactly, as more than, or as between two looks.

With z = (ln t - mu)/sigma and F, f, S of the standard normal or smallest extreme value,
a failure at t counts ln f(z) - ln sigma, a suspension ln S(z), and one found cracked
between looks at t1 and t2

.. math:: \ln[F(z_2) - F(z_1)]

(t1 = 0 where it was found at its first look).

References
----------
.. [1] Nelson, Applied Life Data Analysis; Lawless; Meeker and Escobar.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from enum import StrEnum

import numpy as np
from numpy.typing import NDArray
from scipy.special import log_ndtr, ndtr

from repairs.analysis.errors import InputError

Array = NDArray[np.float64]
NOT_A_LIFE = "A life reads {life!r}; a positive finite number is expected."
NOT_BETWEEN = (
    "Found between {low:g} and {high:g}: the second is due above the first, and the "
    "first not below 0."
)
NEVER = -40.0
"""z of a life of nothing: no chance of failure before it."""
ROOT_TWO_PI = math.sqrt(2 * math.pi)


class LifeModel(StrEnum):
    """The distribution of lives."""

    LOGNORMAL = "lognormal"
    WEIBULL = "weibull"


@dataclass(frozen=True, slots=True)
class Lives:
    """Lives at failure, of items suspended without failure, and between; one unit.

    A crack found at an inspection began between it and the one before: `between` holds
    both lives, the first 0 where there was no inspection before.
    """

    failures: tuple[float, ...]
    suspensions: tuple[float, ...] = ()
    between: tuple[tuple[float, float], ...] = ()

    def __post_init__(self) -> None:
        for life in (*self.failures, *self.suspensions, *(b for _, b in self.between)):
            if not (math.isfinite(life) and life > 0):
                raise InputError(NOT_A_LIFE.format(life=life))
        for low, high in self.between:
            if not 0 <= low < high:
                raise InputError(NOT_BETWEEN.format(low=low, high=high))


def log_survival(model: LifeModel, z: Array) -> Array:
    """Return ln S(z) [-]."""
    if model is LifeModel.LOGNORMAL:
        return np.asarray(log_ndtr(-z), dtype=np.float64)
    return -np.exp(z)


def log_likelihood(
    lives: Lives, model: LifeModel, location: float, scale: float
) -> float:
    """Return the log-likelihood of ln life: exact failures per unit of ln life [-]."""
    f, s, z1, z2 = _standardised(lives, location, scale)
    if model is LifeModel.LOGNORMAL:
        density = -(f**2) / 2 - math.log(2 * math.pi) / 2
    else:
        density = f - np.exp(f)
    total = float(density.sum()) - f.size * math.log(scale)
    total += float(log_survival(model, s).sum())
    return total + float(np.log(_chance(model, z1, z2)).sum())


def slopes(lives: Lives, model: LifeModel, x: Array) -> tuple[Array, Array]:
    """Return first and second derivatives of the log-likelihood by (mu, ln sigma)."""
    scale = math.exp(x[1])
    f, s, z1, z2 = _standardised(lives, float(x[0]), scale)
    if model is LifeModel.LOGNORMAL:
        hazard = np.exp(-(s**2) / 2 - math.log(2 * math.pi) / 2 - log_ndtr(-s))
        first = np.concatenate([-f, -hazard])
        second = np.concatenate([-np.ones_like(f), -hazard * (hazard - s)])
    else:
        first = np.concatenate([1 - np.exp(f), -np.exp(s)])
        second = np.concatenate([-np.exp(f), -np.exp(s)])
    z = np.concatenate([f, s])
    slope = np.array([-first.sum() / scale, -f.size - (first * z).sum()])
    mixed = (second * z + first).sum() / scale
    curve = np.array(
        [
            [second.sum() / scale**2, mixed],
            [mixed, (second * z**2 + first * z).sum()],
        ]
    )
    more, bend = _slopes_between(model, z1, z2, scale)
    return slope + more, curve + bend


def _slopes_between(
    model: LifeModel, z1: Array, z2: Array, scale: float
) -> tuple[Array, Array]:
    """Return what the lives between two looks add to both derivatives."""
    chance = _chance(model, z1, z2)
    (f1, g1), (f2, g2) = _density(model, z1), _density(model, z2)
    a, b = (f1 - f2) / scale, z1 * f1 - z2 * f2
    h1, h2 = f1 + z1 * g1, f2 + z2 * g2
    aa, ab = -(g1 - g2) / scale**2, -(h1 - h2) / scale
    bb = -(z1 * h1 - z2 * h2)
    first = np.array([(a / chance).sum(), (b / chance).sum()])
    mixed = (ab / chance - a * b / chance**2).sum()
    second = [
        [(aa / chance - (a / chance) ** 2).sum(), mixed],
        [mixed, (bb / chance - (b / chance) ** 2).sum()],
    ]
    return first, np.array(second)


def _density(model: LifeModel, z: Array) -> tuple[Array, Array]:
    """Return f(z) and its derivative [-]."""
    if model is LifeModel.LOGNORMAL:
        f = np.exp(-(z**2) / 2) / ROOT_TWO_PI
        return f, -z * f
    rate = np.exp(np.minimum(z, 50.0))
    f = rate * np.exp(-rate)
    return f, f * (1 - rate)


def _chance(model: LifeModel, z1: Array, z2: Array) -> Array:
    """Return F(z2) - F(z1) without loss in either tail [-]."""
    if model is LifeModel.LOGNORMAL:
        upper = z1 > 0
        low, high = np.where(upper, -z2, z1), np.where(upper, -z1, z2)
        chance = ndtr(high) - ndtr(low)
    else:
        r1, r2 = np.exp(np.minimum(z1, 50.0)), np.exp(np.minimum(z2, 50.0))
        chance = -np.exp(-r1) * np.expm1(r1 - r2)
    return np.maximum(np.asarray(chance, dtype=np.float64), 1e-300)


def _standardised(
    lives: Lives, location: float, scale: float
) -> tuple[Array, Array, Array, Array]:
    """Return z of failures, suspensions, and both ends of what lies between."""
    between = np.array(lives.between, dtype=np.float64).reshape(-1, 2)
    with np.errstate(divide="ignore"):
        logs = (
            np.log(np.array(lives.failures, dtype=np.float64)),
            np.log(np.array(lives.suspensions, dtype=np.float64)),
            np.log(between[:, 0]),
            np.log(between[:, 1]),
        )
    f, s, z1, z2 = ((x - location) / scale for x in logs)
    return f, s, np.maximum(z1, NEVER), z2
