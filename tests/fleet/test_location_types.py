"""What differs from type to type comes from the type's file: words, labels, origin.

The invented type is altered in its file's text, once per difference.
"""

from __future__ import annotations

import re
from pathlib import Path

import pytest

from fleet.location import (
    LocationRefused,
    Place,
    place,
    read,
    text_at,
    vocabulary_of,
)
from fleet.location.geometry import TypeGeometry, geometry_from_toml

INCH = 25.4
TEXT = (Path(__file__).parents[2] / "fixtures" / "ard52.toml").read_text()


def altered(*changes: tuple[str, str], text: str = TEXT) -> TypeGeometry:
    """The type with the first occurrence of each text replaced."""
    for old, new in changes:
        assert old in text, old
        text = text.replace(old, new, 1)
    return geometry_from_toml(text)


def found(geometry: TypeGeometry, text: str, variant: str = "base") -> Place:
    return place(read(text, vocabulary_of(geometry)), geometry, variant)


def reads_back(geometry: TypeGeometry, text: str, variant: str = "base") -> Place:
    first = found(geometry, text, variant)
    again = found(geometry, first.canonical, variant)
    assert again.canonical == first.canonical
    assert again.x1_mm == pytest.approx(first.x1_mm, abs=0.02)
    assert again.x2_mm == pytest.approx(first.x2_mm, abs=0.02)
    if first.s1_mm is None:
        assert again.s1_mm is None
    else:
        assert again.s1_mm == pytest.approx(first.s1_mm, abs=0.05)
    return first


# -- stations ahead of the datum ------------------------------------------------

NOSE = (
    ('datum = "60 in ahead of the nose"', 'datum = "40 in behind the nose"'),
    ("start_in = 60\n", "start_in = -40\nnegative_stations = true\n"),
    ("profile_in = [[60, 20],", "profile_in = [[-40, 20],"),
)  # fmt: skip


@pytest.fixture(scope="module")
def behind_nose() -> TypeGeometry:
    return altered(*NOSE)


@pytest.mark.parametrize(
    ("text", "x1", "x2", "canonical"),
    [
        ("STA -20 S-9L", -20, -20, "STA -20 S-9L"),
        ("sta −12.5 s-9l", -12.5, -12.5, "STA -12.5 S-9L"),
        ("STA -30 to -10 S-9L", -30, -10, "STA -30 to -10 S-9L"),
        ("STA -30 to STA 10 S-9L", -30, 10, "STA -30 to 10 S-9L"),
        ("STA -30 thru 10 S-9L", -30, 10, "STA -30 to 10 S-9L"),
        ("STA -30+4 S-9L", -26, -26, "STA -26 S-9L"),
    ],
)
def test_a_station_ahead_of_the_datum_carries_a_minus(
    behind_nose: TypeGeometry, text: str, x1: float, x2: float, canonical: str
) -> None:
    place_read = reads_back(behind_nose, text)
    assert place_read.x1_mm == pytest.approx(x1 * INCH)
    assert place_read.x2_mm == pytest.approx(x2 * INCH)
    assert place_read.canonical == canonical


def test_a_hyphen_that_may_be_a_minus_is_asked_for(behind_nose: TypeGeometry) -> None:
    with pytest.raises(LocationRefused) as caught:
        found(behind_nose, "STA-12 S-9L")
    assert caught.value.code == "E_AMBIG_MINUS"
    assert [o.text for o in caught.value.offers] == ["STA -12", "STA 12"]
    for offer in caught.value.offers:
        assert found(behind_nose, f"{offer.text} S-9L").codes == ()
    # No such station lies ahead of this nose, so the hyphen can be no minus.
    assert found(behind_nose, "STA-640 S-9L").x1_mm == pytest.approx(640 * INCH)


def test_the_range_of_stations_is_told_with_its_sign(
    behind_nose: TypeGeometry,
) -> None:
    with pytest.raises(LocationRefused) as caught:
        found(behind_nose, "STA -60 S-9L")
    assert caught.value.code == "E_STA_RANGE"
    assert "(-40–1060)" in caught.value.message


def test_a_minus_the_type_does_not_have_is_refused() -> None:
    geometry = altered()
    for text, nearest in [("STA -640 S-9L", "STA 640"), ("STA -12 S-9L", "STA 60")]:
        with pytest.raises(LocationRefused) as caught:
            found(geometry, text)
        assert caught.value.code == "E_NEGATIVE"
        assert [o.text for o in caught.value.offers] == [nearest]
        assert caught.value.message.endswith(f"Did you mean {nearest}?")


# -- stringers counted from the keel --------------------------------------------


