"""Bars to both sides: what is drawn, where, and that nothing rests on colour."""

from __future__ import annotations

import re
from xml.etree import ElementTree

import pytest

from fleet.drawing.axis import log_axis
from fleet.drawing.bars import NO_ANSWER, Bar, Bars, bars_svg
from fleet.drawing.chart import Chart, Series, Upright, chart_svg

ROWS = (
    Bar("shell radius", "±10 %", 3.2, 2.4, "+3.20", "+2.40"),
    Bar("skin thickness", "±0.05 mm", 2.5, 3.0, "+2.50", "+3.00"),
    Bar("crack length", "±10 %", 2.9, None, "+2.90"),
)
BARS = Bars("Margin", 2.74, "Margin +2.74", ROWS)


def rects(text: str) -> list[dict[str, str]]:
    return [e.attrib for e in ElementTree.fromstring(text).iter("rect")]


def test_each_end_has_a_bar_of_its_kind_and_its_value_printed():
    text = bars_svg(BARS)
    assert [r["class"] for r in rects(text)] == ["less", "more", "less", "more", "less"]
    for row in ROWS:
        for words in (row.label, row.step, row.less_words, row.more_words):
            assert f">{words}</text>" in text
    assert NO_ANSWER in text


def test_bars_lie_on_the_side_of_their_value():
    base = BARS.at(2.74)
    less, more, *_ = rects(bars_svg(BARS))
    assert float(less["x"]) == pytest.approx(base, abs=0.1)
    assert float(more["x"]) + float(more["width"]) == pytest.approx(base, abs=0.2)
    assert float(less["width"]) / float(more["width"]) == pytest.approx(
        (3.2 - 2.74) / (2.74 - 2.4), rel=0.02
    )


def test_everything_stays_inside_the_drawing():
    long = Bar("a very long name of an input that goes on and on", "±10 %", 1, 9)
    bars = Bars("Margin", 5.0, "Margin +5.00", (long,))
    text = bars_svg(bars)
    width = float(re.search(r'viewBox="0 0 ([\d.]+)', text)[1])  # type: ignore[index]
    assert all(0 <= float(r["x"]) <= width - 50 for r in rects(text))
    assert "…</text>" in text


def test_the_description_holds_every_value_for_those_who_cannot_see_it():
    words = re.search(r"<desc>(.*?)</desc>", bars_svg(BARS))
    assert words is not None
    assert "shell radius ±10 %: +3.20 when less, +2.40 when more" in words[1]


def test_no_rows_and_no_numbers_are_refused():
    with pytest.raises(ValueError, match="have no rows"):
        Bars("Margin", 1.0, "1", ())
    with pytest.raises(ValueError, match="reads nan"):
        Bars("Margin", 1.0, "1", (Bar("x", "", float("nan"), 1.0),))


def test_powers_of_ten_are_even_steps_on_a_logarithmic_axis():
    axis = log_axis(3e3, 2e6)
    assert (axis.low, axis.high) == (1e3, 1e7)
    assert [axis.label(tick) for tick in axis.ticks] == [
        "10³",
        "10⁴",
        "10⁵",
        "10⁶",
        "10⁷",
    ]
    assert axis.share(1e5) == pytest.approx(0.5)
    with pytest.raises(ValueError, match="above zero"):
        log_axis(0.0, 1.0)


def test_inspections_are_dashed_uprights_and_the_first_is_named():
    chart = Chart(
        "Growth",
        "cycles",
        "crack, mm",
        [Series("Growth", [0, 10], [1, 5])],
        uprights=[Upright(2.0, "first inspection 2"), Upright(4.0), Upright(6.0)],
    )
    text = chart_svg(chart)
    assert text.count('class="up"') == 3
    assert text.count("first inspection 2</text>") == 1
