"""Plates: published curves, an independent library, energy solutions, tendencies."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from repairs.analysis.errors import InputError, OutOfRangeError
from repairs.analysis.strength import buckling
from repairs.analysis.strength.buckling import Edges
from tests.outside import outside
from tests.repairs.analysis.plates import (
    BENT,
    COMPRESSED,
    SHEARED,
    buckling_coefficient,
)

LIBRARY = "panels 0.14.0, Ritz with hierarchic shapes"
FIGURE_14 = "NACA TN 3781 figure 14, curve read in a public digitisation"
FIGURE_22 = "NACA TN 3781 figure 22, curve read in a public digitisation"


@pytest.mark.parametrize(
    ("ratio", "k", "rel"),
    [(0.6267, 4.944, 0.01), (0.9775, 4.033, 0.01), (1.4198, 4.540, 0.015),
     (2.0158, 4.051, 0.015), (4.0, 4.028, 0.01)],
)  # fmt: skip
def test_compression_on_the_published_curve(ratio, k, rel):
    outside(
        "Plate in compression, simply supported: k",
        source=FIGURE_14,
        given=f"a/b {ratio:g}",
        published=k,
        computed=buckling.compression_coefficient(Edges.SIMPLE, ratio, 1, 0.3),
        rel=rel,
        route="quoted",
    )


@pytest.mark.parametrize(("ratio", "k"), [(0.8, 4.2025), (1.0, 4.0), (1.5, 4.3403)])
def test_compression_by_an_independent_library(ratio, k):
    outside(
        "Plate in compression, simply supported: k",
        source=LIBRARY,
        given=f"a/b {ratio:g}",
        published=k,
        computed=buckling.compression_coefficient(Edges.SIMPLE, ratio, 1, 0.3),
        rel=1e-4,
        route="library",
    )


def test_a_free_edge_on_the_published_curve():
    outside(
        "Flange in compression, one edge free: k",
        source=FIGURE_14,
        given="a/b 4.98",
        published=0.426,
        computed=buckling.compression_coefficient(Edges.SIMPLE_FREE, 4.98, 1, 0.3),
        rel=0.01,
        route="quoted",
    )


@pytest.mark.parametrize(
    ("edges", "ratios", "held", "poisson"),
    [
        (Edges.CLAMPED, (0.6, 0.72), "CC", 0.3),
        (Edges.CLAMPED_SIMPLE, (0.72, 0.88), "CS", 0.3),
        (Edges.CLAMPED_FREE, (1.5, 1.8), "CF", 0.33),
    ],
)
def test_long_plates_by_the_least_energy_over_the_wave(edges, ratios, held, poisson):
    least = min(
        buckling_coefficient(ratio, "SS", held, COMPRESSED, poisson, (4, 8))
        for ratio in np.linspace(*ratios, 13)
    )
    k = buckling.compression_coefficient(edges, 100, 1, poisson)
    outside(
        "Long plate in compression: k",
        source="Energy solution, least over the wavelength",
        given=f"{edges}, Poisson's ratio {poisson:g}",
        published=least,
        computed=k,
        rel=0.003,
        route="another method",
    )
    assert k <= least


@pytest.mark.parametrize("ratio", [0.7, 1.0, 1.5, 3.0])
@pytest.mark.parametrize(
    ("edges", "held"),
    [(Edges.CLAMPED, "CC"), (Edges.CLAMPED_SIMPLE, "CS"), (Edges.SIMPLE_FREE, "SF"),
     (Edges.CLAMPED_FREE, "CF")],
)  # fmt: skip
def test_the_long_plates_value_is_safe_at_every_length(edges, held, ratio):
    exact = buckling_coefficient(ratio, "SS", held, COMPRESSED, 0.3)
    assert buckling.compression_coefficient(edges, ratio, 1, 0.3) <= exact * 1.0001


@pytest.mark.parametrize(
    ("edges", "ratio", "k", "rel"),
    [(Edges.SIMPLE, 1.0, 9.68, 0.04), (Edges.SIMPLE, 1.53, 7.00, 0.02),
     (Edges.SIMPLE, 2.0, 6.43, 0.02), (Edges.SIMPLE, 3.0, 5.83, 0.02),
     (Edges.SIMPLE, 5.0, 5.54, 0.02), (Edges.CLAMPED, 1.0, 15.0, 0.04),
     (Edges.CLAMPED, 1.98, 10.4, 0.02), (Edges.CLAMPED, 3.0, 9.75, 0.02),
     (Edges.CLAMPED, 5.0, 9.59, 0.05)],
)  # fmt: skip
def test_shear_on_the_published_curve(edges, ratio, k, rel):
    outside(
        f"Plate in shear, {'clamped' if edges is Edges.CLAMPED else 'simple'}: k",
        source=FIGURE_22,
        given=f"a/b {ratio:g}",
        published=k,
        computed=buckling.shear_coefficient(edges, ratio, 1),
        rel=rel,
        route="quoted",
    )


@pytest.mark.parametrize(
    ("edges", "ratio", "k"),
    [(Edges.SIMPLE, 1, 9.3245), (Edges.SIMPLE, 2, 6.546), (Edges.SIMPLE, 3, 5.8402),
     (Edges.CLAMPED, 1, 14.642), (Edges.CLAMPED, 2, 10.248),
     (Edges.CLAMPED, 3, 9.5344)],
)  # fmt: skip
def test_shear_by_an_independent_library(edges, ratio, k):
    found = buckling.shear_coefficient(edges, ratio, 1)
    outside(
        f"Plate in shear, {'clamped' if edges is Edges.CLAMPED else 'simple'}: k",
        source=LIBRARY,
        given=f"a/b {ratio:g}",
        published=k,
        computed=found,
        rel=0.031,
        route="library",
    )
    assert found < 1.014 * k


@pytest.mark.parametrize("ratio", [1.25, 1.75, 2.5, 4.0])
@pytest.mark.parametrize(
    ("edges", "held"), [(Edges.SIMPLE, "SS"), (Edges.CLAMPED, "CC")]
)
def test_shear_over_its_range_by_energy(edges, held, ratio):
    exact = buckling_coefficient(ratio, held, held, SHEARED, terms=(16, 9))
    found = buckling.shear_coefficient(edges, 1, ratio)
    assert 0.965 * exact < found < 1.02 * exact


@pytest.mark.parametrize(
    ("edges", "held", "ratios"),
    [(Edges.SIMPLE, "SS", (0.6, 0.72)), (Edges.CLAMPED, "CC", (0.42, 0.52))],
)
def test_webs_in_bending_by_energy(edges, held, ratios):
    least = min(
        buckling_coefficient(ratio, "SS", held, BENT, terms=(4, 11))
        for ratio in np.linspace(*ratios, 13)
    )
    outside(
        "Long web bent in its plane: k",
        source="Energy solution, least over the wavelength",
        given=str(edges),
        published=least,
        computed=buckling.bending_coefficient(edges),
        rel=0.001,
        route="another method",
    )


def test_buckling_stress_of_a_skin_panel_and_of_the_panel_blended():
    # k 4, E 10.7 Msi, nu 0.33, b 5 in: pi^2/12(1 - nu^2) = 0.92299.
    for t, stress in ((0.063, 6271.6), (0.9 * 0.063, 5080.0)):
        outside(
            "Panel buckling in compression",
            source="Classical plate formula by hand",
            given=f"t {t:.4f}, b 5 in, E 10.7 Msi, k 4",
            published=stress,
            computed=buckling.plate_stress(4, 10.7e6, 0.33, t, 5),
            unit="psi",
            rel=1e-4,
            route="closed form",
        )
    assert buckling.plate_stress(4, 73_800, 0.33, 1.6, 125) == pytest.approx(
        44.64, abs=0.005
    )


@given(st.floats(0.5, 3), st.floats(50, 300))
def test_ten_per_cent_of_thickness_costs_nineteen_of_stress(thickness, width):
    whole = buckling.plate_stress(4, 72_000, 0.33, thickness, width)
    blended = buckling.plate_stress(4, 72_000, 0.33, 0.9 * thickness, width)
    assert blended / whole == pytest.approx(0.81)


@given(st.floats(0.3, 10), st.floats(1.01, 2))
def test_a_longer_plate_is_never_above_the_envelope(ratio, more):
    short = buckling.compression_coefficient(Edges.SIMPLE, ratio, 1, 0.3)
    assert short >= 4
    assert short <= (1 / ratio + ratio) ** 2 + 1e-12
    here = buckling.shear_coefficient(Edges.SIMPLE, ratio * more, 1)
    assert buckling.shear_coefficient(Edges.SIMPLE, 1, ratio * more) == here


def test_which_edge_holds_most():
    order = (Edges.SIMPLE_FREE, Edges.CLAMPED_FREE, Edges.SIMPLE, Edges.CLAMPED_SIMPLE,
             Edges.CLAMPED)  # fmt: skip
    values = [buckling.compression_coefficient(e, 100, 1, 0.3) for e in order]
    assert values == sorted(values)


def test_edges_without_a_coefficient_are_refused():
    with pytest.raises(InputError, match="No coefficient for shear"):
        buckling.shear_coefficient(Edges.SIMPLE_FREE, 2, 1)
    with pytest.raises(InputError, match="in-plane bending"):
        buckling.bending_coefficient(Edges.CLAMPED_FREE)
    with pytest.raises(OutOfRangeError, match="Poisson"):
        buckling.compression_coefficient(Edges.CLAMPED_FREE, 2, 1, 0.4)
    with pytest.raises(OutOfRangeError, match="thin plate"):
        buckling.plate_stress(4, 72_000, 0.33, 2, 8)


@given(st.floats(1, 1e5), st.floats(50, 500))
def test_the_parabola_is_smooth_below_both_limits(elastic, cut_off):
    found = buckling.johnson(elastic, cut_off)
    assert found <= min(elastic, cut_off)
    assert buckling.johnson(elastic * 1.01, cut_off) > found
    # It meets the elastic curve at half of the cut-off with the same slope.
    h = cut_off / 2
    step = 1e-6 * h
    slope = (buckling.johnson(h + step, cut_off) - buckling.johnson(h, cut_off)) / step
    assert slope == pytest.approx(1, abs=1e-4)


def test_effective_width():
    outside(
        "Effective width of buckled skin",
        source="von Karman's width, 1.9 t sqrt(E/F), by hand",
        given="t 0.063 in, E 10.7 Msi, F 30 ksi, Poisson's ratio 0.3",
        published=2.261,
        computed=buckling.effective_width(10_700, 0.3, 0.063, 30),
        unit="in",
        rel=0.001,
        route="closed form",
    )
    # The width returned buckles, simply supported, at just that stress.
    width = buckling.effective_width(72_000, 0.33, 1.2, 200)
    assert buckling.plate_stress(4, 72_000, 0.33, 1.2, width) == pytest.approx(200)
    assert math.isclose(buckling.effective_width(72_000, 0.33, 1.08, 200), 0.9 * width)
