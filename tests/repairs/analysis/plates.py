"""Plates by energy: Ritz with polynomials, an independent route to their buckling."""

from __future__ import annotations

import numpy as np
from numpy.polynomial import Legendre, Polynomial
from scipy.linalg import eigh

_POWER = {"F": 0, "S": 1, "C": 2}
_AT, _WEIGHT = (a for a in np.polynomial.legendre.leggauss(40))
_AT, _WEIGHT = (_AT + 1) / 2, _WEIGHT / 2


def _shapes(count: int, held: str) -> list[np.ndarray]:
    """Values, slopes and curvatures of admissible shapes on 0 to 1, ends as `held`."""
    x = Polynomial([0, 1])
    base = x ** _POWER[held[0]] * (1 - x) ** _POWER[held[1]]
    functions = [
        base * Legendre.basis(i, domain=[0, 1]).convert(kind=Polynomial)
        for i in range(count)
    ]
    return [np.array([f.deriv(d)(_AT) for f in functions]) for d in range(3)]


def buckling_coefficient(
    ratio: float,
    ends: str,
    sides: str,
    load: tuple[float, float, float],
    poisson: float = 0.3,
    terms: tuple[int, int] = (14, 8),
) -> float:
    """Return k of a plate a/b = ratio; ends and sides by F, S, C at both.

    `load` = compression along a, its change over the width as bending, shear; k is the
    factor on them, in units of pi^2 D/(b^2 t).
    """
    x = [s / ratio**d for d, s in enumerate(_shapes(terms[0], ends))]
    y = _shapes(terms[1], sides)

    def term(
        i: int, j: int, k: int, m: int, weight: np.ndarray = _WEIGHT
    ) -> np.ndarray:
        return np.kron((x[i] * _WEIGHT) @ x[j].T, (y[k] * weight) @ y[m].T)

    stiffness = (
        term(2, 2, 0, 0)
        + term(0, 0, 2, 2)
        + poisson * (term(2, 0, 0, 2) + term(0, 2, 2, 0))
        + 2 * (1 - poisson) * term(1, 1, 1, 1)
    )
    compression, bending, shear = load
    across = _WEIGHT * (compression + bending * (1 - 2 * _AT))
    geometry = term(1, 1, 0, 0, across)
    geometry += shear * (term(1, 0, 0, 1) + term(0, 1, 1, 0))
    largest = eigh(geometry, stiffness, eigvals_only=True)[-1]
    return float(1 / largest / np.pi**2)


COMPRESSED, BENT, SHEARED = (1.0, 0.0, 0.0), (0.0, 1.0, 0.0), (0.0, 0.0, 1.0)
