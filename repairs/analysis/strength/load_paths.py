r"""Several load paths in one cross-section: what is left when one member has failed.

Members share a load like springs: by stiffness, with the whole section free to turn
about its elastic centre,

.. math:: P_i = \frac{k_i}{\sum k}P + \frac{k_i y_i}{\sum k y^2}\,P e

y from the elastic centre of what is left, e the distance of the load from it. If the
section is held straight, the second term is left out.

References
----------
.. [1] Equilibrium and even or plane deformation; elementary.
.. [2] 14 CFR 23.571, 23.572 at amendment 48: a dynamic factor at failure is a rule's
   number and therefore an input.
"""

from __future__ import annotations

from dataclasses import dataclass

from repairs.analysis.errors import AnalysisError, InputError, within
from repairs.analysis.types import Grade, Reference, Sourced

LOAD_SHARE = Reference(
    "Members as parallel springs, equilibrium and plane deformation", Grade.DERIVED
)
NO_MEMBER = "No member is called {name!r}. Use one of: {known}."
TWICE = "Two members are called {name!r}. Name each differently."
NONE_LEFT = "No member is left to carry the load."


@dataclass(frozen=True, slots=True)
class Member:
    """One load path: stiffness [N/mm], place in the section [mm], strength [N]."""

    name: str
    stiffness: float
    place: float
    strength: float


@dataclass(frozen=True, slots=True)
class MemberLoad:
    """What one member carries [N], and strength over load minus one [-]."""

    name: str
    load: float
    margin: float


@dataclass(frozen=True, slots=True)
class Redistribution:
    """Loads after a failure, the members that follow, and the last state.

    `followed` names members that could not bear their share, in order; empty = the
    rest holds. `loads` is of those left, empty if none is.
    """

    loads: tuple[MemberLoad, ...]
    followed: tuple[str, ...]
    governing: str
    margin: float

    @property
    def holds(self) -> bool:
        """Whether what is left bears the load without a further failure."""
        return not self.followed


def shared_loads(
    members: tuple[Member, ...], load: float, place: float, *, held_straight: bool
) -> tuple[MemberLoad, ...]:
    """Return how members share a load.

    Parameters
    ----------
    members
        The load paths [N/mm, mm, N].
    load, place
        Load [N] and where in the section it acts [mm].
    held_straight
        Whether neighbouring structure keeps the section from turning.

    Returns
    -------
    tuple of MemberLoad
        In the members' order [N, -].

    Notes
    -----
    Range: elastic members of one length, stiffness > 0. A member in compression keeps
    its tension strength only if it cannot buckle.

    References
    ----------
    .. [1] See `LOAD_SHARE`.
    """
    if not members:
        raise AnalysisError(NONE_LEFT)
    for member in members:
        within(f"Stiffness of {member.name}, N/mm", member.stiffness, 1e-9, 1e12, "k")
        within(f"Strength of {member.name}, N", member.strength, 1e-9, 1e12, "a load")
    total = sum(m.stiffness for m in members)
    centre = sum(m.stiffness * m.place for m in members) / total
    turning = sum(m.stiffness * (m.place - centre) ** 2 for m in members)
    moment = 0.0 if held_straight or turning == 0 else load * (place - centre) / turning
    return tuple(
        _loaded(m, m.stiffness * (load / total + moment * (m.place - centre)))
        for m in members
    )


def _loaded(member: Member, load: float) -> MemberLoad:
    margin = member.strength / abs(load) - 1 if load else float("inf")
    return MemberLoad(member.name, load, margin)


def failed_member(
    members: tuple[Member, ...],
    failed: str,
    load: float,
    place: float,
    dynamic_factor: Sourced,
    *,
    held_straight: bool,
) -> Redistribution:
    """Fail one member and follow the load, until the rest holds or nothing is left.

    Parameters
    ----------
    members
        The load paths before the failure [N/mm, mm, N].
    failed
        Name of the member that fails.
    load, place
        Required residual load [N] and where it acts [mm].
    dynamic_factor
        Factor on the load as the member fails, with its source [-]; 1 if the rule
        asks for none.
    held_straight
        Whether neighbouring structure keeps the section from turning.

    Returns
    -------
    Redistribution
        Loads of those left, the members that failed after it, and what governs.

    Notes
    -----
    Range 1 <= factor <= 2. The factor acts at the first failure and stays on for those
    that follow.

    References
    ----------
    .. [1] See `LOAD_SHARE`.
    """
    names = [member.name for member in members]
    if len(set(names)) < len(names):
        twice = next(name for name in names if names.count(name) > 1)
        raise InputError(TWICE.format(name=twice))
    if failed not in names:
        raise InputError(NO_MEMBER.format(name=failed, known=", ".join(names)))
    factor = within("Dynamic factor", dynamic_factor.value, 1, 2, "a failing member")
    left = tuple(m for m in members if m.name != failed)
    followed: list[str] = []
    first: MemberLoad | None = None
    while left:
        loads = shared_loads(left, load * factor, place, held_straight=held_straight)
        worst = min(loads, key=lambda item: item.margin)
        first = first or worst
        if worst.margin >= 0:
            return Redistribution(loads, tuple(followed), first.name, first.margin)
        followed.append(worst.name)
        left = tuple(m for m in left if m.name != worst.name)
    if first is None:
        raise AnalysisError(NONE_LEFT)
    return Redistribution((), tuple(followed), first.name, first.margin)
