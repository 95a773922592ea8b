r"""Loads of gusts and manoeuvres: how often in turbulence, and the rules' limits.

.. math::
    N(y) = \sum t N_0\left[P_1 e^{-|y|/(b_1 \bar A)} + P_2 e^{-|y|/(b_2 \bar A)}\right]

The units of the rules stay as printed and stand in the names.

References
----------
.. [1] 14 CFR part 25, appendix G (c)(3), 2014 edition.
.. [2] 14 CFR 25.335(d), 2019 edition, and 23.341(c) as of amendment 23-48.
.. [3] 14 CFR 25.337, as of April 2026.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

from repairs.analysis.errors import within
from repairs.analysis.types import Grade, Reference

MISSION_ANALYSIS = Reference("14 CFR part 25, appendix G (c)(3)", Grade.PRINT)
GUST_ALLEVIATION = Reference("14 CFR 25.335(d) and 23.341(c)", Grade.PRINT)
MANOEUVRE = Reference("14 CFR 25.337(b) and (c)", Grade.PRINT)
GRAVITY_FT_S2 = 32.174
"""Standard gravity in the rule's unit [ft/s^2]."""


@dataclass(frozen=True, slots=True)
class TurbulenceSegment:
    """A segment of a mission and its turbulence.

    Parameters
    ----------
    time
        Share of the time, or hours [- or h].
    crossings
        N_0, zero crossings of the load per unit of time [1/s or 1/h].
    response
        A, rms load over rms gust velocity [load unit s/ft].
    p1, b1
        Share of non-storm turbulence and its intensity [-, ft/s].
    p2, b2
        Share of storm turbulence and its intensity [-, ft/s].
    """

    time: float
    crossings: float
    response: float
    p1: float
    b1: float
    p2: float
    b2: float

    def __post_init__(self) -> None:
        for name, value in (
            ("Time in the segment", self.time),
            ("Zero crossings N0", self.crossings),
            ("Response A", self.response),
            ("Intensity b1, ft/s", self.b1),
            ("Intensity b2, ft/s", self.b2),
        ):
            within(name, value, 1e-12, 1e9, "a positive number")
        for name, share in (("P1", self.p1), ("P2", self.p2)):
            within(f"Share of time {name}", share, 0, 1, "a share of time")


def turbulence_exceedances(
    increment: float, segments: Sequence[TurbulenceSegment]
) -> float:
    r"""Return how often a load increment is exceeded in continuous turbulence.

    .. math:: N(y) = \sum t N_0[P_1 e^{-|y|/(b_1 A)} + P_2 e^{-|y|/(b_2 A)}]

    Parameters
    ----------
    increment
        y, load or stress less its value in 1 g level flight, in any one unit, as
        [MPa].
    segments
        Segments of the mission.

    Returns
    -------
    float
        Exceedances per unit of time, one direction. Cumulative: not occurrences.

    Notes
    -----
    Range: any finite increment; a linear structure. P and b are read at the altitude
    from figures 1 and 2 of the appendix and are inputs here.

    References
    ----------
    .. [1] 14 CFR part 25, appendix G (c)(3).
    """
    size = abs(within("Load increment", increment, -1e9, 1e9, "a finite load"))
    return math.fsum(
        s.time
        * s.crossings
        * (
            s.p1 * math.exp(-size / (s.b1 * s.response))
            + s.p2 * math.exp(-size / (s.b2 * s.response))
        )
        for s in segments
    )


