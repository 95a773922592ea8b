"""What an evaluation answers as text: from plain data, without a database."""

from __future__ import annotations

import pytest

from fleet.units import UnitError
from repairs.evaluation_charts import charts_of, inspections
from repairs.evaluation_figures import Figure, answer_of, compared, figures_of
from repairs.input_text import Bounds, input_read, input_write, units_offered

TEST = {"test": "element", "value": "skin", "limit": "skin", "met": True}
FAILED = {
    "test": "inside one bay",
    "value": "1.2 mm beyond",
    "limit": "none",
    "met": False,
}
ASKED = {
    "method": "a-method",
    "version": 2,
    "title": "A method",
    "part": "answers",
    "outcome": "computed",
    "governing": "fracture",
    "missing": [],
    "applicability": [TEST],
    "warnings": [],
}
MARGINS = [
    {"method": "a-method", "mechanism": "fracture", "case": "residual",
     "strength": 200.0, "required": 160.0},
    {"method": "a-method", "mechanism": "yield", "case": "ultimate",
     "strength": 120.0, "required": 150.0},
    {"method": "a-method", "mechanism": "yield", "case": "flight loads",
     "strength": 120.0, "required": None},
]  # fmt: skip
GROWTH = {
    "key": "growth",
    "title": "Growth",
    "x_label": "flight cycles since new",
    "x_unit": "cycles",
    "y_label": "crack length 2a",
    "y_unit": "mm",
    "points": [[0, 1.0], [20_000, 4.0], [40_000, 90.0]],
    "marks": [{"label": "residual lost", "y": 90.0, "x": None}],
}
DATA = {
    "title": "A method",
    "method": "a-method",
    "use": "no_known_crack",
    "outcome": "computed",
    "governing": "fracture",
    "residual_strength_mpa": 200.0,
    "required_residual_mpa": 160.0,
    "residual_case": "residual",
    "margin_residual": 0.25,
    "ultimate_mpa": 150.0,
    "ultimate_case": "ultimate",
    "margin_ultimate": -0.2,
    "ultimate_kept": "not_shown",
    "lives": [
        {"title": "to loss", "cycles": 40_000, "base": "since new", "remark": ""}
    ],
    "scatter_factor": 2.0,
    "life_base": "since new",
    "life_after_factor_cycles": 20_000,
    "threshold": {"cycles": 18_000, "uncapped": 20_000, "cap": "limit of validity",
                  "base": "since new"},
    "repeat": {"cycles": 5_000, "uncapped": 5_000, "cap": "",
               "base": "last accomplishment"},
    "plan": None,
    "margins": MARGINS,
    "cases_not_checked": ["flight loads"],
    "assumptions": ["plane"],
    "missing": [],
    "warnings": ["Unapproved calculation.", "barred", "mind this"],
    "barred": ["barred"],
    "applicability": [TEST],
    "curves": [GROWTH],
    "asked": [
        ASKED,
        ASKED | {"method": "b", "part": "beside"},
        ASKED | {"method": "c", "part": "not_applicable", "outcome": "not_covered",
                 "applicability": [TEST, FAILED]},
        ASKED | {"method": "d", "part": "unanswered", "outcome": "missing_input",
                 "missing": [{"title": "radius", "name": "radius", "where": "there"}]},
    ],
}  # fmt: skip


def test_every_method_asked_says_its_part_and_why_it_has_no_other():
    rows = answer_of(DATA).asked
    assert [(row.part, row.governs, row.why) for row in rows] == [
        ("answers", True, "fracture"),
        ("stands beside", False, "computed too; a better method answers"),
        ("does not apply", False, "inside one bay: 1.2 mm beyond; required none"),
        ("not answered", False, "not recorded: radius"),
    ]


def test_margins_are_signed_and_a_case_that_was_not_checked_says_so():
    rows = answer_of(DATA).margins
    assert [(row.margin, row.negative, row.least) for row in rows] == [
        ("+0.25", False, False),
        ("−0.20", True, True),
        ("not checked", False, False),
    ]
    assert rows[2].required == "not checked"
    assert rows[0].method == "A method"


def test_an_interval_is_shown_beside_what_it_was_cut_down_from():
    first, second = answer_of(DATA).intervals
    assert (first.cycles, first.calculated, first.cap) == (
        "18,000",
        "20,000",
        "limit of validity",
    )
    assert second.cap == "none"


def test_warnings_are_told_once_and_what_bars_stands_apart():
    answer = answer_of(DATA)
    assert (answer.warnings, answer.barred) == (("mind this",), ("barred",))


def test_what_is_not_computed_has_no_figure_whatever_the_data_hold():
    answer = answer_of(DATA | {"outcome": "not_covered"})
    nothing = (answer.figures, answer.margins, answer.lives, answer.intervals)
    assert nothing == ((), (), (), ())
    assert not answer.computed


