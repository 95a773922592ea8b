r"""A cracked sheet with riveted stiffeners: displacement compatibility (Poe).

An infinite sheet of thickness t carries equal stiffeners, pitch b, fastened at pitch p.
The unknown fastener forces make sheet and stiffener move alike at every fastener, but
for its flexibility f. In the sheet a displacement has three parts: even tension, the
forces in an uncracked sheet (Kelvin), and the crack, by the energy theorem

.. math:: v_i = \frac{t}{E}\int_0^a K(a')\,k_i(a')\,da',\qquad
          K = S\sqrt{\pi a} + \sum_j Q_j k_j(a)

where :math:`k_j` is K for unit forces at the four mirror images of fastener j,

.. math:: k_j = 2\sqrt{a/\pi}\int_0^{\pi/2}\sigma_j(a\sin\theta)\,d\theta

References
----------
.. [1] Poe, NASA TR R-358: cracked sheet with riveted, evenly spaced stringers.
.. [2] Vlieger; Swift: the same by displacement compatibility with flexible fasteners.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from enum import StrEnum

import numpy as np
from numpy.typing import NDArray

from repairs.analysis.errors import within
from repairs.analysis.types import Grade, HalfLength, Reference

COMPATIBILITY = Reference(
    "Displacement compatibility of sheet and riveted stiffeners (Poe, NASA TR R-358; "
    "Swift), solved numerically; parts proved against closed forms",
    Grade.DERIVED,
)
Array = NDArray[np.float64]
OUTSIDE = 5
"""Stiffeners modelled beyond the crack tip; more change F by less than 1 %."""
MOST_ROWS = 40
_NODES, _WEIGHTS = np.polynomial.legendre.leggauss(16)
_ANGLES, _ANGLE_WEIGHTS = np.polynomial.legendre.leggauss(40)
_THETA, _THETA_WEIGHTS = (_ANGLES + 1) * math.pi / 4, _ANGLE_WEIGHTS * math.pi / 4


class CrackCentre(StrEnum):
    """Where the crack is centred, and whether the stiffener there still carries."""

    MID_BAY = "mid_bay"
    INTACT_STIFFENER = "intact_stiffener"
    BROKEN_STIFFENER = "broken_stiffener"


@dataclass(frozen=True, slots=True)
class StiffenedSheet:
    """A sheet with equal stiffeners across the crack's path.

    Parameters
    ----------
    thickness, modulus, poisson
        t [mm], E [MPa] and Poisson's ratio [-] of the sheet.
    pitch
        Stiffener pitch b [mm].
    stiffener_area, stiffener_modulus
        Section of one stiffener [mm2] and its modulus [MPa].
    fastener_pitch, fastener_diameter
        p and d along a stiffener, one row [mm].
    flexibility
        f of one fastener [mm/N]; 0 = rigid, which puts most load on the first.
    """

    thickness: float
    modulus: float
    poisson: float
    pitch: float
    stiffener_area: float
    stiffener_modulus: float
    fastener_pitch: float
    fastener_diameter: float
    flexibility: float = 0.0

    def __post_init__(self) -> None:
        within("Poisson's ratio", self.poisson, 0, 0.5, "an elastic solid")
        share = self.fastener_pitch / self.pitch
        within("Fastener pitch over stiffener pitch", share, 1 / 40, 1, "the model")
        slender = self.fastener_diameter / self.fastener_pitch
        within("Fastener diameter over pitch", slender, 0.01, 0.5, "point forces")
        within("Fastener flexibility, mm/N", self.flexibility, 0, 1, "a fastener")

    @property
    def stiffening(self) -> float:
        """Share mu of the load that the stiffeners carry far from the crack [-]."""
        stiffener = self.stiffener_area * self.stiffener_modulus
        return stiffener / (stiffener + self.pitch * self.thickness * self.modulus)


@dataclass(frozen=True, slots=True)
class StiffenedCrack:
    """What a crack does: F, and the largest loads beside it, per unit sheet stress.

    `stiffener` is the most loaded stiffener's load over its load far away;
    `fastener_area` times the sheet stress is the largest fastener force [mm2].
    """

    factor: float
    stiffener: float
    fastener_area: float


@dataclass(frozen=True, slots=True)
class _Fasteners:
    """Positions in one quadrant, stiffener by stiffener, and mirror images of each."""

    x: Array
    y: Array
    stiffeners: int

    @property
    def on_axis(self) -> Array:
        """1 for fasteners on x = 0, which have one mirror image; else 0."""
        return np.where(self.x == 0.0, 1.0, 0.0)

    @property
    def images(self) -> Array:
        """Forces that one unknown stands for: 4, on the axis 2."""
        return 4.0 - 2.0 * self.on_axis

    def mirrored(self) -> list[tuple[Array, Array, Array]]:
        """Return x, y and signed weight of each image, all towards the crack."""
        weight = 1.0 - 0.5 * self.on_axis
        return [
            (right * self.x, up * self.y, -up * weight)
            for right in (1.0, -1.0)
            for up in (1.0, -1.0)
        ]


def stiffened_crack(
    sheet: StiffenedSheet, half_length: HalfLength, centre: CrackCentre
) -> StiffenedCrack:
    r"""Return F on :math:`S\sqrt{\pi a}` and the loads a crack puts on its stiffeners.

    Parameters
    ----------
    sheet
        Sheet, stiffeners and fasteners.
    half_length
        Half-length a [mm].
    centre
        Mid-bay, or at a stiffener, intact or broken.

    Returns
    -------
    StiffenedCrack
        Factor and load ratios, S the sheet's gross stress far from the crack.

    Notes
    -----
    Range 0.02 <= a/b <= 2.2, p/b >= 1/40. Flat elastic sheet, stiffeners without
    bending, every fastener elastic: yield of the first fasteners lowers the peak load
    on the stiffener and raises F. Where a tip lies under rigid fasteners F is
    a lower bound.

    References
    ----------
    .. [1] See `COMPATIBILITY`.
    """
    reach = half_length / sheet.pitch
    within("Half-length over stiffener pitch", reach, 0.02, 2.2, "the model")
    return GrowingCrack(sheet, half_length, centre).grown_to(half_length)


class GrowingCrack:
    """The equations of a panel for a crack that grows up to a longest half-length.

    Parameters
    ----------
    sheet
        Sheet, stiffeners and fasteners.
    longest
        Half-length the model is made large enough for [mm].
    centre
        Mid-bay, or at a stiffener, intact or broken.
    """

    def __init__(
        self, sheet: StiffenedSheet, longest: HalfLength, centre: CrackCentre
    ) -> None:
        self._sheet, self._centre = sheet, centre
        self._places = _places(sheet, longest, centre)
        self._uncracked = _uncracked(sheet, self._places)
        self._crack = np.zeros_like(self._uncracked)
        self._remote = np.zeros(self._places.x.size)
        self._length = 0.0

    def grown_to(self, half_length: HalfLength) -> StiffenedCrack:
        """Return F and loads at a half-length no less than the one before [mm]."""
        crack, remote = _crack_compliance(
            self._sheet, self._places, half_length, self._length
        )
        self._crack += crack
        self._remote += remote
        self._length = half_length
        forces = self._forces()
        sheet, places = self._sheet, self._places
        tip = _force_intensity(sheet, places, np.array([half_length]))[0]
        factor = 1 + float(tip @ forces) / math.sqrt(math.pi * half_length)
        rows = forces.reshape(places.stiffeners, -1)
        per_stress = sheet.stiffener_area * sheet.stiffener_modulus / sheet.modulus
        loads = 1 + np.cumsum(rows[:, ::-1], axis=1) / per_stress
        return StiffenedCrack(factor, float(loads.max()), float(np.abs(forces).max()))

    def _forces(self) -> Array:
        """Solve for fastener forces per unit sheet stress [mm2], closing the crack > 0.

        The broken stiffener may slide as a whole, and carries nothing at the crack.
        """
        system = self._uncracked - self._crack
        if self._centre is not CrackCentre.BROKEN_STIFFENER:
            return np.asarray(np.linalg.solve(system, self._remote), dtype=np.float64)
        axis = self._places.on_axis
        bordered = np.block(
            [[system, -axis[:, None]], [axis[None, :], np.zeros((1, 1))]]
        )
        far = self._sheet.stiffener_area * self._sheet.stiffener_modulus
        right = np.append(self._remote, -far / self._sheet.modulus)
        solved = np.linalg.solve(bordered, right)
        return np.asarray(solved[: axis.size], dtype=np.float64)


def _places(
    sheet: StiffenedSheet, half_length: HalfLength, centre: CrackCentre
) -> _Fasteners:
    stiffeners = math.ceil(half_length / sheet.pitch) + OUTSIDE
    height = 1.5 * max(half_length, sheet.pitch)
    rows = min(MOST_ROWS, max(8, math.ceil(height / sheet.fastener_pitch)))
    offset = 0.5 if centre is CrackCentre.MID_BAY else 0.0
    x = (np.arange(stiffeners) + offset) * sheet.pitch
    y = (np.arange(rows) + 0.5) * sheet.fastener_pitch
    return _Fasteners(np.repeat(x, rows), np.tile(y, stiffeners), stiffeners)


def _uncracked(sheet: StiffenedSheet, places: _Fasteners) -> Array:
    """Return how sheet, stiffeners and fasteners give, the crack still shut [mm/N]."""
    stretch = sheet.stiffener_area * sheet.stiffener_modulus
    same = places.x[:, None] == places.x[None, :]
    shorter = np.minimum(places.y[:, None], places.y[None, :])
    system = _kelvin_compliance(sheet, places)
    system -= np.where(same, shorter / stretch, 0.0)
    system -= sheet.flexibility * np.eye(places.x.size)
    return system


def _force_intensity(
    sheet: StiffenedSheet, places: _Fasteners, lengths: Array
) -> Array:
    """Return k_j at each half-length, per unit force [1/(mm*sqrt(mm))].

    Forces above and below the crack stress its line alike, so half of them do.
    """
    points = (lengths[:, None] * np.sin(_THETA))[:, :, None]
    stress = sum(
        2 * weight * _kelvin_stress(points - x, -y, sheet.poisson) / sheet.thickness
        for x, y, weight in places.mirrored()
        if y[0] > 0
    )
    even = np.einsum("aqn,q->an", stress, _THETA_WEIGHTS)
    scaled: Array = 2 * np.sqrt(lengths / math.pi)[:, None] * even
    return scaled


def _crack_compliance(
    sheet: StiffenedSheet,
    places: _Fasteners,
    half_length: HalfLength,
    begin: float = 0.0,
) -> tuple[Array, Array]:
    """Return displacement towards the crack for unit forces, and for unit stress.

    That of the crack's growth from half-length `begin` on.
    """
    inside = sorted({float(x) for x in places.x if begin < x < half_length})
    ends = np.array([begin, *inside, half_length])
    spans = np.diff(ends)[:, None]
    lengths = (ends[:-1, None] + spans * (_NODES + 1) / 2).ravel()
    weights = (spans * _WEIGHTS / 2).ravel()
    each = _force_intensity(sheet, places, lengths)
    scale = 4 * sheet.thickness / sheet.modulus / places.images
    remote = np.sqrt(math.pi * lengths)
    return (
        scale[:, None] * (each.T @ (each * weights[:, None])),
        scale * (each.T @ (remote * weights)),
    )


def _kelvin_stress(dx: Array, dy: Array, poisson: float) -> Array:
    """Return stress along y per unit line force along y, plane stress [1/mm]."""
    square = dx * dx + dy * dy
    shape = (3 + poisson) - 2 * (1 + poisson) * dx * dx / square
    return -dy / (4 * math.pi * square) * shape


def _kelvin_compliance(sheet: StiffenedSheet, places: _Fasteners) -> Array:
    """Return displacement outwards for unit forces in the uncracked sheet [mm/N].

    A fastener's own displacement is the mean round its edge.
    """
    nu, total = sheet.poisson, np.zeros((places.x.size, places.x.size))
    kappa = (3 - nu) / (1 + nu)
    for x, y, weight in places.mirrored():
        dx, dy = places.x[:, None] - x, places.y[:, None] - y
        square = dx * dx + dy * dy
        own = square < 1e-9 * sheet.fastener_diameter**2
        apart = np.where(own, (sheet.fastener_diameter / 2) ** 2, square)
        along = np.where(own, 0.5, dy * dy / apart)
        total += weight * (along - kappa / 2 * np.log(apart))
    return (1 + nu) ** 2 / (4 * math.pi * sheet.modulus * sheet.thickness) * total
