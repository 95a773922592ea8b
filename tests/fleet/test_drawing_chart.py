"""The line chart: what it decides, what it draws and what it refuses."""

from __future__ import annotations

import re
from xml.etree import ElementTree

import pytest

from fleet.drawing import svg
from fleet.drawing.chart import (
    HEIGHT,
    WIDTH,
    Chart,
    Level,
    Point,
    Series,
    chart_svg,
    nice_axis,
)

SVG = "{http://www.w3.org/2000/svg}"


def strength_chart(**changes: object) -> Chart:
    content = {
        "title": "Residual strength",
        "x_label": "crack length 2a, mm",
        "y_label": "strength, MPa",
        "series": [
            Series("residual strength", (2.0, 60.0, 300.0), (290.0, 250.0, 40.0))
        ],
        "levels": [
            Level(120.2, "ultimate 120 MPa"),
            Level(68.5, "residual 68", soft=True),
        ],
        "point": Point(24.0, 276.0, "now 24 mm"),
    }
    return Chart(**(content | changes))  # type: ignore[arg-type]


@pytest.mark.parametrize(
    ("low", "high", "ticks"),
    [
        # Worked by hand: the smallest of 1, 2, 2.5, 5, 10 times a power of ten that
        # cuts the span into at most five intervals before rounding outwards.
        (2, 300, (0, 100, 200, 300)),
        (0, 8.2, (0, 2, 4, 6, 8, 10)),
        (0, 0.47, (0, 0.1, 0.2, 0.3, 0.4, 0.5)),
        (21_200, 32_127, (20_000, 22_500, 25_000, 27_500, 30_000, 32_500)),
        (-3, 7, (-4, -2, 0, 2, 4, 6, 8)),
    ],
)
def test_ticks_are_round_and_cover_the_values(low, high, ticks):
    axis = nice_axis(low, high)
    assert axis.ticks == pytest.approx(ticks)
    assert axis.low <= low
    assert high <= axis.high


def test_a_single_value_still_gets_an_axis():
    axis = nice_axis(7.0, 7.0)
    assert axis.low < 7.0 < axis.high


@pytest.mark.parametrize(
    ("low", "high", "figures"),
    [
        (0, 0.47, ["0.0", "0.1", "0.2", "0.3", "0.4", "0.5"]),
        (0, 1.2, ["0.00", "0.25", "0.50", "0.75", "1.00", "1.25"]),
        (0, 69_500, ["0", "20,000", "40,000", "60,000", "80,000"]),
    ],
)
def test_all_figures_of_an_axis_have_the_same_decimals(low, high, figures):
    axis = nice_axis(low, high)
    assert [axis.label(tick) for tick in axis.ticks] == figures


def test_the_axes_cover_reference_lines_and_the_marked_point():
    chart = strength_chart(levels=[Level(500.0, "high")], point=Point(410.0, 10.0, "p"))
    assert chart.y_axis.high >= 500.0
    assert chart.x_axis.high >= 410.0


def test_values_land_where_the_axis_says():
    chart = strength_chart()
    assert chart.at(chart.x_axis.low, chart.y_axis.low) == pytest.approx(
        (chart.plot.left, chart.plot.bottom)
    )
    assert chart.at(chart.x_axis.high, chart.y_axis.high) == pytest.approx(
        (chart.plot.right, chart.plot.top)
    )


def test_the_drawing_is_named_described_and_styled_by_classes_only():
    drawing = chart_svg(strength_chart(title="Strength <MPa> & length"))
    element = ElementTree.fromstring(drawing)
    assert element.get("role") == "img"
    assert element.findtext("title") == "Strength <MPa> & length"
    described = element.findtext("desc") or ""
    assert "now 24 mm: 276 at 24" in described
    assert "ultimate 120 MPa: 120.2" in described
    assert "style" not in drawing
    assert not re.search(r"\b(fill|stroke|font-size|onclick)=", drawing)


def labels_of(chart: Chart) -> list[svg.Label]:
    element = ElementTree.fromstring(chart_svg(chart))
    return [
        svg.Label(
            node.text or "",
            float(node.get("x", "nan")),
            float(node.get("y", "nan")),
            node.get("text-anchor", "start"),
        )
        for node in element.iter("text")
        if node.get("transform") is None
    ]


