"""The structure map of the demonstration type: true, legible, linked, in grey."""

from __future__ import annotations

import itertools
import math
import random
from pathlib import Path
from xml.etree import ElementTree

import pytest

from fleet.drawing.sheet import Sheet, Window
from fleet.drawing.structure_map import (
    MapMark,
    MapRepair,
    StructureMap,
    structure_map_svg,
)
from fleet.drawing.svg import Box, Label
from fleet.drawing.symbols import LEAST, MOST, SYMBOLS, symbol
from fleet.location.geometry import geometry_from_toml

FIXTURE = Path(__file__).parents[2] / "fixtures" / "ard52.toml"
INCH = 25.4
BAY = math.radians(9) * 56 * INCH
"""One stringer bay of the fuselage at its reference radius."""


@pytest.fixture(scope="module")
def geometry():
    return geometry_from_toml(FIXTURE.read_text(encoding="utf-8"))


@pytest.fixture(scope="module")
def fuselage(geometry):
    return geometry.section("FUS")


def mark(label="F-0001", kind="dent", along=700.0, across=5.0, size=0.0, **changes):
    a, s = along * INCH, across * BAY
    content = {
        "label": label,
        "kind": kind,
        "kind_words": kind,
        "title": f"{label} {kind}, reported",
        "href": f"/findings/{label}/",
        "along": (a - size / 2, a + size / 2),
        "across": (s - size / 2, s + size / 2),
    }
    return MapMark(**(content | changes))


def repair(label="R-0001", along=(600.0, 640.0), across=(8.0, 10.0)):
    return MapRepair(
        label=label,
        title=f"{label} doubler",
        href=f"/repairs/{label}/",
        along=(along[0] * INCH, along[1] * INCH),
        across=(across[0] * BAY, across[1] * BAY),
    )


def draw(sheet, marks=(), repairs=()):
    drawing = structure_map_svg(StructureMap("map", sheet, "in", marks, repairs))
    return ElementTree.fromstring(drawing)


def of_class(element, class_):
    return [
        node for node in element.iter() if class_ in (node.get("class") or "").split()
    ]


def labels(element):
    return [
        Label(
            node.text,
            float(node.get("x")),
            float(node.get("y")),
            node.get("text-anchor", "start"),
        )
        for node in element.iter("text")
    ]


# -- seen from outside ---------------------------------------------------------------


def fuselage_directions(s_mm):
    """Unit vectors (aft, right, up) of growing x and s, and the outward normal."""
    angle = s_mm / (56 * INCH)
    along = (1.0, 0.0, 0.0)
    across = (0.0, math.cos(angle), -math.sin(angle))
    return along, across, (0.0, math.sin(angle), math.cos(angle))


def cross(a, b):
    return (
        a[1] * b[2] - a[2] * b[1],
        a[2] * b[0] - a[0] * b[2],
        a[0] * b[1] - a[1] * b[0],
    )


def towards_viewer(sheet, along, across):
    """Right crossed with up on paper: the direction from the structure to the eye."""
    shown = sheet.shown
    rightward = 1 if sheet.x(shown.along2_mm) > sheet.x(shown.along1_mm) else -1
    middle = (shown.along1_mm + shown.along2_mm) / 2
    up = sheet.y(shown.across2_mm, middle) < sheet.y(shown.across1_mm, middle)
    upward = 1 if up else -1
    normal = cross(along, across)
    return tuple(rightward * upward * part for part in normal)


@pytest.mark.parametrize(
    ("low", "high"), [(-20, 20), (2, 15), (-15, -2), (-5, 5), (17, 26)]
)
def test_a_shell_is_always_seen_from_outside(fuselage, low, high):
    window = Window(500 * INCH, 700 * INCH, low * BAY, high * BAY)
    sheet = Sheet(fuselage, "base", window=window)
    along, across, outward = fuselage_directions((low + high) / 2 * BAY)
    assert towards_viewer(sheet, along, across) == pytest.approx(outward)


@pytest.mark.parametrize(
    ("code", "skin", "along", "across", "outward"),
    [
        # Axes (aft, right, up): along is outboard or up, across is aft of the front.
        ("WING-R", "upper", (0, 1, 0), (1, 0, 0), (0, 0, 1)),
        ("WING-R", "lower", (0, 1, 0), (1, 0, 0), (0, 0, -1)),
        ("WING-L", "upper", (0, -1, 0), (1, 0, 0), (0, 0, 1)),
        ("WING-L", "lower", (0, -1, 0), (1, 0, 0), (0, 0, -1)),
        ("FIN", "", (0, 0, 1), (1, 0, 0), (0, 1, 0)),
    ],
)
def test_a_surface_is_always_seen_from_outside(
    geometry, code, skin, along, across, outward
):
    sheet = Sheet(geometry.section(code), "base", skin=skin)
    assert towards_viewer(sheet, along, across) == pytest.approx(outward)


