"""Hot spots by the spatial scan statistic, tested by throwing events at random.

A hot spot is the window of cells whose count most exceeds what its share of the
exposure leads one to expect. Its p-value compares it with the best window of random
maps, so looking at many windows is already paid for.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from typing import TypeVar

import numpy as np
from numpy.typing import NDArray
from scipy.special import xlogy

from reports.density import Density, Tally
from reports.lattice import Counts, Flags, Floats, Lattice

LARGEST = 8
"""Longest side of a window, in cells."""

REPLICAS = 999
SIGNIFICANT = 0.05
MOST_SHOWN = 6
_CHUNK = 32
"""Random maps scanned at a time: as many as stay in the processor's cache."""

Cell = TypeVar("Cell", np.int32, np.int64, np.float64)


@dataclass(frozen=True)
class Window:
    """A rectangle of cells; around a shell it may pass the cut of the drawing."""

    along: int
    around: int
    frames: int
    stringers: int

    def cells(self, shape: tuple[int, int]) -> Flags:
        """The window's cells as a mask."""
        mask = np.zeros(shape, dtype=bool)
        around = np.arange(self.around, self.around + self.stringers) % shape[1]
        mask[self.along : self.along + self.frames, around] = True
        return mask


def window_mm(window: Window, lattice: Lattice) -> tuple[float, float, float, float]:
    """Edges of a window: along from and to, across from and to, past the cut if so."""
    turns, rest = divmod(window.around + window.stringers, lattice.shape[1])
    last = window.around + window.stringers
    right = float(lattice.across_mm[rest if lattice.wraps else last])
    if lattice.wraps:
        right += turns * float(lattice.across_mm[-1] - lattice.across_mm[0])
    return (
        float(lattice.along_mm[window.along]),
        float(lattice.along_mm[window.along + window.frames]),
        float(lattice.across_mm[window.around]),
        right,
    )


@dataclass(frozen=True)
class HotSpot:
    """A window with its count, its expectation and how rarely chance does as well."""

    window: Window
    count: int
    expected: float
    llr: float
    p: float

    @property
    def ratio(self) -> float:
        """Observed over expected."""
        return self.count / self.expected

    @property
    def stands_out(self) -> bool:
        """Whether chance explains it badly enough to be called a hot spot."""
        return self.p <= SIGNIFICANT


def scan_ratio(count: Floats, expected: Floats, total: float) -> Floats:
    r"""Log likelihood ratio of the Poisson scan statistic for high counts.

    .. math::
        c\ln\frac cE + (C-c)\ln\frac{C-c}{C-E}\quad\text{if } c > E,\text{ else } 0

    Parameters
    ----------
    count : ndarray (n,)
        Count c inside each window [-].
    expected : ndarray (n,)
        Expected count E inside each window, 0 < E < C [-].
    total : float
        Count C of the whole map [-].

    Returns
    -------
    ndarray (n,)
        Log likelihood ratio [-].

    References
    ----------
    Kulldorff, M. (1997). A spatial scan statistic. Communications in Statistics:
    Theory and Methods 26, 1481-1496.
    """
    c, e = np.broadcast_arrays(
        np.asarray(count, dtype=np.float64), np.asarray(expected, dtype=np.float64)
    )
    ratio = np.zeros(c.shape)
    high = c > e
    inside, outside = c[high], total - c[high]
    ratio[high] = inside * np.log(inside / e[high])
    rest = outside > 0
    part = np.zeros(outside.shape)
    part[rest] = outside[rest] * np.log(outside[rest] / (total - e[high][rest]))
    ratio[high] += part
    return ratio


def hot_spots(
    density: Density, seen: Tally, *, seed: int, replicas: int = REPLICAS
) -> list[HotSpot]:
    """Windows that hold more than their share, the strongest first, none overlapping.

    The list ends with the first window that does not stand out, so that a reader sees
    where the line was drawn; it is empty when nothing was counted.

    Events are counted, each once: under the null hypothesis an event falls on a cell by
    its share of the exposure, and one bad day is not mistaken for a place.
    """
    counts = np.where(density.exposed, seen.middles, 0)
    total = int(counts.sum())
    if total == 0:
        return []
    share = density.exposure / density.exposure.sum()
    best = best_of_random(total, share, density.lattice.wraps, seed, replicas)
    found: list[HotSpot] = []
    taken = np.zeros(share.shape, dtype=bool)
    for window, llr in _ranked(counts, share, wraps=density.lattice.wraps):
        cells = window.cells(share.shape)
        if (taken & cells).any():
            continue
        taken |= cells
        p = (1 + int((best >= llr - 1e-9).sum())) / (replicas + 1)
        expected = float(share[cells].sum()) * total
        found.append(HotSpot(window, int(counts[cells].sum()), expected, llr, p))
        if not found[-1].stands_out or len(found) == MOST_SHOWN:
            break
    return found


