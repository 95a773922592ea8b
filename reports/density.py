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
from scipy import stats

from reports.lattice import Counts, Flags, Floats, Lattice

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
class Sighting:
    """One event in one half-bay; findings of one event share its key."""

    event: str
    along_half: int
    around_half: int


@dataclass(frozen=True)
class Tally:
    """Which cells each event touched, each cell once per event.

    ``outside`` counts sightings whose half-bay the section does not have.
    """

    lattice: Lattice
    events: Sequence[NDArray[np.int64]]
    """Per event its flat cell numbers, sorted, without repeats."""
    outside: int = 0

    @cached_property
    def counts(self) -> Counts:
        """Distinct (event, cell) per cell."""
        size = math.prod(self.lattice.shape)
        flat = np.concatenate([*self.events, np.empty(0, dtype=np.int64)])
        return np.bincount(flat, minlength=size).reshape(self.lattice.shape)


def tally(lattice: Lattice, sightings: Iterable[Sighting]) -> Tally:
    """Fold sightings into cells, counting each event once per cell."""
    rows = list(sightings)
    along, around = lattice.cells(
        np.array([row.along_half for row in rows], dtype=np.int64),
        np.array([row.around_half for row in rows], dtype=np.int64),
    )
    known = (along < lattice.shape[0]) & (around < lattice.shape[1])
    flat = np.where(known, along * lattice.shape[1] + around, -1)
    by_event: dict[str, set[int]] = {}
    for row, cell in zip(rows, flat.tolist(), strict=True):
        if cell >= 0:
            by_event.setdefault(row.event, set()).add(cell)
    events = [np.array(sorted(cells)) for cells in by_event.values()]
    return Tally(lattice, events, outside=int((~known).sum()))


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
    upper = stats.chi2.ppf(1.0 - tail, 2.0 * n + 2.0) / 2.0
    degrees = np.where(n > 0, 2.0 * n, 1.0)
    lower = np.where(n > 0, stats.chi2.ppf(tail, degrees) / 2.0, 0.0)
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

    @property
    def overall(self) -> float | None:
        """Rate over all exposed cells; None without exposure."""
        total = float(self.exposure.sum())
        return self.counted * self.denominator.per / total if total > 0 else None

    @cached_property
    def few(self) -> Flags:
        """Exposed cells whose count is not zero and below ``FEW``."""
        return np.asarray(self.exposed & (self.counts > 0) & (self.counts < FEW))


CLASSES = 5
NONE_FOUND, NO_EXPOSURE = 0, -1


def class_step(shown: Floats) -> float:
    """Width of a colour class: the classes follow the data.

    The upper class begins at four steps, near the 95th percentile of the cells that
    hold a finding, so that one cell with little exposure does not flatten the rest.
    Rounded to two figures. Pass the same step to two maps that are to be compared.
    """
    found = shown[np.isfinite(shown) & (shown > 0)]
    if not found.size:
        return 1.0
    rough = float(np.percentile(found, 95)) / (CLASSES - 1)
    places = 1 - math.floor(math.log10(rough))
    return round(rough, places)


def class_numbers(density: Density, shown: Floats, step: float) -> Counts:
    """Class 1 to 5 of each cell, ``NONE_FOUND`` or ``NO_EXPOSURE``.

    Classes are half-open, lower end included: class n is [(n-1) step, n step).
    """
    filled = np.where(np.isfinite(shown), shown, 0.0)
    steps = np.floor(filled / step * (1 + 1e-12))
    number = np.clip(steps.astype(np.int64) + 1, 1, CLASSES)
    number[density.counts == 0] = NONE_FOUND
    number[~density.exposed] = NO_EXPOSURE
    return number
