from __future__ import annotations

from django.apps import AppConfig


class RepairsConfig(AppConfig):
    name = "repairs"
