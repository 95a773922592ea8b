"""The demonstration type without its materials, and rows placed on it in mm."""

from __future__ import annotations

import datetime as dt
import itertools
from dataclasses import dataclass
from functools import lru_cache
from typing import Any

from fleet.location.geometry import TypeGeometry, geometry_from_toml
from fleet.models import (
    Aircraft,
    AircraftType,
    GeometryRevision,
    Operator,
    Section,
    Variant,
)
from fleet.services.history import Writing
from repairs.models import Event, Finding, Repair
from tests.factories import FIXTURES, NOW, TODAY, aircraft_make, operator_make

INCH = 25.4
_number = itertools.count(1)


@lru_cache
def content() -> str:
    return (FIXTURES / "ard52.toml").read_text(encoding="utf-8")


@dataclass(frozen=True)
class Placing:
    """A published geometry with its sections and two variants."""

    aircraft_type: AircraftType
    revision: GeometryRevision
    variants: dict[str, Variant]
    sections: dict[str, Section]

    @property
    def geometry(self) -> TypeGeometry:
        return geometry_from_toml(content())


def placing_make() -> Placing:
    """Type, variants, geometry and sections of the demonstration type."""
    geometry = geometry_from_toml(content())
    with Writing(actor=None, action="type_create", at=NOW) as w:
        made = w.create(
            AircraftType(code=geometry.code, name=geometry.name, entry_unit="in")
        )
        revision = w.create(
            GeometryRevision(
                aircraft_type=made,
                number=1,
                state=GeometryRevision.State.PUBLISHED,
                content=content(),
                file_digest="as read",
                published_on=TODAY,
            )
        )
        variants = {
            one.code: w.create(
                Variant(aircraft_type=made, code=one.code, name=one.name)
            )
            for one in geometry.variants
        }
        sections = {
            one.code: w.create(
                Section(
                    aircraft_type=made,
                    code=one.code,
                    name=one.title,
                    kind=one.kind,
                    side=one.side,
                    datum_text=one.datum_text,
                    reference_radius_mm=one.reference_mm if one.is_shell else None,
                    wrap_mm=one.wrap_mm,
                )
            )
            for one in geometry.sections
        }
    return Placing(made, revision, variants, sections)


@dataclass(frozen=True)
class Fleet:
    """An operator with three aircraft of both variants."""

    placing: Placing
    operator: Operator
    aircraft: dict[str, Aircraft]


def fleet_make() -> Fleet:
    placing, operator = placing_make(), operator_make()
    aircraft = {
        mark: aircraft_make(operator, placing.variants[variant], mark)
        for mark, variant in (("Q7-AAA", "base"), ("Q7-AAB", "base"), ("Q7-AAS", "S"))
    }
    return Fleet(placing, operator, aircraft)


def place_columns(
    placing: Placing,
    aircraft: Aircraft,
    *,
    x: tuple[float, float],
    s: tuple[float, float] | None,
    section: str = "FUS",
    surface: str = "outer",
) -> dict[str, Any]:
    """Columns of a place given in mm on the aircraft's own variant."""
    shape = placing.geometry.section(section)
    middle = shape.map_of((x[0] + x[1]) / 2, aircraft.variant.code)
    columns: dict[str, Any] = {
        "section": placing.sections[section],
        "geometry": placing.revision,
        "place_entered": "as tested",
        "place_text": f"{section} {x[0] / INCH:.1f} in",
        "x1_mm": x[0],
        "x2_mm": x[1],
        "map_mm": middle,
        "along_half": shape.half_along(middle),
        "surface": surface,
    }
    if s is not None:
        columns |= {
            "s1_mm": s[0],
            "s2_mm": s[1],
            "around_half": shape.half_across((s[0] + s[1]) / 2),
        }
    return columns


def finding_make(
    placing: Placing,
    aircraft: Aircraft,
    *,
    x: tuple[float, float] | None,
    s: tuple[float, float] | None = None,
    section: str = "FUS",
    surface: str = "outer",
    found_on: dt.date = TODAY,
    **changes: Any,
) -> Finding:
    """A finding at coordinates; x None leaves it to be placed."""
    where: dict[str, Any] = {"place_entered": "somewhere aft"}
    if x is not None:
        where = place_columns(
            placing, aircraft, x=x, s=s, section=section, surface=surface
        )
    columns = {
        "operator": aircraft.operator,
        "aircraft": aircraft,
        "number": f"F-{next(_number):04d}",
        "damage_type": "dent",
        "state": "reported",
        "element": "skin",
        "found_on": found_on,
    }
    with Writing(actor=None, action="finding_record", at=NOW) as w:
        return w.create(Finding(**(columns | where | changes)))


def repair_make(
    placing: Placing,
    aircraft: Aircraft,
    *,
    x: tuple[float, float],
    s: tuple[float, float] | None = None,
    **changes: Any,
) -> Repair:
    """A planned repair at coordinates."""
    columns = {
        "operator": aircraft.operator,
        "aircraft": aircraft,
        "number": f"R-{next(_number):04d}",
        "kind": "external_doubler",
        "state": "planned",
        "description": "doubler",
        "category": "pending",
        "approval_basis": "unknown",
        "element": "skin",
    }
    where = place_columns(placing, aircraft, x=x, s=s)
    with Writing(actor=None, action="repair_plan", at=NOW) as w:
        return w.create(Repair(**(columns | where | changes)))


def event_make(aircraft: Aircraft, **changes: Any) -> Event:
    """A hailstorm."""
    columns = {
        "operator": aircraft.operator,
        "aircraft": aircraft,
        "number": f"V-{next(_number):04d}",
        "kind": "hail",
        "state": "open",
        "happened_on": TODAY,
        "description": "hail on the ramp",
    }
    with Writing(actor=None, action="event_record", at=NOW) as w:
        return w.create(Event(**(columns | changes)))
