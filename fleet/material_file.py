"""The materials file, read and converted to canonical units. Pure: no Django.

The file's own comments document it. Every problem is listed, with the item it is in.
"""

from __future__ import annotations

import math
import tomllib
from collections.abc import Iterator
from dataclasses import dataclass
from decimal import Decimal
from typing import Any

from fleet.units import FACTORS

_KSI_MPA = FACTORS["stress"]["ksi"]
_INCH_MM = FACTORS["length"]["in"]
_POUND_PER_CUBIC_INCH = Decimal("0.45359237") / (_INCH_MM / 1000) ** 3

UNITS: dict[str, tuple[str, Decimal]] = {
    "ksi": ("_mpa", _KSI_MPA),
    "Msi": ("_mpa", _KSI_MPA * 1000),
    "MPa": ("_mpa", Decimal(1)),
    "lb/in3": ("_kg_per_m3", _POUND_PER_CUBIC_INCH),
    "kg/m3": ("_kg_per_m3", Decimal(1)),
    "MPa sqrt(m)": ("_mpa_root_mm", Decimal(1000).sqrt()),
    "ksi sqrt(in)": ("_mpa_root_mm", _KSI_MPA * _INCH_MM.sqrt()),
    "-": ("", Decimal(1)),
}
"""Unit in the file: the end of the canonical quantity's name, and the factor."""

_K_UNITS: dict[str, tuple[Decimal, Decimal]] = {
    "in/cycle, ksi sqrt(in)": (_INCH_MM, _KSI_MPA * _INCH_MM.sqrt()),
    "mm/cycle, MPa sqrt(m)": (Decimal(1), Decimal(1000).sqrt()),
}
"""Unit of a growth law: mm in its length, MPa*sqrt(mm) in its stress intensity."""

LAWS: dict[str, tuple[str, ...]] = {
    "walker": ("m", "gamma"),
    "forman": ("m", "kc"),
    "paris": ("m",),
}
"""Growth laws and what each has beside its coefficient and rank."""
MEANINGS = ("plane_strain", "apparent", "at_instability", "growth_fit")
"""What crack and load a toughness was worked out from; the last is no toughness."""
HELD_FLAT = ("yes", "no", "not stated")
SEEN = ("print", "quoted", "memory")
BASES = ("a", "b", "s", "typical")

NOT_TOML = "The materials file cannot be read as TOML: {error}."
MISSING = "{where}: {key} is missing; every {table} needs it."
NOT_ONE_OF = "{where}: {key} reads “{value}”; write one of {known}."
NOT_A_NUMBER = "{where}: {key} reads “{value}”; a number is expected."
WRONG_FORMAT = "The materials file has format {read}; this program reads format 1."
TWICE = "{where}: {what} is given twice; keep one."


class MaterialFileError(ValueError):
    """A materials file with problems; each names the item and the mend."""

    def __init__(self, problems: list[str]) -> None:
        super().__init__("\n".join(problems))
        self.problems = problems


@dataclass(frozen=True, slots=True)
class PropertyEntry:
    """One number in canonical units; the unit ends the quantity's name."""

    quantity: str
    value: float
    basis: str
    direction: str
    thickness_min_mm: float
    thickness_max_mm: float | None
    source: str
    seen: str


@dataclass(frozen=True, slots=True)
class MaterialEntry:
    """A material with its numbers."""

    name: str
    temper: str
    form: str
    properties: tuple[PropertyEntry, ...]


@dataclass(frozen=True, slots=True)
class AdoptedEntry:
    """A demonstration value in canonical units, for a material."""

    name: str
    temper: str
    form: str
    quantity: str
    value: float
    unit: str
    document: str
    page: str
    revision: str


@dataclass(frozen=True, slots=True)
class MaterialFile:
    """What a materials file holds."""

    materials: tuple[MaterialEntry, ...]
    adopted: tuple[AdoptedEntry, ...]


def materials_from_toml(text: str) -> MaterialFile:
    """Read a materials file; MaterialFileError lists all its problems."""
    try:
        content = tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        raise MaterialFileError([NOT_TOML.format(error=error)]) from error
    if content.get("format") != 1:
        raise MaterialFileError([WRONG_FORMAT.format(read=content.get("format"))])
    reader = _Reader([])
    materials = tuple(reader.material(m) for m in content.get("materials", []))
    adopted = tuple(reader.adopted(a) for a in content.get("adopted_demo", []))
    if reader.problems:
        raise MaterialFileError(reader.problems)
    return MaterialFile(materials, adopted)


