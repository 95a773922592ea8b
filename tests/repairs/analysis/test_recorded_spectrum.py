"""Panels with a recorded spectrum: lives against a loop of our own, cycle by cycle.

The loop counts with the `rainflow` library and adds da of each cycle in turn.
"""

from __future__ import annotations

import itertools
import json
import math

import pytest
import rainflow as library

from repairs.analysis.growth.laws import FormanLaw
from repairs.analysis.inputs import Inputs
from repairs.analysis.note import Note
from repairs.analysis.spectra.recorded import RecordedSpectrum
from repairs.analysis.spectra.wing_sequence import GROUND_RATIO
from repairs.analysis.types import Grade, Reference, Result, Stated
from tests.outside import outside
from tests.repairs.analysis.cases import BLEND, CRACK, CURVES, LAW, recorded, said
from tests.repairs.analysis.crack_cases import EDGE, FLAT, OF_PRESSURE, found, unknown

METHOD, TITLE = "unpressurised-skin-crack", "Through crack in unpressurised skin"
POINTS = (-30.0, 120.0, 40.0, 100.0, 10.0, 60.0, -30.0, 90.0, 20.0, 110.0)
FLIGHTS = 2
CHOICES = {
    "residue": "repeating",
    "clip_above_mpa": None,
    "clip_below_mpa": None,
    "omit_below_range_mpa": None,
}
FORMAN = FormanLaw.from_mpa_root_metre(
    4.0e-5, 2.9, 120.0, Reference("made for the test", Grade.RECORDED)
)
NO_CYCLE = {"cycle_max_stress": None, "cycle_ratio": None}
BLENDED = {
    **{name: value for name, value in BLEND.items() if name not in OF_PRESSURE},
    "pressurised": said("no"),
    "limit_flight_stress": recorded(150.0, "MPa"),
}


def spectrum(name="measured", **content) -> RecordedSpectrum:
    text = json.dumps(content)
    return RecordedSpectrum.read(name, "report of the test", text, text)


def sequence(factor=1.0, name="measured", **changed) -> RecordedSpectrum:
    points = [factor * point for point in POINTS]
    plain = {"points_mpa": points, "flights": FLIGHTS, "repeats": True}
    return spectrum(name, kind="sequence", **{**plain, **CHOICES, **changed})


def wing(mean=70.0, **changed) -> RecordedSpectrum:
    return spectrum(
        "wing",
        kind="wing_sequence",
        **{
            "form": "full",
            "place": "wing_lower_surface",
            "mean_flight_stress_mpa": mean,
            "ground_ratio": GROUND_RATIO.value,
            "ground_ratio_source": GROUND_RATIO.source,
            "ground_ratio_grade": "memory",
            "seed": 7,
            "halves": "same_level",
            "truncate_above": None,
            "omit_below": None,
            "residue": "repeating",
            **changed,
        },
    )


def crack(given: RecordedSpectrum, method=METHOD, base=FLAT, **changed) -> Result:
    return found(method, base, spectrum=given, **{**NO_CYCLE, **changed})


def cycles_of_block() -> list[tuple[float, float]]:
    """(range, R) of the block's cycles, by the library, from the largest point on."""
    top = POINTS.index(max(POINTS))
    turned = [*POINTS[top:], *POINTS[: top + 1]]
    halves = [
        (span, mean, count) for span, mean, count, *_ in library.extract_cycles(turned)
    ]
    whole = [row for row in halves if row[2] == 1.0]
    rest = [row for row in halves if row[2] == 0.5][::2]  # in pairs of equal range
    return [(s, (m - s / 2) / (m + s / 2)) for s, m, _ in (*whole, *rest)]


def walker(delta_k: float, ratio: float) -> float:
    part = 1 - LAW.gamma if ratio >= 0 else 1.0
    return LAW.coefficient * (delta_k / (1 - ratio) ** part) ** LAW.exponent


def forman(delta_k: float, ratio: float) -> float:
    counted = delta_k if ratio >= 0 else delta_k / (1 - ratio)
    room = (1 - max(ratio, 0.0)) * FORMAN.toughness - counted
    return FORMAN.coefficient * counted**FORMAN.exponent / room


def looped_flights(start: float, end: float, factor, rate=walker) -> float:
    """Flights from one length to another, every cycle in turn."""
    cycles, length, blocks = cycles_of_block(), start, 0
    while length < end:
        for span, ratio in cycles:
            shape = factor(length) * math.sqrt(math.pi * length)
            length += rate(shape * span, ratio)
        blocks += 1
    return blocks * FLIGHTS


