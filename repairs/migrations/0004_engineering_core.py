"""Stated inputs, evaluations made again in bulk, every method an evaluation asked."""

import django.db.models.deletion
from django.conf import settings
from django.db import migrations, models

import fleet.create_tables
import fleet.fields
from fleet.constraints import exactly_one
from fleet.triggers import installer

GUARDED = ("repairs_statedinput", "repairs_recalculationitem")
REBUILT = ("repairs_evaluation", "repairs_evaluationinput")


def install(apps, schema_editor):  # type: ignore[no-untyped-def]
    """New tables get their triggers; SQLite rebuilt two others and lost theirs."""
    rebuilt = REBUILT if schema_editor.connection.vendor == "sqlite" else ()
    installer(GUARDED + rebuilt)(apps, schema_editor)


class Migration(migrations.Migration):
    dependencies = [
        ("fleet", "0004_engineering_core"),
        ("repairs", "0003_signed_closure"),
    ]
    operations = [
        fleet.create_tables.CreateTables(
            tables=[
                migrations.CreateModel(
                    name="StatedInput",
                    fields=[
                        (
                            "id",
                            models.BigAutoField(
                                auto_created=True,
                                primary_key=True,
                                serialize=False,
                                verbose_name="ID",
                            ),
                        ),
                        (
                            "entered_by",
                            models.ForeignKey(
                                blank=True,
                                help_text="Empty when the program entered it.",
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to=settings.AUTH_USER_MODEL,
                            ),
                        ),
                        ("entered_at", models.DateTimeField()),
                        (
                            "operator",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="stated_inputs",
                                to="fleet.operator",
                            ),
                        ),
                        (
                            "finding",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="stated_inputs",
                                to="repairs.finding",
                            ),
                        ),
                        (
                            "repair",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="stated_inputs",
                                to="repairs.repair",
                            ),
                        ),
                        (
                            "name",
                            models.TextField(
                                help_text="The input's name, as the methods know it."
                            ),
                        ),
                        (
                            "value",
                            fleet.fields.Measure(
                                blank=True,
                                help_text="In the input's own unit.",
                                high=1000000000000000.0,
                                low=-1000000000000000.0,
                                null=True,
                            ),
                        ),
                        (
                            "uncertainty",
                            fleet.fields.Measure(
                                blank=True,
                                help_text="Plus or minus, same unit.",
                                high=1000000000000000.0,
                                low=0,
                                null=True,
                            ),
                        ),
                        ("word", models.TextField(blank=True, default="")),
                        (
                            "spectrum",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.spectrum",
                            ),
                        ),
                        (
                            "entered",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="As typed, with its unit.",
                            ),
                        ),
                        ("document", models.TextField()),
                        ("page", models.TextField(blank=True, default="")),
                        ("revision", models.TextField(blank=True, default="")),
                        (
                            "person",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.person",
                            ),
                        ),
                        ("stated_on", models.DateField()),
                        (
                            "replaces",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="replaced_by",
                                to="repairs.statedinput",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["name", "stated_on", "pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("finding__isnull", False),
                                        ("repair__isnull", True),
                                    ),
                                    models.Q(
                                        ("finding__isnull", True),
                                        ("repair__isnull", False),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_statedinput_one_subject",
                                violation_error_message="Name exactly one of: finding, repair.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(("document", ""), _negated=True),
                                name="repairs_statedinput_has_document",
                                violation_error_message="Give the document.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("spectrum__isnull", True),
                                        ("value__isnull", False),
                                        ("word", ""),
                                    ),
                                    models.Q(
                                        ("spectrum__isnull", True),
                                        ("value__isnull", True),
                                        models.Q(("word", ""), _negated=True),
                                    ),
                                    models.Q(
                                        ("spectrum__isnull", False),
                                        ("value__isnull", True),
                                        ("word", ""),
                                    ),
                                    models.Q(
                                        ("replaces__isnull", False),
                                        ("spectrum__isnull", True),
                                        ("value__isnull", True),
                                        ("word", ""),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_statedinput_one_answer",
                                violation_error_message="State one number, one word or one spectrum; nothing takes back.",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(
                                    ("finding__isnull", False),
                                    ("replaces__isnull", True),
                                ),
                                fields=("finding", "name"),
                                name="repairs_statedinput_one_first_of_finding",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(
                                    ("repair__isnull", False),
                                    ("replaces__isnull", True),
                                ),
                                fields=("repair", "name"),
                                name="repairs_statedinput_one_first_of_repair",
                            ),
                        ],
                        "indexes": [],
                    },
                ),
                migrations.CreateModel(
                    name="Recalculation",
                    fields=[
                        (
                            "id",
                            models.BigAutoField(
                                auto_created=True,
                                primary_key=True,
                                serialize=False,
                                verbose_name="ID",
                            ),
                        ),
                        (
                            "entered_by",
                            models.ForeignKey(
                                blank=True,
                                help_text="Empty when the program entered it.",
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to=settings.AUTH_USER_MODEL,
                            ),
                        ),
                        ("entered_at", models.DateTimeField()),
                        (
                            "operator",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="recalculations",
                                to="fleet.operator",
                            ),
                        ),
                        ("stale_only", models.BooleanField()),
                        ("as_of", models.DateField()),
                        (
                            "last_evaluation",
                            fleet.fields.Count(
                                help_text="Evaluations up to this key are wanted.",
                                high=4611686018427387904,
                                low=0,
                            ),
                        ),
                        ("wanted_count", fleet.fields.Count(high=1000000000, low=0)),
                        ("finished_at", models.DateTimeField(blank=True, null=True)),
                    ],
                    options={
                        "ordering": ["-entered_at", "-pk"],
                        "constraints": [
                            models.UniqueConstraint(
                                condition=models.Q(("finished_at__isnull", True)),
                                fields=("operator",),
                                name="repairs_recalculation_one_at_a_time",
                            )
                        ],
                        "indexes": [],
                    },
                ),
                migrations.CreateModel(
                    name="RecalculationPart",
                    fields=[
                        (
                            "id",
                            models.BigAutoField(
                                auto_created=True,
                                primary_key=True,
                                serialize=False,
                                verbose_name="ID",
                            ),
                        ),
                        (
                            "run",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="parts",
                                to="repairs.recalculation",
                            ),
                        ),
                        (
                            "aircraft",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.aircraft",
                            ),
                        ),
                        ("holder", models.TextField(blank=True, default="")),
                        ("held_until", models.DateTimeField(blank=True, null=True)),
                        ("done", models.BooleanField(default=False)),
                    ],
                    options={
                        "ordering": ["run", "pk"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("run", "aircraft"),
                                name="repairs_recalculationpart_once",
                            )
                        ],
                        "indexes": [],
                    },
                ),
                migrations.CreateModel(
                    name="RecalculationItem",
                    fields=[
                        (
                            "id",
                            models.BigAutoField(
                                auto_created=True,
                                primary_key=True,
                                serialize=False,
                                verbose_name="ID",
                            ),
                        ),
                        (
                            "run",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="items",
                                to="repairs.recalculation",
                            ),
                        ),
                        (
                            "before",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="repairs.evaluation",
                            ),
                        ),
                        (
                            "after",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="recalculated",
                                to="repairs.evaluation",
                            ),
                        ),
                        (
                            "unchanged",
                            models.BooleanField(
                                default=False,
                                help_text="Made again it gives the very same; none was kept.",
                            ),
                        ),
                        (
                            "error",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="Why it could not be made again.",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["run", "pk"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("run", "before"),
                                name="repairs_recalculationitem_once",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("after__isnull", False),
                                        ("error", ""),
                                        ("unchanged", False),
                                    ),
                                    models.Q(
                                        ("after__isnull", True),
                                        ("error", ""),
                                        ("unchanged", True),
                                    ),
                                    models.Q(
                                        ("after__isnull", True),
                                        ("unchanged", False),
                                        models.Q(("error", ""), _negated=True),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_recalculationitem_made_or_not",
                                violation_error_message="An evaluation was made again, or the item says why not.",
                            ),
                        ],
                        "indexes": [],
                    },
                ),
            ],
        ),
        migrations.RemoveConstraint(
            model_name="evaluationinput",
            name="repairs_evaluationinput_one_source",
        ),
        migrations.AddField(
            model_name="evaluation",
            name="methods",
            field=models.TextField(
                blank=True,
                default="",
                help_text="Every method asked with its version, as |id@version|.",
            ),
        ),
        migrations.AddField(
            model_name="evaluationinput",
            name="stated_input",
            field=models.ForeignKey(
                blank=True,
                null=True,
                on_delete=django.db.models.deletion.PROTECT,
                related_name="+",
                to="repairs.statedinput",
            ),
        ),
        migrations.AddConstraint(
            model_name="evaluationinput",
            constraint=exactly_one(
                "repairs_evaluationinput",
                "one_source",
                "panel",
                "panel_on_aircraft",
                "material",
                "spectrum",
                "measurement",
                "fatigue_policy",
                "detectable_size",
                "adopted_value",
                "policy",
                "stated_input",
            ),
        ),
        migrations.RunPython(install, migrations.RunPython.noop),
    ]
