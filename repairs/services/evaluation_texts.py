"""The frozen texts of an evaluation: canonical, the same on every machine."""

from __future__ import annotations

import platform

import numpy
import scipy

from fleet.canonical import canonical
from repairs.analysis.assessment import Answer, Assessment
from repairs.analysis.inputs import Inputs
from repairs.analysis.plain import as_plain


def texts_of(assessment: Assessment, inputs: Inputs) -> dict[str, str]:
    """Inputs, outputs, tests, note and libraries, as an evaluation keeps them."""
    result = assessment.result
    return {
        "inputs": canonical(inputs.as_data()),
        "outputs": canonical(outputs_of(assessment)),
        "applicability": canonical(as_plain(result.applicability)),
        "note": canonical(as_plain(result.note)),
        "libraries": canonical(_libraries()),
    }


def outputs_of(assessment: Assessment) -> dict[str, object]:
    """All the result says but note and tests, which have texts of their own, and what
    each method asked said for itself."""
    result = assessment.result
    said = as_plain(result)
    for name in ("applicability", "note"):
        del said[name]
    return said | {
        "threshold_cycles": result.threshold_cycles,
        "repeat_cycles": result.repeat_cycles,
        "asked": [_asked(answer) for answer in assessment.answers],
    }


def _asked(answer: Answer) -> dict[str, object]:
    """One method's answer, short: the long parts stand in the whole."""
    result = answer.result
    return {
        "method": result.method,
        "version": result.version,
        "title": result.title,
        "part": answer.part.value,
        "outcome": result.outcome.value,
        "governing": result.governing,
        "margin_residual": result.margin_residual,
        "margin_ultimate": result.margin_ultimate,
        "life_cycles": result.life_cycles,
        "life_after_factor_cycles": result.life_after_factor_cycles,
        "threshold_cycles": result.threshold_cycles,
        "repeat_cycles": result.repeat_cycles,
        "missing": as_plain(result.missing),
        "applicability": as_plain(result.applicability),
        "warnings": list(result.warnings),
        "assumptions": list(result.assumptions),
    }


def _libraries() -> dict[str, str]:
    return {
        "python": platform.python_version(),
        "numpy": numpy.__version__,
        "scipy": scipy.__version__,
    }
