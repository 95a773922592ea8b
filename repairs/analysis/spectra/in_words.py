"""Spectra in words: what kind one is, and every choice stored with it."""

from __future__ import annotations

from repairs.analysis.spectra.content import Spectrum
from repairs.analysis.spectra.plain import Kind

KINDS = {
    Kind.CYCLE: "constant cycle",
    Kind.PRESSURE: "pressure cycle",
    Kind.WING_SEQUENCE: "standard transport wing sequence",
    Kind.SEQUENCE: "sequence of turning points",
    Kind.EXCEEDANCE: "table of levels",
}
TITLES = {
    "cycle_max_mpa": "largest stress, MPa",
    "cycle_range_mpa": "stress range, MPa",
    "cycle_ratio": "stress ratio R",
    "share_of_normal": "share of the normal differential",
    "ground_share_of_normal": "share of it on the ground",
    "ground": "on the ground",
    "form": "form",
    "place": "holds for",
    "mean_flight_stress_mpa": "mean stress in flight, MPa",
    "ground_ratio": "ground over mean stress",
    "ground_ratio_source": "source of that ratio",
    "ground_ratio_grade": "grade of that ratio",
    "seed": "seed of the drawn order",
    "halves": "lower halves of gusts",
    "truncate_above": "gusts flown no higher than level",
    "omit_below": "gusts left out below level",
    "residue": "residue of counting",
    "points_mpa": "points, MPa",
    "flights": "flights",
    "repeats": "comes again",
    "levels_mpa": "levels over the mean, MPa",
    "numbers": "numbers",
    "counts": "the numbers are",
    "counted_at": "counted at",
    "mean_mpa": "mean stress in flight, MPa",
    "ground_mpa": "stress on the ground, MPa",
    "clip_above_mpa": "clipped above, MPa",
    "clip_below_mpa": "clipped below, MPa",
    "omit_below_range_mpa": "ranges left out below, MPa",
}
MOST = 12
"""Longest list that is written out."""


def kind_of(spectrum: Spectrum) -> str:
    """Return the kind of a spectrum in words."""
    return KINDS[Kind(str(spectrum.as_data()["kind"]))]


def choices(spectrum: Spectrum) -> tuple[tuple[str, str], ...]:
    """Return every stored choice as (what, value), "none" where none was made."""
    data = spectrum.as_data()
    return tuple((TITLES[key], _said(data[key])) for key in data if key != "kind")


def _said(value: object) -> str:
    match value:
        case None:
            return "none"
        case bool():
            return "yes" if value else "no"
        case float():
            return f"{value:g}"
        case list() if len(value) > MOST:
            return f"{len(value):,}, from {min(value):g} to {max(value):g}"
        case list():
            return ", ".join(f"{part:g}" for part in value)
        case str():
            return value.replace("_", " ")
    return str(value)
