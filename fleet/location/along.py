"""Second stage, along: stations, frames, ribs and doors to true distances."""

from __future__ import annotations

from bisect import bisect_right
from dataclasses import dataclass, field
from decimal import Decimal

from fleet.location.parts import TINY_MM, Frame
from fleet.location.place import LocationRefused
from fleet.location.reading import Along, Offer, Reading
from fleet.location.sections import Section
from fleet.location.tokens import number_lettered
from fleet.units import canonical, in_unit, number_write

STA_RANGE = "{word} {label} is outside this {section} ({low}–{high}).{offers}"
NEGATIVE = "{word} {label} is negative; this {section} has no such stations.{offers}"
HYPHEN = "“{word}-{label}” may be read in more than one way.{offers}"
PLUG_MISSING = "{word} {label} is a plug that variant {variant} does not have.{offers}"
PLUG_UNCLEAR = "{word} {label} may lie before or behind the plug.{offers}"
LABEL_UNKNOWN = "{word} {label} is not on this {section} ({low}–{high}).{offers}"
FRAME_STATION = (
    "{prefix} {frame} stands at {at}, but {word} {label} was read; correct one."
)
DIRECTION = "“{text}” does not run along this {section}; use {offers}."

_BACK = {"fwd": -1, "inbd": -1, "below": -1}
_ON = {"aft": 1, "outbd": 1, "above": 1}


@dataclass
class Work:
    """A reading being placed: its section and the warnings so far."""

    reading: Reading
    section: Section
    variant: str
    unit: str
    codes: list[str] = field(default_factory=list)

    @property
    def name(self) -> str:
        return self.section.title

    def show(self, mm: float) -> str:
        """A length as a number of the type's unit."""
        return number_write(in_unit(mm, self.unit), 3)

    def mm(self, number: Decimal) -> float:
        """A number of the type's unit in mm."""
        return canonical(str(number), self.unit)

    @staticmethod
    def mm_in(inches: float) -> float:
        """A distance of the rules, which are in inches, in mm."""
        return canonical(inches, "in")


def did_you_mean(offers: tuple[Offer, ...]) -> str:
    """The offers as the end of a message."""
    if not offers:
        return ""
    return " Did you mean " + " or ".join(offer.text for offer in offers) + "?"


def x_range(work: Work) -> tuple[float, float] | None:
    """True distances of the ends; None if no station, frame or rib was read."""
    reading = work.reading
    points = reading.stations or reading.frames or reading.ribs
    if not points:
        return None
    ends = [x_of_point(work, point) for point in points]
    if reading.stations and reading.frames:
        _agree(work, ends, [x_of_point(work, point) for point in reading.frames])
    if ends[-1] < ends[0]:
        work.codes.append("W_RANGE_REVERSED")
    return min(ends), max(ends)


def _agree(work: Work, stations: list[float], frames: list[float]) -> None:
    """A frame and a station that name one place must lie within half a pitch."""
    apart = min(abs(s - f) for s in stations for f in frames)
    inside = min(stations) <= min(frames) <= max(stations)
    if inside or apart <= work.section.frame_pitch_mm / 2.0 + TINY_MM:
        return
    frame, station = work.reading.frames[0], work.reading.stations[0]
    raise LocationRefused(
        "E_MISMATCH",
        FRAME_STATION.format(
            prefix=work.section.frame_prefix,
            frame=frame.label.upper(),
            at=f"{station_word(work.section)} {station_label(work, frames[0])}",
            word=station_word(work.section),
            label=station.label.upper(),
        ),
    )


def station_word(section: Section) -> str:
    """The station word of the section's canonical text."""
    return section.station_words[0]


def x_of_point(work: Work, point: Along) -> float:
    """True distance of one point with its offset."""
    base = _base(work, point)
    if point.offset is None:
        return inside(work, base, point)
    length = point.offset.length.mm(work.unit)
    sign = point.offset.sign or direction_sign(work, point.offset.direction)
    pitch = work.section.frame_pitch_mm
    if pitch and length >= pitch - TINY_MM:
        work.codes.append("W_OFFSET_GE_PITCH")
    return inside(work, base + sign * length, point)


