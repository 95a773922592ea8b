"""Canonical text reads back to the same place, whatever was written."""

from __future__ import annotations

from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from fleet.location import LocationRefused, Place, place, read
from fleet.location.geometry import geometry_from_toml

FILE = Path(__file__).parents[2] / "fixtures" / "ard52.toml"
GEOMETRY = geometry_from_toml(FILE.read_text())
CLOSE_MM = 0.05  # three decimals of an inch, at both ends of a range


@pytest.mark.parametrize(
    ("text", "canonical"),
    [
        ("sta 420 + 12 str 17 lh", "STA 420+12 S-17L"),
        ("FR 17-18 between STR 12 & 13 LH", "STA 420-440 S-12L to S-13L"),
        ("BS 640 RBL 40 WL 190", "STA 640 S-6R"),
        ("FR 31 4 o'clock", "STA 700, 2.932 in below S-14R"),
        ("STA 600 S-9R", "STA 600 S-9R"),
        ("12 in aft of FR 20, S-9R", "STA 480+12 S-9R"),
        ("LH WING RIB 9 UPPER SKIN", "LH wing WS 180 upper skin"),
        (
            "aft of rear spar, RH wing lower skin WS 342",
            "RH wing WS 342 lower skin aft of rear spar",
        ),
        ("fin sta 88 left", "FIN STA 88 LH"),
        ("12 in aft of door 2L forward frame", "12 in aft of door 2L fwd frame"),
        ("fr 31 web s16l", "FR 31 WEB S-16L"),
        ("floor beam bs 620 rbl 20", "FLOOR BEAM STA 620 RBL 20"),
        ("seat track lbl 12 sta 500-520", "SEAT TRACK STA 500-520 LBL 12"),
        ("keel beam sta 640 left", "KEEL BEAM STA 640 LH"),
        (
            "aft pressure bulkhead rbl 15 wl 170",
            "AFT PRESSURE BLKHD STA 1000 RBL 15 WL 170",
        ),
        ("STA 640 S-3L to S-2R", "STA 640 S-3L to S-2R"),
        ("STA 640 2 in above S-2R", "STA 640, 2 in above S-2R"),
        (
            "STA 640, 2 in below S-7R to 1 in above S-9R",
            "STA 640, 2 in below S-7R to 7.796 in below S-8R",
        ),
        ("inner skin STA 640 S-9R", "STA 640 inner surface S-9R"),
    ],
)
def test_canonical_text(text: str, canonical: str) -> None:
    assert place(read(text), GEOMETRY, "base").canonical == canonical


def same(one: Place, other: Place) -> None:
    """The same place, to what three decimals of an inch can tell."""
    for name in ("section", "surface", "element", "element_label", "side"):
        assert getattr(one, name) == getattr(other, name), name
    for name in ("x1_mm", "x2_mm", "s1_mm", "s2_mm", "bl_mm", "wl_mm"):
        mine, its = getattr(one, name), getattr(other, name)
        assert (mine is None) == (its is None), name
        if mine is not None:
            assert mine == pytest.approx(its, abs=CLOSE_MM), name


def reads_back(text: str, variant: str) -> None:
    try:
        found = place(read(text), GEOMETRY, variant)
    except LocationRefused:
        return
    again = place(read(found.canonical), GEOMETRY, variant)
    same(found, again)
    assert again.canonical == found.canonical


