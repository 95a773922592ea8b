"""Random draws that give the same demo on every machine and Python version.

One stream per purpose and aircraft: adding an aircraft leaves the others as they were.
Only ``random.Random.random()`` is drawn; every other law is its own inverse transform.
"""

from __future__ import annotations

import hashlib
import math
import random
from collections.abc import Sequence
from statistics import NormalDist
from typing import TypeVar

Choice = TypeVar("Choice")

_quantile = NormalDist().inv_cdf


def stream_digest(seed: int, purpose: str, msn: int) -> str:
    """SHA-256 (hex) of the name of one stream."""
    name = f"framebay-demo-{seed}|{purpose}|{msn}"
    return hashlib.sha256(name.encode()).hexdigest()


class Stream:
    """One sequence of draws; the order of the calls is part of its meaning."""

    def __init__(self, seed: int, purpose: str, msn: int = 0) -> None:
        first_bytes = bytes.fromhex(stream_digest(seed, purpose, msn)[:16])
        self.uniform = random.Random(int.from_bytes(first_bytes, "big")).random

    def between(self, low: float, high: float) -> float:
        return low + (high - low) * self.uniform()

    def whole(self, low: int, high: int) -> int:
        """A whole number, both ends included."""
        return low + int(self.uniform() * (high - low + 1))

    def chance(self, probability: float) -> bool:
        return self.uniform() < probability

    def pick(self, options: Sequence[Choice]) -> Choice:
        return options[int(self.uniform() * len(options))]

    def weighted(self, options: Sequence[tuple[Choice, float]]) -> Choice:
        """Pick by weight; the weights need not add up to one."""
        left = self.uniform() * math.fsum(weight for _, weight in options)
        for option, weight in options:
            left -= weight
            if left < 0:
                return option
        return options[-1][0]

    def poisson(self, mean: float, at_most: int = 1_000) -> int:
        """Poisson count by cumulation of its terms."""
        target = self.uniform()
        count, term = 0, math.exp(-mean)
        total = term
        while target > total and count < at_most:
            count += 1
            term *= mean / count
            total += term
        return count

    def exponential(self, mean: float) -> float:
        return -mean * math.log(1.0 - self.uniform())

    def lognormal(self, median: float, sigma: float) -> float:
        return median * math.exp(sigma * _quantile(self._open_uniform()))

    def beta(self, alpha: int, beta: int) -> float:
        """Beta with whole parameters: the alpha-th smallest of alpha + beta - 1."""
        ordered = sorted(self.uniform() for _ in range(alpha + beta - 1))
        return ordered[alpha - 1]

    def _open_uniform(self) -> float:
        """A uniform draw that is never exactly zero, where the normal law ends."""
        return self.uniform() or 2.0**-54
