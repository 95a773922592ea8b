"""Second stage: readings on the invented demonstration type, in hand-worked figures.

Frame n stands at STA 100 + 20 (n - 1); stringer n lies 9 degrees (n - 1) from the
crown at a radius of 56 in; the stretched variant has 40 in more from STA 560 on.
"""

from __future__ import annotations

import math
from pathlib import Path

import pytest

from fleet.location import LocationRefused, Place, place, read
from fleet.location.geometry import TypeGeometry, geometry_from_toml

INCH = 25.4
FILE = Path(__file__).parents[2] / "fixtures" / "ard52.toml"


@pytest.fixture(scope="module")
def geometry() -> TypeGeometry:
    return geometry_from_toml(FILE.read_text())


def degrees(found: Place) -> tuple[float, float]:
    assert found.s1_mm is not None
    assert found.s2_mm is not None
    radius = 56 * INCH
    return (
        round(math.degrees(found.s1_mm / radius), 3),
        round(math.degrees(found.s2_mm / radius), 3),
    )


def stringer(label: str) -> float:
    """Angle of a stringer label from the crown, right positive."""
    number = int(label.rstrip("LR"))
    angle = 9.0 * (number - 1)
    return -angle if label.endswith("L") or number == 21 else angle


@pytest.mark.parametrize(
    ("text", "variant", "x1", "x2", "first", "last", "side", "warnings"),
    [
        ("STA 420+12 S-17L", "base", 432, 432, "17L", "17L", "L", ""),
        ("sta 420 + 12 str 17 lh", "base", 432, 432, "17L", "17L", "L", ""),
        ("FR 17-18 between STR 12 & 13 LH", "base", 420, 440, "13L", "12L", "L", ""),
        ("STA 560B+6 S-9R", "S", 606, 606, "9R", "9R", "R", ""),
        ("STA 600 S-9R", "S", 640, 640, "9R", "9R", "R", ""),
        ("STA 600 S-9R", "base", 600, 600, "9R", "9R", "R", ""),
        ("Stations 740-760 stringer 14R", "base", 740, 760, "14R", "14R", "R", ""),
        (
            "frame 34 / frame 35, stgr 19R-20R",
            "base", 760, 780, "19R", "20R", "R", "",
        ),
        ("FUS STA 300 S-1", "base", 300, 300, "1", "1", "", ""),
        (
            "STA 700 S-2L to S-2R",
            "base", 700, 700, "2L", "2R", "LR", "W_CROSSES_CENTRELINE",
        ),
        ("STA 820 S-21", "base", 820, 820, "21", "21", "", ""),
        ("L/H side FR 8 STR 15", "base", 240, 240, "15L", "15L", "L", ""),
        ("FR 24A S-11L", "S", 580, 580, "11L", "11L", "L", ""),
        ('STA 480+3/4" S-10L', "base", 480.75, 480.75, "10L", "10L", "L", ""),
        (
            "STA 480+38mm S-10L",
            "base", 480 + 38 / 25.4, 480 + 38 / 25.4, "10L", "10L", "L", "",
        ),
        ("STA 1,016 S-20L", "base", 1016, 1016, "20L", "20L", "L", "W_THOUSANDS"),
        ("STBD FR 40 S-13", "base", 880, 880, "13R", "13R", "R", ""),
        ("STA 300 S-5L lap joint", "base", 300, 300, "5L", "5L", "L", ""),
        ("FR 39 STA 860 S-8L", "base", 860, 860, "8L", "8L", "L", ""),
        (
            "STA 900 3 o'clock S-11R",
            "base", 900, 900, "11R", "11R", "R", "W_VIEW_ASSUMED",
        ),
        (
            "FR 20+150mm STR 9L",
            "base", 480 + 150 / 25.4, 480 + 150 / 25.4, "9L", "9L", "L", "",
        ),
        ("FR 30+4.5 in S-6R", "S", 724.5, 724.5, "6R", "6R", "R", ""),
        (
            "STA 420+600mm S-9L",
            "base", 420 + 600 / 25.4, 420 + 600 / 25.4, "9L", "9L", "L",
            "W_OFFSET_GE_PITCH",
        ),
        ("STA 512+6 S-14L", "base", 518, 518, "14L", "14L", "L", ""),
        ("STA 760-740 S-14R", "base", 0, 0, "", "", "", "refused"),
        (
            "STA 760 to 740 S-12R",
            "base", 740, 760, "12R", "12R", "R", "W_RANGE_REVERSED",
        ),
        (
            "STA 700 S-18R to S-18L",
            "base", 700, 700, "18R", "18L", "LR", "W_CROSSES_CENTRELINE",
        ),
        ("STA 640 S-19R-20", "base", 640, 640, "19R", "20R", "R", ""),
    ],
)  # fmt: skip
def test_stations_and_stringers_are_placed(
    geometry: TypeGeometry,
    text: str, variant: str, x1: float, x2: float,
    first: str, last: str, side: str, warnings: str,
) -> None:  # fmt: skip
    if warnings == "refused":
        with pytest.raises(LocationRefused) as caught:
            place(read(text), geometry, variant)
        assert caught.value.code == "E_AMBIG_MINUS"
        return
    found = place(read(text), geometry, variant)
    assert found.x1_mm == pytest.approx(x1 * INCH, abs=1e-6)
    assert found.x2_mm == pytest.approx(x2 * INCH, abs=1e-6)
    start, end = stringer(first), stringer(last)
    if end < start:
        end += 360.0
    assert degrees(found) == (start, end)
    assert (found.side, " ".join(found.codes)) == (side, warnings)