def test_stringers_may_be_counted_from_the_keel() -> None:
    geometry = altered(('origin = "crown"', 'origin = "keel"'))
    crown = found(geometry, "STA 640 S-21")
    assert crown.s1_mm == pytest.approx(0.0)
    keel = found(geometry, "STA 640 S-1")
    assert abs(keel.s1_mm or 0.0) == pytest.approx(geometry.section("FUS").s2_mm)
    # S-2R is the line next to the keel: 171 degrees from the crown.
    beside = found(geometry, "STA 640 S-2R")
    assert beside.s1_mm == pytest.approx(geometry.section("FUS").s2_mm * 171 / 180)
    below = reads_back(geometry, "STA 640, 2 in below S-12R")
    assert below.canonical == "STA 640, 2 in below S-12R"
    assert (below.s1_mm or 0.0) > (found(geometry, "STA 640 S-12R").s1_mm or 0.0)


# -- words and prefixes -----------------------------------------------------------

LONGERONS = re.sub(r'"S-(\d+[LR])"', r'"LGN \1"', TEXT)
PREFIXES = (
    ('station_words = ["STA", "STN",', 'station_words = ["Y", "STN",'),
    ('prefix = "FR"\nwords = ["FR", "FRAME"]', 'prefix = "SPT"\nwords = ["SPT"]'),
    ('prefix = "S-"\nwords = ["S", "STR",', 'prefix = "LGN "\nwords = ["LGN", "STR",'),
)


@pytest.mark.parametrize(
    ("text", "x", "canonical"),
    [
        ("Y 640 LGN 9L", 640, "Y 640 LGN 9L"),
        ("STA 640+3 LGN-9 LH", 643, "Y 640+3 LGN 9L"),
        ("SPT 31 STR 16L", 700, "Y 700 LGN 16L"),
        ("FR 31 LGN 16L", 700, "Y 700 LGN 16L"),
        ("5 in aft of SPT 20 LGN 9L", 485, "Y 480+5 LGN 9L"),
    ],
)
def test_words_and_prefixes_are_those_of_the_file(
    text: str, x: float, canonical: str
) -> None:
    geometry = altered(*PREFIXES, text=LONGERONS)
    place_read = reads_back(geometry, text)
    assert place_read.x1_mm == pytest.approx(x * INCH)
    assert place_read.canonical == canonical


def test_messages_use_the_prefix_of_the_file() -> None:
    geometry = altered(*PREFIXES, text=LONGERONS)
    for text, message in [
        ("SPT 61 LGN 4L", "SPT 61 is not on this fuselage (1–48)."),
        ("Y 640 LGN 44L", "LGN 44L is not on this fuselage (LGN 1 to LGN 21)."),
        ("Y 640 LGN 12", "LGN 12 has no side. Did you mean LGN 12L or LGN 12R?"),
        ("SPT 39 Y 900 LGN 8L", "SPT 39 stands at Y 860, but Y 900 was read"),
    ]:
        with pytest.raises(LocationRefused) as caught:
            found(geometry, text)
        assert message in caught.value.message


def test_a_word_of_one_type_means_nothing_on_another() -> None:
    assert read("SPT 31 LGN 16L").frames == ()


# -- labels with a letter ---------------------------------------------------------


def test_plug_labels_are_those_of_the_file() -> None:
    geometry = altered(
        ('label = "24A"\nstation = "560A"', 'label = "24I"\nstation = "560I"')
    )
    assert found(geometry, "STA 560I+4 S-9L", "S").x1_mm == pytest.approx(584 * INCH)
    assert found(geometry, "FR 24I S-9L", "S").canonical == "STA 560I S-9L"
    for text in ("STA 560A S-9L", "FR 24A S-9L"):
        with pytest.raises(LocationRefused) as caught:
            found(geometry, text, "S")
        assert caught.value.code == "E_PLUG"


def test_an_i_that_is_no_plug_is_a_one() -> None:
    with pytest.raises(LocationRefused) as caught:
        found(altered(), "STA 64I S-9L")
    assert caught.value.code == "E_NUM_LETTER"
    assert [o.text for o in caught.value.offers] == ["641"]


# -- a surface without spars ------------------------------------------------------


def test_without_spars_the_chord_is_written_in_per_cent() -> None:
    start = TEXT.index('[[sections.planes]]\nlabel = "FRONT SPAR"')
    end = TEXT.index("[[sections.panel_grids]]", start)
    geometry = geometry_from_toml(TEXT[:start] + TEXT[end:])
    text = text_at(
        geometry, "base", "WING-L", along=(2540.0, 2540.0), across=(508.0, 1016.0)
    )
    # 20 in and 40 in of a chord of 110 in.
    assert text == "LH wing WS 100 18.1818 % chord to 36.3636 % chord"
    again = found(geometry, text)
    assert (again.s1_mm, again.s2_mm) == pytest.approx((508.0, 1016.0), abs=0.05)
    assert again.canonical == text
