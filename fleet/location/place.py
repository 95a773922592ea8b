"""A location found on the structure of one variant of a type."""

from __future__ import annotations

from dataclasses import dataclass

from fleet.location.reading import Offer


class LocationRefused(ValueError):
    """A reading that gives no place: code, what was read, what is wrong, offers."""

    def __init__(self, code: str, message: str, offers: tuple[Offer, ...] = ()) -> None:
        super().__init__(message)
        self.code = code
        self.message = message
        self.offers = offers


NEEDS_A_YES = frozenset({"W_OFFSET_GE_PITCH"})
"""Warnings that save only after the user has said yes."""


@dataclass(frozen=True)
class Position:
    """Where the text puts the damage, before panel, bay and zone are looked up.

    s is None where the text says nothing of the circumference or chord.
    """

    section: str
    variant: str
    x1_mm: float
    x2_mm: float
    s1_mm: float | None
    s2_mm: float | None
    surface: str
    element: str
    element_label: str
    side: str
    bl_mm: float | None
    wl_mm: float | None
    door: str
    bl_ends: tuple[float, ...] = ()
    wl_ends: tuple[float, ...] = ()
    """The lines as read, where the place reaches from one to another."""


@dataclass(frozen=True)
class Place:
    """A location in coordinates and in words, with what the structure is there."""

    entered: str
    canonical: str
    codes: tuple[str, ...]
    section: str
    variant: str
    x1_mm: float
    x2_mm: float
    map_mm: float
    s1_mm: float | None
    s2_mm: float | None
    surface: str
    element: str
    element_label: str
    side: str
    bl_mm: float | None
    wl_mm: float | None
    along_half: int
    around_half: int | None
    bay: str
    panel: str | None
    zone: str | None
    thickness_mm: float | None
    material: str | None
    criticality: str

    @property
    def needs_yes(self) -> bool:
        """Whether a warning must be confirmed before the place is saved."""
        return bool(NEEDS_A_YES & set(self.codes))