def direction_sign(work: Work, direction: str) -> int:
    """+1 aft, outboard or up along the section's axis, -1 the other way."""
    allowed = ("fwd", "aft") if work.section.is_shell else ("inbd", "outbd")
    if work.section.skins == ("left", "right"):
        allowed = ("above", "below")
    if direction not in allowed:
        raise LocationRefused(
            "E_SECTION_MISMATCH",
            DIRECTION.format(
                text=direction, section=work.name, offers=" or ".join(allowed)
            ),
        )
    return _BACK.get(direction) or _ON[direction]


def _base(work: Work, point: Along) -> float:
    if point.kind == "station":
        return _station(work, point)
    return _frame(work, point)


def _frame(work: Work, point: Along) -> float:
    section, label = work.section, point.label.upper()
    frame = section.frame(label)
    word = section.frame_prefix
    if frame is None:
        numbers = [f.label for f in section.frames]
        code = "E_RIB_RANGE" if point.kind == "rib" else "E_FRAME_RANGE"
        offers = _digit_offers(word, point.number, _whole_frames(section))
        if point.letter and section.frame(f"{point.number.normalize():f}"):
            code, offers = "E_PLUG", offers[-1:]
        message = LABEL_UNKNOWN.format(
            word=word,
            label=label,
            section=work.name,
            low=numbers[0] if numbers else "none",
            high=numbers[-1] if numbers else "none",
            offers=did_you_mean(offers),
        )
        raise LocationRefused(code, message, offers)
    return _having(work, frame, word, label)


def _having(work: Work, frame: Frame, word: str, label: str) -> float:
    """Where the frame stands on this variant, or E_PLUG."""
    x_mm = frame.x_mm(work.variant)
    if x_mm is None:
        row = work.section.frames
        host = next(f for f in reversed(row[: frame.ordinal - 1]) if not f.plug)
        name = host.label if label == frame.label else host.station_label
        offers = (Offer("frame", f"{word} {name}"),)
        message = PLUG_MISSING.format(
            word=word,
            label=label,
            variant=work.variant,
            offers=did_you_mean(offers),
        )
        raise LocationRefused("E_PLUG", message, offers)
    return x_mm


def _station(work: Work, point: Along) -> float:
    section, label, word = work.section, point.label.upper(), station_word(work.section)
    _signed(work, point)
    for frame in section.frames:
        if frame.station_label == label:
            return _having(work, frame, word, label)
    if point.letter == "i":  # no plug of the type: a one, read as a letter
        asked = number_lettered(label, f"{point.number.normalize():f}1")
        raise LocationRefused(asked.code, asked.message, asked.offers)
    if point.letter:
        plugs = [f.station_label for f in section.frames if f.plug]
        offers = tuple(Offer("station", f"{word} {name}") for name in plugs[:2])
        message = PLUG_MISSING.format(
            word=word, label=label, variant=work.variant, offers=did_you_mean(offers)
        )
        raise LocationRefused("E_PLUG", message, offers)
    return _plain_station(work, work.mm(point.number), point)


def _signed(work: Work, point: Along) -> None:
    """Refuse a minus the type does not have, and ask of a hyphen that may be one."""
    section, label, word = work.section, point.label.upper(), station_word(work.section)
    if point.number < 0 and not section.negative_stations:
        positive = work.mm(-point.number)
        on_it = section.map1_mm - TINY_MM <= section.map_of(positive, "")
        nearest = label.removeprefix("-") if on_it else work.show(section.map1_mm)
        offers = (Offer("positive", f"{word} {nearest}"),)
        message = NEGATIVE.format(
            word=word, label=label, section=work.name, offers=did_you_mean(offers)
        )
        raise LocationRefused("E_NEGATIVE", message, offers)
    if point.hyphen and section.negative_stations and point.number:
        forward = -work.mm(point.number) >= section.map1_mm - TINY_MM
        if forward:
            number = float(point.number)
            both = (
                Offer("minus", f"{word} -{label}", (-number,)),
                Offer("plain", f"{word} {label}", (number,)),
            )
            message = HYPHEN.format(word=word, label=label, offers=did_you_mean(both))
            raise LocationRefused("E_AMBIG_MINUS", message, both)


