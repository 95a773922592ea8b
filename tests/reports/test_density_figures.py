"""The density map drawn: what is decided, as SVG and on paper."""

from __future__ import annotations

from pathlib import Path
from xml.etree import ElementTree

import numpy as np
import pytest

from fleet.drawing.sheet import Sheet
from fleet.location.geometry import geometry_from_toml
from reports.density import CYCLES, NO_EXPOSURE, NONE_FOUND, Density, tally
from reports.figures.density_map import (
    DensityFigure,
    density_svg,
    rate_words,
    spot_boxes,
    swatch,
)
from reports.figures.density_plot import HATCH_FEW, HATCH_NO_EXPOSURE, density_plot
from reports.hot_spots import Window
from reports.lattice import lattice_of

FIXTURE = Path(__file__).parents[2] / "fixtures" / "ard52.toml"


@pytest.fixture(scope="module")
def geometry():
    return geometry_from_toml(FIXTURE.read_text(encoding="utf-8"))


@pytest.fixture(scope="module")
def fuselage(geometry):
    return geometry.section("FUS")


def figure_of(section, found, *, flown=None, **changes):
    """A map with so many found in cells named by frame and stringer."""
    lattice = lattice_of(section, ["base", "S"])
    rows = [
        (2 * list(lattice.frames).index(f), 2 * list(lattice.stringers).index(s), n)
        for f, s, n in found
    ]
    seen = tally(lattice, rows)
    flown = flown if flown is not None else {"base": 50_000.0, "S": 20_000.0}
    density = Density(lattice, seen.counts, lattice.exposure(flown), CYCLES)
    return DensityFigure("map", Sheet(section), "in", density, **changes)


def index(figure, frame, stringer):
    lattice = figure.density.lattice
    return list(lattice.frames).index(frame), list(lattice.stringers).index(stringer)


def parsed(figure):
    return ElementTree.fromstring(density_svg(figure))


def of_class(element, class_):
    return [node for node in element.iter() if node.get("class") == class_]


def test_no_exposure_is_drawn_and_explained_unlike_none_found(fuselage):
    """Only base aircraft flew: the cell about FR 24A had no exposure."""
    figure = figure_of(fuselage, [("FR 30", "S-7R", 2)], flown={"base": 1000.0})
    assert figure.classes[index(figure, "FR 24A", "S-7R")] == NO_EXPOSURE
    assert figure.classes[index(figure, "FR 31", "S-7R")] == NONE_FOUND
    words = dict(figure.legend())
    assert words["dx"] == "no exposure"
    assert words["d0"] == "none found"
    drawn = parsed(figure)
    assert len(of_class(drawn, "dx")) == 1
    assert len(of_class(drawn, "cross")) == 1
    everywhere = figure_of(fuselage, [("FR 30", "S-7R", 2)])
    assert "dx" not in dict(everywhere.legend())
    assert of_class(parsed(everywhere), "dx") == []


def test_a_cell_tells_its_count_exposure_rate_and_limits(fuselage):
    """3 found in 0.1135 m² over 70,000 FC; limits 0.6187 and 8.7673 (Garwood 1936)."""
    figure = figure_of(fuselage, [("FR 30", "S-7R", 3)])
    words = figure.cell_words(*index(figure, "FR 30", "S-7R"))
    exposure = 0.113502 * 70
    low, rate, high = (n / exposure for n in (0.6187, 3, 8.7673))
    assert words == (
        f"FR 30, S-7R: 3 found in {exposure:.3g} m² × 1,000 FC; {rate:.2f} "
        f"(95 % {low:.3f} to {high:.1f}) findings per m² and 1,000 FC"
    )
    assert words in density_svg(figure)


def test_a_cell_lies_about_its_frame_and_stringer(fuselage):
    figure = figure_of(fuselage, [])
    where = index(figure, "FR 12", "S-7R")
    (cell,) = [c for c in figure.cells if (c.along, c.around) == where]
    (box,) = cell.parts
    frame, line = fuselage.frame("12").map_mm, fuselage.stringer("S-7R").s_mm
    assert (box.left + box.right) / 2 == pytest.approx(figure.sheet.x(frame))
    assert (box.top + box.bottom) / 2 == pytest.approx(figure.sheet.y(line, frame))


def test_the_keel_cells_are_drawn_half_at_either_edge(fuselage):
    figure = figure_of(fuselage, [("FR 20", "S-21", 1)])
    where = index(figure, "FR 20", "S-21")
    (cell,) = [c for c in figure.cells if (c.along, c.around) == where]
    upper, lower = sorted(cell.parts, key=lambda box: box.top)
    assert upper.top == pytest.approx(figure.sheet.plot.top)
    assert lower.bottom == pytest.approx(figure.sheet.plot.bottom)
    heights = [box.bottom - box.top for box in (upper, lower)]
    assert heights[0] == pytest.approx(heights[1])


def test_cells_within_a_door_are_not_drawn(fuselage):
    door = next(c for c in fuselage.cutouts if c.kind == "cargo_door").box
    figure = figure_of(fuselage, [])
    middle = (door.map1_mm + door.map2_mm) / 2, (door.s1_mm + door.s2_mm) / 2
    x, y = figure.sheet.x(middle[0]), figure.sheet.y(middle[1], middle[0])
    assert not [
        box
        for cell in figure.cells
        for box in cell.parts
        if box.left < x < box.right and box.top < y < box.bottom
    ]


