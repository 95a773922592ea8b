"""Which geometry an aircraft type has in force, and its rows by their labels."""

from __future__ import annotations

from fleet.location import LocationRefused, Place, place, read, vocabulary_of
from fleet.location.geometry import TypeGeometry, geometry_from_toml
from fleet.models import AircraftType, GeometryRevision

NO_GEOMETRY = (
    "Type {code} has no geometry in force. Load one: "
    "manage.py load_geometry FILE --publish."
)


def geometry_in_force(aircraft_type: AircraftType) -> GeometryRevision | None:
    """The published revision; one query."""
    return aircraft_type.geometries.filter(
        state=GeometryRevision.State.PUBLISHED
    ).first()


def geometry_of(aircraft_type: AircraftType) -> TypeGeometry | None:
    """The published geometry, rebuilt from its file; one query."""
    revision = geometry_in_force(aircraft_type)
    return geometry_from_toml(revision.content) if revision else None


def place_find(*, aircraft_type: AircraftType, variant: str, text: str) -> Place:
    """Where a text lies on a variant; LocationRefused says why it does not.

    Without a geometry in force every text is refused.
    """
    geometry = geometry_of(aircraft_type)
    if geometry is None:
        message = NO_GEOMETRY.format(code=aircraft_type.code)
        raise LocationRefused("E_NO_GEOMETRY", message)
    return place(read(text, vocabulary_of(geometry)), geometry, variant)
