"""Refuse changes to the history: who changed what is written once."""

from __future__ import annotations

from django.db import migrations

from fleet.triggers import installer, remover

TABLES = (
    "fleet_usagerecord",
    "fleet_partearlierlife",
    "fleet_frame",
    "fleet_framestation",
    "fleet_stringer",
    "fleet_cutout",
    "fleet_joint",
    "fleet_panel",
    "fleet_materialproperty",
    "fleet_historyentry",
    "fleet_historyitem",
    "fleet_historyseal",
)


def start_the_chain(apps, schema_editor):  # type: ignore[no-untyped-def]
    apps.get_model("fleet", "HistoryHead").objects.using(
        schema_editor.connection.alias
    ).create(id=1)


class Migration(migrations.Migration):
    dependencies = [("fleet", "0001_initial")]
    operations = [
        migrations.RunPython(start_the_chain, migrations.RunPython.noop),
        migrations.RunPython(
            installer(TABLES, {"fleet_historyentry": "sequence"}), remover(TABLES)
        ),
    ]
