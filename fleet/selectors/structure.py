"""Which geometry an aircraft type has in force, and its rows by their labels."""

from __future__ import annotations

from fleet.location.geometry import TypeGeometry, geometry_from_toml
from fleet.models import AircraftType, GeometryRevision


def geometry_in_force(aircraft_type: AircraftType) -> GeometryRevision | None:
    """The published revision; one query."""
    return aircraft_type.geometries.filter(
        state=GeometryRevision.State.PUBLISHED
    ).first()


def geometry_of(aircraft_type: AircraftType) -> TypeGeometry | None:
    """The published geometry, rebuilt from its file; one query."""
    revision = geometry_in_force(aircraft_type)
    return geometry_from_toml(revision.content) if revision else None
