"""Refuse changes to what was measured, calculated, decided, done and signed."""

from __future__ import annotations

from django.db import migrations

from fleet.triggers import installer, remover

TABLES = (
    "repairs_measurement",
    "repairs_measuredvalue",
    "repairs_holecrack",
    "repairs_limitcheck",
    "repairs_blindreentry",
    "repairs_evaluation",
    "repairs_evaluationinput",
    "repairs_disposition",
    "repairs_dispositionfinding",
    "repairs_dispositionbasis",
    "repairs_neighbourreview",
    "repairs_accomplishment",
    "repairs_approval",
)


class Migration(migrations.Migration):
    dependencies = [("repairs", "0001_initial"), ("fleet", "0002_refuse_changes")]
    operations = [migrations.RunPython(installer(TABLES), remover(TABLES))]
