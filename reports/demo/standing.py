"""Whether a database is empty, holds the demo, or holds anything else."""

from __future__ import annotations

from dataclasses import dataclass

from fleet.models import Aircraft, AircraftType, Operator, Policy, User
from fleet.services.people import policy_set
from reports.demo.fleet import DEMO_TODAY
from reports.demo.load_base import OPERATOR_CODES, Loaded
from reports.demo.load_evaluations import EVALUATED_AT

SEED_KEY = "demo_seed"


def marker_set(loaded: Loaded, seed: int) -> None:
    """The last thing loaded says that the demo is whole, and with which seed."""
    policy_set(
        key=SEED_KEY,
        value=seed,
        unit="count",
        source="drawn by this program",
        grade="adopted",
        operator=loaded.operator,
        effective_from=DEMO_TODAY,
        actor=loaded.users["administrator"],
        at=EVALUATED_AT,
    )


@dataclass(frozen=True, slots=True)
class Standing:
    """`seed` of the demo that is loaded, None if none is; what does not belong."""

    seed: int | None
    foreign: tuple[str, ...]


def standing_now() -> Standing:
    """Read what the database holds; without the demo, any record is foreign."""
    marker = Policy.objects.filter(key=SEED_KEY).first()
    codes = list(OPERATOR_CODES.values()) if marker else []
    strangers = Operator.objects.exclude(code__in=codes)
    foreign = [f"operator {operator.name}" for operator in strangers]
    if marker is None:
        kinds = ((AircraftType, "aircraft type"), (Aircraft, "aircraft"))
        foreign += [
            f"{word} {row}" for kind, word in kinds for row in kind.objects.all()
        ]
        foreign += [f"login {user.username}" for user in User.objects.all()]
    return Standing(marker.value if marker else None, tuple(foreign[:5]))
