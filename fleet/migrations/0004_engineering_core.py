"""What a panel mainly carries; the chance that an inspection finds a length."""

from django.db import migrations

import fleet.fields
from fleet.constraints import all_or_none
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
        migrations.AddField(
            model_name="detectablesize",
            name="curve_link",
            field=fleet.fields.Word(
                blank=True, default="", words=["normal", "logistic"]
            ),
        ),
        migrations.AddField(
            model_name="detectablesize",
            name="half_found_mm",
            field=fleet.fields.Measure(
                blank=True,
                help_text="Visible length found half the time.",
                high=10000,
                low=0.001,
                null=True,
            ),
        ),
        migrations.AddField(
            model_name="detectablesize",
            name="curve_deviation",
            field=fleet.fields.Measure(
                blank=True,
                help_text="Of ln length.",
                high=10,
                low=0.0001,
                null=True,
            ),
        ),
        migrations.AddField(
            model_name="detectablesize",
            name="smallest_tried_mm",
            field=fleet.fields.Measure(
                blank=True,
                high=10000,
                low=0.001,
                null=True,
            ),
        ),
        migrations.AddField(
            model_name="detectablesize",
            name="largest_tried_mm",
            field=fleet.fields.Measure(
                blank=True,
                high=10000,
                low=0.001,
                null=True,
            ),
        ),
        migrations.AddField(
            model_name="detectablesize",
            name="flaws_tried",
            field=fleet.fields.Count(blank=True, high=100000, low=1, null=True),
        ),
        migrations.AddField(
            model_name="detectablesize",
            name="done_share",
            field=fleet.fields.Measure(
                blank=True,
                help_text="Chance that the inspection is done there, each time.",
                high=1,
                low=0,
                null=True,
            ),
        ),
        migrations.AddField(
            model_name="detectablesize",
            name="never_share",
            field=fleet.fields.Measure(
                blank=True,
                help_text="Share of cases in which it is never done there.",
                high=1,
                low=0,
                null=True,
            ),
        ),
        migrations.AddConstraint(
            model_name="detectablesize",
            constraint=all_or_none(
                "fleet_detectablesize",
                "curve_whole",
                "half_found_mm",
                "curve_deviation",
                "smallest_tried_mm",
                "largest_tried_mm",
                "flaws_tried",
                "done_share",
                "never_share",
            ),
        ),
        migrations.RunPython(install_again, migrations.RunPython.noop),
    ]
