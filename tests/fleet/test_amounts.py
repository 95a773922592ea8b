"""Intervals as text and back."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from fleet.amounts import AmountError, amount_read, amount_write, counters_write
from fleet.due import Counter, Counters


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("250 FC", (Counter.CYCLES, 250)),
        ("30,000 FC", (Counter.CYCLES, 30_000)),
        ("6,000 FH", (Counter.MINUTES, 360_000)),
        ("1,234:30 FH", (Counter.MINUTES, 74_070)),
        ("87.5 flight hours", (Counter.MINUTES, 5_250)),
        ("12 landings", (Counter.LANDINGS, 12)),
        ("90 days", (Counter.DAYS, 90)),
        ("18 months", (Counter.MONTHS, 18)),
        ("2 years", (Counter.MONTHS, 24)),
        ("1 FC", (Counter.CYCLES, 1)),
    ],
)
def test_an_interval_has_a_number_and_a_unit(text, expected):
    assert amount_read(text) == expected


@pytest.mark.parametrize(
    "text", ["250", "", "FC", "2,50 FC", "1.5 FC", "-5 FC", "5 kg"]
)
def test_anything_else_is_refused_with_examples(text):
    with pytest.raises(AmountError, match="as 250 FC"):
        amount_read(text)


def test_nothing_repeats_every_zero_cycles():
    with pytest.raises(AmountError, match="at least 1"):
        amount_read("0 FC")


@given(st.sampled_from(list(Counter)), st.integers(1, 2_000_000))
def test_what_is_written_reads_back(counter, value):
    assert amount_read(amount_write(counter, value)) == (counter, value)


def test_what_is_past_has_a_minus_sign():
    assert amount_write(Counter.CYCLES, -31) == "−31 FC"
    assert amount_write(Counter.MINUTES, -90) == "−1:30 FH"


def test_unknown_counters_are_left_out_not_zero():
    assert counters_write(Counters(minutes=90, cycles=12)) == "1:30 FH · 12 FC"
    assert counters_write(Counters()) == ""
