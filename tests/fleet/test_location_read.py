"""First stage: what a text says, with no geometry; and what it leaves open."""

from __future__ import annotations

from decimal import Decimal

import pytest
from hypothesis import given
from hypothesis import strategies as st

from fleet.location import Reading, read


def codes(reading: Reading) -> list[str]:
    return [problem.code for problem in reading.problems]


def labels(points: tuple) -> list[str]:
    return [point.label.upper() for point in points]


def lines(points: tuple) -> list[tuple[int, str]]:
    return [(int(point.number), point.side) for point in points]


@pytest.mark.parametrize(
    "text",
    [
        "STA 640",
        "sta 640",
        "Sta.640",
        "STA. 640",
        "sta . 640",
        "STA-640",
        "STATION 640",
        "Stations 640",
        "BS640",
        "FS 640",
        "FUS STA 640",
        "BODY STA 640",
        "bs - 640",
        "640 is at STN 640",
    ],
)
def test_a_station_is_read_however_its_word_is_written(text: str) -> None:
    reading = read(text)
    assert labels(reading.stations) == ["640"]
    assert not reading.problems


@pytest.mark.parametrize(
    ("text", "key"),
    [
        ("WS 342", "wing"),
        ("WBL 94.24", "wing"),
        ("HS 64", "horizontal tail"),
        ("FIN STA 88", "fin"),
        ("FIN 88", "fin"),
        ("NS 45", "nacelle"),
        ("BS 45", "fuselage"),
    ],
)
def test_the_station_word_tells_the_section(text: str, key: str) -> None:
    assert read(text).stations[0].key == key


@pytest.mark.parametrize(
    ("text", "ends"),
    [
        ("STA 740-760", ["740", "760"]),
        ("STA 740 to 760", ["740", "760"]),
        ("STA 740 thru STA 760", ["740", "760"]),
        ("between STA 740 and 760", ["740", "760"]),
        ("STA 740/760", ["740", "760"]),
        ("BS 560A to 560B", ["560A", "560B"]),
        ("FR 17-18", ["17", "18"]),
        ("frame 34 / frame 35", ["34", "35"]),
        ("fr65-fr66", ["65", "66"]),
    ],
)
def test_ranges_are_joined_by_many_words(text: str, ends: list[str]) -> None:
    reading = read(text)
    assert labels(reading.stations or reading.frames) == ends


@pytest.mark.parametrize(
    ("text", "number", "unit"),
    [
        ("STA 420+12", "12", ""),
        ("sta 420 + 12", "12", ""),
        ('STA 480+3/4"', "0.75", "in"),
        ("STA 480+38mm", "38", "mm"),
        ("STA 480 + 1 1/2 in", "1.5", "in"),
        ("STA 706 + 10 '", "10", ""),
    ],
)
def test_an_offset_from_a_station_keeps_its_unit(
    text: str, number: str, unit: str
) -> None:
    offset = read(text).stations[0].offset
    assert offset is not None
    assert (offset.length.number, offset.length.unit) == (Decimal(number), unit)


def test_only_a_written_offset_without_a_unit_is_flagged() -> None:
    assert read("STA 420+12 S-9L").codes == ()
    assert read("12 aft of FR 20").codes == ("W_UNIT_ASSUMED",)
    assert read("12 in aft of FR 20").codes == ()


def test_an_offset_in_words_belongs_to_what_follows_it() -> None:
    frame = read("12 in aft of FR 20").frames[0]
    assert frame.offset is not None
    assert (frame.offset.direction, frame.offset.length.number) == ("aft", 12)
    line = read("STA 640, 4 in below S-12R").stringers[0]
    assert line.offset is not None
    assert (line.offset.direction, line.offset.length.number) == ("below", 4)
    inner = read("STA 640 2 in inbd of LBL 12").butt_lines[0]
    assert inner.offset is not None
    assert inner.offset.direction == "inbd"


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("STA 1 S-17L", [(17, "L")]),
        ("STA 1 str 17 lh", [(17, "L")]),
        ("STA 1 s17r", [(17, "R")]),
        ("STA 1 STGR 17 right", [(17, "R")]),
        ("STA 1 stringer 38lh", [(38, "L")]),
        ("STA 1 S-19R-20", [(19, "R"), (20, "")]),
        ("STA 1 stgr 19R-20R", [(19, "R"), (20, "R")]),
        ("STA 1 between s-39r and s-39l", [(39, "R"), (39, "L")]),
        ("STA 1 STR 12 & 13 LH", [(12, ""), (13, "L")]),
    ],
)
def test_stringers_carry_their_side(text: str, expected: list) -> None:
    assert lines(read(text).stringers) == expected


