"""Damage density over an unrolled section: counts, exposure, rates, intervals.

Numerator and denominator share one window: the same aircraft, days and cells. A plug's
cells have the exposure of the aircraft that have the plug, and of no others.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray
from scipy.special import gammaincinv

from reports.lattice import Counts, Flags, Floats, Lattice

_Flat = tuple[Counts, Flags]

FEW = 5
"""Below this count a cell's rate says little; such cells are marked on the map."""


@dataclass(frozen=True)
class Denominator:
    """What exposure is counted in, and how many of it a rate is given for."""

    key: str
    unit: str
    per: float

    @property
    def rate_unit(self) -> str:
        """The unit of the rate, in words."""
        amount = f"{self.per:,.0f} {self.unit}" if self.per != 1 else self.unit
        return f"findings per m² and {amount}"


CYCLES = Denominator("cycles", "FC", 1000.0)
HOURS = Denominator("hours", "FH", 1000.0)
YEARS = Denominator("years", "aircraft-year", 1.0)
DENOMINATORS = {each.key: each for each in (CYCLES, HOURS, YEARS)}


@dataclass(frozen=True)
class Tally:
    """Which cells were touched: by single findings, and by events of several.

    ``singles`` counts findings that touch one cell and share no event. ``events`` has
    for each other event its flat cell numbers, sorted, each cell once. ``outside`` is
    how many half-bays named a cell that the section does not have.
    """

    lattice: Lattice
    singles: Counts
    events: Sequence[NDArray[np.int64]]
    outside: int = 0

    @cached_property
    def counts(self) -> Counts:
        """Distinct (event, cell) per cell."""
        flat = np.concatenate([*self.events, np.empty(0, dtype=np.int64)])
        shared = np.bincount(flat, minlength=self.singles.size)
        return self.singles + shared.reshape(self.lattice.shape)

    @cached_property
    def middles(self) -> Counts:
        """Events per cell, each once, at the middle one of the cells it touched.

        What tests of place are made on: a hailstorm over fifty cells is one event.
        """
        flat = np.array([cells[len(cells) // 2] for cells in self.events], np.int64)
        shared = np.bincount(flat, minlength=self.singles.size)
        return self.singles + shared.reshape(self.lattice.shape)


def tally(
    lattice: Lattice,
    singles: Iterable[tuple[int, int, int]],
    shared: Iterable[tuple[str, int, int]] = (),
) -> Tally:
    """Fold half-bays into cells, counting each event once per cell.

    ``singles`` are rows (along half, around half, findings); ``shared`` rows (event,
    along half, around half), as many as the event has findings or touches half-bays.
    """
    rows = np.array(list(singles), dtype=np.int64).reshape(-1, 3)
    flat, known = _flat(lattice, rows[:, 0], rows[:, 1])
    size = math.prod(lattice.shape)
    counts = np.bincount(flat[known], weights=rows[known, 2], minlength=size)
    names = list(shared)
    halves = np.array([row[1:] for row in names], dtype=np.int64).reshape(-1, 2)
    touched, there = _flat(lattice, halves[:, 0], halves[:, 1])
    by_event: dict[str, set[int]] = {}
    for row, cell in zip(names, touched.tolist(), strict=True):
        if cell >= 0:
            by_event.setdefault(row[0], set()).add(cell)
    return Tally(
        lattice,
        counts.astype(np.int64).reshape(lattice.shape),
        [np.array(sorted(cells)) for cells in by_event.values()],
        outside=int(rows[~known, 2].sum() + (~there).sum()),
    )


def _flat(lattice: Lattice, along_half: Counts, around_half: Counts) -> _Flat:
    """Flat cell numbers, -1 where the section has no such cell, and which are known."""
    along, around = lattice.cells(along_half, around_half)
    frames, stringers = lattice.shape
    known = (along >= 0) & (along < frames) & (around >= 0) & (around < stringers)
    return np.where(known, along * stringers + around, -1), known


def garwood_interval(
    count: NDArray[np.integer] | int, *, confidence: float = 0.95
) -> tuple[Floats, Floats]:
    r"""Exact central confidence interval of a Poisson mean.

    .. math:: \tfrac12\chi^2_{\alpha/2}(2n),\quad \tfrac12\chi^2_{1-\alpha/2}(2n+2)

    Parameters
    ----------
    count : int or array (n,)
        Observed count n [-], not negative.
    confidence : float
        Coverage 1 - alpha [-].

    Returns
    -------
    lower, upper : ndarray (n,)
        Ends of the interval of the mean [-]; the lower end is 0 for n = 0.

    References
    ----------
    Garwood, F. (1936). Fiducial limits for the Poisson distribution.
    Biometrika 28, 437-442.
    """
    n = np.asarray(count, dtype=np.float64)
    if np.any(n < 0):
        raise ValueError(f"A count cannot be negative; got {n.min():g}.")
    tail = (1.0 - confidence) / 2.0
    upper = gammaincinv(n + 1.0, 1.0 - tail)
    degrees = np.where(n > 0, 2.0 * n, 1.0)
    lower = np.where(n > 0, gammaincinv(degrees / 2.0, tail), 0.0)
    return np.asarray(lower), np.asarray(upper)


def marshall_rates(counts: Counts, exposure: Floats) -> Floats:
    r"""Rates drawn towards their common mean by how little each cell tells.

    .. math::
        m = \frac{\sum c}{\sum E},\quad
        s^2 = \frac{\sum E (r - m)^2}{\sum E},\quad
        A = \max(0, s^2 - m/\bar E),\quad
        \hat r = m + \frac{A}{A + m/E}(r - m)

    Parameters
    ----------
    counts : ndarray (n,)
        Findings per cell c [-].
    exposure : ndarray (n,)
        Exposure per cell E, all positive [any].

    Returns
    -------
    ndarray (n,)
        Smoothed rates [1/exposure]. All equal to m when the cells differ no more
        than chance explains.

    Notes
    -----
    The global (not the neighbourhood) form of the method. From memory, unverified
    in print; used for the colour of a map only, never for a limit.

    References
    ----------
    Marshall, R. J. (1991). Mapping disease and mortality rates using empirical Bayes
    estimators. Journal of the Royal Statistical Society C 40, 283-294.
    """
    if np.any(exposure <= 0):
        raise ValueError("Every cell needs exposure above zero; mask the others first.")
    total = exposure.sum()
    mean = counts.sum() / total
    if mean == 0:
        return np.zeros_like(exposure)
    rates = counts / exposure
    spread = (exposure * (rates - mean) ** 2).sum() / total
    between = max(0.0, spread - mean / exposure.mean())
    weight = between / (between + mean / exposure)
    return np.asarray(mean + weight * (rates - mean))


@dataclass(frozen=True)
class Density:
    """Counts and exposure of one section, with what follows from them.

    ``exposure`` is in m² times the denominator's unit. A cell without exposure is
    masked: nothing could have been found there, which is not "none found".
    """

    lattice: Lattice
    counts: Counts
    exposure: Floats
    denominator: Denominator

    @cached_property
    def exposed(self) -> Flags:
        """Cells that had any exposure."""
        return np.asarray(self.exposure > 0)

    @property
    def counted(self) -> int:
        """Distinct (event, cell) in exposed cells: the numerator of the rates."""
        return int(self.counts[self.exposed].sum())

    @property
    def unexposed_count(self) -> int:
        """Counts in cells without exposure; named beside the map, in no rate."""
        return int(self.counts[~self.exposed].sum())

    def _per_exposure(self, amount: Floats) -> Floats:
        """Amount per unit of rate; NaN where there is no exposure."""
        rate = np.full(self.lattice.shape, np.nan)
        scale = self.denominator.per
        np.divide(amount * scale, self.exposure, out=rate, where=self.exposed)
        return rate

    @cached_property
    def rate(self) -> Floats:
        """Findings per unit of rate and cell; NaN where masked."""
        return self._per_exposure(self.counts.astype(np.float64))

    @cached_property
    def interval(self) -> tuple[Floats, Floats]:
        """Exact 95 % limits of each cell's rate; NaN where masked."""
        lower, upper = garwood_interval(self.counts)
        return self._per_exposure(lower), self._per_exposure(upper)

    @cached_property
    def smoothed(self) -> Floats:
        """Rates drawn towards their mean (Marshall 1991); NaN where masked."""
        rate = np.full(self.lattice.shape, np.nan)
        if self.exposed.any():
            known = self.exposed
            rate[known] = self.denominator.per * marshall_rates(
                self.counts[known], self.exposure[known]
            )
        return rate

    @cached_property
    def few(self) -> Flags:
        """Exposed cells whose count is not zero and below ``FEW``."""
        return np.asarray(self.exposed & (self.counts > 0) & (self.counts < FEW))


CLASSES = 5
LEAST_RATIO = 1.2
NONE_FOUND, NO_EXPOSURE = 0, -1


def class_edges(shown: Floats) -> tuple[float, ...]:
    """Lower edges of the colour classes: they follow the drawn cells.

    Equal ratios from the least rate to the 99th percentile, so that one cell with
    little exposure does not flatten the rest; two figures. Pass the edges of one map
    to another that is to be compared with it.
    """
    found = shown[np.isfinite(shown) & (shown > 0)]
    if not found.size:
        return tuple(float(number) for number in range(1, CLASSES + 1))
    low, high = float(found.min()), float(np.percentile(found, 99))
    ratio = max((high / low) ** (1 / CLASSES), LEAST_RATIO)
    return tuple(_two_figures(low * ratio**number) for number in range(CLASSES))


def _two_figures(value: float) -> float:
    return round(value, 1 - math.floor(math.log10(value)))


def class_numbers(density: Density, shown: Floats, edges: Sequence[float]) -> Counts:
    """Class 1 to 5 of each cell, ``NONE_FOUND`` or ``NO_EXPOSURE``.

    Class n is [edge n, edge n + 1); the first takes all below it, the last all above.
    """
    filled = np.where(np.isfinite(shown), shown, 0.0)
    number = np.searchsorted(np.array(edges), filled, side="right").astype(np.int64)
    number = np.clip(number, 1, CLASSES)
    number[density.counts == 0] = NONE_FOUND
    number[~density.exposed] = NO_EXPOSURE
    return number