def ends(result: Result, symbol: str) -> list[float]:
    return [
        row.value
        for row in result.note
        if row.symbol == symbol and row.value is not None
    ]


def test_a_cracks_life_is_that_of_every_cycle_in_turn():
    result = crack(sequence())
    end = ends(result, "2a")[-1] / 2

    def secant(a: float) -> float:
        return math.sqrt(1 / math.cos(math.pi * a / 500.0))

    looped = looped_flights(12.0, end, secant)
    outside(
        TITLE,
        source="loop over every cycle, counted by the rainflow library 3.2",
        given="ten turning points in two flights, 2a 24 mm in a sheet of 500 mm",
        published=looped,
        computed=result.lives[-1].cycles,
        unit="flights",
        rel=2e-3,
        route="another method",
    )


def test_a_law_that_no_one_cycle_stands_for_is_added_up_over_the_flight():
    result = crack(sequence(), growth_law=FORMAN)
    end = ends(result, "2a")[-1] / 2

    def secant(a: float) -> float:
        return math.sqrt(1 / math.cos(math.pi * a / 500.0))

    outside(
        "Growth per flight by Forman's law",
        source="loop over every cycle, counted by the rainflow library 3.2",
        given="ten turning points in two flights, 2a 24 mm in a sheet of 500 mm",
        published=looped_flights(12.0, end, secant, forman),
        computed=result.lives[-1].cycles,
        unit="flights",
        rel=2e-3,
        route="another method",
    )


def test_an_edge_cracks_life_is_that_of_every_cycle_in_turn():
    result = crack(sequence(), "edge-crack", EDGE)
    end = ends(result, "a")[-1]

    def tada(a: float) -> float:
        half = math.pi * a / 2 / 150.0
        shape = 0.752 + 2.02 * a / 150.0 + 0.37 * (1 - math.sin(half)) ** 3
        return math.sqrt(math.tan(half) / half) * shape / math.cos(half)

    looped = looped_flights(24.0, end, tada)
    outside(
        "Crack from an edge or a cut-out's corner",
        source="loop over every cycle, counted by the rainflow library 3.2; Tada's "
        "factor written out once more",
        given="ten turning points in two flights, a 24 mm in a strip of 150 mm",
        published=looped,
        computed=result.lives[-1].cycles,
        unit="flights",
        rel=5e-3,
        route="another method",
    )


def test_a_blend_sums_each_cycle_over_its_life():
    given, share = sequence(1.6), (1.4 - 0.17) / 1.4
    result = unknown("corrosion-blend-out", BLENDED, spectrum=given)
    (kt,) = ends(result, "Kt")
    damage = 0.0
    for span, ratio in cycles_of_block():
        top = 1.6 * span / (1 - ratio) / share
        life = CURVES.cycles(kt, top, ratio)
        damage += 0 if life is None else 1 / life / FLIGHTS
    (after,) = ends(result, "N_after")
    outside(
        "Miner sum of a flight's counted cycles",
        source="each cycle's n/N added by hand, counted by the rainflow library 3.2",
        given=f"ten turning points in two flights, Kt {kt:.2f}",
        published=1 / damage,
        computed=after,
        unit="flights",
        rel=1e-9,
        route="another method",
    )
    assert "not chosen" in " ".join(result.barred)


def test_equal_content_gives_one_life_whatever_it_is_called():
    first, second = sequence(name="first"), sequence(name="second")
    assert first.flight is second.flight
    lives = [crack(given).lives for given in (first, second)]
    assert lives[0] == lives[1]


def test_one_cycle_a_flight_is_the_constant_cycle():
    one = sequence(points_mpa=[-16.0, 80.0], flights=1)
    constant = found(METHOD, FLAT)
    assert crack(one).lives == constant.lives
    assert crack(one).residual_strength_mpa == constant.residual_strength_mpa


def test_every_life_falls_as_every_stress_rises():
    factors = (0.7, 1.0, 1.3)
    grown = [crack(sequence(factor)).life_cycles for factor in factors]
    summed = [
        ends(
            unknown("corrosion-blend-out", BLENDED, spectrum=sequence(1.4 * f)),
            "N_after",
        )[0]
        for f in factors
    ]
    for lives in (grown, summed):
        assert all(a > b for a, b in itertools.pairwise(lives))


