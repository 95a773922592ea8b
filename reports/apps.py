from __future__ import annotations

from django.apps import AppConfig


class ReportsConfig(AppConfig):
    name = "reports"
