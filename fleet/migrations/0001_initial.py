import django.contrib.auth.models
import django.contrib.auth.validators
import django.db.models.deletion
import django.utils.timezone
import fleet.create_tables
import fleet.fields
from django.conf import settings
from django.db import migrations, models


class Migration(migrations.Migration):
    initial = True

    dependencies = [
        ("auth", "0012_alter_user_first_name_max_length"),
    ]

    operations = [
        fleet.create_tables.CreateTables(
            tables=[
                migrations.CreateModel(
                    name="Organisation",
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
                        ("code", models.TextField(unique=True)),
                        ("name", models.TextField()),
                        (
                            "kind",
                            fleet.fields.Word(
                                words=[
                                    "operator",
                                    "camo",
                                    "maintenance",
                                    "design_approval_holder",
                                    "owner",
                                    "authority",
                                ]
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["name", "pk"],
                    },
                ),
                migrations.CreateModel(
                    name="Operator",
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
                            "organisation",
                            models.OneToOneField(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="operator",
                                to="fleet.organisation",
                            ),
                        ),
                        ("code", models.TextField(unique=True)),
                        ("name", models.TextField()),
                        (
                            "regime",
                            models.TextField(
                                help_text="Rules it works under; the key of policy rows."
                            ),
                        ),
                        ("time_zone", models.TextField(default="UTC")),
                        (
                            "programme_three_stages",
                            models.BooleanField(
                                default=False,
                                help_text="Its programme adopts the three-stage approval of repairs.",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["name", "pk"],
                    },
                ),
                migrations.CreateModel(
                    name="Person",
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
                            "organisation",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="people",
                                to="fleet.organisation",
                            ),
                        ),
                        ("name", models.TextField()),
                        ("staff_number", models.TextField(blank=True, default="")),
                    ],
                    options={
                        "ordering": ["name", "pk"],
                    },
                ),
                migrations.CreateModel(
                    name="User",
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
                            "password",
                            models.CharField(max_length=128, verbose_name="password"),
                        ),
                        (
                            "last_login",
                            models.DateTimeField(
                                blank=True, null=True, verbose_name="last login"
                            ),
                        ),
                        (
                            "is_superuser",
                            models.BooleanField(
                                default=False,
                                help_text="Designates that this user has all permissions without explicitly assigning them.",
                                verbose_name="superuser status",
                            ),
                        ),
                        (
                            "username",
                            models.CharField(
                                error_messages={
                                    "unique": "A user with that username already exists."
                                },
                                help_text="Required. 150 characters or fewer. Letters, digits and @/./+/-/_ only.",
                                max_length=150,
                                unique=True,
                                validators=[
                                    django.contrib.auth.validators.UnicodeUsernameValidator()
                                ],
                                verbose_name="username",
                            ),
                        ),
                        (
                            "first_name",
                            models.CharField(
                                blank=True, max_length=150, verbose_name="first name"
                            ),
                        ),
                        (
                            "last_name",
                            models.CharField(
                                blank=True, max_length=150, verbose_name="last name"
                            ),
                        ),
                        (
                            "email",
                            models.EmailField(
                                blank=True, max_length=254, verbose_name="email address"
                            ),
                        ),
                        (
                            "is_staff",
                            models.BooleanField(
                                default=False,
                                help_text="Designates whether the user can log into this admin site.",
                                verbose_name="staff status",
                            ),
                        ),
                        (
                            "is_active",
                            models.BooleanField(
                                default=True,
                                help_text="Designates whether this user should be treated as active. Unselect this instead of deleting accounts.",
                                verbose_name="active",
                            ),
                        ),
                        (
                            "date_joined",
                            models.DateTimeField(
                                default=django.utils.timezone.now,
                                verbose_name="date joined",
                            ),
                        ),
                        (
                            "person",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="user",
                                to="fleet.person",
                            ),
                        ),
                        ("sees_all_operators", models.BooleanField(default=False)),
                        (
                            "groups",
                            models.ManyToManyField(
                                blank=True,
                                help_text="The groups this user belongs to. A user will get all permissions granted to each of their groups.",
                                related_name="user_set",
                                related_query_name="user",
                                to="auth.group",
                                verbose_name="groups",
                            ),
                        ),
                        (
                            "user_permissions",
                            models.ManyToManyField(
                                blank=True,
                                help_text="Specific permissions for this user.",
                                related_name="user_set",
                                related_query_name="user",
                                to="auth.permission",
                                verbose_name="user permissions",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["username"],
                    },
                    managers=[
                        ("objects", django.contrib.auth.models.UserManager()),
                    ],
                ),
                migrations.CreateModel(
                    name="Membership",
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
                            "user",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="memberships",
                                to=settings.AUTH_USER_MODEL,
                            ),
                        ),
                        (
                            "operator",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="memberships",
                                to="fleet.operator",
                            ),
                        ),
                        (
                            "role",
                            fleet.fields.Word(
                                words=[
                                    "recorder",
                                    "engineer",
                                    "certifier",
                                    "signatory",
                                    "planner",
                                    "manager",
                                    "auditor",
                                    "administrator",
                                ]
                            ),
                        ),
                        ("began_on", models.DateField()),
                        (
                            "ended_on",
                            models.DateField(
                                blank=True, help_text="Empty: still.", null=True
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["user", "operator", "role", "pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("ended_on__gte", models.F("began_on")),
                                    ("ended_on__isnull", True),
                                    _connector="OR",
                                ),
                                name="fleet_membership_ends_after_start",
                                violation_error_message="ended on lies before began on.",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(("ended_on__isnull", True)),
                                fields=("user", "operator", "role"),
                                name="fleet_membership_one_open",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Authorisation",
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
                            "person",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="authorisations",
                                to="fleet.person",
                            ),
                        ),
                        (
                            "operator",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="authorisations",
                                to="fleet.operator",
                            ),
                        ),
                        ("number", models.TextField()),
                        (
                            "scope",
                            fleet.fields.Word(
                                words=[
                                    "certify",
                                    "inspect",
                                    "ndt",
                                    "assess",
                                    "check",
                                    "approve",
                                ]
                            ),
                        ),
                        ("valid_from", models.DateField()),
                        (
                            "valid_to",
                            models.DateField(
                                blank=True, help_text="Empty: open.", null=True
                            ),
                        ),
                        (
                            "source",
                            models.TextField(help_text="Document that grants it."),
                        ),
                    ],
                    options={
                        "ordering": ["person", "scope", "valid_from", "pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("valid_to__gte", models.F("valid_from")),
                                    ("valid_to__isnull", True),
                                    _connector="OR",
                                ),
                                name="fleet_authorisation_ends_after_start",
                                violation_error_message="valid to lies before valid from.",
                            ),
                            models.UniqueConstraint(
                                fields=("operator", "number", "scope", "valid_from"),
                                name="fleet_authorisation_once",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Policy",
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
                                blank=True,
                                help_text="Empty: offered to every operator of the regime.",
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="policies",
                                to="fleet.operator",
                            ),
                        ),
                        ("regime", models.TextField(blank=True, default="")),
                        ("key", models.TextField()),
                        ("value", fleet.fields.Count(high=1000000000, low=-1000000000)),
                        (
                            "unit",
                            fleet.fields.Word(
                                words=[
                                    "hours",
                                    "days",
                                    "months",
                                    "percent",
                                    "cycles",
                                    "minutes",
                                    "count",
                                    "mm",
                                ]
                            ),
                        ),
                        ("source", models.TextField()),
                        ("edition", models.TextField(blank=True, default="")),
                        (
                            "grade",
                            fleet.fields.Word(
                                help_text="How far the source was read.",
                                words=[
                                    "print",
                                    "quoted",
                                    "memory",
                                    "practice",
                                    "adopted",
                                ],
                            ),
                        ),
                        ("effective_from", models.DateField()),
                        ("effective_to", models.DateField(blank=True, null=True)),
                        (
                            "replaces",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="replaced_by",
                                to="fleet.policy",
                            ),
                        ),
                    ],
                    options={
                        "verbose_name_plural": "policies",
                        "ordering": ["key", "effective_from", "pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(("source", ""), _negated=True),
                                name="fleet_policy_has_source",
                                violation_error_message="Give the source.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("effective_to__gte", models.F("effective_from")),
                                    ("effective_to__isnull", True),
                                    _connector="OR",
                                ),
                                name="fleet_policy_ends_after_start",
                                violation_error_message="effective to lies before effective from.",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(("operator__isnull", False)),
                                fields=("operator", "key", "effective_from"),
                                name="fleet_policy_once_per_operator",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(("operator__isnull", True)),
                                fields=("regime", "key", "effective_from"),
                                name="fleet_policy_once_offered",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="RecordNumber",
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
                            "operator",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.operator",
                            ),
                        ),
                        (
                            "kind",
                            fleet.fields.Word(words=["F", "E", "S", "R", "I", "V"]),
                        ),
                        ("last", fleet.fields.Count(default=0, high=1000000000, low=0)),
                    ],
                    options={
                        "ordering": ["operator", "kind"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("operator", "kind"),
                                name="fleet_recordnumber_once",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Document",
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
                                related_name="documents",
                                to="fleet.operator",
                            ),
                        ),
                        (
                            "kind",
                            fleet.fields.Word(
                                words=[
                                    "repair_manual",
                                    "maintenance_data",
                                    "letter",
                                    "design_approval",
                                    "programme",
                                    "directive",
                                    "release",
                                    "limitations",
                                    "other",
                                ]
                            ),
                        ),
                        ("reference", models.TextField()),
                        ("revision", models.TextField(blank=True, default="")),
                        ("title", models.TextField(blank=True, default="")),
                        (
                            "issued_on",
                            models.DateField(
                                blank=True, help_text="Empty: unknown.", null=True
                            ),
                        ),
                        (
                            "replaces",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="replaced_by",
                                to="fleet.document",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["reference", "revision", "pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(("reference", ""), _negated=True),
                                name="fleet_document_has_reference",
                                violation_error_message="Give the reference.",
                            ),
                            models.UniqueConstraint(
                                fields=("operator", "reference", "revision"),
                                name="fleet_document_once",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Attachment",
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
                            "operator",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="attachments",
                                to="fleet.operator",
                            ),
                        ),
                        (
                            "kind",
                            fleet.fields.Word(
                                words=["photograph", "scan", "report", "other"]
                            ),
                        ),
                        ("title", models.TextField(blank=True, default="")),
                        ("revision", models.TextField(blank=True, default="")),
                        ("page", models.TextField(blank=True, default="")),
                        (
                            "sha256",
                            models.TextField(
                                help_text="Digest of the copy that is shown."
                            ),
                        ),
                        (
                            "original_sha256",
                            models.TextField(
                                help_text="Digest of the bytes as received."
                            ),
                        ),
                        ("media_type", models.TextField()),
                        ("byte_count", fleet.fields.Count(high=1099511627776, low=1)),
                        ("original_name", models.TextField()),
                        (
                            "width_px",
                            fleet.fields.Count(
                                blank=True, high=100000, low=1, null=True
                            ),
                        ),
                        (
                            "height_px",
                            fleet.fields.Count(
                                blank=True, high=100000, low=1, null=True
                            ),
                        ),
                        (
                            "document",
                            models.ForeignKey(
                                blank=True,
                                help_text="Empty: a photograph or other file.",
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="attachments",
                                to="fleet.document",
                            ),
                        ),
                        (
                            "added_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to=settings.AUTH_USER_MODEL,
                            ),
                        ),
                        ("added_at", models.DateTimeField()),
                    ],
                    options={
                        "ordering": ["pk"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("operator", "original_sha256"),
                                name="fleet_attachment_once",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("height_px__isnull", True),
                                        ("width_px__isnull", True),
                                    ),
                                    models.Q(
                                        ("height_px__isnull", False),
                                        ("width_px__isnull", False),
                                    ),
                                    _connector="OR",
                                ),
                                name="fleet_attachment_image_has_both_sides",
                                violation_error_message="An image has a width and a height.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Material",
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
                        ("name", models.TextField()),
                        ("temper", models.TextField(blank=True, default="")),
                        ("form", models.TextField(blank=True, default="")),
                        ("revision", fleet.fields.Count(default=1, high=10000, low=1)),
                        (
                            "replaces",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="replaced_by",
                                to="fleet.material",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["name", "temper", "form", "revision"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("name", "temper", "form", "revision"),
                                name="fleet_material_once",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="MaterialProperty",
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
                            "material",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="properties",
                                to="fleet.material",
                            ),
                        ),
                        ("quantity", models.TextField()),
                        (
                            "value",
                            fleet.fields.Measure(
                                high=1000000000000.0, low=-1000000000000.0
                            ),
                        ),
                        (
                            "thickness_min_mm",
                            fleet.fields.Measure(default=0, high=500, low=0),
                        ),
                        (
                            "thickness_max_mm",
                            fleet.fields.Measure(
                                blank=True,
                                help_text="Empty: no upper end.",
                                high=500,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "direction",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="L, LT, L-T and so on; empty: any.",
                            ),
                        ),
                        (
                            "basis",
                            fleet.fields.Word(
                                words=["a", "b", "s", "typical", "fit", "adopted"]
                            ),
                        ),
                        ("source", models.TextField()),
                        (
                            "seen",
                            fleet.fields.Word(
                                words=["print", "quoted", "memory", "adopted"]
                            ),
                        ),
                    ],
                    options={
                        "verbose_name_plural": "material properties",
                        "ordering": [
                            "material",
                            "quantity",
                            "direction",
                            "thickness_min_mm",
                        ],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(("source", ""), _negated=True),
                                name="fleet_materialproperty_has_source",
                                violation_error_message="Give the source.",
                            ),
                            models.UniqueConstraint(
                                fields=(
                                    "material",
                                    "quantity",
                                    "direction",
                                    "basis",
                                    "thickness_min_mm",
                                ),
                                name="fleet_materialproperty_once",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Spectrum",
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
                        ("name", models.TextField()),
                        ("revision", fleet.fields.Count(default=1, high=10000, low=1)),
                        ("content", models.TextField()),
                        ("content_digest", models.TextField()),
                        (
                            "schema_version",
                            fleet.fields.Count(default=1, high=1000, low=1),
                        ),
                        ("source", models.TextField()),
                        (
                            "replaces",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="replaced_by",
                                to="fleet.spectrum",
                            ),
                        ),
                    ],
                    options={
                        "verbose_name_plural": "spectra",
                        "ordering": ["name", "revision"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("name", "revision"), name="fleet_spectrum_once"
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="AdoptedValue",
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
                                related_name="adopted_values",
                                to="fleet.operator",
                            ),
                        ),
                        (
                            "material",
                            models.ForeignKey(
                                blank=True,
                                help_text="Empty: not a material's property.",
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="adopted_values",
                                to="fleet.material",
                            ),
                        ),
                        ("quantity", models.TextField()),
                        (
                            "value",
                            fleet.fields.Measure(
                                high=1000000000000.0, low=-1000000000000.0
                            ),
                        ),
                        ("unit", models.TextField()),
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
                        ("adopted_on", models.DateField()),
                        (
                            "second_person",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.person",
                            ),
                        ),
                        (
                            "replaces",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="replaced_by",
                                to="fleet.adoptedvalue",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["quantity", "adopted_on", "pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(("document", ""), _negated=True),
                                name="fleet_adoptedvalue_has_document",
                                violation_error_message="Give the document.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("second_person__isnull", True),
                                    models.Q(
                                        ("second_person", models.F("person")),
                                        _negated=True,
                                    ),
                                    _connector="OR",
                                ),
                                name="fleet_adoptedvalue_two_people",
                                violation_error_message="The second person is someone else.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="FatiguePolicy",
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
                            "aircraft_type",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="fatigue_policies",
                                to="fleet.aircrafttype",
                            ),
                        ),
                        (
                            "name",
                            models.TextField(
                                help_text="What it applies to, as: stress life, growth."
                            ),
                        ),
                        ("revision", fleet.fields.Count(default=1, high=10000, low=1)),
                        ("factor", fleet.fields.Measure(high=100, low=1)),
                        (
                            "multiplies",
                            models.TextField(
                                help_text="Test mean, analysis median, growth life."
                            ),
                        ),
                        (
                            "log_life_deviation",
                            fleet.fields.Measure(
                                blank=True,
                                help_text="s of log10 life.",
                                high=5,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "specimens",
                            fleet.fields.Count(
                                blank=True, high=10000, low=1, null=True
                            ),
                        ),
                        (
                            "reliability",
                            fleet.fields.Measure(blank=True, high=1, low=0, null=True),
                        ),
                        (
                            "confidence",
                            fleet.fields.Measure(blank=True, high=1, low=0, null=True),
                        ),
                        ("spectrum_severity_inside", models.BooleanField()),
                        ("source", models.TextField()),
                        (
                            "grade",
                            fleet.fields.Word(
                                words=["print", "quoted", "memory", "adopted"]
                            ),
                        ),
                        (
                            "replaces",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="replaced_by",
                                to="fleet.fatiguepolicy",
                            ),
                        ),
                    ],
                    options={
                        "verbose_name_plural": "fatigue policies",
                        "ordering": ["aircraft_type", "name", "revision"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(("source", ""), _negated=True),
                                name="fleet_fatiguepolicy_has_source",
                                violation_error_message="Give the source.",
                            ),
                            models.UniqueConstraint(
                                fields=("aircraft_type", "name", "revision"),
                                name="fleet_fatiguepolicy_once",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="DetectableSize",
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
                            "aircraft_type",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="detectable_sizes",
                                to="fleet.aircrafttype",
                            ),
                        ),
                        ("method", models.TextField()),
                        (
                            "detail",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="Where it holds: open skin, at fastener head, under doubler.",
                            ),
                        ),
                        ("revision", fleet.fields.Count(default=1, high=10000, low=1)),
                        (
                            "length_mm",
                            fleet.fields.Measure(
                                help_text="Visible length.", high=10000, low=0.001
                            ),
                        ),
                        (
                            "hidden_mm",
                            fleet.fields.Measure(
                                help_text="Part hidden by head, doubler or fairing.",
                                high=10000,
                                low=0,
                            ),
                        ),
                        ("source", models.TextField()),
                        (
                            "grade",
                            fleet.fields.Word(
                                words=["print", "quoted", "memory", "adopted"]
                            ),
                        ),
                        (
                            "replaces",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="replaced_by",
                                to="fleet.detectablesize",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["aircraft_type", "method", "detail", "revision"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(("source", ""), _negated=True),
                                name="fleet_detectablesize_has_source",
                                violation_error_message="Give the source.",
                            ),
                            models.UniqueConstraint(
                                fields=(
                                    "aircraft_type",
                                    "method",
                                    "detail",
                                    "revision",
                                ),
                                name="fleet_detectablesize_once",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="AircraftType",
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
                        ("code", models.TextField(unique=True)),
                        ("name", models.TextField()),
                        ("entry_unit", fleet.fields.Word(words=["in", "mm"])),
                        (
                            "normal_differential_mpa",
                            fleet.fields.Measure(blank=True, high=1, low=0, null=True),
                        ),
                        (
                            "relief_differential_mpa",
                            fleet.fields.Measure(
                                blank=True,
                                help_text="Relief valve, highest.",
                                high=1,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "external_suction_mpa",
                            fleet.fields.Measure(
                                blank=True,
                                help_text="External aerodynamic.",
                                high=1,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "ceiling_ft",
                            fleet.fields.Count(
                                blank=True, high=100000, low=0, null=True
                            ),
                        ),
                        ("pressures_source", models.TextField(blank=True, default="")),
                    ],
                    options={
                        "ordering": ["code"],
                    },
                ),
                migrations.CreateModel(
                    name="Variant",
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
                            "aircraft_type",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="variants",
                                to="fleet.aircrafttype",
                            ),
                        ),
                        ("code", models.TextField()),
                        ("name", models.TextField()),
                        (
                            "design_goal_cycles",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        (
                            "design_goal_minutes",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        (
                            "validity_cycles",
                            fleet.fields.Count(
                                blank=True,
                                help_text="Limit of validity, flight cycles.",
                                high=2000000000,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "validity_minutes",
                            fleet.fields.Count(
                                blank=True,
                                help_text="Limit of validity, flight time.",
                                high=2000000000,
                                low=0,
                                null=True,
                            ),
                        ),
                        ("source", models.TextField(blank=True, default="")),
                    ],
                    options={
                        "ordering": ["aircraft_type", "code"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("aircraft_type", "code"),
                                name="fleet_variant_once",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="GeometryRevision",
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
                            "aircraft_type",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="geometries",
                                to="fleet.aircrafttype",
                            ),
                        ),
                        ("number", fleet.fields.Count(high=10000, low=1)),
                        (
                            "state",
                            fleet.fields.Word(
                                words=["draft", "published", "superseded"]
                            ),
                        ),
                        ("source", models.TextField(blank=True, default="")),
                        (
                            "content",
                            models.TextField(help_text="The geometry file, as read."),
                        ),
                        ("file_digest", models.TextField()),
                        ("published_on", models.DateField(blank=True, null=True)),
                    ],
                    options={
                        "ordering": ["aircraft_type", "number"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("aircraft_type", "number"),
                                name="fleet_geometryrevision_once",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(("state", "published")),
                                fields=("aircraft_type",),
                                name="fleet_geometryrevision_one_published",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Section",
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
                            "aircraft_type",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="sections",
                                to="fleet.aircrafttype",
                            ),
                        ),
                        ("code", models.TextField()),
                        ("name", models.TextField()),
                        ("kind", fleet.fields.Word(words=["shell", "surface"])),
                        (
                            "side",
                            fleet.fields.Word(blank=True, default="", words=["L", "R"]),
                        ),
                        ("datum_text", models.TextField()),
                        (
                            "reference_radius_mm",
                            fleet.fields.Measure(
                                blank=True, high=100000, low=1, null=True
                            ),
                        ),
                        (
                            "wrap_mm",
                            fleet.fields.Measure(
                                blank=True,
                                help_text="Empty: an open surface.",
                                high=1000000,
                                low=1,
                                null=True,
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["aircraft_type", "pk"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("aircraft_type", "code"),
                                name="fleet_section_once",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("kind", "shell"),
                                        ("reference_radius_mm__isnull", False),
                                        ("wrap_mm__isnull", False),
                                    ),
                                    models.Q(
                                        ("kind", "surface"), ("wrap_mm__isnull", True)
                                    ),
                                    _connector="OR",
                                ),
                                name="fleet_section_shell_wraps",
                                violation_error_message="A shell has a radius and a wrap; an open surface has no wrap.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Frame",
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
                            "geometry",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="frames",
                                to="fleet.geometryrevision",
                            ),
                        ),
                        (
                            "section",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="frames",
                                to="fleet.section",
                            ),
                        ),
                        ("label", models.TextField()),
                        ("station_label", models.TextField()),
                        ("map_mm", fleet.fields.Measure(high=200000.0, low=-200000.0)),
                        ("ordinal", fleet.fields.Count(high=9999, low=0)),
                        ("plug", models.BooleanField(default=False)),
                        (
                            "area_mm2",
                            fleet.fields.Measure(
                                blank=True, high=1000000.0, low=0, null=True
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["geometry", "section", "ordinal"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("geometry", "section", "label"),
                                name="fleet_frame_once",
                            ),
                            models.UniqueConstraint(
                                fields=("geometry", "section", "ordinal"),
                                name="fleet_frame_one_ordinal",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="FrameStation",
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
                            "frame",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="stations",
                                to="fleet.frame",
                            ),
                        ),
                        (
                            "variant",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="frame_stations",
                                to="fleet.variant",
                            ),
                        ),
                        ("x_mm", fleet.fields.Measure(high=200000.0, low=-200000.0)),
                    ],
                    options={
                        "ordering": ["frame", "variant"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("frame", "variant"),
                                name="fleet_framestation_once",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Stringer",
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
                            "geometry",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="stringers",
                                to="fleet.geometryrevision",
                            ),
                        ),
                        (
                            "section",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="stringers",
                                to="fleet.section",
                            ),
                        ),
                        ("label", models.TextField()),
                        ("s_mm", fleet.fields.Measure(high=200000.0, low=-200000.0)),
                        ("ordinal", fleet.fields.Count(high=9999, low=0)),
                        (
                            "area_mm2",
                            fleet.fields.Measure(
                                blank=True, high=1000000.0, low=0, null=True
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["geometry", "section", "ordinal"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("geometry", "section", "label"),
                                name="fleet_stringer_once",
                            ),
                            models.UniqueConstraint(
                                fields=("geometry", "section", "ordinal"),
                                name="fleet_stringer_one_ordinal",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Zone",
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
                            "aircraft_type",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="zones",
                                to="fleet.aircrafttype",
                            ),
                        ),
                        ("code", models.TextField()),
                        ("title", models.TextField()),
                    ],
                    options={
                        "ordering": ["aircraft_type", "code"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("aircraft_type", "code"), name="fleet_zone_once"
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Cutout",
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
                            "geometry",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="%(class)ss",
                                to="fleet.geometryrevision",
                            ),
                        ),
                        (
                            "section",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="%(class)ss",
                                to="fleet.section",
                            ),
                        ),
                        ("label", models.TextField()),
                        ("map1_mm", fleet.fields.Measure(high=200000.0, low=-200000.0)),
                        ("map2_mm", fleet.fields.Measure(high=200000.0, low=-200000.0)),
                        ("s1_mm", fleet.fields.Measure(high=200000.0, low=-200000.0)),
                        ("s2_mm", fleet.fields.Measure(high=200000.0, low=-200000.0)),
                        (
                            "kind",
                            fleet.fields.Word(
                                words=[
                                    "door",
                                    "cargo_door",
                                    "window",
                                    "hatch",
                                    "access",
                                ]
                            ),
                        ),
                        (
                            "surround_thickness_mm",
                            fleet.fields.Measure(
                                blank=True, high=500, low=0.01, null=True
                            ),
                        ),
                        (
                            "surround_width_mm",
                            fleet.fields.Measure(
                                blank=True, high=10000, low=0, null=True
                            ),
                        ),
                        (
                            "door_section",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="fills",
                                to="fleet.section",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["geometry", "section", "map1_mm", "pk"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("geometry", "section", "label"),
                                name="fleet_cutout_once",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("map2_mm__gte", models.F("map1_mm")),
                                    ("map2_mm__isnull", True),
                                    _connector="OR",
                                ),
                                name="fleet_cutout_along_ordered",
                                violation_error_message="map2 mm lies before map1 mm.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("s2_mm__gte", models.F("s1_mm")),
                                    ("s2_mm__isnull", True),
                                    _connector="OR",
                                ),
                                name="fleet_cutout_across_ordered",
                                violation_error_message="s2 mm lies before s1 mm.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("surround_thickness_mm__isnull", False),
                                        ("surround_width_mm__isnull", False),
                                    ),
                                    models.Q(
                                        ("surround_thickness_mm__isnull", True),
                                        ("surround_width_mm__isnull", True),
                                    ),
                                    _connector="OR",
                                ),
                                name="fleet_cutout_surround_whole",
                                violation_error_message="Give all of surround_thickness_mm, surround_width_mm, or none.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Joint",
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
                            "geometry",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="%(class)ss",
                                to="fleet.geometryrevision",
                            ),
                        ),
                        (
                            "section",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="%(class)ss",
                                to="fleet.section",
                            ),
                        ),
                        ("label", models.TextField()),
                        ("map1_mm", fleet.fields.Measure(high=200000.0, low=-200000.0)),
                        ("map2_mm", fleet.fields.Measure(high=200000.0, low=-200000.0)),
                        ("s1_mm", fleet.fields.Measure(high=200000.0, low=-200000.0)),
                        ("s2_mm", fleet.fields.Measure(high=200000.0, low=-200000.0)),
                        ("kind", fleet.fields.Word(words=["lap", "butt"])),
                    ],
                    options={
                        "ordering": ["geometry", "section", "map1_mm", "pk"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("geometry", "section", "label"),
                                name="fleet_joint_once",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("map2_mm__gte", models.F("map1_mm")),
                                    ("map2_mm__isnull", True),
                                    _connector="OR",
                                ),
                                name="fleet_joint_along_ordered",
                                violation_error_message="map2 mm lies before map1 mm.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("s2_mm__gte", models.F("s1_mm")),
                                    ("s2_mm__isnull", True),
                                    _connector="OR",
                                ),
                                name="fleet_joint_across_ordered",
                                violation_error_message="s2 mm lies before s1 mm.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Panel",
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
                            "geometry",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="%(class)ss",
                                to="fleet.geometryrevision",
                            ),
                        ),
                        (
                            "section",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="%(class)ss",
                                to="fleet.section",
                            ),
                        ),
                        ("label", models.TextField()),
                        ("map1_mm", fleet.fields.Measure(high=200000.0, low=-200000.0)),
                        ("map2_mm", fleet.fields.Measure(high=200000.0, low=-200000.0)),
                        ("s1_mm", fleet.fields.Measure(high=200000.0, low=-200000.0)),
                        ("s2_mm", fleet.fields.Measure(high=200000.0, low=-200000.0)),
                        (
                            "material",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="panels",
                                to="fleet.material",
                            ),
                        ),
                        (
                            "spectrum",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="panels",
                                to="fleet.spectrum",
                            ),
                        ),
                        (
                            "thickness_mm",
                            fleet.fields.Measure(
                                blank=True, high=500, low=0.01, null=True
                            ),
                        ),
                        (
                            "clad_mm",
                            fleet.fields.Measure(
                                blank=True,
                                help_text="Cladding, each side; 0 = bare.",
                                high=10,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "radius_mm",
                            fleet.fields.Measure(
                                blank=True, high=100000, low=1, null=True
                            ),
                        ),
                        (
                            "limit_stress_mpa",
                            fleet.fields.Measure(
                                blank=True,
                                help_text="Limit, along the section.",
                                high=5000,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "mean_stress_mpa",
                            fleet.fields.Measure(
                                blank=True,
                                help_text="1 g, along the section.",
                                high=5000,
                                low=-5000,
                                null=True,
                            ),
                        ),
                        (
                            "ultimate_load_n_per_mm",
                            fleet.fields.Measure(
                                blank=True, high=1000000.0, low=0, null=True
                            ),
                        ),
                        ("load_source", models.TextField(blank=True, default="")),
                        (
                            "criticality",
                            fleet.fields.Word(
                                words=[
                                    "principal",
                                    "fatigue_critical",
                                    "secondary",
                                    "unknown",
                                ]
                            ),
                        ),
                        (
                            "criticality_source",
                            models.TextField(blank=True, default=""),
                        ),
                        (
                            "zone",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="panels",
                                to="fleet.zone",
                            ),
                        ),
                        ("pressurised", models.BooleanField(default=False)),
                        (
                            "content_digest",
                            models.TextField(help_text="Over the engineering columns."),
                        ),
                        ("source", models.TextField(blank=True, default="")),
                    ],
                    options={
                        "ordering": ["geometry", "section", "map1_mm", "pk"],
                        "indexes": [
                            models.Index(
                                fields=["geometry", "section", "map1_mm"],
                                name="fleet_panel_at",
                            )
                        ],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("geometry", "section", "label"),
                                name="fleet_panel_once",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("map2_mm__gte", models.F("map1_mm")),
                                    ("map2_mm__isnull", True),
                                    _connector="OR",
                                ),
                                name="fleet_panel_along_ordered",
                                violation_error_message="map2 mm lies before map1 mm.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("s2_mm__gte", models.F("s1_mm")),
                                    ("s2_mm__isnull", True),
                                    _connector="OR",
                                ),
                                name="fleet_panel_across_ordered",
                                violation_error_message="s2 mm lies before s1 mm.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Configuration",
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
                            "aircraft_type",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="configurations",
                                to="fleet.aircrafttype",
                            ),
                        ),
                        ("code", models.TextField()),
                        ("name", models.TextField()),
                    ],
                    options={
                        "ordering": ["aircraft_type", "code"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("aircraft_type", "code"),
                                name="fleet_configuration_once",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Aircraft",
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
                                related_name="aircraft",
                                to="fleet.operator",
                            ),
                        ),
                        (
                            "variant",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="aircraft",
                                to="fleet.variant",
                            ),
                        ),
                        ("serial_number", models.TextField()),
                        ("registration", models.TextField(help_text="Today's.")),
                        (
                            "manufactured_on",
                            models.DateField(
                                blank=True, help_text="Empty: unknown.", null=True
                            ),
                        ),
                        (
                            "data_from",
                            models.DateField(help_text="First day with records here."),
                        ),
                        (
                            "data_to",
                            models.DateField(
                                blank=True, help_text="Empty: still here.", null=True
                            ),
                        ),
                        ("opening_minutes", fleet.fields.Count(high=2000000000, low=0)),
                        ("opening_cycles", fleet.fields.Count(high=2000000000, low=0)),
                        (
                            "opening_landings",
                            fleet.fields.Count(high=2000000000, low=0),
                        ),
                        (
                            "opening_pressurisations",
                            fleet.fields.Count(
                                blank=True,
                                help_text="Empty: not tracked.",
                                high=2000000000,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "opening_source",
                            models.TextField(
                                help_text="Evidence of the opening counters."
                            ),
                        ),
                        (
                            "opening_keyed_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to=settings.AUTH_USER_MODEL,
                            ),
                        ),
                        (
                            "opening_rekeyed_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to=settings.AUTH_USER_MODEL,
                            ),
                        ),
                        (
                            "validity_cycles",
                            fleet.fields.Count(
                                blank=True,
                                help_text="Own limit of validity, if extended.",
                                high=2000000000,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "validity_minutes",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        ("validity_source", models.TextField(blank=True, default="")),
                        (
                            "environment",
                            fleet.fields.Word(
                                blank=True,
                                default="",
                                words=["mild", "moderate", "severe"],
                            ),
                        ),
                    ],
                    options={
                        "verbose_name_plural": "aircraft",
                        "ordering": ["registration", "pk"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("variant", "serial_number"),
                                name="fleet_aircraft_one_serial",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(("data_to__isnull", True)),
                                fields=("registration",),
                                name="fleet_aircraft_one_registration",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("data_to__gte", models.F("data_from")),
                                    ("data_to__isnull", True),
                                    _connector="OR",
                                ),
                                name="fleet_aircraft_leaves_after_joining",
                                violation_error_message="data to lies before data from.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("opening_rekeyed_by__isnull", True),
                                    models.Q(
                                        (
                                            "opening_rekeyed_by",
                                            models.F("opening_keyed_by"),
                                        ),
                                        _negated=True,
                                    ),
                                    _connector="OR",
                                ),
                                name="fleet_aircraft_two_people",
                                violation_error_message="Opening counters are keyed again by someone else.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="AircraftPeriod",
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
                            "aircraft",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="periods",
                                to="fleet.aircraft",
                            ),
                        ),
                        (
                            "operator",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="periods",
                                to="fleet.operator",
                            ),
                        ),
                        ("registration", models.TextField()),
                        (
                            "camo",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.organisation",
                            ),
                        ),
                        (
                            "owner",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.organisation",
                            ),
                        ),
                        ("regime", models.TextField()),
                        ("from_on", models.DateField()),
                        (
                            "to_on",
                            models.DateField(
                                blank=True, help_text="Empty: still.", null=True
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["aircraft", "from_on", "pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("to_on__gte", models.F("from_on")),
                                    ("to_on__isnull", True),
                                    _connector="OR",
                                ),
                                name="fleet_aircraftperiod_ordered",
                                violation_error_message="to on lies before from on.",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(("to_on__isnull", True)),
                                fields=("aircraft",),
                                name="fleet_aircraftperiod_one_open",
                            ),
                            models.UniqueConstraint(
                                fields=("aircraft", "from_on"),
                                name="fleet_aircraftperiod_one_start",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="AircraftSpan",
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
                            "aircraft",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="spans",
                                to="fleet.aircraft",
                            ),
                        ),
                        (
                            "state",
                            fleet.fields.Word(
                                words=[
                                    "in_service",
                                    "parked",
                                    "stored",
                                    "in_maintenance",
                                    "withdrawn",
                                ]
                            ),
                        ),
                        (
                            "configuration",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="spans",
                                to="fleet.configuration",
                            ),
                        ),
                        ("from_on", models.DateField()),
                        (
                            "to_on",
                            models.DateField(
                                blank=True, help_text="Empty: still.", null=True
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["aircraft", "from_on", "pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("to_on__gte", models.F("from_on")),
                                    ("to_on__isnull", True),
                                    _connector="OR",
                                ),
                                name="fleet_aircraftspan_ordered",
                                violation_error_message="to on lies before from on.",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(("to_on__isnull", True)),
                                fields=("aircraft",),
                                name="fleet_aircraftspan_one_open",
                            ),
                            models.UniqueConstraint(
                                fields=("aircraft", "from_on"),
                                name="fleet_aircraftspan_one_start",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="PanelOnAircraft",
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
                            "aircraft",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="panels",
                                to="fleet.aircraft",
                            ),
                        ),
                        (
                            "panel",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="on_aircraft",
                                to="fleet.panel",
                            ),
                        ),
                        (
                            "reason",
                            fleet.fields.Word(
                                words=["replaced", "modified", "blended"]
                            ),
                        ),
                        ("from_on", models.DateField()),
                        (
                            "thickness_mm",
                            fleet.fields.Measure(
                                blank=True, high=500, low=0.01, null=True
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
                        (
                            "map1_mm",
                            fleet.fields.Measure(
                                blank=True,
                                help_text="Extent; empty: whole panel.",
                                high=200000,
                                low=-200000,
                                null=True,
                            ),
                        ),
                        (
                            "map2_mm",
                            fleet.fields.Measure(
                                blank=True, high=200000, low=-200000, null=True
                            ),
                        ),
                        (
                            "s1_mm",
                            fleet.fields.Measure(
                                blank=True, high=200000, low=-200000, null=True
                            ),
                        ),
                        (
                            "s2_mm",
                            fleet.fields.Measure(
                                blank=True, high=200000, low=-200000, null=True
                            ),
                        ),
                        (
                            "document",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.document",
                            ),
                        ),
                        ("source", models.TextField()),
                        (
                            "replaces",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="replaced_by",
                                to="fleet.panelonaircraft",
                            ),
                        ),
                    ],
                    options={
                        "verbose_name_plural": "panels on aircraft",
                        "ordering": ["aircraft", "panel", "from_on", "pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(("source", ""), _negated=True),
                                name="fleet_panelonaircraft_has_source",
                                violation_error_message="Give the source.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("map2_mm__gte", models.F("map1_mm")),
                                    ("map2_mm__isnull", True),
                                    _connector="OR",
                                ),
                                name="fleet_panelonaircraft_along_ordered",
                                violation_error_message="map2 mm lies before map1 mm.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("s2_mm__gte", models.F("s1_mm")),
                                    ("s2_mm__isnull", True),
                                    _connector="OR",
                                ),
                                name="fleet_panelonaircraft_across_ordered",
                                violation_error_message="s2 mm lies before s1 mm.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="HistoryHead",
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
                            "sequence",
                            fleet.fields.Count(
                                default=0, high=4611686018427387904, low=0
                            ),
                        ),
                        ("digest", models.TextField(blank=True, default="")),
                    ],
                    options={
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(("id", 1)),
                                name="fleet_historyhead_single",
                                violation_error_message="There is one head only.",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="HistoryEntry",
                    fields=[
                        (
                            "sequence",
                            models.BigIntegerField(primary_key=True, serialize=False),
                        ),
                        ("previous_digest", models.TextField(unique=True)),
                        ("digest", models.TextField(unique=True)),
                        ("stream", models.TextField()),
                        (
                            "stream_sequence",
                            fleet.fields.Count(high=4611686018427387904, low=1),
                        ),
                        (
                            "stream_previous_digest",
                            models.TextField(blank=True, default=""),
                        ),
                        (
                            "operator",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.operator",
                            ),
                        ),
                        (
                            "actor",
                            models.ForeignKey(
                                blank=True,
                                help_text="Empty: the program.",
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to=settings.AUTH_USER_MODEL,
                            ),
                        ),
                        ("actor_name", models.TextField()),
                        ("at", models.DateTimeField()),
                        ("action", models.TextField()),
                        ("reason", models.TextField(blank=True, default="")),
                        ("origin", models.TextField(blank=True, default="")),
                        ("items_digest", models.TextField()),
                    ],
                    options={
                        "verbose_name_plural": "history entries",
                        "ordering": ["sequence"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("stream", "stream_sequence"),
                                name="fleet_historyentry_one_in_stream",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="HistoryItem",
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
                            "entry",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="items",
                                to="fleet.historyentry",
                            ),
                        ),
                        ("number", fleet.fields.Count(high=1000000, low=1)),
                        (
                            "kind",
                            fleet.fields.Word(
                                words=["created", "changed", "created_range"]
                            ),
                        ),
                        ("table", models.TextField()),
                        ("first_pk", models.BigIntegerField()),
                        ("last_pk", models.BigIntegerField()),
                        ("row_digest", models.TextField()),
                        (
                            "changes",
                            models.TextField(
                                help_text="{column: [from, to]} as canonical text."
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["entry", "number"],
                        "indexes": [
                            models.Index(
                                fields=["table", "first_pk", "entry"],
                                name="fleet_history_of_row",
                            )
                        ],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("entry", "number"),
                                name="fleet_historyitem_once",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="HistorySeal",
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
                            "sequence",
                            fleet.fields.Count(high=4611686018427387904, low=1),
                        ),
                        ("digest", models.TextField()),
                        ("sealed_at", models.DateTimeField()),
                        ("where_published", models.TextField()),
                        ("signature", models.TextField(blank=True, default="")),
                    ],
                    options={
                        "ordering": ["sequence", "pk"],
                    },
                ),
                migrations.CreateModel(
                    name="PartNumber",
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
                                related_name="part_numbers",
                                to="fleet.operator",
                            ),
                        ),
                        ("number", models.TextField()),
                        ("title", models.TextField()),
                        ("ata", models.TextField(blank=True, default="")),
                    ],
                    options={
                        "ordering": ["number", "pk"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("operator", "number"),
                                name="fleet_partnumber_once",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="LifeLimit",
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
                            "part_number",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="life_limits",
                                to="fleet.partnumber",
                            ),
                        ),
                        (
                            "configuration",
                            models.ForeignKey(
                                blank=True,
                                help_text="Empty: every configuration.",
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="life_limits",
                                to="fleet.configuration",
                            ),
                        ),
                        (
                            "counter",
                            fleet.fields.Word(
                                words=[
                                    "minutes",
                                    "cycles",
                                    "landings",
                                    "pressurisations",
                                    "days",
                                    "months",
                                ]
                            ),
                        ),
                        ("value", fleet.fields.Count(high=2000000000, low=1)),
                        (
                            "entered",
                            models.TextField(help_text="As keyed, as: 30,000 FC."),
                        ),
                        (
                            "base",
                            fleet.fields.Word(
                                words=["birth", "first_fitted", "overhaul"]
                            ),
                        ),
                        (
                            "carry_over",
                            fleet.fields.Word(
                                default="most_restrictive",
                                words=["most_restrictive", "linear"],
                            ),
                        ),
                        (
                            "document",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.document",
                            ),
                        ),
                        ("page", models.TextField(blank=True, default="")),
                        (
                            "state",
                            fleet.fields.Word(
                                words=["keyed", "in_force", "replaced", "rejected"]
                            ),
                        ),
                        ("effective_from", models.DateField()),
                        (
                            "replaces",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="replaced_by",
                                to="fleet.lifelimit",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["part_number", "counter", "pk"],
                        "constraints": [
                            models.UniqueConstraint(
                                condition=models.Q(
                                    ("configuration__isnull", False),
                                    ("state", "in_force"),
                                ),
                                fields=(
                                    "part_number",
                                    "configuration",
                                    "counter",
                                    "base",
                                ),
                                name="fleet_lifelimit_one_in_force",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(
                                    ("configuration__isnull", True),
                                    ("state", "in_force"),
                                ),
                                fields=("part_number", "counter", "base"),
                                name="fleet_lifelimit_one_in_force_for_all",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="SafeLifePart",
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
                                related_name="safe_life_parts",
                                to="fleet.operator",
                            ),
                        ),
                        (
                            "part_number",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="serials",
                                to="fleet.partnumber",
                            ),
                        ),
                        ("serial", models.TextField()),
                        (
                            "manufactured_on",
                            models.DateField(
                                blank=True, help_text="Empty: unknown.", null=True
                            ),
                        ),
                        (
                            "state",
                            fleet.fields.Word(
                                words=[
                                    "in_store",
                                    "installed",
                                    "unserviceable",
                                    "quarantined",
                                    "expired",
                                    "scrapped",
                                ]
                            ),
                        ),
                        (
                            "chain",
                            fleet.fields.Word(
                                help_text="Back-to-birth record.",
                                words=["complete", "reconstructed", "broken"],
                            ),
                        ),
                        (
                            "release_reference",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="Birth certificate or release to service.",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["part_number", "serial", "pk"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("part_number", "serial"),
                                name="fleet_safelifepart_once",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="PartInstallation",
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
                            "part",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="installations",
                                to="fleet.safelifepart",
                            ),
                        ),
                        (
                            "aircraft",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="installations",
                                to="fleet.aircraft",
                            ),
                        ),
                        ("position", models.TextField()),
                        (
                            "configuration",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="installations",
                                to="fleet.configuration",
                            ),
                        ),
                        (
                            "carried_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="carries",
                                to="fleet.partinstallation",
                            ),
                        ),
                        ("installed_on", models.DateField()),
                        (
                            "installed_minutes",
                            fleet.fields.Count(high=2000000000, low=0),
                        ),
                        (
                            "installed_cycles",
                            fleet.fields.Count(high=2000000000, low=0),
                        ),
                        (
                            "installed_landings",
                            fleet.fields.Count(high=2000000000, low=0),
                        ),
                        (
                            "installed_pressurisations",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        (
                            "removed_on",
                            models.DateField(
                                blank=True, help_text="Empty: still there.", null=True
                            ),
                        ),
                        (
                            "removed_minutes",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        (
                            "removed_cycles",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        (
                            "removed_landings",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        (
                            "removed_pressurisations",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        ("removal_reason", models.TextField(blank=True, default="")),
                        ("release_reference", models.TextField(blank=True, default="")),
                        (
                            "installed_by",
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
                        "ordering": ["part", "installed_on", "pk"],
                        "indexes": [
                            models.Index(
                                fields=["part", "installed_on"],
                                name="fleet_installation_chain",
                            )
                        ],
                        "constraints": [
                            models.UniqueConstraint(
                                condition=models.Q(("removed_on__isnull", True)),
                                fields=("part",),
                                name="fleet_partinstallation_one_open_per_part",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(("removed_on__isnull", True)),
                                fields=("aircraft", "position"),
                                name="fleet_partinstallation_one_open_per_position",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("removed_on__isnull", False),
                                        ("removed_minutes__isnull", False),
                                        ("removed_cycles__isnull", False),
                                        ("removed_landings__isnull", False),
                                    ),
                                    models.Q(
                                        ("removed_on__isnull", True),
                                        ("removed_minutes__isnull", True),
                                        ("removed_cycles__isnull", True),
                                        ("removed_landings__isnull", True),
                                    ),
                                    _connector="OR",
                                ),
                                name="fleet_partinstallation_removal_whole",
                                violation_error_message="Give all of removed_on, removed_minutes, removed_cycles, removed_landings, or none.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("removed_on__gte", models.F("installed_on")),
                                    ("removed_on__isnull", True),
                                    _connector="OR",
                                ),
                                name="fleet_partinstallation_on_forward",
                                violation_error_message="removed on lies before installed on.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    (
                                        "removed_minutes__gte",
                                        models.F("installed_minutes"),
                                    ),
                                    ("removed_minutes__isnull", True),
                                    _connector="OR",
                                ),
                                name="fleet_partinstallation_minutes_forward",
                                violation_error_message="removed minutes lies before installed minutes.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    (
                                        "removed_cycles__gte",
                                        models.F("installed_cycles"),
                                    ),
                                    ("removed_cycles__isnull", True),
                                    _connector="OR",
                                ),
                                name="fleet_partinstallation_cycles_forward",
                                violation_error_message="removed cycles lies before installed cycles.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    (
                                        "removed_landings__gte",
                                        models.F("installed_landings"),
                                    ),
                                    ("removed_landings__isnull", True),
                                    _connector="OR",
                                ),
                                name="fleet_partinstallation_landings_forward",
                                violation_error_message="removed landings lies before installed landings.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    (
                                        "removed_pressurisations__gte",
                                        models.F("installed_pressurisations"),
                                    ),
                                    ("removed_pressurisations__isnull", True),
                                    _connector="OR",
                                ),
                                name="fleet_partinstallation_pressurisations_forward",
                                violation_error_message="removed pressurisations lies before installed pressurisations.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="PartAssembly",
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
                            "child",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="carried_in",
                                to="fleet.safelifepart",
                            ),
                        ),
                        (
                            "parent",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="contains",
                                to="fleet.safelifepart",
                            ),
                        ),
                        ("position", models.TextField()),
                        ("from_on", models.DateField()),
                        ("to_on", models.DateField(blank=True, null=True)),
                    ],
                    options={
                        "verbose_name_plural": "part assemblies",
                        "ordering": ["child", "from_on", "pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("to_on__gte", models.F("from_on")),
                                    ("to_on__isnull", True),
                                    _connector="OR",
                                ),
                                name="fleet_partassembly_ordered",
                                violation_error_message="to on lies before from on.",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(("to_on__isnull", True)),
                                fields=("child",),
                                name="fleet_partassembly_one_open_per_child",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(("to_on__isnull", True)),
                                fields=("parent", "position"),
                                name="fleet_partassembly_one_open_per_position",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("child", models.F("parent")), _negated=True
                                ),
                                name="fleet_partassembly_not_itself",
                                violation_error_message="A part cannot carry itself.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="PartEarlierLife",
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
                            "part",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="earlier_lives",
                                to="fleet.safelifepart",
                            ),
                        ),
                        (
                            "kind",
                            fleet.fields.Word(
                                words=["documented", "reconstructed", "gap"]
                            ),
                        ),
                        (
                            "treatment",
                            fleet.fields.Word(
                                words=["counted", "assumed_maximum", "blocked"]
                            ),
                        ),
                        (
                            "configuration",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.configuration",
                            ),
                        ),
                        ("from_on", models.DateField(blank=True, null=True)),
                        ("to_on", models.DateField(blank=True, null=True)),
                        ("minutes", fleet.fields.Count(high=2000000000, low=0)),
                        ("cycles", fleet.fields.Count(high=2000000000, low=0)),
                        ("landings", fleet.fields.Count(high=2000000000, low=0)),
                        (
                            "pressurisations",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        ("evidence", models.TextField()),
                        (
                            "acceptance",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="Who accepted a reconstruction, and by which paper.",
                            ),
                        ),
                        (
                            "accepted_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.person",
                            ),
                        ),
                        (
                            "second_person",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.person",
                            ),
                        ),
                        (
                            "replaces",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="replaced_by",
                                to="fleet.partearlierlife",
                            ),
                        ),
                    ],
                    options={
                        "verbose_name_plural": "parts' earlier lives",
                        "ordering": ["part", "from_on", "pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(("evidence", ""), _negated=True),
                                name="fleet_partearlierlife_has_evidence",
                                violation_error_message="Give the evidence.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("to_on__gte", models.F("from_on")),
                                    ("to_on__isnull", True),
                                    _connector="OR",
                                ),
                                name="fleet_partearlierlife_ordered",
                                violation_error_message="to on lies before from on.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("kind", "gap"),
                                    ("treatment", "counted"),
                                    _negated=True,
                                ),
                                name="fleet_partearlierlife_gap_is_treated",
                                violation_error_message="A gap is blocked or assumed; it is never plainly counted.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("treatment", "assumed_maximum"), _negated=True
                                    ),
                                    models.Q(
                                        models.Q(("acceptance", ""), _negated=True),
                                        ("accepted_by__isnull", False),
                                        ("second_person__isnull", False),
                                        models.Q(
                                            ("accepted_by", models.F("second_person")),
                                            _negated=True,
                                        ),
                                    ),
                                    _connector="OR",
                                ),
                                name="fleet_partearlierlife_assumption_accepted",
                                violation_error_message="An assumed life names its acceptance and two people.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="PartEvent",
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
                            "part",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="events",
                                to="fleet.safelifepart",
                            ),
                        ),
                        (
                            "kind",
                            fleet.fields.Word(
                                words=["overhaul", "disposition", "transfer"]
                            ),
                        ),
                        ("happened_on", models.DateField()),
                        (
                            "life_minutes",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        (
                            "life_cycles",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        (
                            "life_landings",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        (
                            "life_pressurisations",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        ("method", models.TextField(blank=True, default="")),
                        (
                            "document",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.document",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["part", "happened_on", "pk"],
                    },
                ),
                migrations.CreateModel(
                    name="UsageRecord",
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
                            "aircraft",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="usage",
                                to="fleet.aircraft",
                            ),
                        ),
                        ("day", models.DateField()),
                        ("grain", fleet.fields.Word(words=["day", "flight"])),
                        (
                            "flight_number",
                            fleet.fields.Count(default=0, high=99, low=0),
                        ),
                        ("revision", fleet.fields.Count(default=0, high=999, low=0)),
                        (
                            "replaces",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="replaced_by",
                                to="fleet.usagerecord",
                            ),
                        ),
                        (
                            "minutes",
                            fleet.fields.Count(
                                blank=True,
                                help_text="Empty: unknown.",
                                high=1500,
                                low=0,
                                null=True,
                            ),
                        ),
                        ("cycles", fleet.fields.Count(high=60, low=0)),
                        ("landings", fleet.fields.Count(high=200, low=0)),
                        (
                            "pressurisations",
                            fleet.fields.Count(
                                blank=True,
                                help_text="Empty: not recorded.",
                                high=60,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "cycles_without_minutes",
                            fleet.fields.Count(
                                default=0,
                                help_text="Flown, hours unknown.",
                                high=60,
                                low=0,
                            ),
                        ),
                        ("source", models.TextField()),
                    ],
                    options={
                        "ordering": ["aircraft", "day", "flight_number", "revision"],
                        "indexes": [
                            models.Index(
                                fields=[
                                    "aircraft",
                                    "day",
                                    "minutes",
                                    "cycles",
                                    "landings",
                                    "pressurisations",
                                    "cycles_without_minutes",
                                ],
                                name="fleet_usage_totals",
                            )
                        ],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("aircraft", "day", "flight_number", "revision"),
                                name="fleet_usagerecord_once",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(("flight_number", 0), ("grain", "day")),
                                    models.Q(
                                        ("flight_number__gte", 1), ("grain", "flight")
                                    ),
                                    _connector="OR",
                                ),
                                name="fleet_usagerecord_flight_number_by_grain",
                                violation_error_message="A day has flight number 0, a flight 1 to 99.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("cycles_without_minutes__lte", models.F("cycles"))
                                ),
                                name="fleet_usagerecord_missing_hours_bounded",
                                violation_error_message="More flights without hours than flights.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("minutes__isnull", False),
                                    ("cycles_without_minutes", models.F("cycles")),
                                    _connector="OR",
                                ),
                                name="fleet_usagerecord_unknown_hours_counted",
                                violation_error_message="Hours are unknown, so every flight of the row is without hours.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("replaces__isnull", True), ("revision", 0)
                                    ),
                                    models.Q(
                                        ("replaces__isnull", False), ("revision__gt", 0)
                                    ),
                                    _connector="OR",
                                ),
                                name="fleet_usagerecord_revision_points_back",
                                violation_error_message="A correction names the row it corrects.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(("source", ""), _negated=True),
                                name="fleet_usagerecord_has_source",
                                violation_error_message="Give the source.",
                            ),
                        ],
                    },
                ),
            ],
        ),
    ]