@dataclass(frozen=True, slots=True)
class _Reader:
    """Reads tables and collects what is wrong with them."""

    problems: list[str]

    def material(self, table: dict[str, Any]) -> MaterialEntry:
        where = _named(table)
        entries = [
            *(self._property(p, where) for p in table.get("properties", [])),
            *(e for c in table.get("curves", []) for e in self._curve(c, where)),
            *(e for g in table.get("growth", []) for e in self._growth(g, where)),
            *(e for t in table.get("toughness", []) for e in self._tough(t, where)),
        ]
        keys = [(e.quantity, e.direction, e.basis, e.thickness_min_mm) for e in entries]
        for key in sorted({str(k[0]) for k in keys if keys.count(k) > 1}):
            self.problems.append(TWICE.format(where=where, what=key))
        return MaterialEntry(
            self._text(table, "name", where),
            str(table.get("temper", "")),
            str(table.get("form", "")),
            tuple(entries),
        )

    def adopted(self, table: dict[str, Any]) -> AdoptedEntry:
        where = f"adopted value of {_named(table)}"
        quantity, value = self._quantity(table, where)
        return AdoptedEntry(
            self._text(table, "name", where),
            str(table.get("temper", "")),
            str(table.get("form", "")),
            quantity,
            value,
            "MPa*sqrt(mm)" if quantity.endswith("_mpa_root_mm") else "MPa",
            self._text(table, "document", where),
            str(table.get("page", "")),
            str(table.get("revision", "")),
        )

    def _property(self, table: dict[str, Any], where: str) -> PropertyEntry:
        where = f"{where}, {table.get('quantity', 'property')}"
        quantity, value = self._quantity(table, where)
        low, high = self._thickness(table, where)
        return PropertyEntry(
            quantity,
            value,
            self._one_of(table, "basis", BASES, where),
            str(table.get("direction", "")),
            low,
            high,
            self._text(table, "source", where),
            self._one_of(table, "seen", SEEN, where),
        )

    def _quantity(self, table: dict[str, Any], where: str) -> tuple[str, float]:
        """Canonical name and value of a quantity printed in its own unit."""
        unit = self._one_of(table, "unit", tuple(UNITS), where)
        ending, factor = UNITS.get(unit, ("", Decimal(1)))
        value = self._number(table, "value", where)
        return self._text(table, "quantity", where) + ending, float(
            Decimal(str(value)) * factor
        )

    def _curve(self, table: dict[str, Any], where: str) -> Iterator[PropertyEntry]:
        """Coefficients as printed: kt 2 gives stress_life_kt2_a1 to _a3 and _a4_ksi."""
        kt = self._number(table, "kt", where)
        where = f"{where}, curve Kt {kt:g}"
        unit = self._one_of(table, "stress_unit", ("ksi", "MPa"), where)
        names = {"a1": "a1", "a2": "a2", "a3": "a3", "a4": f"a4_{unit.lower()}"}
        for key, ending in names.items():
            value = self._number(table, key, where)
            yield self._fit(f"stress_life_kt{kt:g}_{ending}", value, table, where)
        for ending, value in self._known(table, where).items():
            yield self._fit(f"stress_life_kt{kt:g}_{ending}", value, table, where)

    def _known(self, table: dict[str, Any], where: str) -> dict[str, float]:
        """What is known of the tests behind a curve; nothing where it is left out."""
        known: dict[str, float] = {}
        if "standard_error" in table:
            known["standard_error"] = self._number(table, "standard_error", where)
        if "thickness_in" in table:
            inches = self._number(table, "thickness_in", where)
            known["thickness_mm"] = inches * float(_INCH_MM)
        if "ratios" in table:
            pair = table["ratios"]
            if not isinstance(pair, list) or len(pair) != 2:
                self.problems.append(
                    NOT_A_NUMBER.format(where=where, key="ratios", value=pair)
                )
            else:
                ends = dict(zip(("ratio_min", "ratio_max"), pair, strict=True))
                known |= {end: self._number(ends, end, where) for end in ends}
        return known

    def _growth(self, table: dict[str, Any], where: str) -> Iterator[PropertyEntry]:
        """A law with C converted: walker_faa_c_mm_mpa_root_mm, _m, _gamma, _rank."""
        key = self._text(table, "key", where)
        where = f"{where}, growth law {key}"
        law = self._one_of({"law": "walker"} | table, "law", tuple(LAWS), where)
        unit = self._one_of(table, "unit", tuple(_K_UNITS), where)
        length, k_size = _K_UNITS.get(unit, (Decimal(1), Decimal(1)))
        numbers = {
            name: self._number(table, name, where)
            for name in ("c", *LAWS.get(law, ()), "rank")
        }
        power = numbers.get("m", 0.0)
        if "kc" in numbers:
            power -= 1  # c dK^m / (... kc - dK)
            numbers["kc_mpa_root_mm"] = numbers.pop("kc") * float(k_size)
        converted = numbers.pop("c") * float(length) / float(k_size) ** power
        numbers["c_mm_mpa_root_mm"] = converted
        for ending, value in numbers.items():
            yield self._fit(f"{law}_{key}_{ending}", value, table, where)

    def _tough(self, table: dict[str, Any], where: str) -> Iterator[PropertyEntry]:
        """A typical toughness with what it was measured on; its meaning names it."""
        meaning = self._one_of(table, "meaning", MEANINGS, where)
        where = f"{where}, toughness {meaning}"
        held = self._one_of(table, "held_flat", HELD_FLAT, where)
        unit = self._one_of(table, "unit", tuple(UNITS), where)
        ending, factor = UNITS.get(unit, ("", Decimal(1)))
        value = Decimal(str(self._number(table, "value", where))) * factor
        low, high = self._thickness(table, where)
        source = self._text(table, "source", where)
        numbers = {f"toughness_{meaning}{ending}": float(value)}
        if "width_in" in table:
            inches = self._number(table, "width_in", where)
            width = inches * float(_INCH_MM)
            numbers[f"toughness_{meaning}_panel_width_mm"] = width
        for quantity, number in numbers.items():
            yield PropertyEntry(
                quantity, number, "typical", str(table.get("direction", "")), low, high,
                f"{source}; kept from buckling: {held}",
                self._one_of(table, "seen", SEEN, where),
            )  # fmt: skip

    def _fit(
        self, quantity: str, value: float, table: dict[str, Any], where: str
    ) -> PropertyEntry:
        return PropertyEntry(
            quantity, value, "fit", str(table.get("direction", "")), 0.0, None,
            self._text(table, "source", where),
            self._one_of(table, "seen", SEEN, where),
        )  # fmt: skip

    def _thickness(
        self, table: dict[str, Any], where: str
    ) -> tuple[float, float | None]:
        given = table.get("thickness_in", [0])
        if not isinstance(given, list) or not 1 <= len(given) <= 2:
            self.problems.append(
                NOT_A_NUMBER.format(where=where, key="thickness_in", value=given)
            )
            return 0.0, None
        sizes = [float(Decimal(str(size)) * _INCH_MM) for size in given]
        return sizes[0], sizes[1] if len(sizes) == 2 else None

    def _text(self, table: dict[str, Any], key: str, where: str) -> str:
        value = str(table.get(key, "")).strip()
        if not value:
            self.problems.append(MISSING.format(where=where, key=key, table="item"))
        return value

    def _one_of(
        self, table: dict[str, Any], key: str, known: tuple[str, ...], where: str
    ) -> str:
        value = self._text(table, key, where)
        if value and value not in known:
            self.problems.append(
                NOT_ONE_OF.format(
                    where=where, key=key, value=value, known=", ".join(known)
                )
            )
        return value

    def _number(self, table: dict[str, Any], key: str, where: str) -> float:
        value = table.get(key)
        if isinstance(value, bool) or not isinstance(value, int | float):
            self.problems.append(NOT_A_NUMBER.format(where=where, key=key, value=value))
            return 1.0
        if not math.isfinite(value):
            self.problems.append(NOT_A_NUMBER.format(where=where, key=key, value=value))
        return float(value)


def _named(table: dict[str, Any]) -> str:
    words = (str(table.get(key, "")) for key in ("name", "temper", "form"))
    return " ".join(word for word in words if word) or "a material without a name"