def _plain_station(work: Work, label_mm: float, point: Along) -> float:
    """True distance of a station that no frame carries the name of.

    Numbers count from the datum without plugs. In the bay that a plug has split, one
    number names two places, so it is asked for.
    """
    section = work.section
    map_mm = section.map_of(label_mm, "")
    for plug in section.plugs:
        after = next(
            f for f in section.frames if not f.plug and f.map_mm > plug.map_mm + TINY_MM
        )
        in_bay = plug.end_mm + TINY_MM < map_mm < after.map_mm - TINY_MM
        if in_bay and work.variant in plug.variants:
            raise _plug_question(work, point, plug.map_mm, plug.end_mm, map_mm)
    x_mm = section.x_of(map_mm, work.variant)
    return label_mm if x_mm is None else x_mm


def _plug_question(
    work: Work, point: Along, start_mm: float, end_mm: float, map_mm: float
) -> LocationRefused:
    word = station_word(work.section)
    plus = work.show(map_mm - end_mm)
    names = [
        f.station_label
        for f in work.section.frames
        if abs(f.map_mm - start_mm) < TINY_MM or abs(f.map_mm - end_mm) < TINY_MM
    ]
    offers = tuple(Offer("plug", f"{word} {name}+{plus}") for name in names)
    message = PLUG_UNCLEAR.format(
        word=word, label=point.label.upper(), offers=did_you_mean(offers)
    )
    return LocationRefused("E_PLUG", message, offers)


def inside(work: Work, x_mm: float, point: Along) -> float:
    """The distance if it is on the section, else E_STA_RANGE with offers."""
    section = work.section
    low = section.x_of(section.map1_mm, work.variant)
    high = section.x_of(section.map2_mm, work.variant)
    assert low is not None
    assert high is not None
    if low - TINY_MM <= x_mm <= high + TINY_MM:
        return x_mm
    word = station_word(section) if point.kind == "station" else section.frame_prefix
    stations = [
        Decimal(f.station_label) for f in section.frames if f.station_label.isdigit()
    ]
    offers = _digit_offers(word, point.number, stations)
    plus = point.offset
    label = point.label.upper()
    if plus is not None:
        label += f" {'+' if x_mm > high else '-'} {plus.length.number:f}"
    message = STA_RANGE.format(
        word=word,
        label=label,
        section=work.name,
        low=work.show(section.map1_mm),
        high=work.show(section.map2_mm - sum(p.length_mm for p in section.plugs)),
        offers=did_you_mean(offers),
    )
    raise LocationRefused("E_STA_RANGE", message, offers)


def _whole_frames(section: Section) -> list[Decimal]:
    return [Decimal(f.label) for f in section.frames if f.label.isdigit()]


def _digit_offers(
    word: str, number: Decimal, valid: list[Decimal]
) -> tuple[Offer, ...]:
    """A last digit too many, and the nearest label there is."""
    offers = []
    if not valid:
        return ()
    shorter = f"{number:f}".partition(".")[0][:-1]
    if shorter and min(valid) <= Decimal(shorter) <= max(valid):
        offers.append(Offer("digit", f"{word} {shorter}", (float(shorter),)))
    nearest = min(valid, key=lambda v: abs(v - number))
    offers.append(Offer("nearest", f"{word} {nearest:f}", (float(nearest),)))
    return tuple(offers)


# -- labels -------------------------------------------------------------------


def station_label(work: Work, x_mm: float) -> str:
    """How a true distance is written: "640", "640+10", "560B+6", "342.5".

    On a section with plugs the frame ahead of it is named, as its bay is then seen.
    """
    section = work.section
    step_mm = work.mm(Decimal("0.0005"))  # half of what the last digit shows
    frames, places = section.frames_on(work.variant)
    count = bisect_right(places, x_mm + step_mm)
    ahead = (frames[count - 1], places[count - 1]) if count else None
    plus = work.show(x_mm - ahead[1]) if ahead else ""
    past_last = ahead is not None and ahead[0] is section.frames[-1]
    if not section.is_shell or ahead is None or (past_last and plus != "0"):
        map_mm = section.map_of(x_mm, work.variant)
        return work.show(section.x_of(map_mm, "") or x_mm)
    name = ahead[0].station_label
    return name if plus == "0" else f"{name}+{plus}"
