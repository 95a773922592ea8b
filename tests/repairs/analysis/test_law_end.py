"""Where a law of Forman ends along a crack's path."""

from __future__ import annotations

import math

import pytest

from repairs.analysis.growth.law_end import law_end
from repairs.analysis.growth.laws import FormanLaw
from repairs.analysis.types import ROOT_1000, Grade, Outcome, Reference
from tests.repairs.analysis.cases import LAW, recorded
from tests.repairs.analysis.crack_cases import FLAT, found
from tests.repairs.analysis.test_recorded_spectrum import crack, ends, sequence

LOW = FormanLaw.from_mpa_root_metre(
    5.0e-6, 2.88, 30.0, Reference("made for the test", Grade.RECORDED)
)
METHOD = "unpressurised-skin-crack"


def test_it_is_where_the_largest_k_is_the_laws_own():
    # K = S sqrt(pi a): a = (Kc / S)^2 / pi, with F = 1.
    end = law_end(LOW, lambda a: 1.0, 100.0, 0.1, 500.0)
    assert end == pytest.approx((30 * ROOT_1000 / 100) ** 2 / math.pi, rel=1e-5)
    assert law_end(LOW, lambda a: 1.0, 100.0, 0.1, 20.0) is None
    assert law_end(LAW, lambda a: 1.0, 100.0, 0.1, 500.0) is None
    assert law_end(LOW, lambda a: 1.0, 100.0, 100.0, 500.0) == 100.0


@pytest.mark.parametrize("spectrum", [None, sequence()])
def test_growth_ends_there_and_says_so(spectrum):
    given = {"growth_law": LOW, "toughness": recorded(100 * ROOT_1000, "MPa*sqrt(mm)")}
    result = crack(spectrum, **given) if spectrum else found(METHOD, FLAT, **given)
    assert result.outcome is Outcome.COMPUTED
    top = 120.0 if spectrum else 80.0
    half = ends(result, "2a")[-1] / 2
    secant = math.sqrt(1 / math.cos(math.pi * half / 500))
    reached = top * secant * math.sqrt(math.pi * half) / ROOT_1000
    assert reached == pytest.approx(30, rel=1e-4)
    assert any("its Kc reached" in words for words in result.warnings)
    last = result.lives[-1]
    assert last.cycles is not None
    assert "its Kc reached" in last.remark