def test_a_hot_spot_past_the_cut_gets_two_outlines(fuselage):
    window = Window(along=20, around=19, frames=2, stringers=3)
    figure = figure_of(fuselage, [], spots=[("A", window)])
    assert len(spot_boxes(figure, window)) == 2
    drawn = parsed(figure)
    assert len(of_class(drawn, "spot")) == 2
    whole = Window(along=20, around=5, frames=2, stringers=3)
    (box,) = spot_boxes(figure_of(fuselage, []), whole)
    low, high = fuselage.frame("20").map_mm, fuselage.frame("21").map_mm
    sheet = figure.sheet
    assert box.left == pytest.approx(sheet.x(low - 254))
    assert box.right == pytest.approx(sheet.x(high + 254))


def test_findings_in_no_rate_are_rings_and_no_colour(fuselage):
    figure = figure_of(fuselage, [])
    figure = figure_of(fuselage, [], outside={index(figure, "FR 20", "S-7R"): 2})
    (ring,) = of_class(parsed(figure), "outside")
    assert ring.findtext("title") == "2 found outside the data"
    assert "outside" in dict(figure.legend())
    assert figure.density.counted == 0


def test_small_counts_are_marked_and_said(fuselage):
    few = figure_of(fuselage, [("FR 30", "S-7R", 4)])
    assert "few" in dict(few.legend())
    many = figure_of(fuselage, [("FR 30", "S-7R", 5)])
    assert "few" not in dict(many.legend())
    strokes = [node.get("d") for node in parsed(many).iter() if node.get("d") == ""]
    assert len(strokes) == 2


def test_an_empty_map_explains_no_classes(fuselage):
    assert figure_of(fuselage, []).legend() == [("d0", "none found")]


def test_two_maps_share_their_classes_when_given_the_edges(fuselage):
    one = figure_of(fuselage, [("FR 30", "S-7R", 8), ("FR 31", "S-7R", 1)])
    other = figure_of(fuselage, [("FR 30", "S-7R", 1)], given_edges=one.edges)
    assert other.edges == one.edges
    assert other.classes[index(other, "FR 30", "S-7R")] <= 2


def test_the_drawing_is_one_stop_with_classes_only(fuselage):
    text = density_svg(figure_of(fuselage, [("FR 30", "S-7R", 2)]))
    assert ElementTree.fromstring(text).get("role") == "img"
    for word in ("style", "tabindex", "href", "fill=", "stroke="):
        assert word not in text


def test_a_wing_is_drawn_from_its_own_side(geometry):
    for code, root in (("WING-R", "left"), ("WING-L", "right")):
        section = geometry.section(code)
        figure = figure_of(section, [])
        figure = DensityFigure(
            "wing", Sheet(section, skin="upper"), "in", figure.density
        )
        assert f"root to the {root}" in density_svg(figure)


@pytest.mark.parametrize(
    ("rate", "words"),
    [
        (0, "0"),
        (0.0731, "0.073"),
        (0.3, "0.30"),
        (4.04, "4.0"),
        (73.4, "73"),
        (1234.5, "1,234"),
        (0.00042, "0.00042"),
    ],
)
def test_rates_have_two_figures(rate, words):
    assert rate_words(rate) == words


@pytest.mark.parametrize("name", ["d0", "d3", "dx", "few", "outside"])
def test_legend_pictures_are_hidden_from_readers_who_hear_the_words(name):
    assert ElementTree.fromstring(swatch(name)).get("aria-hidden") == "true"


# -- on paper -------------------------------------------------------------------------


def test_on_paper_every_cell_is_there_with_its_count(fuselage):
    figure = figure_of(
        fuselage, [("FR 30", "S-7R", 7), ("FR 31", "S-8R", 2)], flown={"base": 9000.0}
    )
    drawn = density_plot(figure, ["Exposure: 9,000 FC."])
    (axes,) = drawn.axes
    parts = sum(len(cell.parts) for cell in figure.cells)
    doors = sum(cutout.kind != "window" for cutout in fuselage.cutouts)
    assert len(axes.patches) == parts + doors
    words = [text.get_text() for text in axes.texts]
    assert words.count("7") == 1
    assert words.count("2") == 1
    assert "Exposure: 9,000 FC." in words
    hatches = {patch.get_hatch() for patch in axes.patches}
    assert hatches == {None, HATCH_FEW, HATCH_NO_EXPOSURE}


def test_on_paper_the_legend_names_unit_and_classes(fuselage):
    figure = figure_of(fuselage, [("FR 30", "S-7R", 7), ("FR 31", "S-8R", 2)])
    drawn = density_plot(figure, [])
    (axes,) = drawn.axes
    told = [text.get_text() for text in axes.get_legend().get_texts()]
    assert told == [words for _, words in figure.legend()]
    assert any(
        "smoothed rate, findings per m² and 1,000 FC" in text.get_text()
        for text in axes.texts
    )


def test_paper_goes_from_light_to_dark(fuselage):
    figure = figure_of(fuselage, [("FR 30", "S-7R", 70), ("FR 31", "S-8R", 1)])
    (axes,) = density_plot(figure, []).axes
    shades = [
        np.mean(patch.get_facecolor()[:3])
        for patch in axes.get_legend().get_patches()
        if not patch.get_hatch()
    ]
    assert shades == sorted(shades, reverse=True)
