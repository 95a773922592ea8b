"""Doors as references: which one, and the place told from its edge."""

from __future__ import annotations

from decimal import Decimal

from fleet.location.along import Work, did_you_mean, direction_sign, inside
from fleet.location.parts import Cutout
from fleet.location.place import LocationRefused
from fleet.location.reading import Along, Offer


def door_cutout(work: Work) -> Cutout | None:
    """The cut-out of the door that the text names, or E_DOOR_UNKNOWN."""
    door = work.reading.door
    if door is None:
        return None
    names = {
        c.label: c for c in work.section.cutouts if c.kind in ("door", "cargo_door")
    }
    if door.name in names:
        return names[door.name]
    offers = tuple(Offer("door", door_text(name)) for name in names)
    message = f"Door {door.name} is not on this {work.name}.{did_you_mean(offers)}"
    raise LocationRefused("E_DOOR_UNKNOWN", message, offers)


def door_text(name: str) -> str:
    """ "door 2L", "aft cargo door"."""
    return f"{name.lower()} door" if " " in name else f"door {name}"


def door_x(work: Work, cutout: Cutout) -> tuple[float, float]:
    """True distances of the place that is given from a door's edge, or of the door."""
    door = work.reading.door
    fore = work.section.x_of(cutout.box.map1_mm, work.variant)
    rear = work.section.x_of(cutout.box.map2_mm, work.variant)
    assert door is not None
    assert fore is not None
    assert rear is not None
    if door.offset is None:
        at = {"fwd": (fore, fore), "aft": (rear, rear)}
        return at.get(door.edge, (fore, rear))
    direction = door.offset.direction
    edge = door.edge or direction
    sign = direction_sign(work, direction)
    x_mm = (fore if edge == "fwd" else rear) + sign * door.offset.length.mm(work.unit)
    point = Along("door", "", Decimal(0), cutout.label, door.offset)
    return (inside(work, x_mm, point),) * 2