@pytest.mark.parametrize(
    ("text", "x", "bl", "wl", "side"),
    [
        ("BS 640 RBL 40 WL 190", 640, 40.0, 190.0, "R"),
        ("FS 640.5 LBL 22.25 WL 98", 640.5, -22.25, 98.0, "L"),
        ("BS 880 BL 0 WL 206", 880, 0.0, 206.0, ""),
        ("STA 860 BL -30.5 WL 103", 860, -30.5, 103.0, "L"),
    ],
)
def test_butt_and_water_lines_give_the_skin_point(
    geometry: TypeGeometry, text: str, x: float, bl: float, wl: float, side: str
) -> None:
    found = place(read(text), geometry, "base")
    angle = math.degrees(math.atan2(bl, wl - 150.0))
    assert found.x1_mm == pytest.approx(x * INCH)
    assert degrees(found)[0] == pytest.approx(angle, abs=1e-3)
    assert (found.side, found.codes) == (side, ())


def test_the_clock_is_an_angle_from_the_crown(geometry: TypeGeometry) -> None:
    found = place(read("FR 31 4 o'clock"), geometry, "base")
    assert found.x1_mm == pytest.approx(700 * INCH)
    assert degrees(found) == (120.0, 120.0)
    assert (found.side, found.codes) == ("R", ("W_VIEW_ASSUMED",))


def test_a_nacelle_has_its_own_stations_and_clock(geometry: TypeGeometry) -> None:
    found = place(read("nacelle 2 NS 45 7:30 o'clock"), geometry, "base")
    assert found.section == "NAC-2"
    assert found.x1_mm == pytest.approx(45 * INCH)
    assert found.s1_mm is not None
    angle = math.degrees(found.s1_mm / (24 * INCH))
    assert angle % 360 == pytest.approx(225.0)
    assert (found.side, found.zone) == ("R", "420")
    assert found.codes == ("W_VIEW_ASSUMED",)


