"""What a recorded spectrum says of one flight: its cycle, or the spectrum itself."""

from __future__ import annotations

import json

from fleet.models import Spectrum
from repairs.analysis.spectra.cycles import ConstantCycle
from repairs.analysis.spectra.plain import Kind
from repairs.analysis.spectra.recorded import RecordedSpectrum
from repairs.selectors.spectra import spectrum_newest
from repairs.services.evaluation_gathered import Gathered, UsedRow

SPECTRUM = "spectrum"
LARGEST, RATIO = CYCLE = ("cycle_max_stress", "cycle_ratio")


def row_kind(row: Spectrum) -> str:
    """The kind of a row's content, as its data name it."""
    return str(json.loads(row.content).get("kind", Kind.CYCLE))


def spectrum_inputs(
    found: Gathered, pk: int, *others: UsedRow, stated: str = ""
) -> None:
    """Keep a spectrum in place of what was said of a flight; one cycle as such.

    Of a revised one its newest revision is taken.
    """
    row = spectrum_newest(pk)
    for name in (SPECTRUM, *CYCLE):
        found.values.pop(name, None)
    source = "; ".join(part for part in (stated, f"{row}: {row.source}") if part)
    read = RecordedSpectrum.read(str(row), source, row.content_digest, row.content)
    given = read.spectrum
    if not isinstance(given, ConstantCycle):
        found.put(SPECTRUM, read, row, *others)
        return
    found.number(LARGEST, given.maximum, source, row, *others)
    found.number(RATIO, given.ratio, source, row, *others)
