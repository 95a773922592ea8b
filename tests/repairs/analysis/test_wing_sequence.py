"""The standard wing sequence: its table, its order, and what is refused."""

from __future__ import annotations

import itertools
from collections import Counter

import numpy as np
import pytest
from numpy.random import PCG64, SeedSequence

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.spectra import counting, drawn, per_flight
from repairs.analysis.spectra import wing_sequence as wing
from repairs.analysis.spectra.sequence import Residue, Treatment
from repairs.analysis.types import Grade
from tests.outside import outside

SOURCE = "NLR TR 73029 / LBF FB-106, 1973, block totals"
TOTALS = (1, 2, 5, 18, 52, 152, 800, 4170, 34_800, 358_665)
CUMULATIVE = (1, 3, 8, 26, 78, 230, 1030, 5200, 40_000, 398_665)
AGAIN = Treatment(Residue.REPEATING)


def made(**changes):
    choices = {
        "mean_flight_stress": 70.0,
        "ground_ratio": wing.GROUND_RATIO,
        "seed": 7,
        "halves": wing.Halves.SAME_LEVEL,
        "truncate_above": None,
        "omit_below": None,
        "place": "wing_lower_surface",
    }
    return wing.WingSequence(**(choices | changes))


@pytest.mark.parametrize(
    ("name", "total", "cumulative", "ours"),
    list(zip(wing.LEVEL_NAMES, TOTALS, CUMULATIVE, wing.level_totals(), strict=True)),
)
def test_level_totals_of_a_block(name, total, cumulative, ours):
    outside(
        "Standard wing sequence, table of flight types",
        source=SOURCE,
        given=f"gust cycles of level {name} in a block of 4,000 flights",
        published=total,
        computed=ours,
        absolute=0,
        route="memory",
    )
    place = wing.LEVEL_NAMES.index(name) + 1
    assert sum(wing.level_totals()[:place]) == cumulative


def test_flights_and_gusts_of_the_table():
    assert sum(number for number, _ in wing.FLIGHT_TYPES.values()) == wing.FLIGHTS
    sums = [sum(gusts) for _, gusts in wing.FLIGHT_TYPES.values()]
    assert sums == [1500, 1400, 1250, 950, 800, 650, 490, 250, 70, 25]
    assert sum(wing.level_totals()) / wing.FLIGHTS == pytest.approx(99.67, abs=0.005)


def test_milder_types_have_no_more_gusts_above_any_level():
    above = [np.cumsum(gusts) for _, gusts in wing.FLIGHT_TYPES.values()]
    for severe, mild in itertools.pairwise(above):
        assert (severe >= mild).all()


def test_the_block_holds_what_the_table_says():
    block = made().sequence()
    assert (block.flights, block.repeats) == (4000, True)
    assert len(block.stresses) == 2 * 4000 + 2 * 398_665
    gusts = Counter(np.round(block.stresses / 70 - 1, 6).tolist())
    for level, total in zip(wing.LEVELS, TOTALS, strict=True):
        ground = 4000 if level == 1.5 else 0  # the ground stress, -0.5, lies there
        assert (gusts[level], gusts[-level]) == (total, total + ground)
    assert gusts[0.0] == 4000


def test_flights_start_on_the_ground_and_come_in_all_their_types():
    block = made().sequence()
    assert (block.stresses[block.starts] == -0.5 * 70).all()
    sizes = np.diff([*block.starts, len(block.stresses)]) // 2 - 1
    assert Counter(sizes.tolist()) == {
        sum(gusts): number for number, gusts in wing.FLIGHT_TYPES.values()
    }
    types = sizes[:40].tolist()
    assert types != sorted(types)


@pytest.mark.parametrize("halves", list(wing.Halves))
def test_ground_air_ground_comes_out_of_counting(halves):
    cycles = counting.counted(made(halves=halves).sequence(), AGAIN)
    # One cycle for each gust and one for each flight, all whole.
    assert cycles.counts.sum() == 398_665 + 4000
    assert cycles.ranges.max() == pytest.approx(70 * 3.2)
    assert (cycles.ranges >= 70 * 1.722 - 1e-9).sum() >= 4000


@pytest.mark.parametrize(
    ("flight_type", "share"),
    [
        ("B", 3.000),
        ("C", 2.800),
        ("D", 2.650),
        ("E", 2.495),
        ("F", 2.340),
        ("G", 2.185),
        ("H", 2.030),
        ("I", 1.875),
        ("J", 1.722),
    ],
)
def test_the_largest_range_of_a_flight(flight_type, share):
    # 1 + level + 0.5: from the ground to the highest gust.
    cycles = counting.counted(made().flight(flight_type), AGAIN)
    outside(
        "Ground-air-ground cycle of the standard wing sequence, by counting",
        source="1 + highest level + 0.5 over the mean flight stress",
        given=f"flight type {flight_type}, ground stress -0.5",
        published=share,
        computed=cycles.ranges.max() / 70,
        rel=1e-9,
        route="closed form",
    )


def test_in_the_severest_flight_the_lowest_gust_lies_under_the_ground_stress():
    cycles = counting.counted(made().flight("A"), AGAIN)
    assert cycles.ranges.max() / 70 == pytest.approx(2.6 + 0.6)


@pytest.mark.parametrize("flight_type", "CDEFGHIJ")
def test_gusts_and_ground_counted_apart_lose_the_largest_range(flight_type):
    gusts = wing.FLIGHT_TYPES[flight_type][1]
    highest = max(
        level for level, number in zip(wing.LEVELS, gusts, strict=True) if number
    )
    apart = max(2 * highest, 1.5)  # a gust alone, or the ground to the mean
    whole = counting.counted(made().flight(flight_type), AGAIN).ranges.max() / 70
    assert whole > apart + 0.19


