"""Locations on the structure: geometry, reader, placer and writer (no database).

    reading = read("STA 512+6 S-14L", vocabulary_of(geometry))
    found = place(reading, geometry, "base")

`read` asks no geometry and never raises; `place` raises LocationRefused. `text_at`
writes the coordinates of a map.
"""

from __future__ import annotations

from fleet.location.place import LocationRefused, Place
from fleet.location.placing import place
from fleet.location.reader import read
from fleet.location.reading import READER_VERSION, Offer, Problem, Reading
from fleet.location.vocabulary import vocabulary_of
from fleet.location.writing import text_at

__all__ = [
    "READER_VERSION",
    "LocationRefused",
    "Offer",
    "Place",
    "Problem",
    "Reading",
    "place",
    "read",
    "text_at",
    "vocabulary_of",
]
