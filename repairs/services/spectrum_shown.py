"""A recorded spectrum as its page shows it: choices, cycles per flight, cautions."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np

from fleet.drawing.chart import Chart, Series, chart_svg
from fleet.models import Spectrum
from repairs.analysis.spectra.cycles import PressureCycle
from repairs.analysis.spectra.in_words import choices, kind_of
from repairs.analysis.spectra.per_flight import FlightCycles
from repairs.analysis.spectra.recorded import RecordedSpectrum
from repairs.analysis.spectra.wing_sequence import TABLE

MOST_ROWS = 40
ONLY_LOWER = (
    "For the lower surface of a transport's wing only: not for a fuselage, a tail or "
    "an upper surface. A pressurised skin takes its pressure cycle."
)
FROM_MEMORY = "Results are barred from approval: {source}."
NOT_A_WING = (
    "For pressurised skin, and only there: the hoop stress of one flight follows the "
    "share of the normal differential."
)
ONE_PLACE = (
    "Stress of the place it was measured or calculated for; at another it is scaled by "
    "nothing and holds only if somebody says so."
)


@dataclass(frozen=True, slots=True)
class CycleRow:
    """One of the different cycles of a flight."""

    largest: float
    smallest: float
    span: float
    ratio: float
    per_flight: float


@dataclass(frozen=True, slots=True)
class SpectrumShown:
    """What a page says of a spectrum."""

    kind: str
    choices: tuple[tuple[str, str], ...]
    cautions: tuple[str, ...]
    largest: float | None
    smallest: float | None
    per_flight: float | None
    different: int
    cycles: list[CycleRow]
    left_out: int
    chart: str


def spectrum_of_row(row: Spectrum) -> RecordedSpectrum:
    """A row as calculations take it."""
    return RecordedSpectrum.read(str(row), row.source, row.content_digest, row.content)


def spectrum_initial(row: Spectrum) -> dict[str, Any]:
    """What a row states, key by key, for a form that revises it; tables as text."""
    data = dict(spectrum_of_row(row).spectrum.as_data())
    if "repeats" in data:
        data["repeats"] = "yes" if data["repeats"] else "no"
    columns: dict[str, Any] = {}
    if "points_mpa" in data:
        columns = {"stress_mpa": data.pop("points_mpa")}
    elif "levels_mpa" in data:
        counts = str(data.pop("counts"))
        columns = {"level_mpa": data.pop("levels_mpa"), counts: data.pop("numbers")}
    if columns:
        lines = (
            ",".join(map(repr, line)) for line in zip(*columns.values(), strict=True)
        )
        data["table"] = "\n".join([",".join(columns), *lines])
    return {**data, "source": row.source}


def spectrum_shown(read: RecordedSpectrum) -> SpectrumShown:
    """A spectrum ready to be shown; a first counting may take a second."""
    flight = read.flight
    rows = [] if flight is None else _rows(flight)
    return SpectrumShown(
        kind=kind_of(read.spectrum),
        choices=choices(read.spectrum),
        cautions=(*_cautions(read), *read.warnings),
        largest=max((row.largest for row in rows), default=None),
        smallest=min((row.smallest for row in rows), default=None),
        per_flight=sum(row.per_flight for row in rows) if rows else None,
        different=len(rows),
        cycles=rows[:MOST_ROWS],
        left_out=max(0, len(rows) - MOST_ROWS),
        chart="" if flight is None else chart_svg(_chart(read.name, flight)),
    )


def _rows(flight: FlightCycles) -> list[CycleRow]:
    """Cycles by range, the largest first."""
    minima = flight.maxima * flight.ratios
    spans = flight.maxima - minima
    return [
        CycleRow(
            float(flight.maxima[n]),
            float(minima[n]),
            float(spans[n]),
            float(flight.ratios[n]),
            float(flight.per_flight[n]),
        )
        for n in np.argsort(-spans, kind="stable")
    ]


def _cautions(read: RecordedSpectrum) -> tuple[str, ...]:
    if isinstance(read.spectrum, PressureCycle):
        return (NOT_A_WING,)
    if read.grade is TABLE.grade:
        return ONLY_LOWER, FROM_MEMORY.format(source=TABLE.source)
    return (ONE_PLACE,)


def _chart(name: str, flight: FlightCycles) -> Chart:
    """Range and largest stress against how often a flight reaches them."""
    spans = flight.maxima * (1 - flight.ratios)
    return Chart(
        title=f"Exceedances of {name}",
        x_label="cycles per flight at or above the stress",
        y_label="MPa",
        series=[
            _passed("range", spans, flight.per_flight),
            _passed("largest stress", flight.maxima, flight.per_flight),
        ],
        x_log=True,
    )


def _passed(name: str, stresses: Any, counts: Any) -> Series:
    """Steps of a cumulative count, from the highest stress down."""
    order = np.argsort(-stresses, kind="stable")
    high, passed = stresses[order], np.cumsum(counts[order])
    x = np.repeat(passed, 2).tolist()
    y = [float(high[0]), *np.repeat(high[1:], 2).tolist(), float(high[-1])]
    if len(high) == 1:
        x, y = [float(passed[0])] * 2, [float(high[0]), 0.0]
    return Series(name, x, y)