def test_shares_of_level_to_the_fifth_power():
    weights = np.array(TOTALS) * np.array(wing.LEVELS) ** 5
    shares = 100 * weights / weights.sum()
    assert shares[[0, 7, 8, 9]] == pytest.approx([1.1, 18.5, 27.4, 20.5], abs=0.06)


def test_the_same_seed_gives_the_same_block_and_another_another():
    first, second, other = (made(seed=s).sequence().stresses for s in (7, 7, 8))
    assert (first == second).all()
    assert (first != other).any()
    assert (np.sort(first) == np.sort(other)).all()


def raw_by_definition(seed, number):
    """PCG64 (XSL-RR 128/64) written out from its published definition."""
    multiplier, wide = 0x2360ED051FC65DA44385DF649FCCF645, (1 << 128) - 1
    begun = PCG64(SeedSequence(seed)).state["state"]
    state, step = begun["state"], begun["inc"]
    for _ in range(number):
        state = (state * multiplier + step) & wide
        word, turn = (state >> 64) ^ (state & (1 << 64) - 1), state >> 122
        yield ((word >> turn) | (word << (64 - turn))) & ((1 << 64) - 1)


def test_the_order_of_flights_is_the_documented_one():
    listed = [
        sum(gusts)
        for number, gusts in wing.FLIGHT_TYPES.values()
        for _ in range(number)
    ]
    keys = list(raw_by_definition(7, 4000))
    expected = [listed[place] for place in sorted(range(4000), key=keys.__getitem__)]
    block = made().sequence()
    sizes = np.diff([*block.starts, len(block.stresses)]) // 2 - 1
    assert sizes.tolist() == expected


def test_whole_numbers_drawn_are_the_documented_ones():
    expected = [(key >> 32) * 4000 >> 32 for key in raw_by_definition(3, 500)]
    assert drawn.Keys(3).below(500, 4000).tolist() == expected


def test_halves_of_equal_level_or_drawn_apart():
    same = made().sequence()
    apart = made(halves=wing.Halves.DRAWN_APART).sequence()
    gusts = np.ones(len(same.stresses), dtype=bool)
    gusts[same.starts] = False
    gusts[same.starts[1:] - 1] = gusts[-1] = False
    upper, lower = same.stresses[gusts].reshape(-1, 2).T
    assert np.allclose(upper + lower, 140)
    assert (upper > lower).all()
    upper, lower = apart.stresses[gusts].reshape(-1, 2).T
    assert (upper > 70).all()
    assert (lower < 70).all()
    assert (abs(upper + lower - 140) > 1).any()
    assert np.allclose(np.sort(apart.stresses), np.sort(same.stresses))


def test_truncation_cuts_and_omission_leaves_out():
    cut = made(truncate_above="III").sequence().stresses / 70
    assert cut.max() == pytest.approx(2.3)
    assert (np.isclose(cut, 2.3)).sum() == 8
    less = made(omit_below="IX")
    assert counting.counted(less.sequence(), AGAIN).counts.sum() == 40_000 + 4000
    (warning,) = less.warnings
    assert "358,665 of 398,665" in warning
    (warning,) = made(truncate_above="III").warnings
    assert "retardation" in warning
    assert made().warnings == ()


def test_omission_and_truncation_never_make_a_flight_worse():
    def damage(**changes):
        flight = per_flight.cycles_of(made(**changes).sequence(), AGAIN)
        amplitudes = flight.maxima * (1 - flight.ratios) / 2
        return flight.per_flight @ amplitudes**5

    full = damage()
    assert damage(omit_below="IX") < full
    assert damage(truncate_above="IV") < full
    assert damage(mean_flight_stress=80.0) > full


def test_stress_scales_with_the_mean_flight_stress():
    doubled = made(mean_flight_stress=140.0).sequence()
    assert np.allclose(doubled.stresses, 2 * made().sequence().stresses, rtol=1e-12)


def test_elsewhere_than_on_the_wing_it_is_refused():
    with pytest.raises(InputError, match="wing lower surface only"):
        made(place="fuselage_crown")


def test_the_truncated_form_is_refused_for_want_of_its_table():
    with pytest.raises(InputError, match="18,442"):
        made(form="truncated")


@pytest.mark.parametrize(
    ("changes", "words"),
    [
        ({"seed": -1}, "at least 0"),
        ({"seed": True}, "at least 0"),
        ({"truncate_above": "XI"}, "VIII, IX, X"),
        ({"omit_below": "II", "truncate_above": "IV"}, "nothing is left"),
    ],
)
def test_wrong_choices_are_refused_with_words(changes, words):
    with pytest.raises(InputError, match=words):
        made(**changes)


def test_a_mean_flight_stress_in_compression_is_refused():
    with pytest.raises(OutOfRangeError, match="Mean flight stress"):
        made(mean_flight_stress=-20.0)


def test_table_and_ground_stress_are_from_memory_and_bar_approval():
    assert wing.TABLE.grade is wing.GROUND_RATIO.grade is Grade.MEMORY


def test_plain_data_states_every_choice():
    whole = made(truncate_above="III", omit_below="IX")
    data = whole.as_data()
    assert wing.WingSequence.from_data(data) == whole
    assert (data["seed"], data["residue"]) == (7, "repeating")
    with pytest.raises(InputError, match="repeating"):
        wing.WingSequence.from_data(data | {"residue": "half_cycles"})
    for key in set(data) - {"kind"}:
        with pytest.raises(InputError, match=key):
            wing.WingSequence.from_data({k: v for k, v in data.items() if k != key})