@pytest.mark.parametrize(
    ("text", "section", "x", "surface", "shares", "side"),
    [
        (
            "RH wing WS 342 lower skin aft of rear spar",
            "WING-R", 342, "lower", (0.62, 1.0), "R",
        ),
        ("LH WING RIB 9 UPPER SKIN", "WING-L", 180, "upper", None, "L"),
        (
            "RH wing lower surface, 60 mm inbd of rib 14",
            "WING-R", 280 - 60 / 25.4, "lower", None, "R",
        ),
        ("HSTAB HS 64 LH lower skin", "HT-L", 64, "lower", None, "L"),
        (
            "aft of front spar LH wing WS 120",
            "WING-L", 120, "", (0.15, 0.62), "L",
        ),
        ("FIN STA 88 LH", "FIN", 88, "outer", (-1.0, 0.0), "L"),
        ("FIN STA 88 RH rear spar", "FIN", 88, "outer", (0.62, 0.62), "R"),
    ],
)  # fmt: skip
def test_wings_and_tail_are_placed_along_span_and_chord(
    geometry: TypeGeometry, text: str, section: str, x: float, surface: str,
    shares: tuple[float, float] | None, side: str,
) -> None:  # fmt: skip
    found = place(read(text), geometry, "base")
    assert (found.section, found.surface, found.side) == (section, surface, side)
    assert found.x1_mm == pytest.approx(x * INCH)
    assert found.codes == ()
    if shares is None:
        assert found.s1_mm is None
    else:
        chord = geometry.section(section).reference_mm
        assert (found.s1_mm, found.s2_mm) == pytest.approx(
            (shares[0] * chord, shares[1] * chord)
        )


def test_a_length_from_a_spar_is_true_at_the_local_chord(
    geometry: TypeGeometry,
) -> None:
    found = place(read("RH wing WS 240 lower skin 4 in aft of front spar"),
                  geometry, "base")  # fmt: skip
    # The chord at WS 240 is (110 + 45) / 2 = 77.5 in; s counts at the root's 110 in.
    assert found.s1_mm == pytest.approx((0.15 * 110 + 4 * 110 / 77.5) * INCH)


def test_a_length_below_a_stringer_is_true_at_the_local_radius(
    geometry: TypeGeometry,
) -> None:
    found = place(read("STA 150, 4 in below S-12R"), geometry, "base")
    # The nose has a radius of 20 + 36 * 90 / 180 = 38 in at STA 150.
    assert degrees(found)[0] == pytest.approx(99 + math.degrees(4 / 38), abs=1e-3)
    above = place(read("STA 640, 4 in above S-12L"), geometry, "base")
    assert degrees(above)[0] == pytest.approx(-99 + math.degrees(4 / 56), abs=1e-3)


def test_a_door_is_a_reference_along_and_across(geometry: TypeGeometry) -> None:
    found = place(read("12 in aft of door 2L fwd frame"), geometry, "base")
    assert found.x1_mm == pytest.approx(912 * INCH)
    assert degrees(found) == (-150.0, -70.0)
    assert (found.side, found.codes) == ("L", ())
    loose = place(read("12 in aft of door 2L"), geometry, "base")
    assert loose.x1_mm == pytest.approx(952 * INCH)
    assert loose.codes == ("W_REF_EDGE",)


def test_inside_a_door_the_element_is_door_structure(geometry: TypeGeometry) -> None:
    found = place(read("STA 800 S-14R"), geometry, "base")
    assert (found.section, found.element) == ("DOOR-CARGO", "door_structure")
    assert found.panel == "DOOR-CARGO SKIN"
    edge = place(read("STA 760 S-14R"), geometry, "base")
    assert (edge.section, edge.element) == ("FUS", "skin")
    # 1.6 mm lower side skin and 0.4 mm more at a door surround.
    assert edge.thickness_mm == 2.0


def test_inside_a_window_there_is_no_panel(geometry: TypeGeometry) -> None:
    found = place(read("STA 490, 4 in below S-10R"), geometry, "base")
    assert (found.element, found.panel, found.thickness_mm) == ("other", None, None)
    assert found.element_label == "window r 20-21"


