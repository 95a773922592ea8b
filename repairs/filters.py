"""Filters of the lists of findings and repairs, kept in the address."""

from __future__ import annotations

from typing import Any

import django_filters
from django import forms
from django.db.models import Q, QuerySet

from fleet.selectors.aircraft import aircraft_visible
from repairs.models import (
    OPEN_STATES,
    DamageType,
    Element,
    Finding,
    FindingState,
    Repair,
    RepairCategory,
    RepairState,
    RepairType,
)
from repairs.selectors.hidden import hiding_damage
from repairs.selectors.unknowns import (
    finding_unknowns,
    findings_unknown,
    repair_unknowns,
    repairs_unknown,
)

PLACED = [("no", "to be placed"), ("yes", "placed")]
OPEN = "open"
LEGACY = "legacy"
EVIDENCE = [
    (LEGACY, "all legacy repairs"),
    ("seen", "legacy, evidence seen"),
    ("not_seen", "legacy, evidence not seen"),
    ("not_applicable", "legacy, evidence not stated"),
]
DAY = forms.DateInput(attrs={"type": "date"})


def _aircraft(request: Any) -> QuerySet[Any]:
    return aircraft_visible(request.user).order_by("registration")


class FindingFilter(django_filters.FilterSet):
    """What the list of findings shows; all empty shows everything."""

    text = django_filters.CharFilter(method="by_text", label="number or location")
    aircraft = django_filters.ModelChoiceFilter(
        queryset=_aircraft, empty_label="every aircraft"
    )
    state = django_filters.ChoiceFilter(
        method="by_state",
        choices=[(OPEN, "all open"), *FindingState.choices],
        empty_label="every state",
    )
    damage_type = django_filters.ChoiceFilter(
        choices=DamageType.choices, empty_label="every type", label="damage type"
    )
    element = django_filters.ChoiceFilter(
        choices=Element.choices, empty_label="every item", label="structural item"
    )
    placed = django_filters.ChoiceFilter(
        method="by_placed",
        choices=PLACED,
        empty_label="placed or not",
        label="location",
    )
    section = django_filters.CharFilter(
        field_name="section__code", lookup_expr="iexact", label="section code"
    )
    found_from = django_filters.DateFilter(
        field_name="found_on", lookup_expr="gte", label="found from", widget=DAY
    )
    found_to = django_filters.DateFilter(
        field_name="found_on", lookup_expr="lte", label="to", widget=DAY
    )
    unknown = django_filters.ChoiceFilter(
        method="by_unknown",
        choices=[(key, words) for key, (words, _) in finding_unknowns().items()],
        empty_label="known or not",
        label="not known",
    )

    class Meta:
        model = Finding
        fields: list[str] = []

    def by_text(
        self, rows: QuerySet[Finding], name: str, value: str
    ) -> QuerySet[Finding]:
        return rows.filter(
            Q(number__icontains=value)
            | Q(place_text__icontains=value)
            | Q(place_entered__icontains=value)
        )

    def by_state(
        self, rows: QuerySet[Finding], name: str, value: str
    ) -> QuerySet[Finding]:
        states = OPEN_STATES if value == OPEN else (value,)
        return rows.filter(state__in=states)

    def by_placed(
        self, rows: QuerySet[Finding], name: str, value: str
    ) -> QuerySet[Finding]:
        return rows.filter(section__isnull=value == "no")

    def by_unknown(
        self, rows: QuerySet[Finding], name: str, value: str
    ) -> QuerySet[Finding]:
        return findings_unknown(rows, value)


class RepairFilter(django_filters.FilterSet):
    """What the list of repairs shows; all empty shows everything."""

    text = django_filters.CharFilter(method="by_text", label="number or location")
    aircraft = django_filters.ModelChoiceFilter(
        queryset=_aircraft, empty_label="every aircraft"
    )
    kind = django_filters.ChoiceFilter(
        choices=RepairType.choices, empty_label="every type", label="repair type"
    )
    state = django_filters.ChoiceFilter(
        choices=RepairState.choices, empty_label="every state"
    )
    category = django_filters.ChoiceFilter(
        choices=RepairCategory.choices, empty_label="every category"
    )
    evidence = django_filters.ChoiceFilter(
        method="by_evidence",
        choices=EVIDENCE,
        empty_label="legacy or not",
        label="before our records",
    )
    hiding = django_filters.BooleanFilter(
        method="by_hiding",
        label="hides damage not shown removed",
        widget=forms.CheckboxInput,
    )
    unknown = django_filters.ChoiceFilter(
        method="by_unknown",
        choices=[(key, words) for key, (words, _) in repair_unknowns().items()],
        empty_label="known or not",
        label="not known",
    )

    class Meta:
        model = Repair
        fields: list[str] = []

    def by_text(
        self, rows: QuerySet[Repair], name: str, value: str
    ) -> QuerySet[Repair]:
        return rows.filter(
            Q(number__icontains=value)
            | Q(place_text__icontains=value)
            | Q(place_entered__icontains=value)
            | Q(description__icontains=value)
        )

    def by_hiding(
        self, rows: QuerySet[Repair], name: str, value: bool
    ) -> QuerySet[Repair]:
        return hiding_damage(rows) if value else rows

    def by_evidence(
        self, rows: QuerySet[Repair], name: str, value: str
    ) -> QuerySet[Repair]:
        legacy = rows.filter(legacy=True)
        return legacy if value == LEGACY else legacy.filter(evidence=value)

    def by_unknown(
        self, rows: QuerySet[Repair], name: str, value: str
    ) -> QuerySet[Repair]:
        return repairs_unknown(rows, value)
