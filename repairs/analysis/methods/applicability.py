"""Applicability tests: run first, on the record, with value and limit of each."""

from __future__ import annotations

from repairs.analysis.inputs import Inputs
from repairs.analysis.surroundings import ObstacleKind, Surroundings
from repairs.analysis.types import Applicability

NOT_RECORDED = "not recorded"
NONE_HERE = "none in this section"


def word_is(inputs: Inputs, name: str, test: str, allowed: str) -> Applicability:
    """Test that a stated word is the one allowed; 'unknown' is not recorded."""
    value = inputs.word(name)
    if value is None or value == "unknown":
        return Applicability(test, value or NOT_RECORDED, allowed, None)
    return Applicability(test, value.replace("_", " "), allowed, value == allowed)


def word_is_not(inputs: Inputs, name: str, test: str, barred: str) -> Applicability:
    """Test that a stated word is not the one barred; 'unknown' is not recorded."""
    value = inputs.word(name)
    limit = f"not {barred.replace('_', ' ')}"
    if value is None or value == "unknown":
        return Applicability(test, value or NOT_RECORDED, limit, None)
    return Applicability(test, value.replace("_", " "), limit, value != barred)


def word_among(
    inputs: Inputs, name: str, test: str, allowed: tuple[str, ...]
) -> Applicability:
    """Test that a stated word is one of those allowed; 'unknown' is not recorded."""
    value = inputs.word(name)
    limit = " or ".join(word.replace("_", " ") for word in allowed)
    if value is None or value == "unknown":
        return Applicability(test, value or NOT_RECORDED, limit, None)
    return Applicability(test, value.replace("_", " "), limit, value in allowed)


def word_outside(
    inputs: Inputs, name: str, test: str, barred: tuple[str, ...]
) -> Applicability:
    """Test that a stated word is none of those barred; 'unknown' is not recorded."""
    value = inputs.word(name)
    limit = "not " + " or ".join(word.replace("_", " ") for word in barred)
    if value is None or value == "unknown":
        return Applicability(test, value or NOT_RECORDED, limit, None)
    return Applicability(test, value.replace("_", " "), limit, value not in barred)


def at_least(test: str, value: float | None, limit: float, unit: str) -> Applicability:
    """Test that a number is not below a limit."""
    wanted = f"at least {limit:.4g} {unit}".rstrip()
    if value is None:
        return Applicability(test, NOT_RECORDED, wanted, None)
    return Applicability(test, f"{value:.4g} {unit}".rstrip(), wanted, value >= limit)


def above(test: str, value: float | None, limit: float, unit: str) -> Applicability:
    """Test that a number is above a limit."""
    wanted = f"above {limit:.4g} {unit}".rstrip()
    if value is None:
        return Applicability(test, NOT_RECORDED, wanted, None)
    return Applicability(test, f"{value:.4g} {unit}".rstrip(), wanted, value > limit)


def at_most(test: str, value: float | None, limit: float, unit: str) -> Applicability:
    """Test that a number is not above a limit."""
    wanted = f"at most {limit:.4g} {unit}".rstrip()
    if value is None:
        return Applicability(test, NOT_RECORDED, wanted, None)
    return Applicability(test, f"{value:.4g} {unit}".rstrip(), wanted, value <= limit)


def clear_of(
    around: Surroundings | None, kind: ObstacleKind, limit: float | None, rule: str
) -> Applicability:
    """Test that the damage keeps its distance from the nearest obstacle of a kind."""
    test = f"distance of the damage from any {kind}"
    wanted = rule if limit is None else f"at least {limit:.1f} mm ({rule})"
    if around is None or limit is None:
        return Applicability(test, NOT_RECORDED, wanted, None)
    nearest = around.nearest(kind)
    if nearest is None:
        return Applicability(test, NONE_HERE, wanted, True)
    distance, label = nearest
    return Applicability(
        test, f"{distance:.1f} mm to {label}", wanted, distance >= limit
    )


def inside_one_bay(around: Surroundings | None) -> Applicability:
    """Test that the damage does not reach a frame of its bay."""
    test, wanted = "inside one bay", "no tip at or beyond a frame"
    if around is None:
        return Applicability(test, NOT_RECORDED, wanted, None)
    room = around.frame_room()
    if room is None:
        return Applicability(test, "no frames round it", wanted, False)
    value = f"{room:.1f} mm from a frame of {around.bay_label}"
    return Applicability(test, value, wanted, room > 0)
