"""What signed closure needs: applicability of documents, backups, sent forms."""

import django.db.models.deletion
from django.conf import settings
from django.db import migrations, models

import fleet.alter_checks
import fleet.create_tables
import fleet.fields
from fleet.triggers import installer, remover


class Migration(migrations.Migration):
    dependencies = [("fleet", "0002_refuse_changes")]
    operations = [
        migrations.AddField(
            model_name="user",
            name="second_factor_since",
            field=models.DateTimeField(
                blank=True,
                help_text="Empty: signs in with the password alone.",
                null=True,
            ),
        ),
        fleet.alter_checks.AlterChecked(
            model_name="recordnumber",
            name="kind",
            field=fleet.fields.Word(words=["F", "D", "E", "S", "R", "I", "V"]),
        ),
        fleet.create_tables.CreateTables(
            tables=[
                migrations.CreateModel(
                    name="DocumentApplicability",
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
                            "document",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="applicability",
                                to="fleet.document",
                            ),
                        ),
                        (
                            "variant",
                            models.ForeignKey(
                                blank=True,
                                help_text="Empty: any variant.",
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.variant",
                            ),
                        ),
                        (
                            "first_serial",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="Empty: from the first.",
                            ),
                        ),
                        (
                            "last_serial",
                            models.TextField(
                                blank=True, default="", help_text="Empty: and later."
                            ),
                        ),
                        (
                            "page",
                            models.TextField(help_text="Where the document says so."),
                        ),
                    ],
                    options={
                        "verbose_name_plural": "document applicability",
                        "ordering": ["document", "pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(("page", ""), _negated=True),
                                name="fleet_documentapplicability_has_page",
                                violation_error_message="Give the page.",
                            )
                        ],
                        "indexes": [],
                    },
                ),
                migrations.CreateModel(
                    name="Backup",
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
                        ("kind", fleet.fields.Word(words=["made", "restored"])),
                        ("made_at", models.DateTimeField()),
                        (
                            "place",
                            models.TextField(help_text="Where the copy was written."),
                        ),
                        (
                            "byte_count",
                            fleet.fields.Count(high=1125899906842624, low=1),
                        ),
                        (
                            "digest",
                            models.TextField(
                                help_text="SHA-256 of the copy's list of contents."
                            ),
                        ),
                        (
                            "sequence",
                            fleet.fields.Count(high=4611686018427387904, low=0),
                        ),
                        (
                            "problems",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="What the check after restoring found; empty: nothing.",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["made_at", "pk"],
                        "indexes": [],
                        "constraints": [],
                    },
                ),
                migrations.CreateModel(
                    name="SentForm",
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
                        ("key", models.UUIDField(unique=True)),
                        (
                            "user",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to=settings.AUTH_USER_MODEL,
                            ),
                        ),
                        ("sent_at", models.DateTimeField()),
                        ("path", models.TextField()),
                        (
                            "content",
                            models.TextField(
                                help_text="Keyed digest of what was typed."
                            ),
                        ),
                        (
                            "entry",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.historyentry",
                            ),
                        ),
                        (
                            "answer",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="Address that the first sending led to.",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["sent_at", "pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(("path", ""), _negated=True),
                                name="fleet_sentform_has_path",
                                violation_error_message="A form has an address.",
                            )
                        ],
                        "indexes": [],
                    },
                ),
            ],
        ),
        migrations.RunPython(installer(("fleet_backup",)), remover(("fleet_backup",))),
    ]
