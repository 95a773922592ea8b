"""What a panel mainly carries."""

from django.db import migrations

import fleet.fields
from fleet.triggers import installer


def install_again(apps, schema_editor):  # type: ignore[no-untyped-def]
    """SQLite rebuilt the table and lost its triggers."""
    if schema_editor.connection.vendor == "sqlite":
        installer(("fleet_panel",))(apps, schema_editor)


class Migration(migrations.Migration):
    dependencies = [("fleet", "0003_signed_closure")]
    operations = [
        migrations.AddField(
            model_name="panel",
            name="load_kind",
            field=fleet.fields.Word(
                blank=True,
                default="",
                words=[
                    "tension",
                    "compression",
                    "shear",
                    "bending",
                    "torsion",
                    "pressure",
                ],
            ),
        ),
        migrations.RunPython(install_again, migrations.RunPython.noop),
    ]