def test_leaving_small_ranges_out_lengthens_both_lives_and_says_so():
    whole, cut = sequence(1.4), sequence(1.4, omit_below_range_mpa=90.0)
    assert crack(cut).life_cycles > crack(whole).life_cycles
    assert any("Ranges below 90 MPa are left out" in w for w in crack(cut).warnings)
    clipped = crack(sequence(clip_above_mpa=100.0))
    assert any("Stresses are clipped" in words for words in clipped.warnings)
    assert clipped.life_cycles > crack(sequence()).life_cycles


def test_the_standard_wing_sequence_is_barred_while_its_table_is_from_memory():
    result = crack(wing())
    assert result.source_from_memory
    assert result.life_cycles is not None
    assert ends(result, "σ_max")[0] == pytest.approx(70 * 2.6)
    more = crack(wing(77.0))
    assert more.life_cycles < result.life_cycles
    again = crack(wing(seed=8))
    assert again.life_cycles == pytest.approx(result.life_cycles, rel=0.01)


def test_what_small_cycles_count_is_a_stated_choice():
    given = wing(90.0)
    chosen = {
        "below_last_term": said("slope_doubled"),
        "below_join_life": recorded(1e7, "cycles"),
    }
    none, longer = (
        unknown("corrosion-blend-out", BLENDED, spectrum=given, **more)
        for more in ({}, chosen)
    )
    assert ends(longer, "N_after")[0] < ends(none, "N_after")[0]
    assert not any("not chosen" in words for words in longer.barred)
    lacking = unknown(
        "corrosion-blend-out",
        BLENDED,
        spectrum=given,
        below_last_term=said("slope_continued"),
    )
    assert any("state the longest life tested" in words for words in lacking.warnings)
    assert ends(lacking, "N_after") == ends(none, "N_after")


WHEELER = {
    "retardation": said("wheeler"),
    "wheeler_exponent": recorded(1.4, "-"),
    "stress_state": said("plane_stress"),
}


def test_a_retarded_life_stands_beside_and_never_governs():
    points = [*POINTS, *([10.0, 70.0] * 30), 10.0, 150.0]
    given = sequence(points_mpa=points)
    plain, beside = crack(given), crack(given, **WHEELER)
    assert beside.life_cycles == plain.life_cycles
    assert beside.life_after_factor_cycles == plain.life_after_factor_cycles
    *counted, ultimate, residual = beside.lives
    assert tuple(counted) == plain.lives
    for life, ours in zip((ultimate, residual), counted, strict=True):
        assert life.remark == "for comparison; not used"
        assert life.cycles > ours.cycles
    assert any("Wheeler's exponent depends" in words for words in beside.warnings)


def test_retardation_without_its_constants_is_not_shown_and_says_what_lacks():
    result = crack(sequence(), retardation=said("wheeler"))
    assert len(result.lives) == 2
    assert any("Wheeler's exponent, fitted" in words for words in result.warnings)
    constant = found(METHOD, FLAT, **WHEELER)
    assert any("no overload" in words for words in constant.warnings)


def test_a_pressure_cycle_lengthens_the_life_by_the_power_of_its_share():
    share = {"share_of_normal": 0.8, "ground_share_of_normal": 0.0, "ground": "open"}
    shell = dict(CRACK)
    shell["external_pressure"] = recorded(0.0, "MPa")
    method = "pressurised-skin-longitudinal-crack"
    lower = found(method, shell, spectrum=spectrum(kind="pressure", **share))
    whole = found(method, shell)
    last = [result.lives[-1].cycles for result in (whole, lower)]
    assert last[1] == pytest.approx(last[0] * 0.8**-LAW.exponent, rel=1e-4)


def test_stress_along_the_section_is_not_taken_for_hoop():
    shell = dict(CRACK)
    method = "pressurised-skin-longitudinal-crack"
    result = found(method, shell, spectrum=sequence())
    assert any("does not use it" in words for words in result.warnings)
    assert result.lives == found(method, shell).lives


def test_a_frozen_input_names_content_by_digest_and_every_choice():
    data = Inputs({"spectrum": wing(), "element": Stated("skin", "test")}).as_data()
    kept = data["spectrum"]
    assert kept["grade"] == "memory"
    assert ["seed of the drawn order", "7"] in kept["choices"]
    assert json.dumps(data)
    note = Note()
    wing().write(note)
    assert note.source_from_memory
