"""Refusals: the code, what was read, and the nearest that is valid."""

from __future__ import annotations

from pathlib import Path

import pytest

from fleet.location import LocationRefused, place, read
from fleet.location.geometry import TypeGeometry, geometry_from_toml

FILE = Path(__file__).parents[2] / "fixtures" / "ard52.toml"


@pytest.fixture(scope="module")
def geometry() -> TypeGeometry:
    return geometry_from_toml(FILE.read_text())


def refused(
    geometry: TypeGeometry, text: str, variant: str = "base"
) -> LocationRefused:
    with pytest.raises(LocationRefused) as caught:
        place(read(text), geometry, variant)
    return caught.value


@pytest.mark.parametrize(
    ("text", "code"),
    [
        ("", "E_EMPTY"),
        ("STA S-17L", "E_STA_VALUE_MISSING"),
        ("STA 4O0 S-12L", "E_NUM_LETTER"),
        ("STA 2400 S-12L", "E_STA_RANGE"),
        ("STA 40 S-12L", "E_STA_RANGE"),
        ("STA 1050+15 S-12L", "E_STA_RANGE"),
        ("STA 640 S-12", "E_SIDE_MISSING"),
        ("LH STA 640 S-12R", "E_SIDE_CONFLICT"),
        ("LH STA 640 RBL 20", "E_SIDE_CONFLICT"),
        ("STA 640 BL 40", "E_SIDE_MISSING"),
        ("STA 640-12 S-9L", "E_AMBIG_MINUS"),
        ("STA 560B S-9R", "E_PLUG"),
        ("FR 24A S-9R", "E_PLUG"),
        ("STA 640C S-9R", "E_PLUG"),
        ("FR 30C S-9R", "E_PLUG"),
        ("FR 61 S-4L", "E_FRAME_RANGE"),
        ("STA 640 13 o'clock", "E_CLOCK"),
        ("WS 342 lower skin", "E_SIDE_MISSING"),
        ("RH wing FR 20 WS 100", "E_SECTION_MISMATCH"),
        ("RH FR 20 RIB 3", "E_SECTION_MISMATCH"),
        ("LH wing STA 640", "E_SECTION_MISMATCH"),
        ("LH wing WS 100 4 o'clock", "E_SECTION_MISMATCH"),
        ("nacelle 3 NS 40", "E_SECTION_MISMATCH"),
        ("nacelle 1 NS 40 RBL 3", "E_SECTION_MISMATCH"),
        ("LH wing WS 100 mid spar", "E_SECTION_MISMATCH"),
        ("12 in inbd of FR 20", "E_SECTION_MISMATCH"),
        ("12 in aft of", "E_REL_NO_REF"),
        ("dent near the galley", "E_NO_LONGITUDINAL"),
        ("STA 64.0.5 S-9L", "E_NUM"),
        ("STA 640 RBL 70", "E_BL_RANGE"),
        ("SEAT TRACK LBL 20 STA 500", "E_BL_RANGE"),
        ("STA 640 RBL 10 WL 300", "E_WL_RANGE"),
        ("STA 640 RBL 50 WL 190", "E_MISMATCH"),
        ("FR 39 STA 900 S-8L", "E_MISMATCH"),
        ("STA 640 S-9L to RBL 20", "E_MISMATCH"),
        ("STA 640 S-9L WL 100", "E_MISMATCH"),
        ("STA 900 6 o'clock S-11R", "E_MISMATCH"),
        ("STA 640 S-44L", "E_STR_RANGE"),
        ("LH wing WS 470 70 in aft of rear spar", "E_STR_RANGE"),
        ("LH wing RIB 31", "E_RIB_RANGE"),
        ("6 in fwd of door 7L", "E_DOOR_UNKNOWN"),
        ("STA 420 + 3 yards S-9L", "E_UNIT_UNKNOWN"),
        ("STA 640 S-9L S-9R", "E_TWO_POINTS"),
        ("STA 640 S-11L to S-11R", "E_TWO_POINTS"),
        ("sta 7 67-792", "E_NUM_SPLIT"),
        ("STA -12 S-9L", "E_NEGATIVE"),
        ("BLKHD RBL 15 WL 170", "E_NO_LONGITUDINAL"),
    ],
)
def test_each_refusal_has_its_code(
    geometry: TypeGeometry, text: str, code: str
) -> None:
    answer = refused(geometry, text)
    assert answer.code == code
    assert len(answer.message) > 20


@pytest.mark.parametrize(
    ("text", "message"),
    [
        (
            "STA 2400 S-12L",
            "STA 2400 is outside this fuselage (60–1060). "
            "Did you mean STA 240 or STA 1040?",
        ),
        (
            "FR 61 S-4L",
            "FR 61 is not on this fuselage (1–48). Did you mean FR 6 or FR 48?",
        ),
        (
            "STA 560B S-9R",
            "STA 560B is a plug that variant base does not have. Did you mean STA 560?",
        ),
        ("STA 640 S-12", "S-12 has no side. Did you mean S-12L or S-12R?"),
        ("STA 640 BL 40", "BL 40 has no side. Did you mean LBL 40 or RBL 40?"),
        (
            "STA 640 S-44L",
            "S-44L is not on this fuselage (S-1 to S-21). Did you mean S-21?",
        ),
        (
            "SEAT TRACK LBL 20 STA 500",
            "No seat track runs at BL 20 on this fuselage. "
            "Did you mean LBL 12 or LBL 36?",
        ),
        (
            "FR 39 STA 900 S-8L",
            "FR 39 stands at STA 860, but STA 900 was read; correct one.",
        ),
        (
            "6 in fwd of door 7L",
            "Door 7L is not on this fuselage. Did you mean door 1L or door 1R or "
            "door 2L or door 2R or aft cargo door?",
        ),
    ],
)
def test_a_refusal_says_what_was_read_and_the_nearest_valid(
    geometry: TypeGeometry, text: str, message: str
) -> None:
    assert refused(geometry, text).message == message


def test_a_hyphen_offers_only_what_the_pitch_allows(geometry: TypeGeometry) -> None:
    # Less than a frame pitch may be taken off; 60 in may not, but 640-660 may be meant.
    assert [o.numbers for o in refused(geometry, "STA 640-12 S-9L").offers] == [
        (628.0,)
    ]
    offers = refused(geometry, "STA 640-60 S-9L").offers
    assert [(o.kind, o.numbers) for o in offers] == [("range", (640.0, 660.0))]


def test_offers_read_without_a_question(geometry: TypeGeometry) -> None:
    for text, rest in [
        ("STA 2400 S-12L", " S-12L"),
        ("STA 640 S-12", " STA 640"),
        ("STA 640 BL 40", " STA 640 WL 190"),
        ("STA 640-60 S-9L", " S-9L"),
        ("WS 342 lower skin", ""),
        ("STA 560B S-9R", " S-9R"),
    ]:
        offers = refused(geometry, text).offers
        assert offers
        for offer in offers:
            assert place(read(offer.text + rest), geometry, "base").canonical


def test_a_plug_label_is_valid_only_on_the_variant_that_has_it(
    geometry: TypeGeometry,
) -> None:
    assert place(read("STA 560B S-9R"), geometry, "S").x1_mm == pytest.approx(
        600 * 25.4
    )
    assert refused(geometry, "STA 560C S-9R", "S").code == "E_PLUG"


def test_an_unknown_variant_is_the_callers_mistake(geometry: TypeGeometry) -> None:
    with pytest.raises(KeyError):
        place(read("STA 640"), geometry, "X")
