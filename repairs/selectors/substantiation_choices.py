"""What the forms of a folder offer to choose from."""

from __future__ import annotations

import datetime as dt
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from typing import Any

from django.db.models import Q, QuerySet

from fleet.models import Aircraft, AuthorisationScope, Person
from fleet.selectors.people import policy
from repairs.models import (
    ASIDE_STATES,
    Evaluation,
    Finding,
    FindingState,
    Repair,
    Substantiation,
)
from repairs.selectors.choices import signers_at
from repairs.selectors.review_reach import REVIEW_REACH, within_reach

PREPARERS = (
    AuthorisationScope.ASSESS,
    AuthorisationScope.CHECK,
    AuthorisationScope.APPROVE,
)
GONE = ("removed", "superseded", "cancelled")


def preparers_at(aircraft: Aircraft) -> QuerySet[Person]:
    return signers_at(aircraft.operator, PREPARERS)


def findings_to_cover(aircraft: Aircraft) -> QuerySet[Finding]:
    """Findings of the aircraft that stand, the newest first."""
    rows = Finding.objects.filter(aircraft=aircraft).exclude(state__in=ASIDE_STATES)
    return rows.order_by("-found_on", "-pk")


def findings_nearby(
    findings: QuerySet[Finding], start: Sequence[int], day: dt.date
) -> list[int]:
    """Keys of those to show first: where the folder starts, then what is open near it.

    Near is within the operator's reach for the review; a folder that starts at no
    finding shows first all that are open.
    """
    if not start:
        rows = findings.exclude(state=FindingState.CLOSED)
        return list(rows.values_list("pk", flat=True))
    related = ("section", "geometry", "aircraft__variant", "aircraft__operator")
    origins = list(findings.filter(pk__in=start).select_related(*related))
    keys = [one.pk for one in origins]
    if not origins:
        return keys
    reach = policy(origins[0].aircraft.operator, REVIEW_REACH, day)
    near = (one.item for one in within_reach(origins, reach.value if reach else None))
    return keys + [
        one.pk
        for one in near
        if isinstance(one, Finding) and one.state != FindingState.CLOSED
    ]


def repairs_without_folder(aircraft: Aircraft) -> QuerySet[Repair]:
    rows = Repair.objects.filter(aircraft=aircraft, substantiation__isnull=True)
    return rows.exclude(state__in=GONE).order_by("-pk")


def evaluations_to_cite(row: Substantiation) -> QuerySet[Evaluation]:
    """Current evaluations of the findings covered and of the repairs of the folder."""
    covered = row.finding_rows.filter(withdrawn=False).values("finding")
    using: dict[str, Any] = {
        "repair__substantiation__operator": row.operator_id,
        "repair__substantiation__number": row.number,
    }
    rows = Evaluation.objects.filter(Q(finding__in=covered) | Q(**using))
    return rows.filter(replaced_by__isnull=True).order_by("-pk")


@dataclass(frozen=True)
class NewFolder:
    """What a new folder starts with: its aircraft, findings, repair and title."""

    aircraft: str = ""
    initial: dict[str, Any] = field(default_factory=dict)


def new_folder_of(asked: Mapping[str, str], choices: QuerySet[Aircraft]) -> NewFolder:
    """From the finding, repair or aircraft that an address names; else the only one."""
    finding = _named(Finding.objects.filter(aircraft__in=choices), asked, "finding")
    repair = _named(Repair.objects.filter(aircraft__in=choices), asked, "repair")
    if repair is not None:
        keys = repair.finding_rows.values_list("finding", flat=True)
        said = {"findings": list(keys), "repair": repair.pk, "answer": "permanent"}
        title = f"{repair.get_kind_display().capitalize()} at {place_of(repair)}"
        return NewFolder(str(repair.aircraft_id), said | {"title": title})
    if finding is not None:
        title = f"{finding.get_damage_type_display().capitalize()}, {place_of(finding)}"
        said = {"findings": [finding.pk], "title": title}
        return NewFolder(str(finding.aircraft_id), said)
    only = list(choices.values_list("pk", flat=True)[:2])
    return NewFolder(asked.get("aircraft") or (str(only[0]) if len(only) == 1 else ""))


def _named(rows: QuerySet[Any], asked: Mapping[str, str], name: str) -> Any:
    key = asked.get(name, "")
    return rows.filter(pk=int(key)).first() if key.isdecimal() else None


def place_of(item: Finding | Repair) -> str:
    return item.place_text or item.place_entered
