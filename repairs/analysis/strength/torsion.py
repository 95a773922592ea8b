r"""Torsion of thin sections, closed and open.

.. math::
    \tau = \frac{T}{2A t},\quad J = \frac{4A^2}{\oint ds/t}
    \qquad\text{closed (Bredt)};\qquad
    \tau = \frac{T t}{J},\quad J = \tfrac13\sum b t^3 \quad\text{open}

References
----------
.. [1] Bredt; Saint-Venant for narrow rectangles: elementary.
"""

from __future__ import annotations

from dataclasses import dataclass

from repairs.analysis.errors import InputError, within
from repairs.analysis.types import Grade, Reference

BREDT = Reference("Bredt, closed thin section in torsion", Grade.DERIVED)
OPEN = Reference("Saint-Venant, open section of narrow rectangles", Grade.DERIVED)


@dataclass(frozen=True, slots=True)
class Wall:
    """A straight piece of wall: length along the middle line and thickness [mm]."""

    length: float
    thickness: float


@dataclass(frozen=True, slots=True)
class Twist:
    """Largest shear stress [MPa] and torsion constant [mm^4]."""

    stress: float
    constant: float


def _checked(walls: tuple[Wall, ...], slenderness: float) -> None:
    if not walls:
        raise InputError("The section has no wall. Enter its walls.")
    for wall in walls:
        slender = wall.length / wall.thickness
        within("Wall length over thickness", slender, slenderness, 1e6, "a thin wall")


def closed_torsion(torque: float, enclosed: float, walls: tuple[Wall, ...]) -> Twist:
    """Return shear stress and constant of one closed cell.

    Parameters
    ----------
    torque
        T [N mm].
    enclosed
        Area within the middle line [mm^2].
    walls
        All round the cell; the thinnest is stressed most.

    Returns
    -------
    Twist
        At the thinnest wall [MPa], [mm^4].

    Notes
    -----
    Range each wall at least 3 times as long as thick. Free warping, no cut-outs.

    References
    ----------
    .. [1] See `BREDT`.
    """
    _checked(walls, 3)
    within("Enclosed area, mm2", enclosed, 1e-6, 1e9, "a cell")
    thinnest = min(w.thickness for w in walls)
    constant = 4 * enclosed**2 / sum(w.length / w.thickness for w in walls)
    return Twist(abs(torque) / (2 * enclosed * thinnest), constant)


def open_torsion(torque: float, walls: tuple[Wall, ...]) -> Twist:
    """Return shear stress and constant of an open section of narrow rectangles.

    Parameters
    ----------
    torque
        T [N mm].
    walls
        All pieces; the thickest is stressed most.

    Returns
    -------
    Twist
        At the thickest wall [MPa], [mm^4].

    Notes
    -----
    Range each wall at least 10 times as long as thick: the constant of one is then at
    most 7 % high. Held warping and the rise at inner corners are not in it.

    References
    ----------
    .. [1] See `OPEN`.
    """
    _checked(walls, 10)
    constant = sum(w.length * w.thickness**3 for w in walls) / 3
    return Twist(abs(torque) * max(w.thickness for w in walls) / constant, constant)
