"""Say where a location text lies on a type's structure."""

from __future__ import annotations

import json
from typing import Any

from django.core.management.base import BaseCommand, CommandError, CommandParser

from fleet.location import LocationRefused, Place
from fleet.models import AircraftType
from fleet.selectors.structure import place_find
from fleet.units import in_unit, measure_write, number_write

NO_TYPE = (
    "There is no aircraft type “{code}” in this database; it holds {held}. Load one: "
    "manage.py load_geometry FILE --publish, or manage.py demo for the demonstration."
)
NO_VARIANT = "Type {code} has no variant “{variant}”; it has {held}."


class Command(BaseCommand):
    help = "Say where a location text lies on a type's structure."

    def add_arguments(self, parser: CommandParser) -> None:
        parser.add_argument("type", help="Code of the aircraft type, as ARD-52.")
        parser.add_argument("text", help="The location as written.")
        parser.add_argument("--variant", help="Code of the variant; first if left out.")
        parser.add_argument("--format", choices=("text", "json"), default="text")

    def handle(self, *args: Any, **options: Any) -> None:
        aircraft_type, variant = _type_and_variant(options["type"], options["variant"])
        as_json = options["format"] == "json"
        try:
            found = place_find(
                aircraft_type=aircraft_type, variant=variant, text=options["text"]
            )
        except LocationRefused as refused:
            answer = _refusal(refused)
            self.stdout.write(_json(answer) if as_json else _lines(answer))
            raise SystemExit(1) from refused
        answer = _answer(found, aircraft_type.entry_unit)
        self.stdout.write(_json(answer) if as_json else _lines(answer))


def _type_and_variant(code: str, wanted: str | None) -> tuple[AircraftType, str]:
    types = list(AircraftType.objects.prefetch_related("variants"))
    held = ", ".join(t.code for t in types) or "none"
    found = next((t for t in types if t.code == code), None)
    if found is None:
        raise CommandError(NO_TYPE.format(code=code, held=held))
    codes = [v.code for v in found.variants.order_by("pk")]
    if wanted is None:
        return found, codes[0]
    if wanted not in codes:
        message = NO_VARIANT.format(code=code, variant=wanted, held=", ".join(codes))
        raise CommandError(message)
    return found, wanted


def _answer(found: Place, unit: str) -> dict[str, Any]:
    thickness = found.thickness_mm
    return {
        "canonical": found.canonical,
        "section": found.section,
        "codes": list(found.codes),
        "needs_yes": found.needs_yes,
        "variant": found.variant,
        "element": found.element,
        "element_label": found.element_label,
        "surface": found.surface,
        "side": found.side,
        "bay": found.bay,
        "panel": found.panel,
        "zone": found.zone,
        "thickness_mm": None if thickness is None else round(thickness, 4),
        "material": found.material,
        "criticality": found.criticality,
        f"x1_{unit}": _number(found.x1_mm, unit),
        f"x2_{unit}": _number(found.x2_mm, unit),
        "x1_mm": _number(found.x1_mm, "mm"),
        "x2_mm": _number(found.x2_mm, "mm"),
        "map_mm": _number(found.map_mm, "mm"),
        "s1_mm": _number(found.s1_mm, "mm"),
        "s2_mm": _number(found.s2_mm, "mm"),
        "bl_mm": _number(found.bl_mm, "mm"),
        "wl_mm": _number(found.wl_mm, "mm"),
        "along_half": found.along_half,
        "around_half": found.around_half,
        "entered": found.entered,
    }


def _number(value_mm: float | None, unit: str) -> float | None:
    """Rounded to what a reading can mean, not to the last bit."""
    return None if value_mm is None else float(number_write(in_unit(value_mm, unit), 4))


def _refusal(refused: LocationRefused) -> dict[str, Any]:
    return {
        "code": refused.code,
        "message": refused.message,
        "offers": [offer.text for offer in refused.offers],
        "canonical": None,
        "section": None,
        "codes": [refused.code],
    }


def _json(answer: dict[str, Any]) -> str:
    return json.dumps(answer, ensure_ascii=False, indent=2)


def _lines(answer: dict[str, Any]) -> str:
    """One line for each thing that is known."""
    lines = []
    for name, value in answer.items():
        if isinstance(value, list):
            value = "; ".join(value)
        elif name.endswith("_mm") and value is not None:
            name, value = name.removesuffix("_mm"), measure_write(value, "mm")
        if value not in (None, "", False):
            lines.append(f"{name.replace('_', ' ')}: {value}")
    return "\n".join(lines)
