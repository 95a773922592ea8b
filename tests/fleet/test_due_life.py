"""Life of parts: installations on two aircraft, three configurations, exactness."""

from __future__ import annotations

from datetime import date
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from fleet.due import CarryOver, Counter, Counters, Due, Standing, due_status
from fleet.life import (
    ConfigurationLimit,
    Flown,
    NoLifeLimit,
    accumulated,
    consumed,
    life_end,
    life_status,
)


def limit(value: int, *, linear: bool = False) -> ConfigurationLimit:
    carry_over = CarryOver.LINEAR if linear else CarryOver.MOST_RESTRICTIVE
    return ConfigurationLimit(value, carry_over)


def three_configurations(*, linear: bool):
    flown = [
        Flown(6_000, limit(20_000, linear=linear)),
        Flown(4_000, limit(16_000, linear=linear)),
    ]
    return flown, [limit(x, linear=linear) for x in (25_000, 20_000, 16_000)]


def test_a_part_swapped_between_aircraft_adds_the_stints_only():
    """(19,870 - 12,450) + (14,905 - 8,112) = 14,213; 30,000 - 14,213 = 15,787;
    aircraft B reaches 14,905 + 15,787 = 30,692; 15,787 / 6.1 = 2,588.03 days."""
    total = accumulated(0, [(12_450, 19_870), (8_112, 14_905)])
    assert total == 14_213
    status = life_status([Flown(7_420, limit(30_000))], limit(30_000), 6_793)
    assert (status.total, status.remaining) == (14_213, 15_787)
    assert 14_905 + status.remaining == 30_692
    forecast = due_status(
        Due(Counters(cycles=status.ends_at)),
        Standing(
            Counters(cycles=total),
            date(2025, 6, 1),
            {Counter.CYCLES: Fraction(61, 10)},
        ),
        as_of=date(2025, 6, 1),
    ).forecast
    assert forecast == date(2032, 7, 2)
    assert total not in (19_870 + 14_905, 14_905, 6_793)


def test_linear_fraction_across_three_configurations():
    """6/20 + 4/16 = 0.55; 0.45 of 25,000, 20,000, 16,000: 11,250, 9,000, 7,200."""
    flown, targets = three_configurations(linear=True)
    assert consumed(flown) == Fraction(55, 100)
    assert [life_end(flown, x) - 10_000 for x in targets] == [11_250, 9_000, 7_200]


def test_a_silent_source_takes_the_most_restrictive_limit_met():
    """min(20,000, 16,000, 25,000) - 10,000 = 6,000; 25,000 - 10,000 = 15,000 would be
    non-conservative."""
    flown, targets = three_configurations(linear=False)
    assert life_end(flown, targets[0]) - 10_000 == 6_000


def test_one_silent_source_is_enough_to_forbid_the_fraction():
    flown, _ = three_configurations(linear=True)
    assert life_end(flown, limit(25_000)) - 10_000 == 6_000


def test_binary_floats_would_lose_a_cycle():
    u = 0.3 + 0.25
    assert (1 - u) * 25_000 < 11_250
    flown, targets = three_configurations(linear=True)
    assert life_end(flown, targets[0]) == 21_250


def test_life_without_a_recorded_limit_is_refused():
    with pytest.raises(NoLifeLimit, match="without a recorded life limit"):
        life_end([Flown(1, None)], limit(10_000))
    assert life_end([Flown(0, None)], limit(10_000)) == 10_000


def test_consumed_is_rounded_up_and_remaining_down():
    status = life_status([], limit(30_000), 29_701)
    assert (status.consumed_percent, status.remaining) == (100, 299)
    flown = [Flown(1, limit(3, linear=True))]
    thirds = life_status(flown, limit(10, linear=True), 0)
    assert (thirds.remaining, thirds.consumed_percent) == (6, 34)


@given(
    st.lists(st.tuples(st.integers(0, 5_000), st.integers(20_000, 60_000)), max_size=4),
    st.integers(20_000, 60_000),
)
def test_most_restrictive_never_ends_later_than_the_linear_fraction(history, target):
    linear = [Flown(n, limit(x, linear=True)) for n, x in history]
    strict = [Flown(n, limit(x)) for n, x in history]
    assert life_end(strict, limit(target)) <= life_end(
        linear, limit(target, linear=True)
    )


@given(
    st.lists(
        st.tuples(st.integers(0, 9_000), st.integers(1, 60_000)),
        min_size=2,
        max_size=5,
    ),
    st.integers(1, 60_000),
)
def test_the_order_of_configurations_does_not_matter(history, target):
    flown = [Flown(n, limit(x, linear=True)) for n, x in history]
    end = life_end(flown, limit(target, linear=True))
    assert life_end(flown[::-1], limit(target, linear=True)) == end


@given(st.lists(st.integers(0, 9_000), max_size=5), st.integers(1, 60_000))
def test_one_configuration_gives_the_plain_difference_either_way(amounts, value):
    for linear in (True, False):
        flown = [Flown(n, limit(value, linear=linear)) for n in amounts]
        assert life_end(flown, limit(value, linear=linear)) == value
