r"""The loop over cycles, which knows retardation, and the formulas it calls.

A cycle is an overload where its plastic zone reaches beyond the zones before it. The
overload itself grows unretarded from the length it meets, and retards from the next
cycle on.

All of it is plain Python that numba also compiles, and stands in one file: the compiled
copy is renewed when this file changes, and no other.

References
----------
.. [1] Wheeler 1972, in the USAF Damage Tolerant Design Handbook, 5.2.1.2.
.. [2] Gallagher and Hughes 1974, generalised Willenborg model.
"""

from __future__ import annotations

import functools
import math
from collections.abc import Callable
from typing import Any

import numpy as np
from numpy.typing import NDArray

from repairs.analysis.growth.laws import Floats
from repairs.analysis.types import Grade, Reference

WHEELER = Reference(
    "Wheeler, in the USAF Damage Tolerant Design Handbook, 5.2.1.2", Grade.PRINT
)
WILLENBORG = Reference(
    "Gallagher and Hughes, generalised Willenborg model, in public university notes on "
    "damage tolerance",
    Grade.QUOTED,
)
NONE, BY_WHEELER, BY_WILLENBORG = 0, 1, 2
OUTGROWN, THROUGH, AT_END, FRACTURE, PAUSED = 0, 1, 2, 3, 4
"""Why the loop stopped."""
MEMORY = 3
"""Numbers a tip remembers of the last overload."""
(
    C,
    M,
    FORMAN_END,
    GAMMA,
    ZONE,
    EXPONENT,
    THRESHOLD,
    SHUT_OFF,
    TOUGHNESS,
    THICKNESS,
    LAST,
) = range(11)
"""Places in the loop's constants."""
LENGTH, DEPTH, FIRST_MEMORY = 0, 1, 2
"""Places in the loop's state."""
LENGTH_AT, DEPTH_AT, LENGTH_UNTIL, DEPTH_UNTIL, FIRST_TIP = 0, 1, 2, 3, 4
"""Places in the local model: where it holds, then K/S and two slopes for each tip."""

March = Callable[..., int]


def wheeler_share(zone: float, distance: float, exponent: float) -> float:
    r"""Return Wheeler's share of the growth, :math:`(r_p/\text{distance})^w` [1]_.

    Parameters
    ----------
    zone
        Radius of this cycle's plastic zone [mm].
    distance
        From the tip to the end of the overload's zone, a_ol + rp_ol - a [mm].
    exponent
        w [-].

    Returns
    -------
    float
        Share of the unretarded growth [-], 1 where the zone reaches the end.

    Notes
    -----
    Range zone > 0.

    References
    ----------
    .. [1] See `WHEELER`.
    """
    if zone >= distance:
        return 1.0
    return math.pow(zone / distance, exponent)


def willenborg_reduction(
    peak: float, overload: float, passed: float, threshold: float, shut_off: float
) -> float:
    r"""Return what the overload's zone takes off both ends of a cycle of K [1]_.

    .. math::
        K_{red} = \frac{1 - K_{th}/K_{max}}{R_{so} - 1}
        \bigl[K_{ol}\sqrt{1 - \Delta a/r_{p,ol}} - K_{max}\bigr]

    Parameters
    ----------
    peak
        Kmax of this cycle [MPa*sqrt(mm)].
    overload
        Kmax of the overload [MPa*sqrt(mm)].
    passed
        Share of the overload's zone that the crack has passed, 0 to 1 [-].
    threshold
        Kmax at threshold [MPa*sqrt(mm)].
    shut_off
        Overload ratio that stops the crack [-].

    Returns
    -------
    float
        Reduction [MPa*sqrt(mm)], 0 where the cycle is an overload itself or below
        the threshold.

    Notes
    -----
    Range 0 <= passed <= 1, peak > 0.

    References
    ----------
    .. [1] See `WILLENBORG`.
    """
    left = overload * math.sqrt(1 - passed) - peak
    if left <= 0 or peak <= threshold:
        return 0.0
    return (1 - threshold / peak) / (shut_off - 1) * left