def best_of_random(
    total: int, share: Floats, wraps: bool, seed: int, replicas: int
) -> Floats:
    """The highest scan ratio of each of so many random maps of ``total`` events."""
    generator = np.random.default_rng(seed)
    maps = generator.multinomial(total, share.ravel(), size=replicas)
    maps = maps.reshape(replicas, *share.shape)
    starts = range(0, replicas, _CHUNK)
    return np.concatenate(
        [
            best_ratios(maps[start : start + _CHUNK], share, wraps=wraps)
            for start in starts
        ]
    )


def _window_sums(
    values: NDArray[Cell], *, wraps: bool
) -> Iterator[tuple[int, int, NDArray[Cell]]]:
    """Sums of ``values`` (..., frames, stringers) over every window, by window size.

    Yields frames, stringers and the sums by first cell; all from one cumulative sum.
    """
    frames, stringers = values.shape[-2:]
    if wraps:
        values = np.concatenate([values, values[..., : LARGEST - 1]], axis=-1)
    edges = [(0, 0)] * (values.ndim - 2) + [(1, 0), (1, 0)]
    summed = np.pad(values.cumsum(axis=-2).cumsum(axis=-1), edges)
    for high in range(1, min(LARGEST, frames) + 1):
        band = summed[..., high:, :] - summed[..., :-high, :]
        for wide in range(1, min(LARGEST, stringers) + 1):
            starts = stringers if wraps else stringers - wide + 1
            yield high, wide, band[..., wide : wide + starts] - band[..., :starts]


def best_ratios(maps: Counts, share: Floats, *, wraps: bool) -> Floats:
    """The highest scan ratio of each map (replicas, frames, stringers) of one total.

    The ratio is rewritten as F(c) - c ln(s / (1 - s)) - C ln(1 - s) with s the window's
    share and F(c) = c ln c + (C - c) ln(C - c) - C ln C from a table, so that no
    logarithm is taken per map. A window with no share or the whole of it gives zero.
    """
    total = int(maps[0].sum())
    n = np.arange(total + 1)
    table = xlogy(n, n) + xlogy(total - n, total - n) - xlogy(total, total)
    best = np.zeros(len(maps))
    all_counts = _window_sums(maps.astype(np.int32), wraps=wraps)
    all_shares = _window_sums(share, wraps=wraps)
    for (_, _, c), (_, _, s) in zip(all_counts, all_shares, strict=True):
        some = np.where((s > 1e-12) & (s < 1 - 1e-12), s, 0.5)
        odds = np.where(some == s, np.log(some / (1 - some)), 0.0)
        rest = np.where(some == s, np.log1p(-some), 0.0)
        ratio = np.take(table, c)
        ratio -= c * odds
        ratio -= total * rest
        ratio *= c > total * s
        np.maximum(best, ratio.max(axis=(1, 2)), out=best)
    return best


def _ranked(
    counts: Counts, share: Floats, *, wraps: bool
) -> Iterator[tuple[Window, float]]:
    """Windows of the observed map that exceed their share, the strongest first."""
    total = int(counts.sum())
    ratios: list[Floats] = []
    places: list[Counts] = []
    all_counts = _window_sums(counts, wraps=wraps)
    all_shares = _window_sums(share, wraps=wraps)
    for (high, wide, c), (_, _, s) in zip(all_counts, all_shares, strict=True):
        usable = (s > 1e-12) & (s < 1 - 1e-12) & (c > total * s)
        ratio = scan_ratio(c[usable].astype(np.float64), total * s[usable], total)
        along, around = np.nonzero(usable)
        sizes = np.full(len(along), high), np.full(len(along), wide)
        ratios.append(ratio)
        places.append(np.stack([along, around, *sizes], axis=1))
    ranked, where = np.concatenate(ratios), np.concatenate(places)
    for index in np.argsort(-ranked, kind="stable").tolist():
        yield Window(*where[index].tolist()), float(ranked[index])