def test_who_stands_at_either_side_sees_the_crown_above_and_reads_where_the_nose_is(
    fuselage,
):
    for low, high, nose in ((2, 15, "right"), (-15, -2, "left")):
        window = Window(500 * INCH, 700 * INCH, low * BAY, high * BAY)
        sheet = Sheet(fuselage, "base", window=window)
        near_crown = min(low * BAY, high * BAY, key=abs)
        assert sheet.y(near_crown, 600 * INCH) == pytest.approx(sheet.plot.top)
        described = draw(sheet).findtext("desc")
        assert f"nose to the {nose}, crown up" in described


# -- true to scale --------------------------------------------------------------------


def test_a_finding_at_a_frame_and_a_stringer_lies_on_their_crossing(fuselage):
    sheet = Sheet(fuselage, "base")
    frame = fuselage.frame("31").x_mm("base")
    line = fuselage.stringer("S-6R").s_mm
    drawn = draw(sheet, [mark(along=frame / INCH, across=line / BAY)])
    disc = next(drawn.iter("ellipse"))
    (x, _), (_, _) = sheet.line_across(frame)
    (_, y), *_ = sheet.line_along(line)
    assert float(disc.get("cx")) == pytest.approx(x, abs=0.06)
    assert float(disc.get("cy")) == pytest.approx(y, abs=0.06)


def test_sizes_are_to_scale_down_to_the_least_mark(fuselage):
    window = Window(600 * INCH, 700 * INCH, 2 * BAY, 9 * BAY)
    sheet = Sheet(fuselage, "base", window=window)
    for size in (1.0, 60.0):
        drawn = draw(sheet, [mark(along=650, size=size)])
        disc = next(drawn.iter("ellipse"))
        expected = max(size / 2 * sheet.scale, LEAST)
        assert float(disc.get("rx")) == pytest.approx(expected, abs=0.06)
        assert float(disc.get("ry")) == pytest.approx(expected, abs=0.06)
        assert not of_class(drawn, "extent")


def test_a_large_extent_gets_an_outline_of_its_true_size(fuselage):
    window = Window(600 * INCH, 700 * INCH, 2 * BAY, 9 * BAY)
    sheet = Sheet(fuselage, "base", window=window)
    drawn = draw(sheet, [mark(along=650, size=300.0)])
    outline = of_class(drawn, "extent")[0]
    assert float(outline.get("width")) == pytest.approx(300 * sheet.scale, abs=0.06)
    assert float(next(drawn.iter("ellipse")).get("rx")) == MOST


def test_the_scale_bar_is_as_long_as_it_says(fuselage):
    sheet = Sheet(fuselage, "base")
    drawn = draw(sheet)
    bar = of_class(drawn, "scale")[0].get("d")
    long = float(bar.split("h")[1].split()[0])
    says = next(la.words for la in labels(drawn) if la.words.endswith(" in"))
    assert long == pytest.approx(
        float(says.removesuffix(" in")) * INCH * sheet.scale, abs=0.06
    )


def test_one_scale_holds_both_ways_and_a_wing_narrows_with_its_chord(geometry):
    sheet = Sheet(geometry.section("WING-R"), "base", skin="upper")
    for station, chord in ((0, 110), (480, 45)):
        (_, top), (_, bottom) = sheet.line_across(station * INCH)
        assert abs(bottom - top) == pytest.approx(chord * INCH * sheet.scale)


# -- variants and wrapping ------------------------------------------------------------


def test_a_variant_shows_its_own_frames_and_the_map_axis_shows_all(fuselage):
    def names(variant):
        window = Window(540 * INCH, 640 * INCH, 0.0, 8 * BAY)
        return [name for name, _, _ in Sheet(fuselage, variant, window=window).frames]

    assert "FR 24A" not in names("base")
    assert {"FR 24A", "FR 24B"} <= set(names("S"))
    assert {"FR 24A", "FR 24B"} <= set(names(None))


def test_structure_aft_of_the_plug_stands_at_its_true_distance(fuselage):
    """The butt joint at STA 700 is 740 in from the datum on the stretched variant."""
    for variant, place in (("base", 700 * INCH), ("S", 740 * INCH)):
        sheet = Sheet(fuselage, variant)
        xs = [float(node.get("x1")) for node in of_class(draw(sheet), "joint")]
        assert any(x == pytest.approx(sheet.x(place), abs=0.06) for x in xs)


def test_what_crosses_the_keel_is_drawn_on_both_sides_of_the_cut(fuselage):
    across = (19 * BAY, 21 * BAY)
    item = mark(across=20.0)
    item = MapMark(**{**item.__dict__, "across": across})
    assert (
        len(StructureMap("m", Sheet(fuselage, "base"), "in", [item]).drawn_marks) == 2
    )
    window = Window(650 * INCH, 750 * INCH, 17 * BAY, 25 * BAY)
    keel = Sheet(fuselage, "base", window=window)
    assert len(StructureMap("m", keel, "in", [item]).drawn_marks) == 1


