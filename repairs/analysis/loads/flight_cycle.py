r"""One cycle a flight: from the smallest on the ground to the largest in flight.

Counting gusts and the ground-to-air cycle apart loses the range from peak to ground;
for damage of a whole flight its sequence is counted, and this cycle comes out of it.
Pressure is the *differential* between cabin and outside, never the cabin's own.
"""

from __future__ import annotations

import math
from collections.abc import Iterable

from repairs.analysis.errors import InputError, within
from repairs.analysis.growth.laws import StressCycle
from repairs.analysis.types import Grade, GrossStress, Reference

STANDARD_ATMOSPHERE = Reference(
    "International standard atmosphere: hydrostatic law with 288.15 K, 101,325 Pa, "
    "6.5 K/km to 11 km, then 216.65 K",
    Grade.DERIVED,
)
NO_TENSION = (
    "The largest stress of the flight is {largest:.4g} MPa; a cycle needs tension "
    "somewhere in flight. No crack is opened by this flight."
)
NO_STRESS = (
    "A flight needs a stress on the ground and one in flight. The hoop stress of a "
    "parked aircraft is 0: enter it."
)
FOOT = 0.3048
"""Metres in one foot, exact."""
GRAVITY, GAS = 9.80665, 287.05287
SEA_PRESSURE, SEA_TEMPERATURE, LAPSE = 0.101325, 288.15, 0.0065
TROPOPAUSE = 11_000.0


def ground_air_ground(ground: Iterable[float], flight: Iterable[float]) -> StressCycle:
    """Return the cycle from the smallest stress on the ground to the largest in flight.

    Parameters
    ----------
    ground
        Stresses on the ground, taxi included [MPa]; compression is negative.
    flight
        Stresses in flight [MPa].

    Returns
    -------
    StressCycle
        Largest stress and ratio R, which is below 0 for compression on the ground.

    Notes
    -----
    Refused without tension in flight. If flight goes below the ground, its own smallest
    stress counts.

    References
    ----------
    .. [1] The largest range of a repeating flight by rainflow counting.
    """
    parked, flown = tuple(ground), tuple(flight)
    if not parked or not flown:
        raise InputError(NO_STRESS)
    smallest, largest = min(parked + flown), max(flown)
    if not largest > 0:
        raise InputError(NO_TENSION.format(largest=largest))
    return StressCycle(GrossStress(largest), smallest / largest)


def standard_pressure(altitude: float) -> float:
    """Return the pressure of the standard atmosphere [MPa] at an altitude [ft].

    Parameters
    ----------
    altitude
        Pressure altitude [ft].

    Returns
    -------
    float
        Absolute pressure [MPa].

    Notes
    -----
    Range -1,000 to 65,000 ft.

    References
    ----------
    .. [1] See `STANDARD_ATMOSPHERE`.
    """
    within("Altitude, ft", altitude, -1000, 65_000, "two layers of the atmosphere")
    height = altitude * FOOT
    low = min(height, TROPOPAUSE)
    share = 1 - LAPSE * low / SEA_TEMPERATURE
    pressure = SEA_PRESSURE * math.pow(share, GRAVITY / (GAS * LAPSE))
    above = max(height - TROPOPAUSE, 0.0)
    return pressure * math.exp(
        -GRAVITY * above / (GAS * (SEA_TEMPERATURE - LAPSE * TROPOPAUSE))
    )


def differential_pressure(cabin_altitude: float, altitude: float) -> float:
    """Return the differential a cabin holds: its pressure less that outside [MPa].

    Parameters
    ----------
    cabin_altitude
        Altitude whose pressure the cabin has [ft].
    altitude
        Altitude flown [ft].

    Returns
    -------
    float
        Differential pressure [MPa]; 0 on the ground with the doors open.

    Notes
    -----
    Range of `standard_pressure`; the cabin is never higher than the aircraft.

    References
    ----------
    .. [1] See `STANDARD_ATMOSPHERE`.
    """
    within("Cabin altitude, ft", cabin_altitude, -1000, altitude, "below the aircraft")
    return standard_pressure(cabin_altitude) - standard_pressure(altitude)
