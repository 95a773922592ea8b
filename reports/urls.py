"""Addresses of the pages that gather from every app."""

from __future__ import annotations

from django.urls import path

from reports.views import aircraft, density, due, overview, release, usage

urlpatterns = [
    path("", overview.overview, name="overview"),
    path("aircraft/", aircraft.aircraft_list, name="aircraft_list"),
    path("aircraft/<int:pk>/", aircraft.aircraft, name="aircraft"),
    path(
        "aircraft/<int:pk>/before-release/",
        release.before_release,
        name="before_release",
    ),
    path("aircraft/<int:pk>/usage/", usage.usage, name="usage"),
    path(
        "aircraft/<int:pk>/usage/<int:row_pk>/correct/",
        usage.usage_correction,
        name="usage_correct",
    ),
    path("due/", due.due_list_page, name="due_list"),
    path("density/", density.density, name="density"),
]
