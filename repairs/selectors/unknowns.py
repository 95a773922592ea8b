"""What is not known of one aircraft: counted, never filled in.

The counts of findings and repairs are made with the same conditions as the lists they
lead to, so that the list shows exactly what was counted.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from urllib.parse import urlencode

from django.db.models import Count, Exists, OuterRef, Q, QuerySet
from django.urls import reverse

from fleet.models import (
    Aircraft,
    DocumentApplicability,
    PartEarlierLife,
    PartState,
    SafeLifePart,
)
from fleet.selectors.counters import usage_current
from repairs.models import (
    ASIDE_STATES,
    DispositionFinding,
    Event,
    Finding,
    FindingState,
    MeasuredValue,
    Repair,
    RepairFinding,
    RepairState,
    RequirementState,
    RequirementSubject,
)
from repairs.selectors.hidden import hiding_damage

DECIDED = (FindingState.ACCEPTED, FindingState.DEFERRED, FindingState.TO_RECTIFY)
FINDINGS_LAST = (*ASIDE_STATES, FindingState.CLOSED)


@dataclass(frozen=True)
class Unknown:
    """One thing that is not known, how often, and where to see which."""

    words: str
    count: int
    address: str


def _known_values() -> QuerySet[MeasuredValue]:
    return MeasuredValue.objects.filter(
        measurement__finding=OuterRef("pk"), status="known"
    )


def _unknown_values() -> QuerySet[MeasuredValue]:
    """Dimensions said to be unknown that no measuring of the finding has known."""
    known = MeasuredValue.objects.filter(
        measurement__finding=OuterRef("measurement__finding"),
        quantity=OuterRef("quantity"),
        status="known",
    )
    rows = MeasuredValue.objects.filter(
        measurement__finding=OuterRef("pk"), status="unknown"
    )
    return rows.exclude(Exists(known))


def _decision() -> QuerySet[DispositionFinding]:
    return DispositionFinding.objects.filter(finding=OuterRef("pk"))


def finding_unknowns() -> Mapping[str, tuple[str, Q]]:
    """By key: words, and which of the findings that stand."""
    return {
        "place": ("findings to be placed", Q(section__isnull=True)),
        "criticality": (
            "findings, criticality of the structure unknown",
            Q(criticality="unknown"),
        ),
        "element": ("findings, structural item unknown", Q(element="unknown")),
        "dimensions": (
            "findings, a dimension unknown or none measured",
            Q(Exists(_unknown_values())) | ~Q(Exists(_known_values())),
        ),
        "counters": ("findings, cycles when found unknown", Q(at_cycles__isnull=True)),
        "method": (
            "findings, detection method unknown",
            Q(detection_method="unknown"),
        ),
        "cause": ("findings, cause unknown", Q(cause="unknown")),
        "decision": (
            "damage kept, deferred or to rectify without a recorded decision",
            Q(state__in=DECIDED) & ~Q(Exists(_decision())),
        ),
    }


def repair_unknowns() -> Mapping[str, tuple[str, Q]]:
    """By key: words, and which of the repairs on the aircraft."""
    applicability = DocumentApplicability.objects.filter(
        document=OuterRef("approval_document")
    )
    answered = RepairFinding.objects.filter(repair=OuterRef("pk"))
    return {
        "place": ("repairs to be placed", Q(section__isnull=True)),
        "data": ("repairs, approval data unknown", Q(approval_document__isnull=True)),
        "release": ("repairs, release not recorded", Q(release_document__isnull=True)),
        "evidence": (
            "legacy repairs, evidence not seen",
            Q(legacy=True) & ~Q(evidence="seen"),
        ),
        "hiding": (
            "repairs over damage not shown to be removed",
            Q(pk__in=hiding_damage(Repair.objects.all()).values("pk")),
        ),
        "category": ("repairs, category pending", Q(category="pending")),
        "counters": (
            "repairs, counters at release unknown",
            Q(at_cycles__isnull=True) | Q(at_minutes__isnull=True),
        ),
        "criticality": (
            "repairs, criticality of the structure unknown",
            Q(criticality="unknown"),
        ),
        "size": (
            "repairs, length or width unknown",
            Q(length_mm__isnull=True) | Q(width_mm__isnull=True),
        ),
        "answers": (
            "repairs, the damage they answer not recorded",
            ~Q(Exists(answered)),
        ),
        "inspection": (
            "repairs, not said whether an independent inspection is required",
            Q(inspection_required__isnull=True),
        ),
        "applicability": (
            "repairs, applicability of their approval data not recorded",
            Q(approval_document__isnull=False) & ~Q(Exists(applicability)),
        ),
    }


def findings_unknown(rows: QuerySet[Finding], key: str) -> QuerySet[Finding]:
    """Findings that stand, of which that is not known."""
    return rows.exclude(state__in=FINDINGS_LAST).filter(finding_unknowns()[key][1])


def repairs_unknown(rows: QuerySet[Repair], key: str) -> QuerySet[Repair]:
    """Repairs on the aircraft, of which that is not known."""
    return rows.filter(state=RepairState.EMBODIED).filter(repair_unknowns()[key][1])


def unknowns(aircraft: Aircraft) -> list[Unknown]:
    """Everything not known of the aircraft and its records; eight queries."""
    return [
        row
        for row in (
            *_aircraft(aircraft),
            *_findings(aircraft),
            *_repairs(aircraft),
            *_parts(aircraft),
            *_requirements(aircraft),
        )
        if row.count
    ]


def _findings(aircraft: Aircraft) -> list[Unknown]:
    wanted = finding_unknowns()
    rows = Finding.objects.filter(aircraft=aircraft).exclude(state__in=FINDINGS_LAST)
    return _counted(rows, wanted, "finding_list", aircraft)


def _repairs(aircraft: Aircraft) -> list[Unknown]:
    wanted = repair_unknowns()
    rows = Repair.objects.filter(aircraft=aircraft, state=RepairState.EMBODIED)
    return _counted(rows, wanted, "repair_list", aircraft)


def _counted(
    rows: QuerySet[Finding] | QuerySet[Repair],
    wanted: Mapping[str, tuple[str, Q]],
    page: str,
    aircraft: Aircraft,
) -> list[Unknown]:
    """One query for all of them."""
    columns = {
        f"count_{key}": Count("pk", filter=condition)
        for key, (_, condition) in wanted.items()
    }
    found = rows.order_by().aggregate(**columns)
    return [
        Unknown(words, found[f"count_{key}"], _address(page, aircraft, key))
        for key, (words, _) in wanted.items()
    ]


def _address(page: str, aircraft: Aircraft, key: str) -> str:
    query = urlencode({"aircraft": aircraft.pk, "unknown": key})
    return f"{reverse(page)}?{query}"


def _aircraft(aircraft: Aircraft) -> list[Unknown]:
    """Two queries."""
    page = reverse("aircraft", args=[aircraft.pk])
    usage = reverse("usage", args=[aircraft.pk])
    untimed = usage_current().filter(aircraft=aircraft, cycles_without_minutes__gt=0)
    holder = aircraft if aircraft.validity_source else aircraft.variant
    limits = (holder.validity_cycles, holder.validity_minutes)
    events = Event.objects.filter(aircraft=aircraft, at_cycles__isnull=True)
    return [
        Unknown("manufacture date", int(aircraft.manufactured_on is None), page),
        Unknown(
            "evidence of the opening counters",
            int(not aircraft.opening_source.strip()),
            page,
        ),
        Unknown(
            "opening counters keyed once only",
            int(aircraft.opening_rekeyed_by_id is None),
            page,
        ),
        Unknown("limit of validity", int(limits == (None, None)), page),
        Unknown(
            "pressurisation cycles before our records",
            int(aircraft.opening_pressurisations is None),
            page,
        ),
        Unknown("days with flights without hours", untimed.count(), usage),
        Unknown("events, cycles unknown", events.count(), page),
    ]


def _parts(aircraft: Aircraft) -> list[Unknown]:
    """Two queries."""
    page = f"{reverse('part_list')}?{urlencode({'text': aircraft.registration})}"
    parts = SafeLifePart.objects.filter(
        installations__aircraft=aircraft,
        installations__removed_on__isnull=True,
        state=PartState.INSTALLED,
    ).distinct()
    gaps = PartEarlierLife.objects.filter(
        part__in=parts, kind="gap", replaced_by__isnull=True
    )
    undated = parts.filter(manufactured_on__isnull=True)
    broken = parts.exclude(chain="complete")
    return [
        Unknown("gaps in the history of installed safe-life parts", gaps.count(), page),
        Unknown("safe-life parts, manufacture date unknown", undated.count(), page),
        Unknown("safe-life parts, history not complete to new", broken.count(), page),
    ]


def _requirements(aircraft: Aircraft) -> list[Unknown]:
    """One query."""
    page = f"{reverse('requirement_list')}?{urlencode({'text': aircraft.registration})}"
    found = RequirementSubject.objects.filter(aircraft=aircraft).aggregate(
        unanswered=Count("pk", filter=Q(applies="unanswered")),
        claimed=Count("pk", filter=Q(state=RequirementState.TERMINATION_UNVERIFIED)),
        unverified=Count(
            "pk",
            filter=Q(
                requirement__verified=False,
                requirement__state=RequirementState.EFFECTIVE,
                applies="yes",
            ),
        ),
    )
    return [
        Unknown(
            "requirements without an answer whether they apply",
            found["unanswered"],
            page,
        ),
        Unknown("terminating actions not verified", found["claimed"], page),
        Unknown("requirements keyed once only", found["unverified"], page),
    ]


def legacy_counts(aircraft: Aircraft) -> list[Unknown]:
    """Repairs from before our records, by whether their evidence was seen."""
    rows = Repair.objects.filter(
        aircraft=aircraft, legacy=True, state=RepairState.EMBODIED
    )
    found = rows.order_by().aggregate(
        all=Count("pk"),
        seen=Count("pk", filter=Q(evidence="seen")),
        not_seen=Count("pk", filter=Q(evidence="not_seen")),
    )
    page = reverse("repair_list")

    def address(word: str) -> str:
        query = {"aircraft": aircraft.pk, "state": "embodied", "evidence": word}
        return f"{page}?{urlencode(query)}"

    return [
        Unknown("legacy repairs", found["all"], address("legacy")),
        Unknown("evidence seen", found["seen"], address("seen")),
        Unknown("evidence not seen", found["not_seen"], address("not_seen")),
    ]
