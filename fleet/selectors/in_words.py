"""Columns and what they hold as a reader says it: names, labels, units, records.

Works on values as the history and a signed text keep them (`fleet.canonical.plain`).
Keys of other records are looked up together, one query a table.
"""

from __future__ import annotations

import datetime as dt
import re
from collections.abc import Iterable, Mapping
from functools import cache
from typing import Any

from django.apps import apps
from django.db import models

from fleet.amounts import amount_write
from fleet.due import Counter
from fleet.units import measure_write, number_write

Table = type[models.Model]
Keys = Mapping[tuple[Table, Any], str]

NOTHING = "—"
STORED = re.compile(r"[a-z]+(_[a-z]+)+")
"""A stored word that its column has no labels for."""
NO_KEYS: Keys = {}
NOT_THERE = "no longer there"
NAMES = {
    "address": "internet address",
    "along_half": "cell along",
    "around_half": "cell across",
    "arm_mm": "arm",
    "at_cycles": "flight cycles then",
    "at_landings": "landings then",
    "at_minutes": "flight hours then",
    "at_pressurisations": "pressurisation cycles then",
    "ata": "ATA chapter and section",
    "bl_mm": "butt line",
    "clad_mm": "cladding",
    "cluster_count": "number of damages",
    "covers": "hides it from sight",
    "counters_ahead": "counters ahead of usage",
    "data_due_on": "damage-tolerance data due on",
    "element": "structural item",
    "disposition.kind": "decision",
    "element_label": "label of the item",
    "evidence": "evidence of release",
    "found_on": "first found on",
    "geometry": "geometry revision",
    "inspection_required": "independent inspection required",
    "last_clean_cycles": "flight cycles at that inspection",
    "last_clean_method": "method of that inspection",
    "last_clean_on": "last inspected without a finding on",
    "limit_cycles": "deferral limit in flight cycles",
    "limit_landings": "deferral limit in landings",
    "limit_minutes": "deferral limit in flight hours",
    "limit_on": "deferral limit on",
    "legacy": "from before these records",
    "map_mm": "on the map axis",
    "minutes": "flight hours",
    "place_codes": "accepted warnings of the reader",
    "place_entered": "location as written",
    "place_text": "location",
    "repair.kind": "repair type",
    "replaces": "takes the place of",
    "s1_mm": "across from",
    "s2_mm": "across to",
    "safe_life_part": "safe-life part",
    "scale": "minor or major",
    "scale_reason": "why minor or major",
    "stage_reached": "approval stage reached",
    "substantiation.aircraft": "serial number of the aircraft",
    "substantiationcase.kind": "strength or life",
    "touches": "what it touches",
    "weight_change_g": "change of weight",
    "wl_mm": "water line",
    "worked_out": "ratio as worked out on the spot",
    "x1_mm": "along from",
    "x2_mm": "along to",
}
"""Where the column's own name says too little, or is not the trade's; of one table
where it stands before the point."""

ENDS = {
    "_id": "",
    "_mm": "",
    "_mm2": "",
    "_mpa": "",
    "_g": "",
    "_n_per_mm": "",
    "_entered": " as written",
    "_minutes": " in flight hours",
    "_cycles": " in flight cycles",
    "_landings": " in landings",
    "_pressurisations": " in pressurisation cycles",
}
"""Ends of a column's name, and what a reader is told instead."""

UNITS = {"_mm2": "mm2", "_mpa": "mpa", "_n_per_mm": "n_per_mm"}
COUNTERS = {
    "minutes": Counter.MINUTES,
    "cycles": Counter.CYCLES,
    "landings": Counter.LANDINGS,
    "pressurisations": Counter.PRESSURISATIONS,
}


def name_words(column: str, table: Table | None = None) -> str:
    """A column's name without its unit and without what makes it a key."""
    bare = column.removesuffix("_id")
    own = f"{table._meta.model_name}.{bare}" if table else bare
    if told := NAMES.get(own, NAMES.get(bare)):
        return told
    for end, words in ENDS.items():
        if bare.endswith(end):
            return bare.removesuffix(end).replace("_", " ") + words
    return bare.replace("_", " ")


def value_words(
    table: Table | None,
    column: str,
    value: Any,
    keys: Keys = NO_KEYS,
    length_unit: str = "mm",
) -> str:
    """A kept value with its label, its unit or the name of the record it points at."""
    if value is None or value == "":
        return NOTHING
    field = _field(table, column)
    if _is_key(field, column):
        return keys.get((field.related_model, value), NOT_THERE)
    if field is not None and field.choices:
        return str(dict(field.flatchoices).get(value, value))
    if isinstance(value, bool):
        return "yes" if value else "no"
    if isinstance(field, models.DateTimeField):
        at = dt.datetime.fromisoformat(value)
        return f"{at:%Y-%m-%d %H:%M} UTC"
    if isinstance(value, str) and not value.startswith(("0x", "-0x")):
        return value.replace("_", " ") if STORED.fullmatch(value) else value
    return _number_words(column, value, length_unit)


def _number_words(column: str, kept: Any, length_unit: str) -> str:
    """A number with its unit, which is the end of the column's name."""
    value = float.fromhex(kept) if isinstance(kept, str) else kept
    counter = COUNTERS.get(column.rpartition("_")[2])
    if counter is not None and isinstance(value, int):
        return amount_write(counter, value)
    if column.endswith("_mm"):
        return measure_write(value, length_unit)
    for end, unit in UNITS.items():
        if column.endswith(end):
            return measure_write(value, unit)
    if column.endswith("_percent"):
        return f"{number_write(value, 2)} %"
    if column.endswith("_g"):
        return f"{value:,} g".replace("-", "−")
    return f"{value:g}" if isinstance(value, float) else str(value)


def keys_told(kept: Iterable[tuple[Table | None, str, Any]]) -> Keys:
    """The names of the records that these columns point at; one query a table."""
    wanted: dict[Table, set[Any]] = {}
    for table, column, value in kept:
        field = _field(table, column)
        if value is not None and _is_key(field, column):
            wanted.setdefault(field.related_model, set()).add(value)
    return {
        (kind, row.pk): str(row)
        for kind, pks in wanted.items()
        for row in kind._default_manager.filter(pk__in=pks)
    }


def table_named(name: str) -> Table | None:
    """The table of that name in the database; None for one that is no more."""
    return _tables().get(name)


@cache
def _tables() -> dict[str, Table]:
    return {one._meta.db_table: one for one in apps.get_models()}


@cache
def _field(table: Table | None, column: str) -> Any:
    if table is None:
        return None
    for field in table._meta.concrete_fields:
        if column in (field.attname, field.name):
            return field
    return None


def _is_key(field: Any, column: str) -> bool:
    return field is not None and field.is_relation and column == field.attname
