"""Axes of charts: ends and round ticks, even or by powers of ten."""

from __future__ import annotations

import math
from dataclasses import dataclass

SUPERSCRIPT = str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹")
_ROUND_STEPS = (1.0, 2.0, 2.5, 5.0, 10.0)
NOT_POSITIVE = "A logarithmic axis holds what is above zero; {low} is not."


@dataclass(frozen=True)
class Axis:
    """Ends and ticks of one axis."""

    low: float
    high: float
    ticks: tuple[float, ...]
    log: bool = False

    def share(self, value: float) -> float:
        """How far along the axis a value lies, 0 to 1."""
        if self.log:
            return math.log(value / self.low) / math.log(self.high / self.low)
        return (value - self.low) / (self.high - self.low)

    def label(self, tick: float) -> str:
        """The tick's figures, all ticks with the same decimals; a power of ten on a
        logarithmic axis."""
        if self.log:
            power = round(math.log10(tick))
            return f"10{str(power).translate(SUPERSCRIPT)}"
        step = self.ticks[1] - self.ticks[0]
        decimals = max(0, -math.floor(math.log10(step) + 1e-9))
        if decimals and abs(step * 10**decimals % 1) > 1e-6:
            decimals += 1
        return f"{tick:,.{decimals}f}"


def nice_axis(low: float, high: float, *, intervals: int = 5) -> Axis:
    """An axis over the values with round ticks (steps of 1, 2, 2.5 or 5).

    It starts at zero when the values are positive and the lowest is less than half
    the highest, so that a curve's height can be read as a proportion.
    """
    if 0 <= low < 0.5 * high:
        low = 0.0
    if high <= low:
        room = abs(low) * 0.1 or 1.0
        low, high = low - room, high + room
    rough = (high - low) / intervals
    power = 10.0 ** math.floor(math.log10(rough))
    step = next(s for s in _ROUND_STEPS if s * power >= rough * (1 - 1e-9)) * power
    first, last = math.floor(low / step + 1e-9), math.ceil(high / step - 1e-9)
    ticks = tuple(index * step for index in range(first, last + 1))
    return Axis(low=ticks[0], high=ticks[-1], ticks=ticks)


def log_axis(low: float, high: float) -> Axis:
    """An axis over whole powers of ten."""
    if low <= 0:
        raise ValueError(NOT_POSITIVE.format(low=low))
    first = math.floor(math.log10(low) + 1e-9)
    last = max(first + 1, math.ceil(math.log10(high) - 1e-9))
    ticks = tuple(10.0**power for power in range(first, last + 1))
    return Axis(low=ticks[0], high=ticks[-1], ticks=ticks, log=True)
