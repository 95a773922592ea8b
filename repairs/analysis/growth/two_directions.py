r"""A part-through crack that grows along the surface and inward, then through.

.. math:: \frac{dc}{dN} = f(\Delta K_c, R),\qquad \frac{da}{dN} = f(\Delta K_a, R)

with K taken at two points of the front; the front stays an ellipse. Under one repeated
cycle, or one equivalent cycle a flight, depth serves as the running variable: the end
is met exactly.

References
----------
.. [1] USAF Damage Tolerant Design Handbook, 11.3: two-point growth, and the angles.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass, field

import numpy as np
from scipy.integrate import solve_ivp

from repairs.analysis.errors import AnalysisError, within
from repairs.analysis.growth.laws import (
    Floats,
    GrowthLaw,
    StressCycle,
    delta_k,
    refuse_threshold,
)
from repairs.analysis.growth.separable import Factor, GrowthTable
from repairs.analysis.intensity.part_through import (
    CORNER_ANGLES,
    SURFACE_ANGLES,
    PartThrough,
    corner_crack_at_hole,
    surface_crack,
)

BREAK_THROUGH_RULE = (
    "When the depth reaches the thickness the crack goes on as a through crack of the "
    "length it has along the surface."
)
FLAW_BELOW_THRESHOLD = (
    "A threshold is for long cracks: a part-through flaw grows without one. Leave the "
    "threshold out."
)
NO_FLAW = (
    "The crack begins part-through, the path has no factors for that. Begin with a "
    "depth of the thickness, or give the factors."
)
PART_POINTS, THROUGH_POINTS = 30, 60
FIRST_STEP = 1e-9
"""First step in ln a, on the start's own slope: factors may jump a little at a/c = 1,
where a flaw often starts, and the integrator would look for the jump."""

EARLY_STEP = 0.1
"""The integrator's own first step in ln a; it shortens it where it must."""

TwoFactors = Callable[[float, float], tuple[float, float]]
"""(depth a, length c) [mm] -> factors on S sqrt(pi a) at the length and depth tips."""


@dataclass(frozen=True, eq=False)
class History:
    """A crack's growth for a curve: cycles (or flights), length and depth [mm].

    Depth is the thickness once the crack is through.
    """

    cycles: Floats
    length: Floats
    depth: Floats


@dataclass(frozen=True, slots=True)
class TwoAxisGrowth:
    """How a part-through crack grew: cycles, final depth and length [mm]."""

    cycles: float
    depth: float
    length: float
    history: History = field(compare=False, repr=False)


@dataclass(frozen=True, slots=True)
class BreakThrough:
    """Where a crack came through; see `BREAK_THROUGH_RULE`.

    Factors on S [sqrt(mm)] of the surface tip before and of the through crack after: K
    jumps between the two solutions, length does not.
    """

    cycles: float
    length: float
    before: float
    after: float


@dataclass(frozen=True, slots=True)
class ToEnd:
    """A crack from flaw to its end: cycles (or flights), break-through, history."""

    cycles: float
    break_through: BreakThrough
    history: History = field(compare=False, repr=False)


def corner_at_hole(thickness: float, radius: float, half_width: float) -> TwoFactors:
    """Return factors of one corner crack at a hole, at 10 and 80 degrees [mm]."""

    def factors(depth: float, length: float) -> tuple[float, float]:
        crack = PartThrough(depth, length, thickness)
        along, inward = CORNER_ANGLES
        return (
            corner_crack_at_hole(crack, radius, half_width, along),
            corner_crack_at_hole(crack, radius, half_width, inward),
        )

    return factors


def surface_flaw(thickness: float, half_width: float) -> TwoFactors:
    """Return factors of a semi-elliptical surface crack, at 10 and 90 degrees [mm]."""

    def factors(depth: float, length: float) -> tuple[float, float]:
        crack = PartThrough(depth, length, thickness)
        along, inward = SURFACE_ANGLES
        return (
            surface_crack(crack, half_width, along),
            surface_crack(crack, half_width, inward),
        )

    return factors


def grow_part_through(
    law: GrowthLaw,
    factors: TwoFactors,
    cycle: StressCycle,
    start: tuple[float, float],
    thickness: float,
) -> TwoAxisGrowth:
    """Grow depth a and length c together until the crack is through.

    Parameters
    ----------
    law
        Growth law.
    factors
        (a, c) -> factors on S sqrt(pi a) at the length tip and at the depth tip [-].
    cycle
        Stress cycle, or the equivalent cycle of a flight [MPa].
    start
        Depth a and length c [mm].
    thickness
        Plate thickness; growth ends when a reaches it [mm].

    Returns
    -------
    TwoAxisGrowth
        Cycles to break through, the lengths there, and the history.

    Notes
    -----
    Range of the factors, stress range above 0. Relative error below 1e-7 in N and c for
    smooth factors.

    References
    ----------
    .. [1] USAF Damage Tolerant Design Handbook, 11.3: two-point growth.
    """
    within("Range of stress, MPa", cycle.span, 1e-9, 1e5, "a crack that is pulled")
    return _grown(law, factors, cycle, start, thickness)