@pytest.mark.parametrize(
    ("text", "number", "side"),
    [
        ("STA 1 RBL 40", "40", "R"),
        ("STA 1 LBL 22.25", "22.25", "L"),
        ("STA 1 BL -30.5", "30.5", "L"),
        ("STA 1 BL R46", "46", "R"),
        ("STA 1 left butt line 24", "24", "L"),
        ("STA 1 butt line 24", "24", ""),
        ("STA 1 rbl-24", "24", "R"),
        ("STA 1 lbl45", "45", "L"),
    ],
)
def test_butt_lines_carry_their_side(text: str, number: str, side: str) -> None:
    line = read(text).butt_lines[0]
    assert (line.number, line.side) == (Decimal(number), side)


def test_a_butt_line_in_words_is_no_side_of_its_own() -> None:
    assert read("STA 640 left butt line 24").side == ""


@pytest.mark.parametrize(
    ("text", "degrees"),
    [
        ("FR 31 4 o'clock", 120.0),
        ("FR 31 7:30 o'clock", 225.0),
        ("FR 31 12 o clock", 0.0),
        ("FR 31 4 o'clock looking aft", 240.0),
    ],
)
def test_the_clock_is_read_looking_forward(text: str, degrees: float) -> None:
    assert read(text).clock_degrees == (degrees,)


def test_the_view_is_flagged_unless_it_is_said() -> None:
    assert "W_VIEW_ASSUMED" in read("FR 31 4 o'clock").codes
    assert "W_VIEW_ASSUMED" not in read("FR 31 4 o'clock looking forward").codes
    assert "W_VIEW_ASSUMED" not in read("FR 31 4 o'clock looking aft").codes


@pytest.mark.parametrize(
    "text", ["R & R panel STA 640", "right & right sta 640", "R/R fairing STA 640"]
)
def test_remove_and_replace_is_no_side(text: str) -> None:
    reading = read(text)
    assert reading.side == ""
    assert labels(reading.stations) == ["640"]


@pytest.mark.parametrize(
    ("text", "side"),
    [
        ("LH STA 1 S-3", "L"),
        ("L/H side STA 1", "L"),
        ("PORT STA 1", "L"),
        ("STBD STA 1", "R"),
        ("starboard STA 1", "R"),
        ("rt STA 1", "R"),
        ("art STA 1", ""),
    ],
)
def test_sides_are_whole_words(text: str, side: str) -> None:
    assert read(text).side == side


@pytest.mark.parametrize(
    ("text", "code", "offer"),
    [
        ("sta 7 67-792", "E_NUM_SPLIT", "767"),
        ("BS 8 07+14", "E_NUM_SPLIT", "807"),
        ("rbl 2 4 STA 640", "E_NUM_SPLIT", "24"),
        ("STA 640 str 2 3r", "E_NUM_SPLIT", "23"),
        ("STA 4O0 S-12L", "E_NUM_LETTER", "400"),
        ("STA 6I0", "E_NUM_LETTER", "610"),
        ("STA 64l5", "E_NUM_LETTER", "6415"),
    ],
)
def test_a_damaged_number_is_a_question_with_an_offer(
    text: str, code: str, offer: str
) -> None:
    problem = read(text).problems[0]
    assert problem.code == code
    assert offer in [o.text for o in problem.offers]


def test_a_split_number_gives_no_value() -> None:
    assert read("sta 7 67-792 corroded").stations == ()


@pytest.mark.parametrize(
    "text",
    ["STA 900 3 o'clock", "STA 640 4 in below S-7R", "STA 440 2 places", "STA 4.5 2"],
)
def test_two_numbers_that_belong_apart_are_no_split(text: str) -> None:
    assert "E_NUM_SPLIT" not in codes(read(text))


@pytest.mark.parametrize(
    ("text", "warning", "number"),
    [
        ("STA 1,016", "W_THOUSANDS", "1016"),
        ("STA 12,5", "W_DECIMAL_COMMA", "12.5"),
    ],
)
def test_commas_in_numbers_are_flagged(text: str, warning: str, number: str) -> None:
    reading = read(text)
    assert reading.codes == (warning,)
    assert reading.stations[0].number == Decimal(number)


@pytest.mark.parametrize("text", ["STA 1,01", "STA 64.0.5", "STA 1,2,3"])
def test_a_malformed_number_is_refused(text: str) -> None:
    assert codes(read(text)) == ["E_NUM"]


