"""The reader on 22,655 real difficulty texts, fetched by package for the test.

FAA service difficulty report texts as published in sdr-hazards-classification 1.0.0.
The texts are rough: "R & R" became "right & right", numbers are split by line wraps.
"""

from __future__ import annotations

import csv
import io
import re
from collections.abc import Callable

import pytest

from fleet.location import Reading, read
from tests.open_data import Archive

pytestmark = pytest.mark.open_data

TEXTS = 22_655
LOCATION_WORD = re.compile(
    r"\b(sta|station|bs|fr|frame|fs|str|stringer|ws|wbl|rbl|lbl|wl|hs)\b", re.IGNORECASE
)
SPLIT = re.compile(r"\b(?:sta|bs) (\d) (\d\d)\b(?![.+\w])", re.IGNORECASE)


@pytest.fixture(scope="module")
def readings(
    open_data_wheel: Callable[[str], Archive],
) -> list[tuple[str, Reading]]:
    """Every text with its reading; the first reading that raised would fail this."""
    archive = open_data_wheel("sdr-hazards-classification")
    found = []
    for name in archive.names(".csv"):
        rows = csv.DictReader(io.StringIO(archive.read(name).decode(errors="replace")))
        found.extend((row["Text"], read(row["Text"])) for row in rows)
    return found


def test_no_text_raises(readings: list[tuple[str, Reading]]) -> None:
    assert len(readings) == TEXTS


def test_four_in_five_texts_with_a_location_word_give_a_station(
    readings: list[tuple[str, Reading]],
) -> None:
    # By this pattern 12,407 texts hold a location word. A frame alone is no station.
    located = [reading for text, reading in readings if LOCATION_WORD.search(text)]
    stations = sum(reading.has_station for reading in located)
    assert len(located) == 12_407
    assert stations / len(located) >= 0.79
    along = sum(bool(r.stations or r.frames or r.ribs) for r in located)
    assert along / len(located) >= 0.94


def test_remove_and_replace_gives_no_side(
    readings: list[tuple[str, Reading]],
) -> None:
    spoilt = re.compile(r"\b(?:right|r) (?:&|/) (?:right|r)\b", re.IGNORECASE)
    other = re.compile(
        r"right|\br/?h|\brt\b|\brbl|left|\bl/?h|\blt\b|\d *[lr]\b|port|stbd|starboard",
        re.IGNORECASE,
    )
    alone = [
        reading
        for text, reading in readings
        if spoilt.search(text) and not other.search(spoilt.sub("", text))
    ]
    assert len(alone) > 20
    assert {reading.side for reading in alone} == {""}


def test_a_number_split_by_a_blank_is_a_question(
    readings: list[tuple[str, Reading]],
) -> None:
    split = [(text, r) for text, r in readings if SPLIT.search(text)]
    assert len(split) > 30
    for text, reading in split:
        assert "E_NUM_SPLIT" in [p.code for p in reading.problems], text
        joined = "".join(SPLIT.search(text).groups())
        first = {f"{point.number:f}" for point in reading.stations}
        assert not first & {joined[0]}, text


def test_offsets_with_a_minus_are_questions(
    readings: list[tuple[str, Reading]],
) -> None:
    minus = [reading for text, reading in readings if "1114 - 6.0" in text]
    assert minus
    for reading in minus:
        assert [p.code for p in reading.problems] == ["E_AMBIG_MINUS"]
        assert reading.problems[0].offers[0].numbers == (1108.0,)
