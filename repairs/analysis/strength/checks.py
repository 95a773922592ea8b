r"""One comparison of an applied with an allowable stress, at limit or at ultimate.

.. math:: MS = \frac{\text{allowable}}{\text{applied}} - 1

References
----------
.. [1] 14 CFR 25.303 (ultimate), 25.305 (limit), 25.613 (basis of allowables).
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from enum import StrEnum

from repairs.analysis.errors import InputError, within
from repairs.analysis.strength.load_kinds import Mechanism
from repairs.analysis.types import Applicability, Grade, Reference

BASIS = Reference(
    "14 CFR 25.613(b), in an older copy: 99 % with 95 % confidence for a single "
    "member, 90 % with 95 % for redundant structure",
    Grade.QUOTED,
)
NO_CHECK = "No check was made. Give the section, the material and the load."


class Level(StrEnum):
    """The two load levels of a check."""

    LIMIT = "limit"
    ULTIMATE = "ultimate"


@dataclass(frozen=True, slots=True)
class Demand:
    """A load at limit and at ultimate, each with its own cases [N or N mm].

    Sizes only: the function called says tension or compression.
    """

    limit: float
    ultimate: float

    def __post_init__(self) -> None:
        within("Limit load", self.limit, 0, 1e12, "the size of a load")
        within("Ultimate load", self.ultimate, 0, 1e12, "the size of a load")


@dataclass(frozen=True, slots=True)
class MemberMaterial:
    """Strengths [MPa] of one material with their basis (A, B or S) and source.

    `shape` is Ramberg and Osgood's n; None = unknown.
    """

    modulus: float
    poisson: float
    tension_ultimate: float
    tension_yield: float
    compression_yield: float
    shear_ultimate: float
    basis: str
    reference: Reference
    shape: float | None = None

    @property
    def shear_yield(self) -> float:
        """Tension yield over sqrt 3, by distortion energy [MPa]."""
        return self.tension_yield / math.sqrt(3)


@dataclass(frozen=True, slots=True)
class Check:
    """One comparison of stresses [MPa] with its level and the source of the formula.

    `found` overrides allowable over applied where loads interact.
    """

    mechanism: Mechanism
    level: Level
    applied: float
    allowable: float
    reference: Reference
    found: float | None = None

    @property
    def margin(self) -> float:
        """Allowable over applied less one [-]; infinite without load."""
        if self.found is not None:
            return self.found
        return self.allowable / self.applied - 1 if self.applied > 0 else math.inf


def governing(checks: tuple[Check, ...]) -> Check:
    """Return the check with the least margin."""
    if not checks:
        raise InputError(NO_CHECK)
    return min(checks, key=lambda check: check.margin)


def basis_allowed(basis: str, *, single_load_path: bool) -> Applicability:
    """Return whether a basis of allowables may be used for this load path.

    Parameters
    ----------
    basis
        A (99 % with 95 %), B (90 % with 95 %) or S (specified minimum) [-].
    single_load_path
        Whether failure of this member loses the component.

    Returns
    -------
    Applicability
        B for a single load path is not met; S is not stated by the rule (None) [-].

    Notes
    -----
    No range.

    References
    ----------
    .. [1] See `BASIS`.
    """
    needed = "A" if single_load_path else "A or B"
    met = {"A": True, "B": not single_load_path}.get(basis)
    path = "single load path" if single_load_path else "redundant structure"
    return Applicability("Basis of the allowables", f"{basis}, {path}", needed, met)
