"""What a location text says, before any aircraft type is asked what it means."""

from __future__ import annotations

from dataclasses import dataclass, field
from decimal import Decimal

from fleet.units import FACTORS

READER_VERSION = "2"


@dataclass(frozen=True)
class Offer:
    """A reading that may have been meant: its kind and the text to write for it."""

    kind: str
    text: str
    numbers: tuple[float, ...] = ()


@dataclass(frozen=True)
class Problem:
    """A question that stands between the text and a place."""

    code: str
    message: str
    offers: tuple[Offer, ...] = ()


@dataclass(frozen=True)
class Length:
    """A length as written; `unit` is '' where none was."""

    number: Decimal
    unit: str

    def mm(self, type_unit: str) -> float:
        """In mm, in the type's unit where none was written."""
        return float(self.number * FACTORS["length"][self.unit or type_unit])


@dataclass(frozen=True)
class Offset:
    """A length from a reference: `sign` along it, `written` as "12 aft of ..."."""

    length: Length
    sign: int
    direction: str = ""

    @property
    def written(self) -> bool:
        return bool(self.direction)


@dataclass(frozen=True)
class Along:
    """A station, frame or rib, with what is to be added to it."""

    kind: str
    key: str
    number: Decimal
    letter: str = ""
    offset: Offset | None = None
    hyphen: bool = field(default=False, compare=False)
    """Whether a hyphen joined it to its word: "STA-12", which may be a minus."""

    @property
    def label(self) -> str:
        """As painted: "560A", "24B", "640.5"."""
        return f"{self.number.normalize():f}{self.letter}"


@dataclass(frozen=True)
class Across:
    """A stringer, line, spar or share of the chord, with what is to be added to it."""

    kind: str
    number: Decimal
    side: str = ""
    offset: Offset | None = None
    name: str = ""


@dataclass(frozen=True)
class Door:
    """A door as reference: "2L" or "aft cargo", its edge and the distance from it."""

    name: str
    edge: str = ""
    offset: Offset | None = None


@dataclass(frozen=True)
class Reading:
    """Everything a text says of a location; empty fields were not said."""

    text: str
    section: str = ""
    side: str = ""
    stations: tuple[Along, ...] = ()
    frames: tuple[Along, ...] = ()
    ribs: tuple[Along, ...] = ()
    stringers: tuple[Across, ...] = ()
    butt_lines: tuple[Across, ...] = ()
    water_lines: tuple[Across, ...] = ()
    clock_degrees: tuple[float, ...] = ()
    spars: tuple[Across, ...] = ()
    chords: tuple[Across, ...] = ()
    """Shares of the chord in per cent."""
    spar_side: str = ""
    """fwd or aft, where no length from the spar is given."""
    surface: str = ""
    door: Door | None = None
    element: str = ""
    element_label: str = ""
    codes: tuple[str, ...] = ()
    problems: tuple[Problem, ...] = field(default=())

    @property
    def has_station(self) -> bool:
        """Whether a station number was read."""
        return bool(self.stations)
