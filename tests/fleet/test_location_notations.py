"""Every notation of work orders in its spellings, as canonical text or a question.

Figures are hand-worked on the invented type: frame n at STA 100 + 20 (n - 1), stringer
n 9 degrees (n - 1) from the crown at a radius of 56 in, chord of the wing at WS 120
110 - 65 x 120 / 480 = 93.75 in.
"""

from __future__ import annotations

from pathlib import Path

import pytest

from fleet.location import LocationRefused, place, read, vocabulary_of
from fleet.location.geometry import geometry_from_toml

FILE = Path(__file__).parents[2] / "fixtures" / "ard52.toml"
GEOMETRY = geometry_from_toml(FILE.read_text())
WORDS = vocabulary_of(GEOMETRY)


def canonical(text: str, variant: str = "base") -> str:
    """The canonical text, which must read back to itself."""
    found = place(read(text, WORDS), GEOMETRY, variant)
    again = place(read(found.canonical, WORDS), GEOMETRY, variant)
    assert again.canonical == found.canonical
    return found.canonical


def refused(text: str, variant: str = "base") -> LocationRefused:
    with pytest.raises(LocationRefused) as caught:
        place(read(text, WORDS), GEOMETRY, variant)
    return caught.value


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        # feet: a foot mark only before inches
        ("STA 480+1'6\" S-9L", "STA 480+18 S-9L"),
        ("STA 480 + 1 ft 6 in S-9L", "STA 480+18 S-9L"),
        ("STA 480+1'-6\" S-9L", "STA 480+18 S-9L"),
        ("STA 480+1 ft S-9L", "STA 480+12 S-9L"),
        ("STA 480+12' S-9L", "STA 480+12 S-9L"),
        ("STA 640+10' 4 in below S-9L", "STA 640+10, 4 in below S-9L"),
        # inch marks
        ("STA 480+6'' S-9L", "STA 480+6 S-9L"),
        ("STA 480+6″ S-9L", "STA 480+6 S-9L"),
        ("STA 480+6 inches S-9L", "STA 480+6 S-9L"),
        ("STA 480+1 1/2 in S-9L", "STA 480+1.5 S-9L"),
        ("STA 480+.5 S-9L", "STA 480+0.5 S-9L"),
        # metric
        ("STA 480+2.54cm S-9L", "STA 480+1 S-9L"),
        ("STA 480+0.254 m S-9L", "STA 480+10 S-9L"),
        ("25.4 mm aft of FR 20 S-9L", "STA 480+1 S-9L"),
        # words for signs, and a length with its unit taken off
        ("STA 480 plus 3 in S-9L", "STA 480+3 S-9L"),
        ("STA 480 minus 3 in S-9L", "STA 460+17 S-9L"),
        ("STA 480 - 3 in S-9L", "STA 460+17 S-9L"),
        ("FR 20-3in S-9L", "STA 460+17 S-9L"),
        ("STA 480-3/4\" S-9L", "STA 460+19.25 S-9L"),
        ("STA 480-76.2mm S-9L", "STA 460+17 S-9L"),
        # dots in abbreviations
        ("B.S. 640 W.L. 190 R.B.L. 40", "STA 640 S-6R"),
        ("L.H. STA 640 S-9", "STA 640 S-9L"),
        ("STA 640 STGR 9 R.H.", "STA 640 S-9R"),
        # stringers
        ("STRINGER NO. 9 LH STA 640", "STA 640 S-9L"),
        ("STA 640 STR #9 LH", "STA 640 S-9L"),
        ("STA 640 STR L9", "STA 640 S-9L"),
        ("STA640/S9L", "STA 640 S-9L"),
        ("STA 640 S-9-12L", "STA 640 S-9L to S-12L"),
        # the clock
        ("STA 640 3 o'clock", "STA 640 S-11R"),
        ("STA 640 3 o'clock looking aft", "STA 640 S-11L"),
        ("STA 640 6 o'clock", "STA 640 S-21"),
        ("FR 28 2:42 to 3 o'clock", "STA 640 S-10R to S-11R"),
        ("FR 28 2:42-3:18 o'clock", "STA 640 S-10R to S-12R"),
        # butt and water lines: a side at one end holds for both
        ("FLOOR BEAM STA 620 RBL 10 - 20", "FLOOR BEAM STA 620 RBL 10 to RBL 20"),
        ("FLOOR BEAM STA 620 LBL 8 to RBL 8", "FLOOR BEAM STA 620 LBL 8 to RBL 8"),
        ("FLOOR BEAM STA 620 BL 0 to LBL 8", "FLOOR BEAM STA 620 BL 0 to LBL 8"),
        ("STA 640 2 in inbd of LBL 12", "STA 640 LBL 10"),
        # wing and tail
        ("LH wing WS 120 upper skin between front and rear spar",
         "LH wing WS 120 upper skin aft of front spar"),
        ("LH wing WS 120 lower skin 15% to 62% chord",
         "LH wing WS 120 lower skin aft of front spar"),
        # 25 % is 10 % of 93.75 in behind the front spar
        ("LH wing WS 120 lower skin 25 % chord",
         "LH wing WS 120 lower skin 9.375 in aft of front spar"),
        ("LH wing WS 120 lower skin 4 in aft of front spar to 9 in aft of front spar",
         "LH wing WS 120 lower skin 4 in aft of front spar to 9 in aft of front spar"),
        ("upper LH wing skin WS 120", "LH wing WS 120 upper skin"),
        ("HS 64 LH upper", "LH horizontal tail HS 64 upper skin"),
        ("4 in outbd of RIB 9 LH wing lower skin", "LH wing WS 184 lower skin"),
        ("4 in above FIN RIB 3 LH", "FIN STA 34 LH"),
        # nacelles
        ("#1 nacelle NS 45 3 o'clock", "nacelle 1 NS 40+5 S-4R"),
        ("No. 2 nacelle NS 45 3 o'clock", "nacelle 2 NS 40+5 S-4R"),
        ("LH nacelle NS 45 3 o'clock", "nacelle 1 NS 40+5 S-4R"),
        ("nac 2 NS 45 S-3R", "nacelle 2 NS 40+5 S-3R"),
        # doors: what else was said across is not dropped
        ("6 in fwd of door 1L fwd frame, 2 in below S-9L",
         "STA 160+4, 2 in below S-9L"),
        ("door 2L STA 920 S-12L to S-15L", "STA 920 S-12L to S-15L"),
        ("door 2L aft edge", "door 2L aft frame"),
    ],
)  # fmt: skip
def test_notations(text: str, expected: str) -> None:
    assert canonical(text) == expected