@pytest.mark.parametrize(
    "chart",
    [
        strength_chart(),
        strength_chart(point=Point(299.0, 42.0, "now 299 mm, at the very end")),
        strength_chart(
            levels=[Level(100.0, "one level"), Level(101.0, "its neighbour")]
        ),
        strength_chart(
            series=[
                Series("before", (0.0, 1e6), (0.0, 9.9e8)),
                Series("after", (0.0, 1e6), (9.9e8, 0.0)),
            ],
            levels=[],
            point=None,
        ),
    ],
)
def test_no_label_leaves_the_drawing_or_covers_another(chart):
    labels = labels_of(chart)
    page = svg.Box(0, 0, WIDTH, HEIGHT)
    assert all(label.box.inside(page) for label in labels)
    for number, label in enumerate(labels):
        for other in labels[number + 1 :]:
            assert not label.box.meets(other.box), (label, other)


def test_reference_words_keep_off_the_curve_that_rises_at_the_right():
    growth = Chart(
        title="Growth",
        x_label="flight cycles from now",
        y_label="crack length 2a, mm",
        series=[Series("growth", (0, 60_000, 69_000, 69_500), (24, 60, 150, 280))],
        levels=[Level(191, "residual strength lost, 191 mm")],
    )
    (words,) = [la for la in labels_of(growth) if la.words.startswith("residual")]
    assert not words.box.crossed_by(growth.curves[0])


def test_a_point_at_the_top_of_a_falling_curve_is_named_off_the_curve():
    chart = strength_chart(
        series=[Series("strength", (15, 50, 150, 460), (300, 270, 100, 25))],
        point=Point(29.7, 290.0, "29.7 mm"),
    )
    (words,) = [la for la in labels_of(chart) if la.words == "29.7 mm"]
    assert not words.box.crossed_by(chart.curves[0])


def test_a_long_title_of_the_upright_axis_stands_in_two_lines():
    long = "residual strength, gross, on the thickness left by the blend, MPa"
    chart = strength_chart(y_label=long)
    assert " ".join(chart.y_words) == long
    assert len(chart.y_words) == 2
    assert all(svg.text_width(words) < HEIGHT for words in chart.y_words)
    assert chart.plot.left > strength_chart().plot.left
    assert strength_chart().y_words == ["strength, MPa"]


def test_several_curves_are_told_apart_by_class_and_by_name():
    chart = strength_chart(
        series=[Series("before", (0, 10), (5, 6)), Series("after", (0, 10), (2, 3))]
    )
    drawing = chart_svg(chart)
    assert 'class="c1"' in drawing
    assert 'class="c2"' in drawing
    assert {"before", "after"} <= {label.words for label in labels_of(chart)}


@pytest.mark.parametrize("bad", [float("nan"), float("inf"), float("-inf")])
def test_a_value_that_is_no_number_is_refused_with_its_place(bad):
    with pytest.raises(ValueError, match=r"Residual strength.*now 24 mm|marked point"):
        strength_chart(point=Point(24.0, bad, "now 24 mm"))
    with pytest.raises(ValueError, match="residual strength"):
        strength_chart(series=[Series("residual strength", (1.0, bad), (1.0, 2.0))])
    with pytest.raises(ValueError, match="ultimate"):
        strength_chart(levels=[Level(bad, "ultimate")])


def test_unequal_or_missing_points_are_refused():
    with pytest.raises(ValueError, match="3 x values and 2 y values"):
        strength_chart(series=[Series("s", (1, 2, 3), (1, 2))])
    with pytest.raises(ValueError, match="no points"):
        strength_chart(series=[])


@pytest.mark.parametrize(
    ("segment", "crossed"),
    [
        (((0, 0), (10, 10)), True),
        (((0, 5), (10, 5)), True),
        (((5, 0), (5, 10)), True),
        (((0, 0), (3, 0)), False),
        (((0, 7), (3, 10)), False),
        (((4.5, 4.5), (5.5, 5.5)), True),
    ],
)
def test_a_box_knows_the_lines_that_cross_it(segment, crossed):
    assert svg.Box(4, 4, 6, 6).crossed_by(segment) is crossed


def test_attributes_are_escaped_and_coordinates_short():
    element = svg.tag("a", svg.text("<b>"), href='/x?a="1"&b=2', x=-0.04, y=2.25)
    assert element == (
        '<a href="/x?a=&quot;1&quot;&amp;b=2" x="0" y="2.2">&lt;b&gt;</a>'
    )
