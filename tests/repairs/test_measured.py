"""Dimensions of each damage type, and how what was typed is read."""

from __future__ import annotations

import pytest

from repairs.measured import (
    Hole,
    MeasuredError,
    Typed,
    holes_read,
    measured_read,
    sizes_of,
)
from repairs.measurements import (
    ASKED_RATIOS,
    DIMENSIONS,
    SIZE_ORDER,
    Kind,
    missing,
    ratios,
)
from repairs.models import DamageType

UNIT_ENDS = {Kind.LENGTH: "_mm", Kind.AREA: "_mm2", Kind.COUNT: "_count"}


def read(damage_type: str, **typed: str) -> dict[str, object]:
    rows = measured_read(
        damage_type, [Typed(k, v) for k, v in typed.items()], entry_unit="in"
    )
    return {row.quantity: row for row in rows}


def test_every_damage_type_has_its_dimensions_and_something_needed():
    assert set(DIMENSIONS) == set(DamageType.values)
    for damage_type, rows in DIMENSIONS.items():
        assert any(one.needed for one in rows), damage_type
        names = [one.quantity for one in rows]
        assert len(names) == len(set(names)), damage_type
        assert set(SIZE_ORDER) & set(names), damage_type


@pytest.mark.parametrize("damage_type", DIMENSIONS)
def test_the_unit_is_the_end_of_the_name(damage_type):
    for one in DIMENSIONS[damage_type]:
        end = UNIT_ENDS.get(one.kind, "")
        assert one.quantity.endswith(end), one.quantity
        assert bool(one.words) == (one.kind is Kind.WORD), one.quantity


def test_asked_ratios_are_of_dimensions_the_type_has():
    for damage_type, ratio in ASKED_RATIOS.items():
        names = {one.quantity for one in DIMENSIONS[damage_type]}
        assert {ratio.numerator, ratio.denominator, ratio.kept_with} <= names


def test_lengths_keep_what_was_typed_and_become_mm():
    found = read("dent", length_mm="3", width_mm="1 1/2 in", depth_mm="2 mm")
    # 3 x 25.4, 1.5 x 25.4 and 2 mm.
    assert [found[q].value for q in ("length_mm", "width_mm", "depth_mm")] == (
        pytest.approx([76.2, 38.1, 2.0])
    )
    assert [found[q].entered for q in found] == ["3 in", "1 1/2 in", "2 mm"]


@pytest.mark.parametrize(
    ("typed", "value", "spread"),
    [
        ("12 ± 0.5 mm", 12.0, 0.5),
        ("12 mm ± 0.5", 12.0, 0.5),
        ("0.5 in +/- 0.1 in", 12.7, 2.54),
        ("1 ± 0.02", 25.4, 0.508),
    ],
)
def test_an_uncertainty_follows_in_the_same_unit_unless_it_has_its_own(
    typed, value, spread
):
    row = read("crack", length_mm=typed)["length_mm"]
    assert (row.value, row.uncertainty) == pytest.approx((value, spread))


@pytest.mark.parametrize(
    ("quantity", "typed", "words"),
    [
        ("length_mm", "about 3", "not a number"),
        ("length_mm", "-3 mm", "below zero"),
        ("length_mm", "3 psi", "not a unit of length"),
        ("crack_count", "2.5", "not a whole number"),
        ("direction", "sideways", "longitudinal, circumferential"),
        ("colour", "red", "has no dimension"),
    ],
)
def test_what_cannot_be_read_is_said_per_dimension(quantity, typed, words):
    with pytest.raises(MeasuredError) as refused:
        read("crack", **{quantity: typed})
    assert list(refused.value.problems) == [quantity]
    assert words in refused.value.problems[quantity]


def test_words_are_read_as_shown_or_as_stored():
    assert read("crack", origin="fastener hole")["origin"].word == "fastener_hole"
    assert read("crack", origin="fastener_hole")["origin"].word == "fastener_hole"
    assert read("crack", origin="Cut-out corner")["origin"].word == "cut_out_corner"


def test_unknown_and_not_applicable_have_no_value():
    found = read("dent", creased="unknown", next_dent_mm="n/a", edge_distance_mm=" ")
    assert {q: row.status for q, row in found.items()} == {
        "creased": "unknown",
        "next_dent_mm": "not_applicable",
    }
    assert sizes_of(found.values()) == {}


def test_missing_never_counts_what_is_needed_only_after_rework():
    known = {"length_mm", "width_mm", "depth_mm"}
    assert missing("corrosion", "as_found", known) == []
    after = {one.quantity for one in missing("corrosion", "after_rework", known)}
    assert after == {"remaining_thickness_mm", "damage_removed"}


def test_ratios_follow_from_the_sizes_and_nought_gives_none():
    sizes = {"length_mm": 60.0, "width_mm": 45.0, "depth_mm": 1.0}
    assert {r.name: v for r, v in ratios("dent", sizes)} == {
        "length_over_width": pytest.approx(4 / 3),
        "width_over_depth": 45.0,
    }
    assert ratios("dent", {"width_mm": 45.0, "depth_mm": 0.0}) == []


def test_a_row_of_holes_is_read_line_by_line():
    text = "12; 1.2 mm; -; 4.8 mm; 20 mm\n\n13; ; 0.05"
    assert holes_read(text, entry_unit="in") == [
        Hole(12, 1.2, None, 4.8, 20.0),
        Hole(13, None, pytest.approx(1.27)),
    ]
    with pytest.raises(ValueError, match="is not a hole"):
        holes_read("first; 1 mm", entry_unit="in")
