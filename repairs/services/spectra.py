"""Recording load spectra: checked, kept as canonical text, revised by new rows."""

from __future__ import annotations

import datetime as dt
from collections.abc import Mapping
from typing import Any

from django.core.exceptions import ValidationError

from fleet.canonical import canonical, digest
from fleet.models import Spectrum, User
from fleet.services.history import Writing
from repairs.analysis.errors import AnalysisError
from repairs.analysis.spectra.content import spectrum_from
from repairs.analysis.spectra.exceedance import CountedAt
from repairs.analysis.spectra.in_words import KINDS
from repairs.analysis.spectra.plain import Kind
from repairs.analysis.spectra.recorded import RecordedSpectrum
from repairs.analysis.spectra.sequence import Residue
from repairs.analysis.spectra.table_text import levels_from_text, points_from_text
from repairs.analysis.spectra.wing_sequence import (
    FULL,
    LEVEL_NAMES,
    WING_LOWER_SURFACE,
    Halves,
)
from repairs.analysis.types import Grade
from repairs.selectors.spectra import spectra_in_force

KIND_WORDS = {str(kind): words for kind, words in KINDS.items()}
FROM_TEXT = (str(Kind.SEQUENCE), str(Kind.EXCEEDANCE))
"""Kinds whose stresses are read from a table."""
WORDS: dict[str, tuple[str, ...]] = {
    "residue": tuple(map(str, Residue)),
    "counted_at": tuple(map(str, CountedAt)),
    "halves": tuple(map(str, Halves)),
    "ground_ratio_grade": tuple(map(str, Grade)),
    "truncate_above": LEVEL_NAMES,
    "omit_below": LEVEL_NAMES,
}
"""Answers of every choice that is a word."""
TREATED = ("residue", "clip_above_mpa", "clip_below_mpa", "omit_below_range_mpa")
KEYS: dict[str, tuple[str, ...]] = {
    "cycle": ("cycle_max_mpa", "cycle_range_mpa", "cycle_ratio"),
    "pressure": ("share_of_normal", "ground_share_of_normal", "ground"),
    "wing_sequence": (
        "mean_flight_stress_mpa",
        "ground_ratio",
        "ground_ratio_source",
        "ground_ratio_grade",
        "seed",
        "halves",
        "truncate_above",
        "omit_below",
    ),
    "sequence": ("flights", "repeats", *TREATED),
    "exceedance": ("counted_at", "flights", "mean_mpa", "ground_mpa", "seed", *TREATED),
}
"""What is stated of each kind beside its table."""
NOT_MADE = ("truncate_above", "omit_below", *TREATED[1:])
"""Choices that may not be made at all."""
LONGEST = 2_000_000

NAME_TAKEN = "A spectrum of this name is recorded ({row}); revise it, or name this one."
NO_NAME = "Name the spectrum."
NO_SOURCE = "Say where it is from: document, revision, page; who measured it."
NO_TABLE = "Give the table of stresses, typed or as a file."
TABLE_HERE = "A {kind} takes no table; leave the file out."
TOO_LONG = "The table has {read:,} characters; at most {most:,} are read."
NEWER = "{row} was revised before: {by}. Revise that one."
SAME = "This says what {row} says already; there is nothing to revise."


def spectrum_data(
    kind: str, given: Mapping[str, Any], table: str = ""
) -> dict[str, Any]:
    """Plain data of a kind from what was stated and its table.

    ValidationError names the line, key or value that is not as expected.
    """
    data: dict[str, Any] = {"kind": kind}
    for key in KEYS[kind]:
        value = given.get(key)
        if value not in (None, "") or key in NOT_MADE:
            data[key] = None if value == "" else value
    if kind == Kind.WING_SEQUENCE:
        data |= {"form": FULL, "place": WING_LOWER_SURFACE}
        data["residue"] = str(Residue.REPEATING)
    if kind in FROM_TEXT:
        data |= _of_table(kind, table)
    elif table.strip():
        raise ValidationError({"table": TABLE_HERE.format(kind=KIND_WORDS[kind])})
    return data


def _of_table(kind: str, table: str) -> dict[str, Any]:
    if not table.strip():
        raise ValidationError({"table": NO_TABLE})
    if len(table) > LONGEST:
        raise ValidationError({"table": TOO_LONG.format(read=len(table), most=LONGEST)})
    try:
        if kind == Kind.SEQUENCE:
            return {"points_mpa": list(points_from_text(table))}
        levels, numbers, counts = levels_from_text(table)
    except AnalysisError as refusal:
        raise ValidationError({"table": str(refusal)}) from refusal
    return {
        "levels_mpa": list(levels),
        "numbers": list(numbers),
        "counts": str(counts),
    }


def spectrum_read(
    data: Mapping[str, Any], name: str = "", source: str = ""
) -> RecordedSpectrum:
    """The spectrum that plain data states, checked and counted; nothing is kept."""
    try:
        text = canonical(spectrum_from(data).as_data())
        where = source.strip() or "not recorded yet"
        return RecordedSpectrum.read(name, where, digest(text), text)
    except AnalysisError as refusal:
        raise ValidationError(str(refusal)) from refusal


def spectrum_record(
    *,
    name: str,
    data: Mapping[str, Any],
    source: str,
    actor: User | None,
    at: dt.datetime,
) -> Spectrum:
    """A new spectrum; one of the same name is revised instead."""
    name = name.strip()
    if not name:
        raise ValidationError({"name": NO_NAME})
    with Writing(actor=actor, action="spectrum_record", at=at) as w:
        last = Spectrum.objects.filter(name=name).last()
        if last is not None:
            raise ValidationError({"name": NAME_TAKEN.format(row=last)})
        return w.create(_row(name, 1, data, source))


def spectrum_revise(
    *,
    row: Spectrum,
    data: Mapping[str, Any],
    source: str,
    actor: User | None,
    at: dt.datetime,
) -> Spectrum:
    """The next revision of a spectrum; evaluations read from it become stale."""
    with Writing(actor=actor, action="spectrum_revise", at=at) as w:
        w.locked(Spectrum.objects.all(), pk=row.pk)
        later = Spectrum.objects.filter(replaces=row).first()
        if later is not None:
            raise ValidationError(NEWER.format(row=row, by=later))
        made = _row(row.name, row.revision + 1, data, source)
        if (made.content, made.source) == (row.content, row.source):
            raise ValidationError(SAME.format(row=row))
        made.replaces = row
        return w.create(made)


def spectrum_named(name: str) -> Spectrum | None:
    """The revision in force of a name."""
    return spectra_in_force().filter(name=name).first()


def _row(name: str, revision: int, data: Mapping[str, Any], source: str) -> Spectrum:
    if not source.strip():
        raise ValidationError({"source": NO_SOURCE})
    read = spectrum_read(data, name, source)
    text = canonical(read.spectrum.as_data())
    return Spectrum(
        name=name,
        revision=revision,
        content=text,
        content_digest=digest(text),
        source=source.strip(),
    )
