"""Addresses of findings, repairs, evaluations, inspections and structure maps."""

from __future__ import annotations

from django.urls import path

from repairs.views import maps

urlpatterns = [
    path(
        "types/<str:code>/<str:section>/map/",
        maps.structure_map,
        name="structure_map",
    ),
]
