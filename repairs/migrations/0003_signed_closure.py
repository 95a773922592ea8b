"""Substantiations, surveys, corrosion levels; which repair superseded which."""

import django.db.models.deletion
from django.conf import settings
from django.db import migrations, models

import fleet.alter_checks
import fleet.create_tables
import fleet.fields
from fleet.triggers import installer

REBUILT = ("repairs_approval",)


def superseded_by(apps, schema_editor):  # type: ignore[no-untyped-def]
    """A repair named the one that it superseded; now each names the one that
    superseded it, so that one may supersede several."""
    rows = apps.get_model("repairs", "Repair").objects.using(
        schema_editor.connection.alias
    )
    for row in rows.filter(replaces__isnull=False):
        rows.filter(pk=row.replaces_id).update(superseded_by=row.pk)


def install_again(apps, schema_editor):  # type: ignore[no-untyped-def]
    """SQLite rebuilt the table and lost its triggers."""
    if schema_editor.connection.vendor == "sqlite":
        installer(REBUILT)(apps, schema_editor)


class Migration(migrations.Migration):
    dependencies = [
        ("fleet", "0003_signed_closure"),
        ("repairs", "0002_refuse_changes"),
    ]
    operations = [
        fleet.create_tables.CreateTables(
            tables=[
                migrations.CreateModel(
                    name="CorrosionLevel",
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
                            "finding",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="corrosion_levels",
                                to="repairs.finding",
                            ),
                        ),
                        (
                            "replaces",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="replaced_by",
                                to="repairs.corrosionlevel",
                            ),
                        ),
                        ("level", fleet.fields.Count(high=3, low=1)),
                        (
                            "definitions",
                            models.TextField(
                                help_text="Document and paragraph of the wording."
                            ),
                        ),
                        (
                            "task",
                            models.TextField(
                                help_text="Task or area of the programme."
                            ),
                        ),
                        (
                            "first_inspection",
                            models.BooleanField(blank=True, null=True),
                        ),
                        ("last_inspected_on", models.DateField(blank=True, null=True)),
                        (
                            "spread",
                            fleet.fields.Word(words=["local", "widespread", "unknown"]),
                        ),
                        (
                            "single_rework",
                            fleet.fields.Word(
                                help_text="Allowable after one rework.",
                                words=["within", "beyond", "unknown"],
                            ),
                        ),
                        (
                            "cumulative",
                            fleet.fields.Word(
                                help_text="With earlier reworks.",
                                words=["within", "beyond", "unknown"],
                            ),
                        ),
                        (
                            "determined_by",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.person",
                            ),
                        ),
                        ("determined_on", models.DateField()),
                        ("programme_action", models.TextField(blank=True, default="")),
                        ("fleet_action", models.TextField(blank=True, default="")),
                    ],
                    options={
                        "ordering": ["finding", "pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(("definitions", ""), _negated=True),
                                name="repairs_corrosionlevel_has_definitions",
                                violation_error_message="Give the definitions.",
                            )
                        ],
                        "indexes": [],
                    },
                ),
                migrations.CreateModel(
                    name="Substantiation",
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
                                related_name="substantiations",
                                to="fleet.operator",
                            ),
                        ),
                        (
                            "aircraft",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="substantiations",
                                to="fleet.aircraft",
                            ),
                        ),
                        ("number", models.TextField()),
                        ("revision", fleet.fields.Count(default=0, high=9999, low=0)),
                        (
                            "replaces",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="replaced_by",
                                to="repairs.substantiation",
                            ),
                        ),
                        (
                            "revision_reason",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="Why this revision; empty for the first.",
                            ),
                        ),
                        ("title", models.TextField()),
                        (
                            "answer",
                            fleet.fields.Word(
                                words=[
                                    "accept",
                                    "blend",
                                    "time_limited",
                                    "permanent",
                                    "replace",
                                    "limitation",
                                    "special_flight",
                                ]
                            ),
                        ),
                        (
                            "limitation",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="What the aircraft may not do.",
                            ),
                        ),
                        (
                            "scale",
                            fleet.fields.Word(
                                default="undecided",
                                words=["minor", "major", "undecided"],
                            ),
                        ),
                        ("scale_reason", models.TextField(blank=True, default="")),
                        (
                            "category",
                            fleet.fields.Word(
                                blank=True,
                                default="",
                                words=["a", "b", "c", "pending", "not_applicable"],
                            ),
                        ),
                        ("category_reason", models.TextField(blank=True, default="")),
                        (
                            "data_due_on",
                            models.DateField(
                                blank=True,
                                help_text="Schedule for the damage-tolerance data.",
                                null=True,
                            ),
                        ),
                        (
                            "temporary_limit_cycles",
                            fleet.fields.Count(
                                blank=True,
                                help_text="From release, approved.",
                                high=2000000000,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "temporary_limit_minutes",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        ("temporary_limit_on", models.DateField(blank=True, null=True)),
                        (
                            "temporary_limit_source",
                            models.TextField(blank=True, default=""),
                        ),
                        (
                            "threshold_cycles",
                            fleet.fields.Count(
                                blank=True,
                                help_text="From release, approved at stage 2.",
                                high=2000000000,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "threshold_minutes",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        ("threshold_on", models.DateField(blank=True, null=True)),
                        ("threshold_source", models.TextField(blank=True, default="")),
                        (
                            "inspections",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="Method, procedure, criteria and repeat of stage 3.",
                            ),
                        ),
                        (
                            "prepared_by",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.person",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["-pk"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("operator", "number", "revision"),
                                name="repairs_substantiation_one_number",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(("title", ""), _negated=True),
                                name="repairs_substantiation_has_title",
                                violation_error_message="Give the title.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        (
                                            "answer__in",
                                            ("limitation", "special_flight"),
                                        ),
                                        _negated=True,
                                    ),
                                    models.Q(("limitation", ""), _negated=True),
                                    _connector="OR",
                                ),
                                name="repairs_substantiation_limitation_said",
                                violation_error_message="Say what the limitation is.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("temporary_limit_cycles__isnull", True),
                                        ("temporary_limit_minutes__isnull", True),
                                        ("temporary_limit_on__isnull", True),
                                    ),
                                    models.Q(
                                        ("temporary_limit_source", ""), _negated=True
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_substantiation_temporary_limit_has_source",
                                violation_error_message="A temporary limit names the document that approves it.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("threshold_cycles__isnull", True),
                                        ("threshold_minutes__isnull", True),
                                        ("threshold_on__isnull", True),
                                    ),
                                    models.Q(("threshold_source", ""), _negated=True),
                                    _connector="OR",
                                ),
                                name="repairs_substantiation_threshold_has_source",
                                violation_error_message="A stage 2 threshold names the document that approves it.",
                            ),
                        ],
                        "indexes": [],
                    },
                ),
                migrations.CreateModel(
                    name="SubstantiationFinding",
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
                            "substantiation",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="finding_rows",
                                to="repairs.substantiation",
                            ),
                        ),
                        (
                            "finding",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="substantiation_rows",
                                to="repairs.finding",
                            ),
                        ),
                        ("withdrawn", models.BooleanField(default=False)),
                    ],
                    options={
                        "ordering": ["substantiation", "finding"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("substantiation", "finding"),
                                name="repairs_substantiationfinding_once",
                            )
                        ],
                        "indexes": [],
                    },
                ),
                migrations.CreateModel(
                    name="SubstantiationNeighbour",
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
                            "substantiation",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="neighbours",
                                to="repairs.substantiation",
                            ),
                        ),
                        (
                            "finding",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="repairs.finding",
                            ),
                        ),
                        (
                            "repair",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="repairs.repair",
                            ),
                        ),
                        (
                            "joint",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.joint",
                            ),
                        ),
                        (
                            "gap_mm",
                            fleet.fields.Measure(
                                blank=True,
                                help_text="Empty: not known.",
                                high=200000,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "answer",
                            fleet.fields.Word(
                                blank=True,
                                default="",
                                help_text="Empty: not reviewed yet.",
                                words=["interacts", "does_not_interact"],
                            ),
                        ),
                        ("reason", models.TextField(blank=True, default="")),
                        (
                            "reviewed_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.person",
                            ),
                        ),
                        ("reviewed_on", models.DateField(blank=True, null=True)),
                        ("withdrawn", models.BooleanField(default=False)),
                    ],
                    options={
                        "ordering": ["substantiation", "gap_mm", "pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("finding__isnull", False),
                                        ("repair__isnull", True),
                                        ("joint__isnull", True),
                                    ),
                                    models.Q(
                                        ("finding__isnull", True),
                                        ("repair__isnull", False),
                                        ("joint__isnull", True),
                                    ),
                                    models.Q(
                                        ("finding__isnull", True),
                                        ("repair__isnull", True),
                                        ("joint__isnull", False),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_substantiationneighbour_one_neighbour",
                                violation_error_message="Name exactly one of: finding, repair, joint.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("answer", ""),
                                        ("reviewed_by__isnull", True),
                                        ("reviewed_on__isnull", True),
                                    ),
                                    models.Q(
                                        models.Q(("answer", ""), _negated=True),
                                        models.Q(("reason", ""), _negated=True),
                                        ("reviewed_by__isnull", False),
                                        ("reviewed_on__isnull", False),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_substantiationneighbour_answer_whole",
                                violation_error_message="An answered neighbour has a reason, a person and a day.",
                            ),
                        ],
                        "indexes": [],
                    },
                ),
                migrations.CreateModel(
                    name="SubstantiationCase",
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
                            "substantiation",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="cases",
                                to="repairs.substantiation",
                            ),
                        ),
                        ("number", fleet.fields.Count(high=999, low=1)),
                        (
                            "kind",
                            fleet.fields.Word(
                                words=["static_ultimate", "residual", "fatigue"]
                            ),
                        ),
                        (
                            "requirement",
                            models.TextField(help_text="Rule and paragraph."),
                        ),
                        ("case", models.TextField(help_text="The critical load case.")),
                        ("method", models.TextField(blank=True, default="")),
                        ("allowable_source", models.TextField(blank=True, default="")),
                        (
                            "margin",
                            fleet.fields.Measure(
                                blank=True,
                                help_text="Empty: not shown as a number.",
                                high=1000000.0,
                                low=-1,
                                null=True,
                            ),
                        ),
                        (
                            "evaluation",
                            models.ForeignKey(
                                blank=True,
                                help_text="Empty: calculated elsewhere, see the method.",
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="case_rows",
                                to="repairs.evaluation",
                            ),
                        ),
                        ("withdrawn", models.BooleanField(default=False)),
                    ],
                    options={
                        "ordering": ["substantiation", "number"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("substantiation", "number"),
                                name="repairs_substantiationcase_once",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(("requirement", ""), _negated=True),
                                name="repairs_substantiationcase_has_requirement",
                                violation_error_message="Give the requirement.",
                            ),
                        ],
                        "indexes": [],
                    },
                ),
                migrations.CreateModel(
                    name="SubstantiationEffect",
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
                            "substantiation",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="effects",
                                to="repairs.substantiation",
                            ),
                        ),
                        (
                            "touches",
                            fleet.fields.Word(
                                words=[
                                    "weight_and_balance",
                                    "control_surface_balance",
                                    "performance",
                                    "systems",
                                    "flight_manual",
                                    "limitations_section",
                                    "maintenance_programme",
                                ]
                            ),
                        ),
                        (
                            "answer",
                            fleet.fields.Word(words=["none", "affected", "unknown"]),
                        ),
                        ("note", models.TextField(blank=True, default="")),
                    ],
                    options={
                        "ordering": ["substantiation", "pk"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("substantiation", "touches"),
                                name="repairs_substantiationeffect_once",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(("answer", "affected"), _negated=True),
                                    models.Q(("note", ""), _negated=True),
                                    _connector="OR",
                                ),
                                name="repairs_substantiationeffect_effect_said",
                                violation_error_message="Say what is affected, and how.",
                            ),
                        ],
                        "indexes": [],
                    },
                ),
                migrations.CreateModel(
                    name="SubstantiationDocument",
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
                            "substantiation",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="documents",
                                to="repairs.substantiation",
                            ),
                        ),
                        (
                            "role",
                            fleet.fields.Word(
                                words=[
                                    "approval_data",
                                    "correspondence",
                                    "drawing",
                                    "calculation",
                                    "test_report",
                                    "inspection_report",
                                    "other",
                                ]
                            ),
                        ),
                        (
                            "document",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="substantiation_rows",
                                to="fleet.document",
                            ),
                        ),
                        ("page", models.TextField(blank=True, default="")),
                        (
                            "attachment",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.attachment",
                            ),
                        ),
                        ("withdrawn", models.BooleanField(default=False)),
                    ],
                    options={
                        "ordering": ["substantiation", "pk"],
                        "indexes": [],
                        "constraints": [],
                    },
                ),
                migrations.CreateModel(
                    name="RepairRequired",
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
                            "repair",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="required",
                                to="repairs.repair",
                            ),
                        ),
                        (
                            "number",
                            fleet.fields.Count(
                                help_text="Of the layer it stands against.",
                                high=99,
                                low=1,
                            ),
                        ),
                        (
                            "material",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.material",
                            ),
                        ),
                        ("material_entered", models.TextField()),
                        (
                            "thickness_mm",
                            fleet.fields.Measure(
                                blank=True, high=500, low=0.01, null=True
                            ),
                        ),
                        ("thickness_entered", models.TextField(blank=True, default="")),
                        (
                            "page",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="Where the approved data say so.",
                            ),
                        ),
                        (
                            "difference",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="What differs from the layer fitted; empty: nothing.",
                            ),
                        ),
                        (
                            "answer",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="Why the difference stands, with its document.",
                            ),
                        ),
                        (
                            "answered_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.person",
                            ),
                        ),
                    ],
                    options={
                        "verbose_name_plural": "repair materials required",
                        "ordering": ["repair", "number"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("repair", "number"),
                                name="repairs_repairrequired_once",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("answer", ""), ("answered_by__isnull", True)
                                    ),
                                    models.Q(
                                        models.Q(("answer", ""), _negated=True),
                                        ("answered_by__isnull", False),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_repairrequired_answer_whole",
                                violation_error_message="An answered difference has words and a person.",
                            ),
                        ],
                        "indexes": [],
                    },
                ),
                migrations.CreateModel(
                    name="RepairStep",
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
                            "repair",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="steps",
                                to="repairs.repair",
                            ),
                        ),
                        ("number", fleet.fields.Count(high=99, low=1)),
                        ("title", models.TextField()),
                        (
                            "option",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="Which of the data's options was chosen.",
                            ),
                        ),
                        (
                            "done_on",
                            models.DateField(
                                blank=True, help_text="Empty: not done.", null=True
                            ),
                        ),
                        (
                            "done_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.person",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["repair", "number"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("repair", "number"),
                                name="repairs_repairstep_once",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("done_on__isnull", False),
                                        ("done_by__isnull", False),
                                    ),
                                    models.Q(
                                        ("done_on__isnull", True),
                                        ("done_by__isnull", True),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_repairstep_done_whole",
                                violation_error_message="Give all of done_on, done_by, or none.",
                            ),
                        ],
                        "indexes": [],
                    },
                ),
                migrations.CreateModel(
                    name="Survey",
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
                            "at_minutes",
                            fleet.fields.Count(
                                blank=True,
                                help_text="Flight time in minutes.",
                                high=2000000000,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "at_cycles",
                            fleet.fields.Count(
                                blank=True,
                                help_text="Flight cycles.",
                                high=2000000000,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "at_landings",
                            fleet.fields.Count(
                                blank=True,
                                help_text="Landings.",
                                high=2000000000,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "at_pressurisations",
                            fleet.fields.Count(
                                blank=True,
                                help_text="Pressurisation cycles.",
                                high=2000000000,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "operator",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="surveys",
                                to="fleet.operator",
                            ),
                        ),
                        (
                            "aircraft",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="surveys",
                                to="fleet.aircraft",
                            ),
                        ),
                        ("number", fleet.fields.Count(high=9999, low=1)),
                        (
                            "area",
                            models.TextField(
                                help_text="What was looked at, as: whole aircraft."
                            ),
                        ),
                        ("surveyed_on", models.DateField()),
                        (
                            "surveyed_by",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.person",
                            ),
                        ),
                        (
                            "document",
                            models.ForeignKey(
                                blank=True,
                                help_text="The signed sheet; empty: none.",
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.document",
                            ),
                        ),
                        (
                            "state",
                            fleet.fields.Word(default="open", words=["open", "closed"]),
                        ),
                        ("closed_on", models.DateField(blank=True, null=True)),
                        (
                            "closed_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.person",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["-surveyed_on", "-pk"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("aircraft", "number"),
                                name="repairs_survey_one_number",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("closed_by__isnull", True),
                                        ("closed_on__isnull", True),
                                        ("state", "open"),
                                    ),
                                    models.Q(
                                        ("closed_by__isnull", False),
                                        ("closed_on__isnull", False),
                                        ("state", "closed"),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_survey_closed_whole",
                                violation_error_message="A closed survey says when and by whom.",
                            ),
                        ],
                        "indexes": [],
                    },
                ),
                migrations.CreateModel(
                    name="SurveyItem",
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
                            "section",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.section",
                            ),
                        ),
                        (
                            "geometry",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.geometryrevision",
                            ),
                        ),
                        ("place_entered", models.TextField(help_text="As written.")),
                        (
                            "place_text",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="Canonical text; empty: to be placed.",
                            ),
                        ),
                        (
                            "place_codes",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="Warnings of the reader, accepted by the user.",
                            ),
                        ),
                        ("reader_version", models.TextField(blank=True, default="")),
                        (
                            "x1_mm",
                            fleet.fields.Measure(
                                blank=True, high=200000.0, low=-200000.0, null=True
                            ),
                        ),
                        (
                            "x2_mm",
                            fleet.fields.Measure(
                                blank=True, high=200000.0, low=-200000.0, null=True
                            ),
                        ),
                        (
                            "map_mm",
                            fleet.fields.Measure(
                                blank=True, high=200000.0, low=-200000.0, null=True
                            ),
                        ),
                        (
                            "s1_mm",
                            fleet.fields.Measure(
                                blank=True, high=200000.0, low=-100000, null=True
                            ),
                        ),
                        (
                            "s2_mm",
                            fleet.fields.Measure(
                                blank=True, high=200000.0, low=-100000, null=True
                            ),
                        ),
                        (
                            "bl_mm",
                            fleet.fields.Measure(
                                blank=True,
                                help_text="Butt line, right positive.",
                                high=100000,
                                low=-100000,
                                null=True,
                            ),
                        ),
                        (
                            "wl_mm",
                            fleet.fields.Measure(
                                blank=True,
                                help_text="Water line.",
                                high=100000,
                                low=-100000,
                                null=True,
                            ),
                        ),
                        (
                            "along_half",
                            fleet.fields.Count(
                                blank=True, high=9999, low=-9999, null=True
                            ),
                        ),
                        (
                            "around_half",
                            fleet.fields.Count(
                                blank=True, high=9999, low=-9999, null=True
                            ),
                        ),
                        (
                            "surface",
                            fleet.fields.Word(
                                blank=True,
                                default="",
                                words=["outer", "inner", "upper", "lower", "internal"],
                            ),
                        ),
                        (
                            "panel",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.panel",
                            ),
                        ),
                        (
                            "zone",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.zone",
                            ),
                        ),
                        (
                            "survey",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="items",
                                to="repairs.survey",
                            ),
                        ),
                        ("number", fleet.fields.Count(high=99999, low=1)),
                        (
                            "outcome",
                            fleet.fields.Word(
                                default="to_match",
                                words=[
                                    "to_match",
                                    "matched",
                                    "recorded_not_found",
                                    "found_not_recorded",
                                ],
                            ),
                        ),
                        (
                            "seen_as",
                            fleet.fields.Word(
                                help_text="What was seen.",
                                words=["damage", "repair", "unclear", "nothing"],
                            ),
                        ),
                        ("description", models.TextField(blank=True, default="")),
                        (
                            "length_mm",
                            fleet.fields.Measure(
                                blank=True, high=100000, low=0, null=True
                            ),
                        ),
                        (
                            "width_mm",
                            fleet.fields.Measure(
                                blank=True, high=100000, low=0, null=True
                            ),
                        ),
                        (
                            "finding",
                            models.ForeignKey(
                                blank=True,
                                help_text="The record it matches, or the one it opened.",
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="survey_items",
                                to="repairs.finding",
                            ),
                        ),
                        (
                            "repair",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="survey_items",
                                to="repairs.repair",
                            ),
                        ),
                        (
                            "answer",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="How the difference was settled.",
                            ),
                        ),
                        (
                            "answered_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.person",
                            ),
                        ),
                        ("answered_on", models.DateField(blank=True, null=True)),
                    ],
                    options={
                        "ordering": ["survey", "number"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("along_half__isnull", True),
                                        ("geometry__isnull", True),
                                        ("map_mm__isnull", True),
                                        ("panel__isnull", True),
                                        ("place_text", ""),
                                        ("s1_mm__isnull", True),
                                        ("section__isnull", True),
                                        ("x1_mm__isnull", True),
                                        ("x2_mm__isnull", True),
                                    ),
                                    models.Q(
                                        ("along_half__isnull", False),
                                        ("geometry__isnull", False),
                                        ("map_mm__isnull", False),
                                        ("section__isnull", False),
                                        ("x1_mm__isnull", False),
                                        ("x2_mm__isnull", False),
                                        models.Q(("place_text", ""), _negated=True),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_surveyitem_place_whole",
                                violation_error_message="A place has a section and coordinates, or text only.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("s1_mm__isnull", False),
                                        ("s2_mm__isnull", False),
                                        ("around_half__isnull", False),
                                    ),
                                    models.Q(
                                        ("s1_mm__isnull", True),
                                        ("s2_mm__isnull", True),
                                        ("around_half__isnull", True),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_surveyitem_across_whole",
                                violation_error_message="Give all of s1_mm, s2_mm, around_half, or none.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("x2_mm__gte", models.F("x1_mm")),
                                    ("x2_mm__isnull", True),
                                    _connector="OR",
                                ),
                                name="repairs_surveyitem_x_ordered",
                                violation_error_message="x2 mm lies before x1 mm.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("s2_mm__gte", models.F("s1_mm")),
                                    ("s2_mm__isnull", True),
                                    _connector="OR",
                                ),
                                name="repairs_surveyitem_s_ordered",
                                violation_error_message="s2 mm lies before s1 mm.",
                            ),
                            models.UniqueConstraint(
                                fields=("survey", "number"),
                                name="repairs_surveyitem_once",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        (
                                            "outcome__in",
                                            ("matched", "recorded_not_found"),
                                        ),
                                        _negated=True,
                                    ),
                                    ("finding__isnull", False),
                                    ("repair__isnull", False),
                                    _connector="OR",
                                ),
                                name="repairs_surveyitem_match_named",
                                violation_error_message="Name the finding or repair it is.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("answer", ""),
                                        ("answered_by__isnull", True),
                                        ("answered_on__isnull", True),
                                    ),
                                    models.Q(
                                        models.Q(("answer", ""), _negated=True),
                                        ("answered_by__isnull", False),
                                        ("answered_on__isnull", False),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_surveyitem_answer_whole",
                                violation_error_message="A settled difference has words, a person and a day.",
                            ),
                        ],
                        "indexes": [],
                    },
                ),
            ],
        ),
        migrations.RemoveConstraint(
            model_name="approval",
            name="repairs_approval_one_subject",
        ),
        migrations.RemoveConstraint(
            model_name="duepoint",
            name="repairs_duepoint_one_origin",
        ),
        migrations.AddField(
            model_name="approval",
            name="overrules",
            field=models.OneToOneField(
                blank=True,
                help_text="The rejection that this one overrules.",
                null=True,
                on_delete=django.db.models.deletion.PROTECT,
                related_name="overruled_by",
                to="repairs.approval",
            ),
        ),
        migrations.AddField(
            model_name="disposition",
            name="crew_informed_on",
            field=models.DateField(
                blank=True, help_text="Deferral: the crew was told.", null=True
            ),
        ),
        migrations.AddField(
            model_name="occurrencereport",
            name="content",
            field=models.TextField(
                blank=True, default="", help_text="The report's text, as it was sent."
            ),
        ),
        migrations.AddField(
            model_name="occurrencereport",
            name="decided_by",
            field=models.ForeignKey(
                blank=True,
                null=True,
                on_delete=django.db.models.deletion.PROTECT,
                related_name="+",
                to="fleet.person",
            ),
        ),
        migrations.AddField(
            model_name="occurrencereport",
            name="policy",
            field=models.ForeignKey(
                blank=True,
                help_text="The clock that was used; empty: none is recorded.",
                null=True,
                on_delete=django.db.models.deletion.PROTECT,
                related_name="+",
                to="fleet.policy",
            ),
        ),
        migrations.AddField(
            model_name="occurrencereport",
            name="recipients",
            field=models.TextField(
                blank=True,
                default="",
                help_text="Authority, design approval holder, owner.",
            ),
        ),
        migrations.AddField(
            model_name="occurrencereport",
            name="rule",
            field=models.TextField(
                blank=True,
                default="",
                help_text="The paragraph that asks for the report.",
            ),
        ),
        migrations.AddField(
            model_name="repair",
            name="inspection_required",
            field=models.BooleanField(
                blank=True,
                help_text="Independent inspection; empty: not said.",
                null=True,
            ),
        ),
        migrations.AddField(
            model_name="repair",
            name="superseded_by",
            field=models.ForeignKey(
                blank=True,
                help_text="A larger repair may supersede several.",
                null=True,
                on_delete=django.db.models.deletion.PROTECT,
                related_name="supersedes",
                to="repairs.repair",
            ),
        ),
        fleet.alter_checks.AlterChecked(
            model_name="duepoint",
            name="kind",
            field=fleet.fields.Word(
                words=[
                    "threshold",
                    "repeat",
                    "deferral",
                    "replace",
                    "stage_clock",
                    "validity",
                    "phase",
                    "life",
                    "engineering",
                ]
            ),
        ),
        migrations.AddConstraint(
            model_name="occurrencereport",
            constraint=models.UniqueConstraint(
                condition=models.Q(("finding__isnull", False)),
                fields=("finding", "regime", "number"),
                name="repairs_occurrencereport_one_per_finding",
            ),
        ),
        migrations.AddConstraint(
            model_name="occurrencereport",
            constraint=models.UniqueConstraint(
                condition=models.Q(("event__isnull", False)),
                fields=("event", "regime", "number"),
                name="repairs_occurrencereport_one_per_event",
            ),
        ),
        migrations.AddField(
            model_name="approval",
            name="substantiation",
            field=models.ForeignKey(
                blank=True,
                null=True,
                on_delete=django.db.models.deletion.PROTECT,
                related_name="approvals",
                to="repairs.substantiation",
            ),
        ),
        migrations.AddField(
            model_name="disposition",
            name="substantiation",
            field=models.ForeignKey(
                blank=True,
                null=True,
                on_delete=django.db.models.deletion.PROTECT,
                related_name="dispositions",
                to="repairs.substantiation",
            ),
        ),
        migrations.AddField(
            model_name="duepoint",
            name="substantiation",
            field=models.ForeignKey(
                blank=True,
                null=True,
                on_delete=django.db.models.deletion.PROTECT,
                related_name="due_points",
                to="repairs.substantiation",
            ),
        ),
        migrations.AddField(
            model_name="repair",
            name="substantiation",
            field=models.ForeignKey(
                blank=True,
                help_text="The revision that was used.",
                null=True,
                on_delete=django.db.models.deletion.PROTECT,
                related_name="repairs",
                to="repairs.substantiation",
            ),
        ),
        migrations.AddConstraint(
            model_name="approval",
            constraint=models.CheckConstraint(
                condition=models.Q(
                    models.Q(
                        ("disposition__isnull", False),
                        ("repair__isnull", True),
                        ("evaluation__isnull", True),
                        ("requirement__isnull", True),
                        ("accomplishment__isnull", True),
                        ("finding__isnull", True),
                        ("event__isnull", True),
                        ("substantiation__isnull", True),
                    ),
                    models.Q(
                        ("disposition__isnull", True),
                        ("repair__isnull", False),
                        ("evaluation__isnull", True),
                        ("requirement__isnull", True),
                        ("accomplishment__isnull", True),
                        ("finding__isnull", True),
                        ("event__isnull", True),
                        ("substantiation__isnull", True),
                    ),
                    models.Q(
                        ("disposition__isnull", True),
                        ("repair__isnull", True),
                        ("evaluation__isnull", False),
                        ("requirement__isnull", True),
                        ("accomplishment__isnull", True),
                        ("finding__isnull", True),
                        ("event__isnull", True),
                        ("substantiation__isnull", True),
                    ),
                    models.Q(
                        ("disposition__isnull", True),
                        ("repair__isnull", True),
                        ("evaluation__isnull", True),
                        ("requirement__isnull", False),
                        ("accomplishment__isnull", True),
                        ("finding__isnull", True),
                        ("event__isnull", True),
                        ("substantiation__isnull", True),
                    ),
                    models.Q(
                        ("disposition__isnull", True),
                        ("repair__isnull", True),
                        ("evaluation__isnull", True),
                        ("requirement__isnull", True),
                        ("accomplishment__isnull", False),
                        ("finding__isnull", True),
                        ("event__isnull", True),
                        ("substantiation__isnull", True),
                    ),
                    models.Q(
                        ("disposition__isnull", True),
                        ("repair__isnull", True),
                        ("evaluation__isnull", True),
                        ("requirement__isnull", True),
                        ("accomplishment__isnull", True),
                        ("finding__isnull", False),
                        ("event__isnull", True),
                        ("substantiation__isnull", True),
                    ),
                    models.Q(
                        ("disposition__isnull", True),
                        ("repair__isnull", True),
                        ("evaluation__isnull", True),
                        ("requirement__isnull", True),
                        ("accomplishment__isnull", True),
                        ("finding__isnull", True),
                        ("event__isnull", False),
                        ("substantiation__isnull", True),
                    ),
                    models.Q(
                        ("disposition__isnull", True),
                        ("repair__isnull", True),
                        ("evaluation__isnull", True),
                        ("requirement__isnull", True),
                        ("accomplishment__isnull", True),
                        ("finding__isnull", True),
                        ("event__isnull", True),
                        ("substantiation__isnull", False),
                    ),
                    _connector="OR",
                ),
                name="repairs_approval_one_subject",
                violation_error_message="Name exactly one of: disposition, repair, evaluation, requirement, accomplishment, finding, event, substantiation.",
            ),
        ),
        migrations.AddConstraint(
            model_name="approval",
            constraint=models.UniqueConstraint(
                condition=models.Q(("substantiation__isnull", False)),
                fields=("substantiation", "meaning", "signer_person"),
                name="repairs_approval_once_per_substantiation",
            ),
        ),
        migrations.AddField(
            model_name="duepoint",
            name="survey_item",
            field=models.ForeignKey(
                blank=True,
                null=True,
                on_delete=django.db.models.deletion.PROTECT,
                related_name="due_points",
                to="repairs.surveyitem",
            ),
        ),
        migrations.AddConstraint(
            model_name="duepoint",
            constraint=models.CheckConstraint(
                condition=models.Q(
                    models.Q(
                        ("subject__isnull", False),
                        ("disposition__isnull", True),
                        ("repair__isnull", True),
                        ("event__isnull", True),
                        ("substantiation__isnull", True),
                        ("survey_item__isnull", True),
                        ("life_of__isnull", True),
                    ),
                    models.Q(
                        ("subject__isnull", True),
                        ("disposition__isnull", False),
                        ("repair__isnull", True),
                        ("event__isnull", True),
                        ("substantiation__isnull", True),
                        ("survey_item__isnull", True),
                        ("life_of__isnull", True),
                    ),
                    models.Q(
                        ("subject__isnull", True),
                        ("disposition__isnull", True),
                        ("repair__isnull", False),
                        ("event__isnull", True),
                        ("substantiation__isnull", True),
                        ("survey_item__isnull", True),
                        ("life_of__isnull", True),
                    ),
                    models.Q(
                        ("subject__isnull", True),
                        ("disposition__isnull", True),
                        ("repair__isnull", True),
                        ("event__isnull", False),
                        ("substantiation__isnull", True),
                        ("survey_item__isnull", True),
                        ("life_of__isnull", True),
                    ),
                    models.Q(
                        ("subject__isnull", True),
                        ("disposition__isnull", True),
                        ("repair__isnull", True),
                        ("event__isnull", True),
                        ("substantiation__isnull", False),
                        ("survey_item__isnull", True),
                        ("life_of__isnull", True),
                    ),
                    models.Q(
                        ("subject__isnull", True),
                        ("disposition__isnull", True),
                        ("repair__isnull", True),
                        ("event__isnull", True),
                        ("substantiation__isnull", True),
                        ("survey_item__isnull", False),
                        ("life_of__isnull", True),
                    ),
                    models.Q(
                        ("subject__isnull", True),
                        ("disposition__isnull", True),
                        ("repair__isnull", True),
                        ("event__isnull", True),
                        ("substantiation__isnull", True),
                        ("survey_item__isnull", True),
                        ("life_of__isnull", False),
                    ),
                    _connector="OR",
                ),
                name="repairs_duepoint_one_origin",
                violation_error_message="Name exactly one of: subject, disposition, repair, event, substantiation, survey_item, life_of.",
            ),
        ),
        migrations.AddConstraint(
            model_name="duepoint",
            constraint=models.UniqueConstraint(
                condition=models.Q(
                    ("closed_on__isnull", True), ("substantiation__isnull", False)
                ),
                fields=("substantiation", "kind", "group"),
                name="repairs_duepoint_one_open_per_substantiation",
            ),
        ),
        migrations.AddConstraint(
            model_name="duepoint",
            constraint=models.UniqueConstraint(
                condition=models.Q(
                    ("closed_on__isnull", True), ("survey_item__isnull", False)
                ),
                fields=("survey_item", "kind", "group"),
                name="repairs_duepoint_one_open_per_survey_item",
            ),
        ),
        migrations.RunPython(superseded_by, migrations.RunPython.noop),
        migrations.RemoveField(model_name="repair", name="replaces"),
        migrations.RunPython(install_again, migrations.RunPython.noop),
    ]
