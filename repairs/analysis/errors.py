"""Refusals of the calculation part: what was read, what was expected, the mend."""

from __future__ import annotations

OUT_OF_RANGE = "{what} is {value:.4g}, outside {low:.4g} to {high:.4g} ({why}). {mend}"
NOT_FINITE = "{what} reads {value!r}; a finite number is expected. Enter it again."
WITHOUT_SOURCE = (
    "{what} has no source. Name the document, drawing or record it is from."
)
UNKNOWN_INPUT = "No method knows an input called {name!r}. Use one of: {known}."
UNKNOWN_FORM = "No form is called {name!r}. Use one of: {known}."
UNKNOWN_METHOD = "No method is called {name!r}. Use one of: {known}."
WRONG_KIND = "Input {name} reads {read!r}; {expected} is expected."
WRONG_UNIT = "Input {name} is in {read}; {expected} is expected. Convert it on entry."


class AnalysisError(ValueError):
    """A calculation that cannot be made as asked."""


class InputError(AnalysisError):
    """An input that is not what its name promises."""


class OutOfRangeError(AnalysisError):
    """A published solution asked outside the range it was published for."""


def within(
    what: str,
    value: float,
    low: float,
    high: float,
    why: str,
    mend: str = "Choose another solution.",
) -> float:
    """Return `value` if it lies in [low, high], else refuse with the reason."""
    if not low <= value <= high:  # also refuses NaN
        raise OutOfRangeError(
            OUT_OF_RANGE.format(
                what=what, value=value, low=low, high=high, why=why, mend=mend
            )
        )
    return value
