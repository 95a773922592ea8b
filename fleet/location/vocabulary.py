"""The words that stand before numbers: the usual ones and those of a type's file."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property, lru_cache

from fleet.location.typegeometry import TypeGeometry
from fleet.location.words import (
    BUTT_WORDS,
    DIRECTIONS,
    FRAME_WORDS,
    RIB_WORDS,
    SIDE_WORDS,
    SPARS,
    STATION_WORDS,
    STRINGER_WORDS,
    SURFACES,
    WATER_WORDS,
)

_OTHER_STEPS = frozenset(
    BUTT_WORDS.keys() | WATER_WORDS | SPARS.keys() | SURFACES.keys()
    | SIDE_WORDS.keys() | DIRECTIONS.keys()
    | {"butt", "water", "fin", "door", "main", "bulk"}
)  # fmt: skip


@dataclass(frozen=True)
class Vocabulary:
    """Station words with the section of each; frame, rib and stringer words."""

    stations: Mapping[str, str]
    frames: frozenset[str]
    ribs: frozenset[str]
    stringers: frozenset[str]

    @cached_property
    def references(self) -> frozenset[str]:
        """Words of what a length may be told from."""
        lines = BUTT_WORDS.keys() | WATER_WORDS
        return self.frames | self.ribs | self.stringers | self.stations.keys() | lines

    @cached_property
    def steps(self) -> frozenset[str]:
        """Words that may begin something the reader knows."""
        return self.references | _OTHER_STEPS


USUAL = Vocabulary(STATION_WORDS, FRAME_WORDS, RIB_WORDS, STRINGER_WORDS)

_SectionWords = tuple[str, tuple[str, ...], tuple[str, ...], tuple[str, ...]]


def vocabulary_of(geometry: TypeGeometry) -> Vocabulary:
    """The usual words and those that the type's file names."""
    return _with(
        tuple(
            (s.words[0], s.station_words, s.frame_words, s.stringer_words)
            for s in geometry.sections
            if not s.parent and s.words
        )
    )


@lru_cache(maxsize=32)
def _with(sections: tuple[_SectionWords, ...]) -> Vocabulary:
    stations = dict(STATION_WORDS)
    frames, stringers = set(FRAME_WORDS), set(STRINGER_WORDS)
    for name, station_words, frame_words, stringer_words in sections:
        key = name.rstrip("0123456789 ")
        for phrase in station_words:
            *before, word = phrase.lower().split()
            if before:
                stations.setdefault(word, key)
            elif word != key:
                stations[word] = key
        frames.update(w.lower() for w in frame_words if w.lower() not in RIB_WORDS)
        stringers.update(w.lower() for w in stringer_words)
    return Vocabulary(stations, frozenset(frames), RIB_WORDS, frozenset(stringers))
