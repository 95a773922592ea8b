"""Factors on stress-life beside each other: as fixed, and as its own scatter makes it.

A policy that states deviation, tests and survival implies a factor. Both are written
down; the fixed one divides the life, and where it is the smaller the note warns.

References
----------
.. [1] `repairs.analysis.scatter.factors`, forms (a) and (b); `scatter.tolerance` for a
   deviation estimated from the tests themselves.
"""

from __future__ import annotations

from collections.abc import Sequence

from repairs.analysis.note import Note
from repairs.analysis.scatter import factors as scatter
from repairs.analysis.scatter.factors import FatiguePolicy, Form
from repairs.analysis.scatter.tolerance import factor_from_tests
from repairs.analysis.types import Grade, Reference, Sourced

FORMS = {
    Form.CONFIDENCE: "10^(s (z_p + z_C/√n)), confidence on the mean",
    Form.PREDICTIVE: "10^(s z_p √(1 + 1/n)), one item foretold",
}
FROM_TESTS = (
    "{tests} tests, deviation estimated from them, p = {survival:g}, "
    "C = {confidence:g}: one-sided tolerance factor ({source})"
)
SMALLER = (
    "The scatter factor {fixed:g} is smaller than {made:.2f}, which its own deviation, "
    "tests and survival give; needs an engineer."
)


def policy_of_tests(
    lives: Sequence[float],
    survival: float,
    confidence: float,
    multiplies: str,
    source: Sourced,
    *,
    severity_inside: bool,
) -> FatiguePolicy:
    """Return a factor from tested lives, their deviation unknown beforehand.

    Parameters
    ----------
    lives
        Lives of at least two tests, all failed [cycles].
    survival, confidence
        p and C [-].
    multiplies
        The life it divides; the geometric mean of these tests.
    source
        Where the lives are recorded; its value is their number [-].
    severity_inside
        Whether the severity of the spectrum is already inside the lives.

    Returns
    -------
    FatiguePolicy
        Factor, graded as the lives are.

    Notes
    -----
    Range of `scatter.tolerance`. With few tests confidence costs more than scatter; a
    deviation known from elsewhere gives a smaller factor (`policy_of_scatter`).

    References
    ----------
    .. [1] See the module.
    """
    factor = factor_from_tests(lives, survival, confidence)
    words = FROM_TESTS.format(
        tests=len(lives),
        survival=survival,
        confidence=confidence,
        source=source.source,
    )
    return FatiguePolicy(
        Sourced(factor, "-", words, source.grade),
        multiplies,
        None,
        len(lives),
        survival,
        confidence,
        severity_inside,
    )


def made_factors(policy: FatiguePolicy) -> dict[Form, float]:
    """Return the factors that a policy's own scatter gives; none where it has none.

    Parameters
    ----------
    policy
        A factor with what it states of deviation, tests, survival, confidence.

    Returns
    -------
    dict of Form to float
        Factors [-]; the confidence form only where a confidence is stated.

    Notes
    -----
    Range of the forms.

    References
    ----------
    .. [1] See the module.
    """
    s, n, p = policy.log_deviation, policy.tests, policy.survival
    if s is None or n is None or p is None:
        return {}
    z = scatter.quantile(p)
    found = {Form.PREDICTIVE: scatter.factor_predictive(s, z, n)}
    if policy.confidence is not None:
        made = scatter.factor_confidence(s, z, policy.confidence, n)
        found[Form.CONFIDENCE] = made
    return found


def write_made_factors(note: Note, policy: FatiguePolicy | None) -> None:
    """Write the factors of a policy's own scatter beside the one that is used."""
    if policy is None:
        return
    found = made_factors(policy)
    for form, factor in found.items():
        confidence = "" if form is Form.PREDICTIVE else f", C = {policy.confidence:g}"
        note.beside(
            "f*",
            f"factor from log-life scatter: {FORMS[form]}",
            f"s = {policy.log_deviation:g}, n = {policy.tests}, "
            f"p = {policy.survival:g}{confidence}",
            factor,
            "-",
            Reference("normal distribution of log life", Grade.DERIVED),
        )
    largest = max(found.values(), default=0.0)
    if policy.factor.value < largest * (1 - 1e-3):
        note.warn(SMALLER.format(fixed=policy.factor.value, made=largest))
