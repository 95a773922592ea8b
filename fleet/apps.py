from __future__ import annotations

from django.apps import AppConfig


class FleetConfig(AppConfig):
    name = "fleet"
