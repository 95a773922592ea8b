"""Units: exact factors, the ways people write them, and what is refused."""

from __future__ import annotations

import re
from decimal import Decimal

import pytest
from hypothesis import given
from hypothesis import strategies as st

from fleet.units import (
    FACTORS,
    UnitError,
    canonical,
    hours_read,
    hours_write,
    in_unit,
    length_read,
    measure_read,
    measure_write,
    number_read,
    number_write,
)


@pytest.mark.parametrize(
    ("text", "mm"),
    [
        ("0.25 in", 6.35),
        ('12"', 304.8),
        ("12 inches", 304.8),
        ("1 1/2 in", 38.1),
        ("1-1/2 in", 38.1),
        ("3/4 in.", 19.05),
        (".050 in", 1.27),
        ("6.35 mm", 6.35),
        ("6,35 mm", 6.35),
        ("0,250 in", 6.35),
        ("2.5cm", 25.0),
        ("1 ft", 304.8),
        ("0.5″", 12.7),
        ("1,234,567 mm", 1234567.0),
    ],
)
def test_a_length_is_read_as_written(text: str, mm: float) -> None:
    # 1 in = 25.4 mm exactly (international yard and pound agreement, 1959).
    assert length_read(text) == pytest.approx(mm, rel=1e-15)


def test_a_bare_length_is_refused_unless_the_caller_names_the_unit() -> None:
    with pytest.raises(UnitError, match=r"“0\.25” has no unit; write 0\.25 mm or"):
        length_read("0.25")
    assert length_read("3/4", unit="in") == 19.05
    assert length_read("6 mm", unit="in") == 6.0


@pytest.mark.parametrize(
    ("text", "part"),
    [
        ("", "Nothing was given where a length is expected"),
        ("about an inch", "is not a number"),
        ("3 yards", "“yards” in “3 yards” is not a unit of length"),
        ("8 psi", "is not a unit of length"),
        ("1..5 mm", "is not a number"),
        ("1/0 in", "is not a number"),
        ("1,016 mm", "may be 1016 or 1.016"),
        ("nan mm", "is not a number"),
    ],
)
def test_what_cannot_be_read_is_refused_in_words(text: str, part: str) -> None:
    with pytest.raises(UnitError, match=re.escape(part)):
        length_read(text)


def test_stress_factors_follow_from_the_pound_and_the_inch() -> None:
    # NIST SP 811 (2008), appendix B.8: 1 psi = 6.894 757 E+03 Pa, 1 ksi the same in
    # MPa; 1 lbf/in = 1.751 268 E+02 N/m.
    assert canonical(1, "psi") == pytest.approx(6.894757e-3, rel=1e-7)
    assert canonical(1, "ksi") == pytest.approx(6.894757, rel=1e-7)
    assert canonical(1, "lbf_per_in") == pytest.approx(0.1751268, rel=1e-6)
    assert measure_read("8.2 psi", "stress") == pytest.approx(0.0565370, rel=1e-6)


def test_areas_and_running_loads_are_read_in_their_units() -> None:
    assert measure_read("0.35 in2", "area") == pytest.approx(225.806, rel=1e-12)
    assert measure_read("200 N/mm", "running_load") == 200.0
    with pytest.raises(UnitError, match="is not a unit of running load"):
        measure_read("200 N", "running_load")


@pytest.mark.parametrize(
    ("value", "unit", "text"),
    [
        (6.35, "in", "0.25 in"),
        (6.35, "mm", "6.35 mm"),
        (0.0565370105, "psi", "8.2 psi"),
        (344.7378647, "ksi", "50 ksi"),
        (345.0, "mpa", "345 MPa"),
        (-0.0001, "mm", "0 mm"),
        (210.15, "n_per_mm", "210.2 N/mm"),
    ],
)
def test_values_are_written_with_sensible_digits(
    value: float, unit: str, text: str
) -> None:
    assert measure_write(value, unit) == text


def test_digits_may_be_asked_for() -> None:
    assert measure_write(25.4 / 3, "in", digits=2) == "0.33 in"
    assert number_write(2.50, 2) == "2.5"


def test_an_unknown_unit_is_an_error_both_ways() -> None:
    for convert in (canonical, in_unit):
        with pytest.raises(UnitError, match="furlong"):
            convert(1.0, "furlong")


@pytest.mark.parametrize(
    ("text", "minutes"),
    [
        ("1234:30", 74070),
        ("1,234:05", 74045),
        ("0:59", 59),
        ("12.5", 750),
        ("12,5", 750),
        ("7", 420),
    ],
)
def test_hours_are_read_to_whole_minutes(text: str, minutes: int) -> None:
    assert hours_read(text) == minutes


@pytest.mark.parametrize("text", ["", "12:60", "1:2", "-3:00", "-3", "noon", "1:30:00"])
def test_times_that_are_none_are_refused(text: str) -> None:
    with pytest.raises(UnitError, match="is not a time in hours"):
        hours_read(text)


def test_hours_that_are_no_whole_minutes_are_refused() -> None:
    with pytest.raises(UnitError, match=r"is 0\.6 minutes"):
        hours_read("0.01")


@given(st.integers(min_value=0, max_value=2_000_000_000))
def test_hours_written_are_read_back(minutes: int) -> None:
    assert hours_read(hours_write(minutes)) == minutes


def test_negative_time_is_written_with_a_minus_sign() -> None:
    assert hours_write(-90) == "−1:30"


@pytest.mark.parametrize(
    ("text", "quantity", "value"),
    [
        ("1 lbf", "force", 4.4482216152605),  # NIST SP 811 (2008), appendix B.8
        ("2.5 kip", "force", 11120.55403815125),
        ("1 lbf in", "moment", 112.984829),  # the same: 1.129848 E-01 N m
        ("1 in-lb", "moment", 112.984829),
        ("1.5 N m", "moment", 1500.0),
        ("1 in4", "inertia", 416231.4256),  # the same: 4.162314 E-07 m4
        ("1 ksi√in", "toughness", 34.7485),  # 1.098843 MPa root m, root 1000 mm
        ("100 MPa√m", "toughness", 3162.27766),
        ("0.00002 mm/N", "flexibility", 2e-5),
        ("350 N/mm", "running_load", 350.0),
    ],
)
def test_loads_sections_and_toughness_are_read(text, quantity, value) -> None:
    assert measure_read(text, quantity) == pytest.approx(value, rel=1e-6)


@given(
    st.sampled_from([u for units in FACTORS.values() for u in units]),
    st.decimals(min_value="0.001", max_value="99999", places=3),
)
def test_a_number_survives_the_way_to_canonical_and_back(
    unit: str, number: Decimal
) -> None:
    there = canonical(str(number), unit)
    assert in_unit(there, unit) == pytest.approx(float(number), rel=1e-14)


@given(st.integers(0, 40), st.integers(1, 63), st.sampled_from([2, 4, 8, 16, 32, 64]))
def test_mixed_fractions_are_exact(whole: int, top: int, under: int) -> None:
    assert number_read(f"{whole} {top}/{under}") == whole + Decimal(top) / under
