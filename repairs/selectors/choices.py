"""Records a form offers to choose from."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from django.db.models import Prefetch, Q, QuerySet

from fleet.models import (
    Aircraft,
    Authorisation,
    AuthorisationScope,
    Operator,
    Organisation,
    Person,
    User,
)
from repairs.models import (
    Disposition,
    Event,
    Finding,
    InspectionRequirement,
    Repair,
    RepairState,
    RequirementState,
    Substantiation,
)
from repairs.selectors.repair_inspections import INSPECTION_LINE


def aircraft_of(operators: Sequence[Operator]) -> QuerySet[Aircraft]:
    """Aircraft these operators have today."""
    return Aircraft.objects.filter(
        operator__in=operators, data_to__isnull=True
    ).select_related("variant__aircraft_type", "operator")


def aircraft_chosen(choices: QuerySet[Aircraft], key: str) -> Aircraft | None:
    """The aircraft an address or form names, if it is one of the choices."""
    return choices.in_bulk([int(key)]).get(int(key)) if key.isdecimal() else None


def people_at(operators: Sequence[Operator]) -> QuerySet[Person]:
    """Own people, and those of organisations that are no operator."""
    return Person.objects.filter(
        Q(organisation__operator__in=operators) | Q(organisation__operator__isnull=True)
    )


def signers_at(
    operator: Operator, scopes: Sequence[AuthorisationScope]
) -> QuerySet[Person]:
    """Who holds or held such an authorisation; the day is checked when it is signed."""
    return Person.objects.filter(
        authorisations__operator=operator, authorisations__scope__in=scopes
    ).distinct()


def holders_at(
    operators: Sequence[Operator], scopes: Sequence[AuthorisationScope]
) -> QuerySet[Person]:
    """The same of several operators, each person with what is `held` of it."""
    granted = Authorisation.objects.filter(operator__in=operators, scope__in=scopes)
    held = Prefetch("authorisations", granted, to_attr="held")
    people = Person.objects.filter(authorisations__in=granted)
    return people.distinct().prefetch_related(held)


def decisions_told(rows: QuerySet[Disposition]) -> QuerySet[Disposition]:
    """Decisions that none replaced, with the findings that their words name."""
    rows = rows.filter(replaced_by__isnull=True)
    return rows.prefetch_related("finding_rows__finding")


def decision_choices(
    finding: Finding, states: Sequence[str]
) -> dict[str, QuerySet[Any]]:
    """What a decision on a finding may name."""
    others = Finding.objects.filter(aircraft=finding.aircraft_id, state__in=states)
    return {
        "also": others.exclude(pk=finding.pk),
        "further": others.exclude(pk=finding.pk),
        "evaluations": finding.evaluations.filter(replaced_by__isnull=True),
        "limit_checks": finding.limit_checks.all(),
        "substantiation": Substantiation.objects.filter(
            finding_rows__finding=finding,
            finding_rows__withdrawn=False,
            replaced_by__isnull=True,
        ),
        "requirement": InspectionRequirement.objects.filter(
            subjects__aircraft=finding.aircraft_id,
            subjects__applies="yes",
            state=RequirementState.EFFECTIVE,
        ).distinct(),
        "replaces": decisions_told(
            Disposition.objects.filter(finding_rows__finding=finding)
        ),
    }


def repair_choices(
    aircraft: Aircraft | None, operators: Sequence[Operator]
) -> dict[str, QuerySet[Any]]:
    """What a repair on an aircraft may name; nothing before the aircraft is chosen."""
    people = people_at(operators)
    keepers = [aircraft.operator] if aircraft is not None else operators
    on_aircraft = {"aircraft": aircraft}
    return {
        "supersedes": Repair.objects.filter(**on_aircraft, state=RepairState.EMBODIED),
        "disposition": decisions_told(Disposition.objects.filter(**on_aircraft)),
        "substantiation": Substantiation.objects.filter(
            **on_aircraft, replaced_by__isnull=True
        ),
        "performed_by": people,
        "answered_by": people,
        "inspected_by": holders_at(keepers, INSPECTION_LINE),
        "released_by": holders_at(keepers, (AuthorisationScope.CERTIFY,)),
        "organisation": Organisation.objects.filter(
            Q(operator__in=operators) | Q(operator__isnull=True)
        ),
    }


def findings_to_answer(
    aircraft: Aircraft | None, states: Sequence[str], also: Sequence[int] = ()
) -> list[Finding]:
    """Open findings a repair may answer; those it is recorded for come first."""
    if aircraft is None:
        return []
    wanted = Q(state__in=states) | Q(pk__in=also)
    rows = Finding.objects.filter(wanted, aircraft=aircraft).order_by("pk")
    return sorted(rows, key=lambda one: one.pk not in also)


def covered_keys(asked: int | None, folder: int | None) -> list[int]:
    """Keys of the findings a planned repair is for: the one asked, a folder's."""
    rows = Finding.objects.filter(
        Q(pk=asked)
        | Q(
            substantiation_rows__substantiation=folder,
            substantiation_rows__withdrawn=False,
        )
    )
    if asked is None and folder is None:
        return []
    return list(rows.distinct().values_list("pk", flat=True))


def events_of(user: User, aircraft: Aircraft | None) -> QuerySet[Event]:
    """Events a finding may follow: the aircraft's, all before it is chosen."""
    rows = Event.objects.visible_to(user).distinct().select_related("aircraft")
    return rows.filter(aircraft=aircraft) if aircraft is not None else rows