lengths = st.one_of(
    st.integers(1, 19).map(str),
    st.decimals("0.01", "19.9", places=2).map(str),
    st.sampled_from(["3/4", "1 1/2", ".5"]),
)
units = st.sampled_from([" in", '"', " mm", ""])
stations = st.one_of(
    st.integers(60, 1060).map(lambda n: f"STA {n}"),
    st.decimals("60", "1060", places=1).map(lambda n: f"STA {n}"),
    st.tuples(st.integers(5, 52), lengths, units).map(
        lambda t: f"STA {t[0] * 20}+{t[1]}{t[2]}"
    ),
    st.integers(1, 48).map(lambda n: f"FR {n}"),
    st.tuples(lengths, st.sampled_from(["aft", "fwd"]), st.integers(2, 47)).map(
        lambda t: f"{t[0]} in {t[1]} of FR {t[2]}"
    ),
    st.tuples(st.integers(60, 700), st.integers(1, 300)).map(
        lambda t: f"STA {t[0]} to {t[0] + t[1]}"
    ),
    st.sampled_from(["STA 560A", "STA 560B", "STA 560A+7", "STA 560+19", "FR 24B"]),
)
lines = st.one_of(
    st.sampled_from(["S-1", "S-21"]),
    st.tuples(st.integers(2, 20), st.sampled_from("LR")).map(
        lambda t: f"S-{t[0]}{t[1]}"
    ),
)
across = st.one_of(
    st.just(""),
    lines,
    st.tuples(lines, lines).map(lambda t: f"{t[0]} to {t[1]}"),
    st.tuples(lengths, st.sampled_from(["above", "below"]), lines).map(
        lambda t: f"{t[0]} in {t[1]} {t[2]}"
    ),
    st.tuples(st.integers(1, 12), st.integers(0, 59)).map(
        lambda t: f"{t[0]}:{t[1]:02d} o'clock"
    ),
    st.tuples(st.sampled_from("LR"), st.integers(0, 58), st.integers(90, 210)).map(
        lambda t: f"{t[0]}BL {t[1]} WL {t[2]}"
    ),
    st.tuples(st.integers(94, 206), st.sampled_from(["LH", "RH"])).map(
        lambda t: f"WL {t[0]} {t[1]}"
    ),
)
elements = st.sampled_from(
    ["", "", "", "FLOOR BEAM ", "SEAT TRACK ", "KEEL BEAM ", "SHEAR CLIP ",
     "FRAME WEB ", "FRAME CAP ", "AFT PRESSURE BLKHD "]
)  # fmt: skip


def test_webs_over_several_frames_keep_their_extent():
    reads_back("FRAME WEB STA 574 to 746", "base")
    found = place(read("FRAME WEB STA 574 to 746"), GEOMETRY, "base")
    again = place(read(found.canonical), GEOMETRY, "base")
    assert again.x2_mm - again.x1_mm == pytest.approx((746 - 574) * 25.4)


@settings(max_examples=400, deadline=None)
@given(elements, stations, across, st.sampled_from(["base", "S"]))
def test_fuselage_text_reads_back(
    element: str, station: str, line: str, variant: str
) -> None:
    reads_back(f"{element}{station} {line}", variant)


@settings(max_examples=200, deadline=None)
@given(
    st.sampled_from(["LH wing WS", "RH wing WS", "LH hstab HS", "RH hstab HS"]),
    st.decimals("0", "480", places=1),
    st.sampled_from(["", "upper skin", "lower skin"]),
    st.one_of(
        st.just(""),
        st.integers(1, 8).map(lambda n: f"S-{n}"),
        st.sampled_from(["front spar", "aft of rear spar", "fwd of front spar"]),
        lengths.map(lambda n: f"{n} in aft of front spar"),
        lengths.map(lambda n: f"{n} in fwd of rear spar"),
    ),
)
def test_wing_and_tail_text_reads_back(
    section: str, station: object, surface: str, line: str
) -> None:
    reads_back(f"{section} {station} {surface} {line}", "base")


@settings(max_examples=100, deadline=None)
@given(
    st.decimals("0", "150", places=1),
    st.sampled_from(["LH", "RH"]),
    st.sampled_from(["", "rear spar", "aft of rear spar", "2 in aft of front spar"]),
)
def test_fin_text_reads_back(station: object, side: str, line: str) -> None:
    reads_back(f"FIN STA {station} {side} {line}", "base")


@settings(max_examples=100, deadline=None)
@given(
    st.sampled_from(["1", "2"]),
    st.integers(0, 140),
    st.tuples(st.integers(1, 12), st.integers(0, 59)),
)
def test_nacelle_text_reads_back(
    number: str, station: int, clock: tuple[int, int]
) -> None:
    reads_back(
        f"nacelle {number} NS {station} {clock[0]}:{clock[1]:02d} o'clock", "base"
    )


@settings(max_examples=100, deadline=None)
@given(
    st.sampled_from(["door 1L", "door 2R", "aft cargo door", "2L door"]),
    lengths,
    st.sampled_from(["aft", "fwd"]),
    st.sampled_from(["", " fwd frame", " aft edge"]),
    st.sampled_from(["base", "S"]),
)
def test_door_text_reads_back(
    door: str, length: str, way: str, edge: str, variant: str
) -> None:
    reads_back(f"{length} in {way} of {door}{edge}", variant)
