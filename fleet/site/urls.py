"""The addresses of every page; each app lists its own."""

from __future__ import annotations

from django.urls import include, path

urlpatterns = [
    path("", include("fleet.urls")),
    path("", include("repairs.urls")),
    path("", include("reports.urls")),
]