def test_a_hyphen_may_be_minus_or_an_elided_end() -> None:
    problem = read("STA 640-12 S-9L").problems[0]
    assert problem.code == "E_AMBIG_MINUS"
    assert [(o.kind, o.numbers) for o in problem.offers] == [("minus", (628.0,))]
    kinds = [(o.kind, o.numbers) for o in read("STA 640-60 S-9L").problems[0].offers]
    assert kinds == [("minus", (580.0,)), ("range", (640.0, 660.0))]


def test_an_offset_written_with_a_minus_is_a_question() -> None:
    # Written so in two real difficulty reports, where a range was first suspected.
    reading = read("seat track at bs 1114 - 6.0 , left butt line 8.5")
    assert codes(reading) == ["E_AMBIG_MINUS"]
    assert reading.problems[0].offers[0].numbers == (1108.0,)
    assert reading.stations == ()


@pytest.mark.parametrize(
    ("text", "code"),
    [
        ("", "E_EMPTY"),
        ("   ", "E_EMPTY"),
        ("STA S-17L", "E_STA_VALUE_MISSING"),
        ("dent near the galley", "E_NO_LONGITUDINAL"),
        ("12 in aft of", "E_REL_NO_REF"),
        ("12 in aft of the galley", "E_REL_NO_REF"),
        ("STA 420 + 3 yards S-9L", "E_UNIT_UNKNOWN"),
        ("STA 640 13 o'clock", "E_CLOCK"),
        ("STA 640 7:75 o'clock", "E_CLOCK"),
        ("STA 640 S-9L S-9R", "E_TWO_POINTS"),
        ("STA 640 STA 700", "E_TWO_POINTS"),
        ("left and port of STA 640, right", "E_SIDE_CONFLICT"),
    ],
)
def test_what_the_text_leaves_open_is_named(text: str, code: str) -> None:
    assert codes(read(text))[0] == code


@pytest.mark.parametrize(
    ("text", "code", "part"),
    [
        ("STA 640 S-7R + 4 in", "E_REL_NO_REF", "4 in below S-7R or 4 in above S-7R"),
        ("STA 640 S-7R, 6 mm aft", "E_REL_NO_REF", "does not say of what"),
        ("half an inch aft of FR 20", "E_REL_NO_REF", "“aft of” does not say how far"),
        ("STA 500, 520 S-9L", "E_TWO_POINTS", "“STA 500” and “520”"),
    ],
)
def test_nothing_that_was_written_is_dropped_in_silence(
    text: str, code: str, part: str
) -> None:
    problem = read(text).problems[0]
    assert problem.code == code
    assert part in problem.message


def test_letters_that_begin_a_stringer_are_no_plug() -> None:
    reading = read("STA 640S-9L")
    assert labels(reading.stations) == ["640"]
    assert lines(reading.stringers) == [(9, "L")]


def test_a_place_written_twice_is_one_place() -> None:
    reading = read("dent at STA 640 S-9L; repaired STA 640 S-9L")
    assert reading.problems == ()


@pytest.mark.parametrize(
    ("text", "element"),
    [
        ("FLOOR BEAM STA 620 RBL 20", "floor_beam"),
        ("SEAT TRACK LBL 12 STA 500-520", "seat_track"),
        ("FR 31 WEB S-16L", "frame_web"),
        ("AFT PRESSURE BLKHD RBL 15 WL 170", "bulkhead"),
        ("KEEL BEAM STA 640 LH", "keel_beam"),
        ("shear tie at STA 1219 S-39R", "shear_clip"),
        ("STA 300 S-5L lap joint", "skin"),
        ("STA 640 S-7R", ""),
    ],
)
def test_the_structural_item_is_read_from_its_words(text: str, element: str) -> None:
    assert read(text).element == element


@given(st.text(max_size=120))
def test_no_text_whatever_raises(text: str) -> None:
    assert isinstance(read(text), Reading)


_PIECES = st.sampled_from(
    ["STA", "FR", "S-", "17L", "640", "+", "-", "/", "to", "and", "12", "in", "aft",
     "of", "door", "2L", "RBL", "WL", "4", "o'clock", "'", '"', ",", ";", "RIB", "spar",
     "upper", "skin", "LH", "R", "&", "560B", "1/2", "mm", "below"]
)  # fmt: skip


@given(st.lists(_PIECES, max_size=14).map(" ".join))
def test_no_jumble_of_location_words_raises(text: str) -> None:
    assert isinstance(read(text), Reading)