def test_known_damage_shows_no_interval():
    titles = [figure.title for figure in figures_of(DATA | {"use": "found_damage"})]
    assert "Threshold" not in titles
    assert "Repeat interval" not in titles


def test_a_plan_says_how_often_it_misses():
    plan = {
        "mean": 0.999,
        "worst": 0.98,
        "scheduled": 0.995,
        "target": 0.99,
        "longest": 4_000,
    }
    rows = answer_of(DATA | {"plan": plan}).plan
    assert [(row.value, row.remark) for row in rows[:2]] == [
        ("0.9990", "missed 0.001"),
        ("0.9800", "missed 0.02"),
    ]
    assert rows[-1].value == "4,000 FC"


def test_columns_mark_what_differs_from_the_first():
    first = [Figure("Life", "100 FC", "", 100), Figure("Margin, a", "+0.50", "", 0.5)]
    other = [Figure("Life", "80 FC", "", 80), Figure("Margin, a", "+0.25", "", 0.25)]
    life, margin = compared([first, other])
    assert [cell.differs for cell in life.cells] == [False, True]
    assert (life.cells[1].by, margin.cells[1].by) == ("−20.0 %", "−0.25")
    (same,) = compared([first[:1], first[:1]])
    assert not any(cell.differs for cell in same.cells)


def test_a_figure_only_one_column_has_is_a_dash_in_the_other():
    (row,) = compared([[], [Figure("Threshold", "100 FC", "since new", 100)]])
    assert [cell.value for cell in row.cells] == ["—", "100 FC"]
    assert row.cells[1].differs


def test_inspections_stand_at_the_threshold_and_each_repeat_before_the_end():
    marks = inspections(DATA, GROWTH)
    assert [mark.value for mark in marks] == [18e3, 23e3, 28e3, 33e3, 38e3]
    assert marks[0].label == "first inspection 18,000, then every 5,000"


def test_too_many_inspections_are_told_and_not_drawn():
    often = DATA | {"repeat": DATA["repeat"] | {"cycles": 100}}
    (only,) = inspections(often, GROWTH)
    assert only.label.endswith("then every 100")


def test_without_a_threshold_nothing_is_marked():
    assert inspections(DATA | {"threshold": None}, GROWTH) == []


def test_a_plans_own_inspections_are_marked_on_the_growth_curve():
    looks = GROWTH | {
        "key": "inspections",
        "marks": [
            {"label": "eddy current: POD 0.50", "y": 4.0, "x": 20_000.0},
            {"label": "eddy current: POD 0.90", "y": 9.0, "x": 25_000.0},
        ],
    }
    data = DATA | {"curves": [GROWTH, looks]}
    (drawn,) = charts_of(data)
    assert drawn[0] == "Growth"
    assert drawn[1].count('class="up"') == 2
    assert [look.cycles for look in answer_of(data).looks] == ["20,000", "25,000"]


def test_a_what_if_is_drawn_into_the_same_axes():
    other = DATA | {"curves": [GROWTH | {"points": [[0, 2.0], [30_000, 90.0]]}]}
    ((_, drawing),) = charts_of(DATA, other)
    assert ">as recorded</text>" in drawing
    assert ">what if</text>" in drawing
    ((_, alone),) = charts_of(DATA, DATA)
    assert "what if" not in alone


@pytest.mark.parametrize(
    ("text", "unit", "value"),
    [
        ("12,345 FC", "cycles", 12345.0),
        ("12 %", "-", 0.12),
        ("−0.5", "-", -0.5),
        ("41000 ft", "ft", 41000.0),
        ("1.2e3 mm", "mm", 1200.0),
        ("1 1/2 in", "mm", 38.1),
    ],
)
def test_numbers_are_read_as_people_write_them(text, unit, value):
    assert input_read(text, unit).value == pytest.approx(value, rel=1e-12)


def test_toughness_is_shown_and_read_in_root_metres():
    kept = input_read("100", "MPa*sqrt(mm)", bare=True).value
    assert kept == pytest.approx(100 * 1000**0.5)
    assert input_write(kept, "MPa*sqrt(mm)") == "100 MPa√m"
    assert "ksi√in" in units_offered("MPa*sqrt(mm)")


def test_bounds_say_what_was_read_and_what_may_be():
    with pytest.raises(UnitError, match="Pitch is above zero; “0 mm” is not"):
        Bounds(0, strict=True).check(0.0, "0 mm", "pitch")
    with pytest.raises(UnitError, match="is above 1, the most"):
        Bounds(0, 1).check(1.2, "1.2", "share")
    with pytest.raises(UnitError, match="is not a unit of this"):
        input_read("5 mm", "-")