@pytest.mark.parametrize(
    ("text", "element", "label", "x", "bl", "wl", "zone"),
    [
        ("FLOOR BEAM STA 620 RBL 20", "floor_beam", "", 620, 20.0, None, "232"),
        ("SEAT TRACK LBL 12 STA 500-520", "seat_track", "", 500, -12.0, None, "231"),
        (
            "AFT PRESSURE BLKHD RBL 15 WL 170",
            "bulkhead", "AFT PRESSURE BLKHD", 1000, 15.0, 170.0, "252",
        ),
        ("KEEL BEAM STA 640 LH", "keel_beam", "KEEL BEAM", 640, None, None, "131"),
    ],
)  # fmt: skip
def test_internal_structure_has_lines_but_no_arc(
    geometry: TypeGeometry, text: str, element: str, label: str, x: float,
    bl: float | None, wl: float | None, zone: str,
) -> None:  # fmt: skip
    found = place(read(text), geometry, "base")
    assert (found.element, found.element_label) == (element, label)
    assert (found.surface, found.s1_mm, found.panel) == ("internal", None, None)
    assert found.x1_mm == pytest.approx(x * INCH)
    assert found.bl_mm == (None if bl is None else pytest.approx(bl * INCH))
    assert found.wl_mm == (None if wl is None else pytest.approx(wl * INCH))
    assert (found.zone, found.codes) == (zone, ())


def test_a_frame_web_has_a_frame_and_an_arc(geometry: TypeGeometry) -> None:
    found = place(read("FR 31 WEB S-16L"), geometry, "base")
    assert (found.element, found.element_label) == ("frame_web", "FR 31")
    assert found.surface == "internal"
    assert degrees(found) == (-135.0, -135.0)


def test_lines_off_the_skin_are_internal_structure(geometry: TypeGeometry) -> None:
    found = place(read("STA 640 RBL 40 WL 120"), geometry, "base")
    assert found.codes == ("W_OFF_SKIN",)
    assert (found.surface, found.s1_mm) == ("internal", None)
    # hypot(40, 40) is 56.57 in, 0.57 in outside the skin: within two inches of it.
    assert place(read("STA 640 RBL 40 WL 190"), geometry, "base").codes == ()


def test_a_station_alone_is_flagged(geometry: TypeGeometry) -> None:
    found = place(read("STA 640"), geometry, "base")
    assert found.codes == ("W_NO_CIRCUMFERENTIAL",)
    assert (found.s1_mm, found.around_half, found.zone) == (None, None, None)


def test_an_offset_of_a_pitch_needs_a_yes(geometry: TypeGeometry) -> None:
    assert place(read("STA 420+600mm S-9L"), geometry, "base").needs_yes
    assert not place(read("STA 420+19.9 S-9L"), geometry, "base").needs_yes


def test_what_lies_at_a_place_is_told(geometry: TypeGeometry) -> None:
    found = place(read("FR 28 + 10, 4 in below STR 7 RH"), geometry, "base")
    assert found.canonical == "STA 640+10, 4 in below S-7R"
    assert found.bay == "FR 28–29, S-7R to S-8R"
    assert found.panel == "UPPER SIDE R 500-700"
    assert found.material == "2024 T3 clad sheet"
    assert (found.thickness_mm, found.zone) == (1.4, "232")
    assert found.criticality == "principal"
    # FR 28 is the 30th line of the map axis, which holds both plug frames; mid-bay
    # counts to the second half. S-7R is the sixth line from the crown.
    assert (found.along_half, found.around_half) == (61, 12)


def test_base_and_stretched_meet_on_the_map_axis(geometry: TypeGeometry) -> None:
    base = place(read("STA 600 S-9R"), geometry, "base")
    stretched = place(read("STA 600 S-9R"), geometry, "S")
    assert base.map_mm == stretched.map_mm == pytest.approx(640 * INCH)
    assert stretched.x1_mm - base.x1_mm == pytest.approx(40 * INCH)


def test_the_splice_bay_of_the_plug_is_asked_for(geometry: TypeGeometry) -> None:
    assert place(read("STA 570 S-9R"), geometry, "base").x1_mm == pytest.approx(
        570 * INCH
    )
    with pytest.raises(LocationRefused) as caught:
        place(read("STA 570 S-9R"), geometry, "S")
    assert caught.value.code == "E_PLUG"
    assert [o.text for o in caught.value.offers] == ["STA 560+10", "STA 560B+10"]