@dataclass(frozen=True, slots=True)
class GustAeroplane:
    """What the discrete gust formula asks of an aeroplane.

    Parameters
    ----------
    wing_loading_psf
        W/S [lb/ft^2].
    chord_ft
        Mean geometric chord [ft].
    lift_slope
        Slope of the normal-force coefficient, a [1/rad].
    density_slug_ft3
        Air density [slug/ft^3].
    """

    wing_loading_psf: float
    chord_ft: float
    lift_slope: float
    density_slug_ft3: float

    def __post_init__(self) -> None:
        within("Wing loading, lb/ft2", self.wing_loading_psf, 1, 1000, "a wing")
        within("Mean chord, ft", self.chord_ft, 0.5, 100, "a wing")
        within("Lift slope, 1/rad", self.lift_slope, 0.5, 12, "a wing")
        within(
            "Air density, slug/ft3",
            self.density_slug_ft3,
            1e-5,
            0.004,
            "the atmosphere",
        )

    @property
    def mass_ratio(self) -> float:
        """mu = 2 (W/S) / (rho c a g) [-]."""
        return (
            2
            * self.wing_loading_psf
            / (self.density_slug_ft3 * self.chord_ft * self.lift_slope * GRAVITY_FT_S2)
        )

    @property
    def alleviation(self) -> float:
        """Kg = 0.88 mu / (5.3 + mu) [-]."""
        return 0.88 * self.mass_ratio / (5.3 + self.mass_ratio)


def gust_increment(
    aeroplane: GustAeroplane, gust_fps_eas: float, speed_kt_eas: float
) -> float:
    r"""Return the load-factor increment of a discrete gust (Pratt).

    .. math:: \Delta n = \frac{K_g U_{de} V_e a}{498\,(W/S)}

    Parameters
    ----------
    aeroplane
        Wing loading, chord, lift slope and density.
    gust_fps_eas
        U_de, derived gust velocity [ft/s EAS].
    speed_kt_eas
        V_e [kt EAS].

    Returns
    -------
    float
        Increment over 1 g [-].

    Notes
    -----
    Range: a rigid aeroplane in a one-minus-cosine gust of 25 chords. Transport rules
    ask for tuned discrete gusts and continuous turbulence instead (25.341).

    References
    ----------
    .. [1] 14 CFR 25.335(d)(1) and 23.341(c); the form is Pratt's, NACA TN 2964, 1953.
    """
    within("Gust velocity, ft/s", gust_fps_eas, -200, 200, "derived gust velocities")
    within("Airspeed, kt EAS", speed_kt_eas, 1, 800, "equivalent airspeed")
    return (
        aeroplane.alleviation
        * gust_fps_eas
        * speed_kt_eas
        * aeroplane.lift_slope
        / (498 * aeroplane.wing_loading_psf)
    )


def manoeuvre_limit(takeoff_weight_lb: float) -> float:
    r"""Return the positive limit manoeuvring load factor of a transport.

    .. math:: n = 2.1 + \frac{24\,000}{W + 10\,000}, \quad 2.5 \le n \le 3.8

    Parameters
    ----------
    takeoff_weight_lb
        W, design maximum take-off weight [lb]; not the weight of a flight.

    Returns
    -------
    float
        n [-].

    Notes
    -----
    Range: transport category; unless features of the design make it impossible to
    exceed a lower one in flight (25.337(d)).

    References
    ----------
    .. [1] 14 CFR 25.337(b).
    """
    within("Take-off weight, lb", takeoff_weight_lb, 1, 2e6, "design maximum")
    return min(max(2.1 + 24_000 / (takeoff_weight_lb + 10_000), 2.5), 3.8)


def negative_manoeuvre_limit(
    speed: float, cruise_speed: float, dive_speed: float
) -> float:
    r"""Return the negative limit manoeuvring load factor of a transport.

    .. math:: n = -1 \text{ up to } V_C,\ \text{then linear to } 0 \text{ at } V_D

    Parameters
    ----------
    speed, cruise_speed, dive_speed
        V, V_C and V_D in one unit [kt EAS].

    Returns
    -------
    float
        n [-].

    Notes
    -----
    Range: 0 < V <= V_D, V_C < V_D.

    References
    ----------
    .. [1] 14 CFR 25.337(c).
    """
    within("Cruise speed VC", cruise_speed, 1, dive_speed * (1 - 1e-9), "below VD")
    within("Speed", speed, 0, dive_speed, "up to VD")
    if speed <= cruise_speed:
        return -1.0
    return -(dive_speed - speed) / (dive_speed - cruise_speed)
