"""Whether a database is empty, holds the demo, or holds anything else."""

from __future__ import annotations

from dataclasses import dataclass

from fleet.models import (
    Aircraft,
    AircraftType,
    Document,
    HistoryEntry,
    Operator,
    User,
)
from fleet.services.documents import document_get_or_create
from fleet.services.history import Writing
from reports.demo.load_base import OPERATOR_CODES, Loaded
from reports.demo.load_evaluations import EVALUATED_AT

MARKER = "Framebay demonstration"


def marker_set(loaded: Loaded, seed: int) -> None:
    """The last thing loaded says that the demo is whole, and with which seed."""
    with Writing(
        actor=loaded.users["administrator"],
        action="document_record",
        at=EVALUATED_AT,
        operator=loaded.operator,
    ) as w:
        document_get_or_create(
            w,
            operator=loaded.operator,
            kind="other",
            reference=MARKER,
            revision=str(seed),
            title="Seed from which this program drew the demonstration",
        )


@dataclass(frozen=True, slots=True)
class Standing:
    """`seed` of the demo that is loaded, None if none is; what does not belong."""

    seed: int | None
    foreign: tuple[str, ...]


def standing_now() -> Standing:
    """Read what the database holds; without the demo, any record is foreign."""
    marker = Document.objects.filter(reference=MARKER).first()
    codes = list(OPERATOR_CODES.values()) if marker else []
    strangers = Operator.objects.exclude(code__in=codes)
    foreign = [f"operator {operator.name}" for operator in strangers]
    if marker is None:
        kinds = ((AircraftType, "aircraft type"), (Aircraft, "aircraft"))
        foreign += [
            f"{word} {row}" for kind, word in kinds for row in kind.objects.all()
        ]
        foreign += [f"login {user.username}" for user in User.objects.all()]
        if not foreign and (written := HistoryEntry.objects.count()):
            foreign.append(f"history entries ({written})")
    return Standing(int(marker.revision) if marker else None, tuple(foreign[:5]))
