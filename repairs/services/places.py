"""A location text as columns of a record; what cannot be read stays as written."""

from __future__ import annotations

from dataclasses import dataclass, field
from difflib import SequenceMatcher
from itertools import combinations
from typing import Any

from django.db import models

from fleet.location.place import LocationRefused, Place
from fleet.models import Aircraft, Criticality
from fleet.selectors.structure import place_find
from fleet.services.structure import place_columns
from repairs.models import Element

MOST_WORDS = 12
"""Words searched for the ones an offer replaces; a longer text is prose."""


@dataclass(frozen=True, slots=True)
class Placed:
    """What became of a location text: columns to store, or why there are none."""

    text: str
    place: Place | None = None
    columns: dict[str, Any] = field(default_factory=dict)
    refused: LocationRefused | None = None
    offers: tuple[str, ...] = ()
    """The text as it may have been meant, whole."""


def place_try(aircraft: Aircraft, text: str) -> Placed:
    """Read and place a text on the aircraft's variant; a refusal is a result."""
    try:
        found = _find(aircraft, text)
    except LocationRefused as refused:
        offers = tuple(_mended(aircraft, text, one.text) for one in refused.offers)
        return Placed(text, refused=refused, offers=offers)
    return Placed(text, found, place_columns(aircraft, found))


def _find(aircraft: Aircraft, text: str) -> Place:
    variant = aircraft.variant
    return place_find(
        aircraft_type=variant.aircraft_type, variant=variant.code, text=text
    )


def _mended(aircraft: Aircraft, text: str, offer: str) -> str:
    """The text with the offer put for the words most like it that then give a place.

    "STA 640-12 S-9L" with "STA 628" is "STA 628 S-9L": the rest of it stays.
    """
    words = text.split()[:MOST_WORDS]

    def unlike(cut: tuple[int, int]) -> float:
        matcher = SequenceMatcher(None, " ".join(words[slice(*cut)]).upper(), offer)
        return -matcher.ratio()

    for start, end in sorted(combinations(range(len(words) + 1), 2), key=unlike):
        whole = " ".join([*words[:start], offer, *words[end:]])
        try:
            _find(aircraft, whole)
        except LocationRefused:
            continue
        return whole
    return offer


def place_columns_of(placed: Placed) -> dict[str, Any]:
    """The place columns; of a text that gave no place, the text alone."""
    return {**placed.columns, "place_entered": placed.text.strip()}


def item_columns(
    placed: Placed,
    *,
    element: str,
    element_label: str,
    surface: str,
    criticality: str,
    criticality_source: str,
) -> dict[str, object]:
    """The structural item: as stated, else as the location names it.

    Of skin whose criticality is not stated, the panel says it.
    """
    place, panel = placed.place, placed.columns.get("panel")
    item = element or (place.element if place else "") or Element.UNKNOWN
    if not criticality and item == Element.SKIN and panel is not None:
        criticality = panel.criticality
        criticality_source = panel.criticality_source
    return {
        "element": item,
        "element_label": element_label or (place.element_label if place else ""),
        "surface": surface or placed.columns.get("surface", ""),
        "criticality": criticality or Criticality.UNKNOWN,
        "criticality_source": criticality_source,
    }


def keyed(row: models.Model, columns: dict[str, Any]) -> dict[str, Any]:
    """Fields of the row as columns: a related record becomes its key."""
    found: dict[str, Any] = {}
    for name, value in columns.items():
        field_ = row._meta.get_field(name)
        found[field_.attname] = value.pk if isinstance(value, models.Model) else value  # type: ignore[union-attr]
    return found
