"""Kinds of spectrum, their plain data, and a user's text."""

from __future__ import annotations

import json

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.spectra import sequence, table_text
from repairs.analysis.spectra.content import flight_of, spectrum_from
from repairs.analysis.spectra.cycles import ConstantCycle, PressureCycle, StatedBy
from repairs.analysis.spectra.exceedance import CountedAt, Counts, ExceedanceTable
from repairs.analysis.spectra.sequence import (
    LoadSequence,
    Residue,
    Treatment,
    UserSequence,
)
from repairs.analysis.spectra.wing_sequence import GROUND_RATIO, Halves, WingSequence

AGAIN = Treatment(Residue.REPEATING)
SPECTRA = (
    ConstantCycle(StatedBy.MAXIMUM, 86.9, 0.1),
    ConstantCycle(StatedBy.RANGE, 80.0, -0.5),
    PressureCycle(0.85, 0.0, "doors open"),
    WingSequence(
        70.0, GROUND_RATIO, 3, Halves.DRAWN_APART, None, "IX", "wing_lower_surface"
    ),
    UserSequence((0.0, 80.0, 20.0, 95.5), 2, True, AGAIN),
    UserSequence((0.0, 80.0), 1, False, Treatment(Residue.HALVES, 70.0, -10.0, 5.0)),
    ExceedanceTable(
        (10.0, 20.0, 30.0),
        (900.0, 40.0, 2.0),
        Counts.EXCEEDANCES,
        CountedAt.LEVEL,
        100,
        60.0,
        -10.0,
        4,
        AGAIN,
    ),
)


@pytest.mark.parametrize("spectrum", SPECTRA)
def test_plain_data_gives_back_the_same_spectrum(spectrum):
    data = spectrum.as_data()
    assert spectrum_from(json.loads(json.dumps(data, allow_nan=False))) == spectrum
    assert spectrum_from(data).as_data() == data


@pytest.mark.parametrize("spectrum", SPECTRA)
def test_each_choice_must_be_there_and_no_other(spectrum):
    data = spectrum.as_data()
    for key in set(data) - {"kind"}:
        with pytest.raises(InputError, match=key):
            spectrum_from({k: v for k, v in data.items() if k != key})
    with pytest.raises(InputError, match="knows no mean_stres"):
        spectrum_from(data | {"mean_stres": 5})


@pytest.mark.parametrize("spectrum", SPECTRA)
def test_blank_is_not_zero(spectrum):
    data = spectrum.as_data()
    for key, value in data.items():
        if isinstance(value, int | float):
            for blank in (None, "", "0", True if isinstance(value, float) else 1.0):
                if blank is None and key in ("clip_above_mpa", "clip_below_mpa"):
                    continue
                if blank is None and key == "omit_below_range_mpa":
                    continue
                if isinstance(value, bool) and blank is True:
                    continue
                with pytest.raises(InputError, match=key):
                    spectrum_from(data | {key: blank})


@pytest.mark.parametrize("spectrum", [s for s in SPECTRA if s != SPECTRA[2]])
def test_every_kind_that_states_stress_gives_a_flight(spectrum):
    flight = flight_of(spectrum)
    assert flight.maxima.min() > 0
    assert flight.per_flight.min() > 0
    assert len(flight.maxima) == len(flight.ratios) == len(flight.per_flight)
    assert all(isinstance(warning, str) for warning in spectrum.warnings)


def test_a_constant_cycle_comes_once_a_flight():
    flight = flight_of(ConstantCycle(StatedBy.RANGE, 80.0, -0.5))
    assert flight.maxima.tolist() == pytest.approx([80 / 1.5])
    assert flight.ratios.tolist() == pytest.approx([-0.5])
    assert flight.per_flight.tolist() == [1.0]


def test_choices_of_a_user_sequence_are_told():
    clipped = SPECTRA[5]
    assert len(clipped.warnings) == 2
    block = UserSequence((0.0, 80.0), 1, True, Treatment(Residue.HALVES))
    assert block.warnings == (sequence.HALVES_OF_BLOCK,)
    assert SPECTRA[4].warnings == ()


def test_rows_of_the_first_schema_are_constant_cycles():
    read = spectrum_from({"cycle_max_mpa": 86.9, "cycle_ratio": 0})
    assert read == ConstantCycle(StatedBy.MAXIMUM, 86.9, 0.0)


def test_an_unknown_kind_is_refused_with_those_there_are():
    with pytest.raises(InputError, match="pressure, wing_sequence, sequence"):
        spectrum_from({"kind": "gust"})


def test_a_cycle_states_maximum_or_range_but_not_both():
    # Range 120 at R = -0.5: Smax = 120 / 1.5.
    by_range = ConstantCycle(StatedBy.RANGE, 120.0, -0.5)
    assert by_range.maximum == pytest.approx(80)
    assert by_range.sequence().stresses.tolist() == pytest.approx([-40, 80])
    for data in (
        {"cycle_ratio": 0},
        {"cycle_ratio": 0, "cycle_max_mpa": 8, "cycle_range_mpa": 8},
    ):
        with pytest.raises(InputError, match="either cycle_max_mpa or cycle_range_mpa"):
            spectrum_from(data)