def _grown(
    law: GrowthLaw,
    factors: TwoFactors,
    cycle: StressCycle,
    start: tuple[float, float],
    thickness: float,
    points: int = 0,
) -> TwoAxisGrowth:
    """Grow a flaw until it is through; `points` of history, or the steps taken."""
    refuse_threshold(law, FLAW_BELOW_THRESHOLD)

    def slopes(log_depth: float, state: Floats) -> tuple[float, float]:
        depth, length = min(math.exp(log_depth), thickness), float(state[0])
        at_length, at_depth = factors(depth, length)
        along = law.rate(delta_k(at_length, cycle, depth), cycle.ratio)
        inward = law.rate(delta_k(at_depth, cycle, depth), cycle.ratio)
        return depth * along / inward, depth / inward

    depth, length = start
    if depth >= thickness:
        at_once = History(np.zeros(1), np.array([length]), np.array([thickness]))
        return TwoAxisGrowth(0.0, thickness, length, at_once)
    begin, end = math.log(depth), math.log(thickness)
    more, passed = slopes(begin, np.array([length]))
    after = min(begin + FIRST_STEP, end)
    solved = solve_ivp(
        slopes,
        (after, end),
        (length + (after - begin) * more, (after - begin) * passed),
        method="DOP853",
        first_step=min(EARLY_STEP, end - after) or None,
        t_eval=np.linspace(after, end, points) if points else None,
        rtol=1e-8,
        atol=1e-12,
    )
    if not solved.success:
        raise AnalysisError(f"Growth through the thickness failed: {solved.message}")
    lengths, cycles = solved.y
    depths = np.exp(solved.t)
    depths[0], depths[-1] = depth, thickness
    return TwoAxisGrowth(
        float(cycles[-1]),
        thickness,
        float(lengths[-1]),
        History(cycles, lengths, depths),
    )


@dataclass(frozen=True)
class FlawPath:
    """A flaw's whole path: part-through factors, then the through crack's F(c).

    `thickness` and the last length `end` in mm. No part-through factors: a through
    crack from the start.
    """

    part: TwoFactors | None
    through: Factor
    thickness: float
    end: float

    def part_intensities(self, length: float, depth: float) -> tuple[float, float]:
        """Return K over S of the length and the depth tip [sqrt(mm)]."""
        assert self.part is not None, "a path that begins part-through"
        at_length, at_depth = self.part(depth, length)
        root = math.sqrt(math.pi * depth)
        return at_length * root, at_depth * root

    def through_intensity(self, length: float, depth: float = 0.0) -> tuple[float]:
        """Return K over S of the through crack [sqrt(mm)]."""
        return (self.through(length) * math.sqrt(math.pi * length),)

    def jump(self, length: float) -> tuple[float, float]:
        """Return K over S of the surface tip before and after break-through."""
        before, _ = self.part_intensities(length, self.thickness)
        return before, self.through_intensity(length)[0]


def grow_to_end(
    law: GrowthLaw, path: FlawPath, cycle: StressCycle, start: tuple[float, float]
) -> ToEnd:
    """Grow a flaw until it is through, and the through crack to the path's end.

    Parameters
    ----------
    law
        Growth law.
    path
        Factors of both stages, thickness, and where growth ends [mm].
    cycle
        Stress cycle, or the equivalent cycle of a flight [MPa].
    start
        Depth a and length c [mm].

    Returns
    -------
    ToEnd
        Cycles (flights for the cycle of a flight), break-through, history.

    Notes
    -----
    Range of the factors; see `BREAK_THROUGH_RULE`.

    References
    ----------
    .. [1] USAF Damage Tolerant Design Handbook, 11.3: two-point growth.
    """
    if path.part is None:
        raise AnalysisError(NO_FLAW)
    grown = _grown(law, path.part, cycle, start, path.thickness, PART_POINTS)
    through = GrowthTable(law, path.through, cycle, grown.length, path.end)
    lengths = np.geomspace(grown.length, path.end, THROUGH_POINTS)
    lengths[0], lengths[-1] = grown.length, path.end  # geomspace rounds its ends
    cycles = grown.cycles + through.cycles_from_low(lengths)
    part = grown.history
    return ToEnd(
        float(cycles[-1]),
        BreakThrough(grown.cycles, grown.length, *path.jump(grown.length)),
        History(
            np.concatenate((part.cycles, cycles[1:])),
            np.concatenate((part.length, lengths[1:])),
            np.concatenate((part.depth, np.full(THROUGH_POINTS - 1, path.thickness))),
        ),
    )
