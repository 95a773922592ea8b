"""Stiffened panel: the worksheet's three curves, arrest, and the two-bay crack.

Inputs and digitised curves from a public university worksheet; strengths recomputed
independently from them (skin, stiffener, fastener, ksi).
"""

from __future__ import annotations

import math
from dataclasses import replace
from functools import lru_cache

import pytest

from repairs.analysis.errors import AnalysisError
from repairs.analysis.intensity.stiffened_sheet import (
    CrackCentre,
    StiffenedCrack,
    StiffenedSheet,
    stiffened_crack,
)
from repairs.analysis.strength import stiffened as sp
from repairs.analysis.types import INCH, KSI, GrossStress, HalfLength

PITCH, THICKNESS = 10.0, 0.063
PANEL = sp.StiffenedPanel(68, 1.0, 1.0, 65, 50 * math.pi / 4 * (5 / 16) ** 2)
BETA = {
    0.1: 0.995, 0.2: 0.98, 0.3: 0.94, 0.4: 0.87, 0.45: 0.79, 0.5: 0.60, 0.55: 0.43,
    0.575: 0.41, 0.6: 0.41, 0.65: 0.43, 0.7: 0.45, 0.8: 0.49, 0.9: 0.52, 1.0: 0.54,
}  # fmt: skip
STIFFENER = (1, 1.05, 1.125, 1.25, 1.6, 1.8, 2.0, 2.15, 2.25, 2.4)
FASTENER = (0, 0, 0, 0, 0.08, 0.16, 0.19, 0.21, 0.23, 0.24)


def charts(half_length: HalfLength) -> StiffenedCrack:
    """Read the digitised charts between their points, in inches."""
    share = half_length / PITCH
    grid = [i / 10 for i in range(1, 11)]

    def between(xs: list[float], ys: list[float]) -> float:
        for i in range(1, len(xs)):
            if share <= xs[i] + 1e-12:
                part = (share - xs[i - 1]) / (xs[i] - xs[i - 1])
                return ys[i - 1] + part * (ys[i] - ys[i - 1])
        raise ValueError(share)

    return StiffenedCrack(
        between(list(BETA), list(BETA.values())),
        between(grid, list(STIFFENER)),
        between(grid, list(FASTENER)) * PITCH * THICKNESS,
    )


@pytest.mark.parametrize(
    ("share", "skin", "stiffener", "fastener", "governing"),
    [
        (0.2, 27.68, 61.90, None, sp.SKIN),
        (0.4, 22.05, 52.00, None, sp.SKIN),
        (0.5, 28.60, 40.62, 76.09, sp.SKIN),
        (0.6, 38.20, 36.11, 38.05, sp.STIFFENER),
        (0.8, 27.68, 30.23, 28.99, sp.SKIN),
        (1.0, 22.47, 27.08, 25.36, sp.SKIN),
    ],
)
def test_three_curves_of_the_worksheet(share, skin, stiffener, fastener, governing):
    half = HalfLength(share * PITCH)
    found = sp.panel_strength(PANEL, charts(half), half)
    each = dict(found.each)
    assert each[sp.SKIN] == pytest.approx(skin, abs=6e-3)
    assert each[sp.STIFFENER] == pytest.approx(stiffener, abs=0.012)
    if fastener is None:
        assert each[sp.FASTENER] is None
    else:
        assert each[sp.FASTENER] == pytest.approx(fastener, abs=0.012)
    assert found.governing == governing


def test_arrest_of_the_worksheet():
    # Skin smallest 22.05 at a/b 0.40; peak 39.02 at 0.575, where the stiffener governs
    # at about 37.
    found = sp.arrest(PANEL, charts, HalfLength(3.0), HalfLength(7.0))
    assert found.critical == pytest.approx(22.05, abs=0.1)
    assert found.at / PITCH == pytest.approx(0.40, abs=0.02)
    assert found.arrested_at / PITCH == pytest.approx(0.575, abs=0.01)
    assert dict(found.peak.each)[sp.SKIN] == pytest.approx(39.02, abs=0.15)
    assert found.peak.governing == sp.STIFFENER
    assert found.peak.stress == pytest.approx(37, abs=0.5)
    assert found.holds
    assert found.meets(GrossStress(36.0))
    assert not found.meets(GrossStress(38.0))


def test_without_a_stiffener_in_range_there_is_no_arrest():
    with pytest.raises(AnalysisError, match="no arrest"):
        sp.arrest(PANEL, charts, HalfLength(1.5), HalfLength(3.5))


MODULUS = 10_500 * KSI
SHEET = StiffenedSheet(
    THICKNESS * INCH,
    MODULUS,
    0.33,
    PITCH * INCH,
    0.27 * INCH**2,
    MODULUS,
    0.833 * INCH,
    5 / 16 * INCH,
    4e-5,
)
SI_PANEL = sp.StiffenedPanel(3500.0, MODULUS, MODULUS, 65 * KSI, 17_000.0)


def flat(half_length: float) -> float:
    return 1.0


def test_a_two_bay_crack_is_arrested_just_beyond_the_neighbours(monkeypatch):
    monkeypatch.setattr(sp, "stiffened_crack", lru_cache(stiffened_crack))
    found = sp.two_bay_strength(SHEET, SI_PANEL, flat)
    assert found.holds
    assert 1.0 < found.arrested_at / SHEET.pitch < 1.15
    assert found.at < SHEET.pitch
    # With the middle member whole the skin is stronger, but that member bears most.
    intact = sp.panel_strength(
        SI_PANEL,
        stiffened_crack(SHEET, found.arrested_at, CrackCentre.INTACT_STIFFENER),
        found.arrested_at,
    )
    assert dict(found.peak.each)[sp.SKIN] < dict(intact.each)[sp.SKIN]
    assert intact.governing == sp.STIFFENER
    bulged = sp.two_bay_strength(SHEET, SI_PANEL, lambda a: 1.2)
    assert bulged.critical == pytest.approx(found.critical / 1.2)
    assert bulged.peak.stress <= found.peak.stress + 1e-9


def test_a_stronger_stiffener_or_fastener_never_weakens_the_panel():
    half = HalfLength(1.1 * SHEET.pitch)
    effect = stiffened_crack(SHEET, half, CrackCentre.BROKEN_STIFFENER)
    weak = sp.panel_strength(SI_PANEL, effect, half).stress
    for change in ({"stiffener_strength": 80 * KSI}, {"fastener_strength": 2e4}):
        assert (
            sp.panel_strength(replace(SI_PANEL, **change), effect, half).stress >= weak
        )