@given(st.floats(1, 500), st.floats(-5, 0.95))
def test_range_and_maximum_state_the_same_cycle(maximum, ratio):
    by_maximum = ConstantCycle(StatedBy.MAXIMUM, maximum, ratio)
    by_range = ConstantCycle(StatedBy.RANGE, maximum * (1 - ratio), ratio)
    assert by_range.maximum == pytest.approx(by_maximum.maximum)


def test_pressure_of_a_short_flight_is_a_share_of_the_normal():
    # 80 % of the differential that gives 100 MPa, from 4 MPa on the ground.
    cycle = PressureCycle(0.8, 0.04, "held by the ground supply").cycle(100.0)
    assert (cycle.maximum, cycle.ratio) == pytest.approx((80, 0.05))


@pytest.mark.parametrize(
    ("share", "ground"), [(0.0, 0.0), (1.2, 0.0), (0.8, 0.8), (0.8, -0.2)]
)
def test_pressure_outside_normal_operation_is_refused(share, ground):
    with pytest.raises(OutOfRangeError, match="Share of the normal differential"):
        PressureCycle(share, ground, "doors open")


def test_the_ground_minimum_is_named():
    with pytest.raises(InputError, match="ground"):
        PressureCycle(0.8, 0.0, " ")


def test_a_one_off_history_cannot_be_counted_as_repeating():
    with pytest.raises(InputError) as refused:
        UserSequence((0.0, 1.0), 1, False, AGAIN)
    assert str(refused.value) == sequence.ONE_OFF_REPEATED


@pytest.mark.parametrize("flights", [0, -3, 1.0, True, None])
def test_flights_are_a_whole_number(flights):
    with pytest.raises(InputError, match="whole number"):
        UserSequence((0.0, 1.0), flights, True, AGAIN)


def test_a_sequence_cannot_be_changed_nor_changes_what_it_is_made_of():
    points = np.array([0.0, 5.0])
    made = LoadSequence(points, 1, True)
    points[0] = 9
    assert made.stresses.tolist() == [0, 5]
    with pytest.raises(ValueError, match="read-only"):
        made.stresses[0] = 1


def test_clipping_levels_are_not_crossed():
    with pytest.raises(OutOfRangeError, match="Exchange them"):
        Treatment(Residue.HALVES, clip_above=10, clip_below=20)
    with pytest.raises(OutOfRangeError, match="Omitted range"):
        Treatment(Residue.HALVES, omit_below_range=-1)


def test_turning_points_from_text():
    text = "\ufeffstress_mpa\r\n0\r\n\r\n 81.5 \r\n-4e0\r\n"
    assert table_text.points_from_text(text) == (0, 81.5, -4)


@pytest.mark.parametrize("mark", [",", ";", "\t"])
def test_cycles_from_text_in_the_order_flown(mark):
    text = "Count,MAX_MPA,ratio\n2,100,0.1\n1,50,-1\n".replace(",", mark)
    assert table_text.points_from_text(text) == (10, 100, 10, 100, -50, 50)


def test_cycles_by_range_from_text():
    # Range 90 at R = 0.1: from 10 to 100.
    points = table_text.points_from_text("range_mpa,ratio,count\n90,0.1,1\n")
    assert points == pytest.approx((10, 100))


def test_levels_from_text_say_what_their_numbers_are():
    text = "level_mpa;exceedances\n20;3\n10;70\n"
    expected = ((10, 20), (70, 3), Counts.EXCEEDANCES)
    assert table_text.levels_from_text(text) == expected
    text = text.replace("exceedances", "occurrences")
    assert table_text.levels_from_text(text)[2] is Counts.OCCURRENCES


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("", "holds no sequence"),
        ("stress_mpa\n", "holds no sequence"),
        ("stress\n1\n2\n", "Line 1 names the columns stress; stress_mpa or max_mpa"),
        ("max_mpa,range_mpa,ratio,count\n1,1,0,1\n", "Line 1 names the columns"),
        ("\nstress_mpa\n1\nhigh\n", "Line 4, column stress_mpa reads 'high'"),
        ("stress_mpa\n1\n12,5\n", "Line 3, column stress_mpa reads '12,5'"),
        ("stress_mpa\n1\nnan\n", "Line 3, column stress_mpa reads 'nan'"),
        ("max_mpa,ratio,count\n80,0\n", "Line 2 has 2 values; 3 are expected"),
        ("max_mpa,ratio,count\n80,0,\n", "Line 2, column count reads ''"),
        ("max_mpa,ratio,count\n80,1,1\n", "Line 2, column ratio reads 1;"),
        ("max_mpa,ratio,count\n80,0,1\n-8,0,1\n", "Line 3, column max_mpa reads -8"),
        ("max_mpa,ratio,count\n80,0,1.5\n", "Line 2, column count reads 1.5"),
        ("max_mpa,ratio,count\n80,0,6000000\n", "at most 5,000,000"),
    ],
)
def test_a_wrong_text_is_refused_with_its_line(text, words):
    with pytest.raises(InputError) as refused:
        table_text.points_from_text(text)
    assert words in str(refused.value)


def test_a_table_that_does_not_say_what_it_counts_is_refused():
    with pytest.raises(InputError, match="exceedances or level_mpa, occurrences"):
        table_text.levels_from_text("level_mpa,count\n10,5\n20,1\n")
