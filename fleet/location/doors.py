"""Doors as references: which one, and the place told from its edge."""

from __future__ import annotations

from decimal import Decimal

from fleet.location.along import (
    Work,
    did_you_mean,
    direction_sign,
    inside,
    station_label,
    station_word,
)
from fleet.location.parts import TINY_MM, Cutout
from fleet.location.place import LocationRefused
from fleet.location.reading import Along, Offer

DOOR_STATION = "“{door}” gives {at}, but {read} was read too; keep one."


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


def door_agrees(work: Work, cutout: Cutout, ends: tuple[float, float]) -> None:
    """A station beside a door's name lies at that door; a place has one reference."""
    door = work.reading.door
    assert door is not None
    at, near = door_x(work, cutout), work.section.frame_pitch_mm + TINY_MM
    beside = ends[0] <= at[1] + near and at[0] - near <= ends[1]
    if beside and door.offset is None and not door.edge:
        return
    first, last = (station_label(work, x) for x in at)
    word = station_word(work.section)
    raise LocationRefused(
        "E_MISMATCH",
        DOOR_STATION.format(
            door=door_text(cutout.label),
            at=f"{word} {first}" if first == last else f"{word} {first} to {last}",
            read=f"{word} {station_label(work, ends[0])}",
        ),
    )