def test_a_left_hand_finding_shows_in_a_window_over_the_keel(fuselage):
    window = Window(650 * INCH, 750 * INCH, 17 * BAY, 25 * BAY)
    sheet = Sheet(fuselage, "base", window=window)
    shown = StructureMap("m", sheet, "in", [mark(across=-18.0)]).drawn_marks
    assert len(shown) == 1
    elsewhere = StructureMap("m", sheet, "in", [mark(across=-5.0)]).drawn_marks
    assert elsewhere == []


def test_a_finding_with_no_place_across_is_named_and_not_drawn(fuselage):
    drawn = draw(Sheet(fuselage, "base"), [mark("F-0040", across=0.0)], [])
    assert "F-0040" not in drawn.findtext("desc")
    vague = MapMark(**{**mark("F-0040").__dict__, "across": None})
    drawn = draw(Sheet(fuselage, "base"), [vague])
    assert "not drawn: F-0040" in drawn.findtext("desc")
    assert of_class(drawn, "finding-item") == []


# -- legible, linked, in grey ----------------------------------------------------------


def test_every_mark_has_a_shape_of_its_own():
    shapes = {kind: symbol(kind, 0.0, 0.0) for kind in SYMBOLS}
    assert len(set(shapes.values())) == len(SYMBOLS)


def test_an_unknown_damage_type_is_refused_with_the_known_ones():
    with pytest.raises(ValueError, match=r"“rust”; known are bird_strike.*symbols\.py"):
        symbol("rust", 0.0, 0.0)


def test_items_are_links_named_by_their_titles(fuselage):
    drawn = draw(Sheet(fuselage, "base"), [mark()], [repair()])
    assert drawn.get("role") == "group"
    assert drawn.get("aria-label") == "map"
    links = {node.get("href"): node for node in drawn.iter("a")}
    assert set(links) == {"/findings/F-0001/", "/repairs/R-0001/"}
    one = links["/findings/F-0001/"]
    assert one.findtext("title") == one.get("aria-label") == "F-0001 dent, reported"


def test_a_title_cannot_break_out_of_the_drawing(fuselage):
    nasty = mark(title='"><script>alert(1)</script>')
    text = structure_map_svg(StructureMap("<&>", Sheet(fuselage), "in", [nasty]))
    assert "<script" not in text
    assert ElementTree.fromstring(text).get("aria-label") == "<&>"


def test_the_look_comes_from_classes_only(fuselage):
    text = structure_map_svg(
        StructureMap("m", Sheet(fuselage), "in", [mark()], [repair()])
    )
    for word in ("style", "onclick", "fill=", "stroke="):
        assert word not in text


def test_repairs_are_double_outlines(fuselage):
    drawn = draw(Sheet(fuselage, "base"), [], [repair()])
    (link,) = of_class(drawn, "repair-item")
    outer, inner = of_class(link, "repair")
    assert float(outer.get("width")) - float(inner.get("width")) == pytest.approx(
        5.0, abs=0.11
    )


def test_the_legend_lists_what_is_shown_and_nothing_else(geometry, fuselage):
    words = {la.words for la in labels(draw(Sheet(fuselage), [mark(kind="crack")]))}
    assert {"crack", "cut-out", "joint"} <= words
    assert "dent" not in words
    assert "repair" not in words
    wing = Sheet(geometry.section("WING-R"), "base", skin="upper")
    words = {la.words for la in labels(draw(wing))}
    assert words.isdisjoint({"cut-out", "joint", "crack"})


@pytest.mark.parametrize(
    ("code", "skin"),
    [("FUS", ""), ("WING-L", "upper"), ("FIN", ""), ("NAC-1", ""), ("DOOR-CARGO", "")],
)
def test_names_never_cover_each_other_or_leave_the_paper(geometry, code, skin):
    section = geometry.section(code)
    sheet = Sheet(section, "base", skin=skin)
    shown, chance = sheet.shown, random.Random(code)
    marks = [
        mark(
            f"F-{n:04d}",
            kind,
            chance.uniform(shown.along1_mm, shown.along2_mm) / INCH,
            chance.uniform(shown.across1_mm, shown.across2_mm) / BAY,
            focus=n == 3,
        )
        for n, kind in enumerate(itertools.islice(itertools.cycle(SYMBOLS), 60))
    ]
    drawn = draw(sheet, marks)
    width, height = map(float, drawn.get("viewBox").split()[2:])
    page = Box(0, 0, width, height)
    found = labels(drawn)
    for label in found:
        assert label.box.inside(page), label
    for one, other in itertools.combinations(found, 2):
        assert not one.box.meets(other.box), (one, other)
    assert any(label.words == "F-0003" for label in found)


def test_the_datum_the_view_and_both_sides_are_written_out(fuselage):
    words = " | ".join(la.words for la in labels(draw(Sheet(fuselage, "base"))))
    for part in (
        "datum 60 in ahead of the nose",
        "seen from outside",
        "crown",
        "keel",
        "LH",
        "RH",
        "FWD",
        "true across at radius 56 in",
    ):
        assert part in words