def tip_growth(
    intensity: float,
    cycle: tuple[float, float, float],
    length: float,
    state: Floats,
    at: int,
    model: int,
    constants: Floats,
) -> float:
    """Return the growth of one tip in one cycle [mm], -1 where it fractures.

    `intensity` is K over S; `cycle` holds maximum, range and the part of the range that
    counts in the law, all of S [MPa]; the tip's memory begins at `at` of the state and
    is renewed by an overload.
    """
    maximum, span, driven = cycle
    peak = intensity * maximum
    if peak >= constants[TOUGHNESS]:
        return -1.0
    driving = intensity * driven
    share = 1.0
    if model == BY_WHEELER:
        zone = constants[ZONE] * peak * peak
        distance = state[at] - length
        if zone >= distance:
            state[at] = length + zone
        else:
            share = wheeler_share(zone, distance, constants[EXPONENT])
    elif model == BY_WILLENBORG:
        zone = constants[ZONE] * peak * peak
        begin, reach = state[at + 1], state[at + 2]
        if length + zone >= begin + reach:
            state[at], state[at + 1], state[at + 2] = peak, length, zone
        else:
            passed = (length - begin) / reach
            taken = willenborg_reduction(
                peak, state[at], passed, constants[THRESHOLD], constants[SHUT_OFF]
            )
            if taken >= peak:
                return 0.0
            ratio = 1 - intensity * span / (peak - taken)
            power = 1 - constants[GAMMA] if ratio >= 0 else 1.0
            driving = intensity * span / math.pow(1 - ratio, power)
    growth = float(constants[C] * math.pow(driving, constants[M]) * share)
    if constants[FORMAN_END] > 0:
        room = min(1.0, span / maximum) * constants[FORMAN_END] - driving
        return float(growth / room) if room > 0 else -1.0
    return growth


def march(
    maximum: Floats,
    span: Floats,
    driven: Floats,
    place: NDArray[np.int64],
    state: Floats,
    local: Floats,
    constants: Floats,
    model: int,
    tips: int,
    until: int,
) -> int:
    """Run cycles until the crack outgrows its local model; return why it stopped.

    `place` holds the next cycle's index and the cycles done; `state` the length, the
    depth and each tip's memory; all three are renewed. The local model is linear in
    both lengths.
    """
    length, depth = state[LENGTH], state[DEPTH]
    index, done = place[0], place[1]
    reason = PAUSED
    while done < until:
        if maximum[index] > 0:
            along, inward = length - local[LENGTH_AT], depth - local[DEPTH_AT]
            cycle = (maximum[index], span[index], driven[index])
            at = FIRST_TIP
            intensity = local[at] + local[at + 1] * along + local[at + 2] * inward
            grown = tip_growth(
                intensity, cycle, length, state, FIRST_MEMORY, model, constants
            )
            deeper = 0.0
            if tips == 2:
                at = FIRST_TIP + 3
                intensity = local[at] + local[at + 1] * along + local[at + 2] * inward
                at = FIRST_MEMORY + MEMORY
                deeper = tip_growth(
                    intensity, cycle, depth, state, at, model, constants
                )
            if grown < 0 or deeper < 0:
                reason = FRACTURE
                break
            length += grown
            depth += deeper
        index += 1
        done += 1
        if index == len(maximum):
            index = 0
        if tips == 2 and depth >= constants[THICKNESS]:
            reason = THROUGH
            break
        if length >= constants[LAST]:
            reason = AT_END
            break
        if length >= local[LENGTH_UNTIL] or depth >= local[DEPTH_UNTIL]:
            reason = OUTGROWN
            break
    state[LENGTH], state[DEPTH] = length, depth
    place[0], place[1] = index, done
    return reason


@functools.cache
def compiled_march() -> March:
    """Return the loop as machine code, kept between processes beside this file.

    The first call imports numba and, once a version, compiles.
    """
    import numba
    from numba.extending import register_jitable

    for part in (wheeler_share, willenborg_reduction, tip_growth):
        register_jitable(part)
    made: Any
    try:
        made = numba.njit(cache=True)(march)
    except RuntimeError:  # nowhere to write: compiled for this process alone
        made = numba.njit(march)
    return made  # type: ignore[no-any-return]