def test_a_length_behind_a_stringer_of_a_wing_is_true_at_the_local_chord() -> None:
    # S-3 lies 47 x 3 / 9 % of the chord behind the front spar; at WS 240 it is 77.5 in.
    text = canonical("LH wing lower skin WS 240 2 in aft of S-3")
    aft = 77.5 * 0.47 * 3 / 9 + 2
    assert text == f"LH wing WS 240 lower skin {aft:.3f} in aft of front spar"


@pytest.mark.parametrize(
    ("text", "code", "offers"),
    [
        ("FR 20 aft 12 in S-9L", "E_REL_NO_REF", ["12 in aft of FR 20"]),
        ("FR 20, 12 aft, S-9L", "E_REL_NO_REF", ["12 aft of FR 20"]),
        ("STA 640 S-7R, 6 mm below", "E_REL_NO_REF", ["6 mm below S-7R"]),
        ("STA 420+ S-9L", "E_NUM", []),
        ("STA 420++12 S-9L", "E_NUM", []),
        ("STA 420+12+3 S-9L", "E_NUM", []),
        ("STA l20 S-9L", "E_NUM_LETTER", ["120"]),
        ("STA 56OA S-9L", "E_NUM_LETTER", ["560A"]),
        ("FR 12A S-9L", "E_PLUG", ["FR 12"]),
        ("NS 45 3 o'clock", "E_SIDE_MISSING",
         ["LH NS 45 3 o'clock", "RH NS 45 3 o'clock"]),
        ("door 2L STA 400", "E_MISMATCH", []),
        ("12 in aft of door 2L fwd frame, STA 940", "E_MISMATCH", []),
        ("STA 640 front spar", "E_SECTION_MISMATCH", []),
        ("LH wing WS 120 120% chord", "E_STR_RANGE", []),
        ("LH wing WS 120 front spar, 30% chord", "E_TWO_POINTS", []),
        ("FIN STA 88 30% chord", "E_SIDE_MISSING",
         ["LH FIN STA 88 30% chord", "RH FIN STA 88 30% chord"]),
        ("STA 480 -3 S-9L", "E_AMBIG_MINUS", ["STA 477", "STA 480 to 483"]),
        ("STA 640 15:00 o'clock", "E_CLOCK", []),
    ],
)  # fmt: skip
def test_questions(text: str, code: str, offers: list[str]) -> None:
    answer = refused(text)
    assert answer.code == code
    assert [o.text for o in answer.offers] == offers
    for offer in answer.offers:
        assert offer.text in answer.message


def test_an_inch_mark_behind_a_range_is_a_stray_quote() -> None:
    assert canonical('STA 740-760" S-9L') == "STA 740-760 S-9L"
    assert canonical("STA 740-760 in the lap joint S-9L") == "STA 740-760 S-9L"


def test_the_door_is_named_in_the_mismatch() -> None:
    assert refused("door 2L STA 400").message == (
        "“door 2L” gives STA 900 to 940, but STA 400 was read too; keep one."
    )
