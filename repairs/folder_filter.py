"""The filter of the list of substantiations, kept in the address."""

from __future__ import annotations

from typing import Any

import django_filters
from django import forms
from django.db.models import Q, QuerySet

from fleet.selectors.aircraft import aircraft_visible
from repairs.models import Substantiation

STAGES = [(0, "no stage"), (1, "stage 1"), (2, "stage 2"), (3, "complete")]


def _aircraft(request: Any) -> QuerySet[Any]:
    return aircraft_visible(request.user).order_by("registration")


class FolderFilter(django_filters.FilterSet):
    """What the list shows; all empty shows everything."""

    text = django_filters.CharFilter(method="by_text", label="number or title")
    aircraft = django_filters.ModelChoiceFilter(
        queryset=_aircraft, empty_label="every aircraft"
    )
    stage = django_filters.ChoiceFilter(
        field_name="reached", choices=STAGES, empty_label="every stage", label="reached"
    )
    clock = django_filters.BooleanFilter(
        method="by_clock", label="with an open clock", widget=forms.CheckboxInput
    )

    class Meta:
        model = Substantiation
        fields: list[str] = []

    def by_text(
        self, rows: QuerySet[Substantiation], name: str, value: str
    ) -> QuerySet[Substantiation]:
        return rows.filter(Q(number__icontains=value) | Q(title__icontains=value))

    def by_clock(
        self, rows: QuerySet[Substantiation], name: str, value: bool
    ) -> QuerySet[Substantiation]:
        return rows.filter(has_open_clock=True) if value else rows  # type: ignore[misc]
