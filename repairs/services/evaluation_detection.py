"""The detection curve of the inspection method that an evaluation is made for."""

from __future__ import annotations

import math

from fleet.models import DetectableSize
from repairs.analysis.inspection.detection import (
    DetectionCurve,
    SizeMeaning,
    Study,
    Technique,
    log_logistic,
    log_normal,
)
from repairs.analysis.inspection.known import Detection
from repairs.analysis.types import Sourced
from repairs.services.evaluation_materials import grade_of

DETECTION_TARGET = "detection_target_percent"
"""Policy key of the chance of detection that an operator asks of a plan."""
CURVES = {"normal": log_normal, "logistic": log_logistic}
TECHNIQUES = {
    "general_visual": Technique.GENERAL_VISUAL,
    "detailed_visual": Technique.DETAILED_VISUAL,
    "penetrant": Technique.PENETRANT,
    "magnetic_particle": Technique.MAGNETIC_PARTICLE,
    "eddy_current_high": Technique.EDDY_CURRENT_SURFACE,
    "eddy_current_low": Technique.EDDY_CURRENT_LOW_FREQUENCY,
    "bolt_hole_eddy_current": Technique.EDDY_CURRENT_BOLT_HOLE,
    "ultrasonic": Technique.ULTRASONIC,
    "radiographic": Technique.RADIOGRAPHIC,
}
"""Inspection methods as findings name them to what their curve was measured with."""


def detection_of(size: DetectableSize) -> Detection | None:
    """The curve of a detectable size with what hides part of the crack, or None."""
    if size.half_found_mm is None or size.method not in TECHNIQUES:
        return None
    title = f"{size.method.replace('_', ' ')}, {size.detail}"
    return Detection(
        title,
        _curve(size),
        size.hidden_mm,
        _share(size, size.done_share),
        _share(size, size.never_share),
    )


def _curve(size: DetectableSize) -> DetectionCurve:
    """The database keeps a curve whole: all of its columns, or none."""
    study = Study(
        TECHNIQUES[size.method],
        SizeMeaning.BEYOND_COVER,
        size.smallest_tried_mm or 0.0,
        size.largest_tried_mm or 0.0,
        size.flaws_tried or 0,
        size.source,
        grade_of(size.grade),
    )
    make = CURVES[size.curve_link or "normal"]
    return make(math.log(size.half_found_mm or 0.0), size.curve_deviation or 0.0, study)


def _share(size: DetectableSize, share: float | None) -> Sourced:
    assert share is not None, "the database keeps a curve whole"
    return Sourced(share, "-", size.source, grade_of(size.grade))
