import django.db.models.deletion
import django.db.models.expressions
import fleet.create_tables
import fleet.fields
from django.conf import settings
from django.db import migrations, models


class Migration(migrations.Migration):
    initial = True

    dependencies = [
        ("fleet", "0001_initial"),
    ]

    operations = [
        fleet.create_tables.CreateTables(
            tables=[
                migrations.CreateModel(
                    name="Event",
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
                                related_name="events",
                                to="fleet.operator",
                            ),
                        ),
                        (
                            "aircraft",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="events",
                                to="fleet.aircraft",
                            ),
                        ),
                        ("number", models.TextField()),
                        (
                            "kind",
                            fleet.fields.Word(
                                words=[
                                    "hard_landing",
                                    "overweight_landing",
                                    "turbulence",
                                    "overspeed",
                                    "excursion",
                                    "lightning",
                                    "bird",
                                    "hail",
                                    "foreign_object",
                                    "tail_strike",
                                    "ash",
                                    "ground",
                                    "heat",
                                    "towing",
                                ]
                            ),
                        ),
                        ("state", fleet.fields.Word(words=["open", "closed"])),
                        ("happened_on", models.DateField()),
                        ("description", models.TextField(blank=True, default="")),
                    ],
                    options={
                        "ordering": ["-happened_on", "-pk"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("operator", "number"),
                                name="repairs_event_one_number",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="EventValue",
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
                            "event",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="values",
                                to="repairs.event",
                            ),
                        ),
                        ("quantity", models.TextField()),
                        (
                            "value",
                            fleet.fields.Measure(high=1000000000.0, low=-1000000000.0),
                        ),
                        ("source", models.TextField(blank=True, default="")),
                    ],
                    options={
                        "ordering": ["event", "quantity"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("event", "quantity"),
                                name="repairs_eventvalue_once",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="EventPhase",
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
                            "event",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="phases",
                                to="repairs.event",
                            ),
                        ),
                        ("number", fleet.fields.Count(high=99, low=1)),
                        ("title", models.TextField()),
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
                        ("required", models.BooleanField(default=True)),
                        ("done_on", models.DateField(blank=True, null=True)),
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
                        ("result", models.TextField(blank=True, default="")),
                    ],
                    options={
                        "ordering": ["event", "number"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("event", "number"),
                                name="repairs_eventphase_once",
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
                                name="repairs_eventphase_done_whole",
                                violation_error_message="Give all of done_on, done_by, or none.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Finding",
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
                            "element",
                            fleet.fields.Word(
                                default="unknown",
                                words=[
                                    "skin",
                                    "stringer",
                                    "frame_cap",
                                    "frame_web",
                                    "shear_clip",
                                    "floor_beam",
                                    "seat_track",
                                    "bulkhead",
                                    "spar_cap",
                                    "spar_web",
                                    "rib",
                                    "keel_beam",
                                    "door_structure",
                                    "fitting",
                                    "fairing",
                                    "other",
                                    "unknown",
                                ],
                            ),
                        ),
                        (
                            "element_label",
                            models.TextField(
                                blank=True, default="", help_text="As S-14L, FR 31."
                            ),
                        ),
                        (
                            "criticality",
                            fleet.fields.Word(
                                default="unknown",
                                words=[
                                    "principal",
                                    "fatigue_critical",
                                    "secondary",
                                    "unknown",
                                ],
                            ),
                        ),
                        (
                            "criticality_source",
                            models.TextField(blank=True, default=""),
                        ),
                        (
                            "ata",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="ATA chapter and section, as 53-10.",
                            ),
                        ),
                        (
                            "operator",
                            models.ForeignKey(
                                help_text="Who operated the aircraft when it was found.",
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="findings",
                                to="fleet.operator",
                            ),
                        ),
                        (
                            "aircraft",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="findings",
                                to="fleet.aircraft",
                            ),
                        ),
                        (
                            "safe_life_part",
                            models.ForeignKey(
                                blank=True,
                                help_text="Empty: not on a removable part.",
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="findings",
                                to="fleet.safelifepart",
                            ),
                        ),
                        ("number", models.TextField()),
                        (
                            "damage_type",
                            fleet.fields.Word(
                                words=[
                                    "dent",
                                    "scratch",
                                    "gouge",
                                    "nick",
                                    "crack",
                                    "corrosion",
                                    "hole",
                                    "crease",
                                    "delamination",
                                    "disbond",
                                    "impact",
                                    "lightning",
                                    "heat",
                                    "wear",
                                    "fastener",
                                    "bird_strike",
                                ]
                            ),
                        ),
                        (
                            "cluster_count",
                            fleet.fields.Count(
                                default=1,
                                help_text="Hail: one, n dents.",
                                high=100000,
                                low=1,
                            ),
                        ),
                        (
                            "state",
                            fleet.fields.Word(
                                words=[
                                    "reported",
                                    "assessed",
                                    "accepted",
                                    "deferred",
                                    "to_rectify",
                                    "rectified",
                                    "closed",
                                    "duplicate",
                                    "voided",
                                ]
                            ),
                        ),
                        (
                            "cause",
                            fleet.fields.Word(
                                default="unknown",
                                words=[
                                    "fatigue",
                                    "corrosion",
                                    "accidental",
                                    "maintenance",
                                    "manufacturing",
                                    "wear",
                                    "overload",
                                    "unknown",
                                ],
                            ),
                        ),
                        ("found_on", models.DateField()),
                        (
                            "found_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.person",
                            ),
                        ),
                        (
                            "counters_source",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="From usage, or from which document.",
                            ),
                        ),
                        (
                            "counters_ahead",
                            models.BooleanField(
                                default=False, help_text="Ahead of usage."
                            ),
                        ),
                        (
                            "occasion",
                            fleet.fields.Word(
                                default="other",
                                words=[
                                    "task",
                                    "check",
                                    "ramp",
                                    "event",
                                    "repair",
                                    "other",
                                ],
                            ),
                        ),
                        ("task_reference", models.TextField(blank=True, default="")),
                        (
                            "detection_method",
                            fleet.fields.Word(
                                default="unknown",
                                words=[
                                    "general_visual",
                                    "detailed_visual",
                                    "tap",
                                    "eddy_current_high",
                                    "eddy_current_low",
                                    "ultrasonic",
                                    "penetrant",
                                    "magnetic",
                                    "radiographic",
                                    "thermography",
                                    "unknown",
                                ],
                            ),
                        ),
                        (
                            "detection_procedure",
                            models.TextField(blank=True, default=""),
                        ),
                        (
                            "last_clean_on",
                            models.DateField(
                                blank=True,
                                help_text="Last inspection here without a finding.",
                                null=True,
                            ),
                        ),
                        (
                            "last_clean_cycles",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        ("last_clean_method", models.TextField(blank=True, default="")),
                        (
                            "event",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="findings",
                                to="repairs.event",
                            ),
                        ),
                        ("description", models.TextField(blank=True, default="")),
                        (
                            "client_key",
                            models.UUIDField(
                                blank=True,
                                help_text="A form is sent once.",
                                null=True,
                                unique=True,
                            ),
                        ),
                        (
                            "replaces",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="replaced_by",
                                to="repairs.finding",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["-found_on", "-pk"],
                        "indexes": [
                            models.Index(
                                fields=["aircraft", "section", "x1_mm"],
                                name="repairs_finding_near",
                            ),
                            models.Index(
                                condition=models.Q(
                                    (
                                        "x2_mm__gt",
                                        django.db.models.expressions.CombinedExpression(
                                            models.F("x1_mm"), "+", models.Value(500.0)
                                        ),
                                    )
                                ),
                                fields=["aircraft", "section", "x2_mm"],
                                name="repairs_finding_long",
                            ),
                            models.Index(
                                fields=[
                                    "section",
                                    "along_half",
                                    "around_half",
                                    "aircraft",
                                    "damage_type",
                                    "found_on",
                                    "state",
                                    "element",
                                    "surface",
                                    "cluster_count",
                                ],
                                name="repairs_finding_map",
                            ),
                            models.Index(
                                condition=models.Q(
                                    (
                                        "state__in",
                                        (
                                            "reported",
                                            "assessed",
                                            "deferred",
                                            "to_rectify",
                                            "rectified",
                                        ),
                                    )
                                ),
                                fields=["state", "aircraft"],
                                name="repairs_finding_open",
                            ),
                            models.Index(
                                fields=["aircraft", "found_on"],
                                name="repairs_finding_by_date",
                            ),
                        ],
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
                                name="repairs_finding_place_whole",
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
                                name="repairs_finding_across_whole",
                                violation_error_message="Give all of s1_mm, s2_mm, around_half, or none.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("x2_mm__gte", models.F("x1_mm")),
                                    ("x2_mm__isnull", True),
                                    _connector="OR",
                                ),
                                name="repairs_finding_x_ordered",
                                violation_error_message="x2 mm lies before x1 mm.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("s2_mm__gte", models.F("s1_mm")),
                                    ("s2_mm__isnull", True),
                                    _connector="OR",
                                ),
                                name="repairs_finding_s_ordered",
                                violation_error_message="s2 mm lies before s1 mm.",
                            ),
                            models.UniqueConstraint(
                                fields=("operator", "number"),
                                name="repairs_finding_one_number",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(("number", ""), _negated=True),
                                name="repairs_finding_has_number",
                                violation_error_message="Give the number.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("section__isnull", False),
                                    ("state__in", ("reported", "duplicate", "voided")),
                                    _connector="OR",
                                ),
                                name="repairs_finding_placed_before_assessed",
                                violation_error_message="A finding to be placed cannot be assessed.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="FindingQuestion",
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
                            "finding",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="questions",
                                to="repairs.finding",
                            ),
                        ),
                        ("code", models.TextField()),
                        ("asked", models.TextField()),
                        ("answer", models.TextField(blank=True, default="")),
                        (
                            "answered_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to=settings.AUTH_USER_MODEL,
                            ),
                        ),
                        ("answered_at", models.DateTimeField(blank=True, null=True)),
                    ],
                    options={
                        "ordering": ["finding", "pk"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("finding", "code"),
                                name="repairs_findingquestion_once",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("answered_by__isnull", False),
                                        ("answered_at__isnull", False),
                                    ),
                                    models.Q(
                                        ("answered_by__isnull", True),
                                        ("answered_at__isnull", True),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_findingquestion_answer_whole",
                                violation_error_message="Give all of answered_by, answered_at, or none.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("answered_at__isnull", True),
                                    models.Q(("answer", ""), _negated=True),
                                    _connector="OR",
                                ),
                                name="repairs_findingquestion_answer_said",
                                violation_error_message="An answer has words.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="FindingLink",
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
                                related_name="links",
                                to="repairs.finding",
                            ),
                        ),
                        (
                            "earlier",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="later_links",
                                to="repairs.finding",
                            ),
                        ),
                        (
                            "kind",
                            fleet.fields.Word(
                                words=[
                                    "same_damage",
                                    "duplicate_report",
                                    "different",
                                    "grew_from",
                                ]
                            ),
                        ),
                        (
                            "decided_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.person",
                            ),
                        ),
                        ("decided_on", models.DateField()),
                    ],
                    options={
                        "ordering": ["finding", "earlier"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("finding", "earlier"),
                                name="repairs_findinglink_once",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("finding", models.F("earlier")), _negated=True
                                ),
                                name="repairs_findinglink_not_itself",
                                violation_error_message="A finding cannot be linked to itself.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Measurement",
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
                            "finding",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="measurements",
                                to="repairs.finding",
                            ),
                        ),
                        ("number", fleet.fields.Count(high=9999, low=1)),
                        (
                            "stage",
                            fleet.fields.Word(
                                words=["as_found", "after_rework", "repeat"]
                            ),
                        ),
                        ("measured_on", models.DateField()),
                        (
                            "measured_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.person",
                            ),
                        ),
                        ("method", models.TextField(blank=True, default="")),
                        ("instrument", models.TextField(blank=True, default="")),
                        ("light", models.TextField(blank=True, default="")),
                        (
                            "accomplishment",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="measurements",
                                to="repairs.accomplishment",
                            ),
                        ),
                        (
                            "replaces",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="replaced_by",
                                to="repairs.measurement",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["finding", "number"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("finding", "number"),
                                name="repairs_measurement_once",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="MeasuredValue",
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
                            "measurement",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="values",
                                to="repairs.measurement",
                            ),
                        ),
                        (
                            "quantity",
                            models.TextField(
                                help_text="The unit is the end of the name."
                            ),
                        ),
                        (
                            "status",
                            fleet.fields.Word(
                                words=["known", "unknown", "not_applicable"]
                            ),
                        ),
                        (
                            "value",
                            fleet.fields.Measure(
                                blank=True, high=1000000.0, low=-1000000.0, null=True
                            ),
                        ),
                        (
                            "word",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="For dimensions that are a word, as: longitudinal.",
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
                        (
                            "uncertainty",
                            fleet.fields.Measure(
                                blank=True, high=1000000.0, low=0, null=True
                            ),
                        ),
                        (
                            "worked_out",
                            fleet.fields.Measure(
                                blank=True,
                                help_text="The ratio as the technician had it.",
                                high=1000000.0,
                                low=-1000000.0,
                                null=True,
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["measurement", "pk"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("measurement", "quantity"),
                                name="repairs_measuredvalue_once",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("status", "known"),
                                        models.Q(
                                            ("value__isnull", False),
                                            models.Q(("word", ""), _negated=True),
                                            _connector="XOR",
                                        ),
                                    ),
                                    models.Q(
                                        models.Q(("status", "known"), _negated=True),
                                        ("value__isnull", True),
                                        ("word", ""),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_measuredvalue_value_iff_known",
                                violation_error_message="A known dimension has a value; an unknown one has none.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="HoleCrack",
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
                            "measurement",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="holes",
                                to="repairs.measurement",
                            ),
                        ),
                        ("hole_number", fleet.fields.Count(high=9999, low=1)),
                        (
                            "fore_length_mm",
                            fleet.fields.Measure(
                                blank=True, high=10000, low=0, null=True
                            ),
                        ),
                        (
                            "aft_length_mm",
                            fleet.fields.Measure(
                                blank=True, high=10000, low=0, null=True
                            ),
                        ),
                        (
                            "hole_diameter_mm",
                            fleet.fields.Measure(
                                blank=True, high=1000, low=0.01, null=True
                            ),
                        ),
                        (
                            "pitch_to_next_mm",
                            fleet.fields.Measure(
                                blank=True, high=10000, low=0.01, null=True
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["measurement", "hole_number"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("measurement", "hole_number"),
                                name="repairs_holecrack_once",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Disposition",
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
                                related_name="dispositions",
                                to="fleet.operator",
                            ),
                        ),
                        (
                            "aircraft",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="dispositions",
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
                                to="repairs.disposition",
                            ),
                        ),
                        (
                            "kind",
                            fleet.fields.Word(
                                words=[
                                    "accept",
                                    "accept_with_inspection",
                                    "defer",
                                    "rectify",
                                    "replace",
                                    "not_damage",
                                ]
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
                        (
                            "found_on",
                            models.DateField(
                                help_text="Original date, kept through every revision."
                            ),
                        ),
                        (
                            "basis_document",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="dispositions",
                                to="fleet.document",
                            ),
                        ),
                        (
                            "basis_page",
                            models.TextField(
                                help_text="Page or paragraph of the basis."
                            ),
                        ),
                        ("reason", models.TextField()),
                        (
                            "decided_by",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.person",
                            ),
                        ),
                        (
                            "authorisation",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.authorisation",
                            ),
                        ),
                        ("decided_on", models.DateField()),
                        (
                            "limit_minutes",
                            fleet.fields.Count(
                                blank=True,
                                help_text="Deferral limit, aircraft counters.",
                                high=2000000000,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "limit_cycles",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        (
                            "limit_landings",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        ("limit_on", models.DateField(blank=True, null=True)),
                    ],
                    options={
                        "ordering": ["-decided_on", "-pk"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("operator", "number", "revision"),
                                name="repairs_disposition_one_number",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(("basis_page", ""), _negated=True),
                                name="repairs_disposition_has_basis_page",
                                violation_error_message="Give the basis_page.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(("reason", ""), _negated=True),
                                name="repairs_disposition_has_reason",
                                violation_error_message="Give the reason.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(("kind", "defer"), _negated=True),
                                    ("limit_minutes__isnull", False),
                                    ("limit_cycles__isnull", False),
                                    ("limit_landings__isnull", False),
                                    ("limit_on__isnull", False),
                                    _connector="OR",
                                ),
                                name="repairs_disposition_deferral_has_limit",
                                violation_error_message="A deferral has a limit in flight hours, cycles, landings or a date.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="DispositionFinding",
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
                            "disposition",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="finding_rows",
                                to="repairs.disposition",
                            ),
                        ),
                        (
                            "finding",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="disposition_rows",
                                to="repairs.finding",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["disposition", "finding"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("disposition", "finding"),
                                name="repairs_dispositionfinding_once",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="DispositionBasis",
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
                            "disposition",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="basis_rows",
                                to="repairs.disposition",
                            ),
                        ),
                        (
                            "evaluation",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="disposition_rows",
                                to="repairs.evaluation",
                            ),
                        ),
                        (
                            "limit_check",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="disposition_rows",
                                to="repairs.limitcheck",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["disposition", "pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("evaluation__isnull", False),
                                        ("limit_check__isnull", True),
                                    ),
                                    models.Q(
                                        ("evaluation__isnull", True),
                                        ("limit_check__isnull", False),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_dispositionbasis_one_basis",
                                violation_error_message="Name exactly one of: evaluation, limit_check.",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="NeighbourReview",
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
                            "disposition",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="neighbour_reviews",
                                to="repairs.disposition",
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
                        ("gap_mm", fleet.fields.Measure(high=200000, low=0)),
                        ("interacts", models.BooleanField()),
                        ("reason", models.TextField()),
                    ],
                    options={
                        "ordering": ["disposition", "pk"],
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
                                name="repairs_neighbourreview_one_neighbour",
                                violation_error_message="Name exactly one of: finding, repair.",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Repair",
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
                            "element",
                            fleet.fields.Word(
                                default="unknown",
                                words=[
                                    "skin",
                                    "stringer",
                                    "frame_cap",
                                    "frame_web",
                                    "shear_clip",
                                    "floor_beam",
                                    "seat_track",
                                    "bulkhead",
                                    "spar_cap",
                                    "spar_web",
                                    "rib",
                                    "keel_beam",
                                    "door_structure",
                                    "fitting",
                                    "fairing",
                                    "other",
                                    "unknown",
                                ],
                            ),
                        ),
                        (
                            "element_label",
                            models.TextField(
                                blank=True, default="", help_text="As S-14L, FR 31."
                            ),
                        ),
                        (
                            "criticality",
                            fleet.fields.Word(
                                default="unknown",
                                words=[
                                    "principal",
                                    "fatigue_critical",
                                    "secondary",
                                    "unknown",
                                ],
                            ),
                        ),
                        (
                            "criticality_source",
                            models.TextField(blank=True, default=""),
                        ),
                        (
                            "ata",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="ATA chapter and section, as 53-10.",
                            ),
                        ),
                        (
                            "operator",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="repairs",
                                to="fleet.operator",
                            ),
                        ),
                        (
                            "aircraft",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="repairs",
                                to="fleet.aircraft",
                            ),
                        ),
                        (
                            "safe_life_part",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="repairs",
                                to="fleet.safelifepart",
                            ),
                        ),
                        ("number", models.TextField()),
                        (
                            "chart_number",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="Number on the damage and repair chart.",
                            ),
                        ),
                        (
                            "kind",
                            fleet.fields.Word(
                                words=[
                                    "blend",
                                    "external_doubler",
                                    "internal_doubler",
                                    "flush",
                                    "splice",
                                    "bonded",
                                    "oversize_fastener",
                                    "replacement",
                                    "stop_drill",
                                    "other",
                                ]
                            ),
                        ),
                        (
                            "state",
                            fleet.fields.Word(
                                words=[
                                    "planned",
                                    "in_work",
                                    "embodied",
                                    "removed",
                                    "superseded",
                                    "cancelled",
                                ]
                            ),
                        ),
                        ("description", models.TextField()),
                        (
                            "length_mm",
                            fleet.fields.Measure(
                                blank=True,
                                help_text="Along the section.",
                                high=100000,
                                low=0.01,
                                null=True,
                            ),
                        ),
                        (
                            "width_mm",
                            fleet.fields.Measure(
                                blank=True,
                                help_text="Across the section.",
                                high=100000,
                                low=0.01,
                                null=True,
                            ),
                        ),
                        (
                            "category",
                            fleet.fields.Word(
                                words=["a", "b", "c", "pending", "not_applicable"]
                            ),
                        ),
                        ("category_reason", models.TextField(blank=True, default="")),
                        (
                            "disposition",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="repairs",
                                to="repairs.disposition",
                            ),
                        ),
                        (
                            "approval_basis",
                            fleet.fields.Word(
                                words=[
                                    "repair_manual",
                                    "letter",
                                    "design_approval",
                                    "unknown",
                                ]
                            ),
                        ),
                        (
                            "approval_document",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.document",
                            ),
                        ),
                        ("approval_page", models.TextField(blank=True, default="")),
                        (
                            "release_document",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.document",
                            ),
                        ),
                        (
                            "released_on",
                            models.DateField(
                                blank=True, help_text="Empty: not released.", null=True
                            ),
                        ),
                        (
                            "organisation",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.organisation",
                            ),
                        ),
                        (
                            "performed_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.person",
                            ),
                        ),
                        (
                            "inspected_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.person",
                            ),
                        ),
                        (
                            "released_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.person",
                            ),
                        ),
                        (
                            "legacy",
                            models.BooleanField(
                                default=False, help_text="From before our records."
                            ),
                        ),
                        (
                            "evidence",
                            fleet.fields.Word(
                                default="not_applicable",
                                words=["seen", "not_seen", "not_applicable"],
                            ),
                        ),
                        (
                            "weight_change_g",
                            fleet.fields.Count(
                                blank=True, high=10000000, low=-10000000, null=True
                            ),
                        ),
                        (
                            "arm_mm",
                            fleet.fields.Measure(
                                blank=True, high=200000, low=-200000, null=True
                            ),
                        ),
                        (
                            "remaining_thickness_mm",
                            fleet.fields.Measure(
                                blank=True,
                                help_text="Blends: minimum.",
                                high=500,
                                low=0.01,
                                null=True,
                            ),
                        ),
                        (
                            "blend_depth_mm",
                            fleet.fields.Measure(
                                blank=True, high=500, low=0, null=True
                            ),
                        ),
                        (
                            "replacement_limit_cycles",
                            fleet.fields.Count(
                                blank=True,
                                help_text="Category C, aircraft counter.",
                                high=2000000000,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "replacement_limit_minutes",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        (
                            "replacement_limit_on",
                            models.DateField(blank=True, null=True),
                        ),
                        (
                            "stage_reached",
                            fleet.fields.Word(
                                default="not_applicable",
                                words=["none", "1", "2", "3", "not_applicable"],
                            ),
                        ),
                        (
                            "temporary_limit_cycles",
                            fleet.fields.Count(
                                blank=True,
                                help_text="Approved at stage 1; stage 2 is due before it.",
                                high=2000000000,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "replaces",
                            models.ForeignKey(
                                blank=True,
                                help_text="A larger repair may supersede several.",
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="replaced_by",
                                to="repairs.repair",
                            ),
                        ),
                        ("removed_on", models.DateField(blank=True, null=True)),
                        ("removal_reason", models.TextField(blank=True, default="")),
                    ],
                    options={
                        "ordering": ["-released_on", "-pk"],
                        "indexes": [
                            models.Index(
                                fields=["aircraft", "section", "x1_mm"],
                                name="repairs_repair_near",
                            ),
                            models.Index(
                                condition=models.Q(
                                    (
                                        "x2_mm__gt",
                                        django.db.models.expressions.CombinedExpression(
                                            models.F("x1_mm"), "+", models.Value(500.0)
                                        ),
                                    )
                                ),
                                fields=["aircraft", "section", "x2_mm"],
                                name="repairs_repair_long",
                            ),
                            models.Index(
                                fields=[
                                    "section",
                                    "along_half",
                                    "around_half",
                                    "aircraft",
                                ],
                                name="repairs_repair_cell",
                            ),
                        ],
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
                                name="repairs_repair_place_whole",
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
                                name="repairs_repair_across_whole",
                                violation_error_message="Give all of s1_mm, s2_mm, around_half, or none.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("x2_mm__gte", models.F("x1_mm")),
                                    ("x2_mm__isnull", True),
                                    _connector="OR",
                                ),
                                name="repairs_repair_x_ordered",
                                violation_error_message="x2 mm lies before x1 mm.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("s2_mm__gte", models.F("s1_mm")),
                                    ("s2_mm__isnull", True),
                                    _connector="OR",
                                ),
                                name="repairs_repair_s_ordered",
                                violation_error_message="s2 mm lies before s1 mm.",
                            ),
                            models.UniqueConstraint(
                                fields=("operator", "number"),
                                name="repairs_repair_one_number",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(("number", ""), _negated=True),
                                name="repairs_repair_has_number",
                                violation_error_message="Give the number.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        (
                                            "state__in",
                                            ("embodied", "removed", "superseded"),
                                        ),
                                        _negated=True,
                                    ),
                                    models.Q(
                                        ("released_on__isnull", False),
                                        models.Q(
                                            ("legacy", True),
                                            models.Q(
                                                ("at_cycles__isnull", False),
                                                ("at_minutes__isnull", False),
                                            ),
                                            _connector="OR",
                                        ),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_repair_embodied_whole",
                                violation_error_message="An embodied repair has its release date and counters.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        (
                                            "state__in",
                                            ("embodied", "removed", "superseded"),
                                        ),
                                        _negated=True,
                                    ),
                                    ("legacy", True),
                                    ("approval_document__isnull", False),
                                    _connector="OR",
                                ),
                                name="repairs_repair_approved_data",
                                violation_error_message="An embodied repair names its approval data.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("inspected_by__isnull", True),
                                    models.Q(
                                        ("inspected_by", models.F("performed_by")),
                                        _negated=True,
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_repair_two_people",
                                violation_error_message="Inspected by someone other than who performed it.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("category", "not_applicable"), _negated=True
                                    ),
                                    models.Q(("category_reason", ""), _negated=True),
                                    _connector="OR",
                                ),
                                name="repairs_repair_reason_given",
                                violation_error_message="Say why no category applies.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="RepairFinding",
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
                                related_name="finding_rows",
                                to="repairs.repair",
                            ),
                        ),
                        (
                            "finding",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="repair_rows",
                                to="repairs.finding",
                            ),
                        ),
                        (
                            "covers",
                            models.BooleanField(
                                help_text="The repair hides it from sight."
                            ),
                        ),
                        (
                            "damage_removed",
                            fleet.fields.Word(words=["yes", "no", "partly", "unknown"]),
                        ),
                        (
                            "edge_margin_mm",
                            fleet.fields.Measure(
                                blank=True,
                                help_text="Damage edge to repair edge; empty: unknown.",
                                high=10000,
                                low=-10000,
                                null=True,
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["repair", "finding"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("repair", "finding"),
                                name="repairs_repairfinding_once",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="RepairLayer",
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
                                related_name="layers",
                                to="repairs.repair",
                            ),
                        ),
                        ("number", fleet.fields.Count(high=99, low=1)),
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
                        ("batch", models.TextField(blank=True, default="")),
                    ],
                    options={
                        "ordering": ["repair", "number"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("repair", "number"),
                                name="repairs_repairlayer_once",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="RepairFastener",
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
                                related_name="fasteners",
                                to="repairs.repair",
                            ),
                        ),
                        ("number", fleet.fields.Count(high=99, low=1)),
                        ("fastener", models.TextField()),
                        (
                            "diameter_mm",
                            fleet.fields.Measure(
                                blank=True, high=100, low=0.1, null=True
                            ),
                        ),
                        (
                            "pitch_mm",
                            fleet.fields.Measure(
                                blank=True, high=1000, low=0.1, null=True
                            ),
                        ),
                        (
                            "edge_distance_mm",
                            fleet.fields.Measure(
                                blank=True, high=1000, low=0.1, null=True
                            ),
                        ),
                        (
                            "rows",
                            fleet.fields.Count(blank=True, high=99, low=1, null=True),
                        ),
                        (
                            "count",
                            fleet.fields.Count(
                                blank=True, high=100000, low=1, null=True
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["repair", "number"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("repair", "number"),
                                name="repairs_repairfastener_once",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Evaluation",
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
                                related_name="evaluations",
                                to="fleet.operator",
                            ),
                        ),
                        (
                            "finding",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="evaluations",
                                to="repairs.finding",
                            ),
                        ),
                        (
                            "repair",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="evaluations",
                                to="repairs.repair",
                            ),
                        ),
                        ("number", models.TextField()),
                        (
                            "use",
                            fleet.fields.Word(words=["found_damage", "no_known_crack"]),
                        ),
                        (
                            "outcome",
                            fleet.fields.Word(
                                words=["computed", "not_covered", "missing_input"]
                            ),
                        ),
                        (
                            "governing",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="Which mode or requirement governs.",
                            ),
                        ),
                        (
                            "method",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="Empty: no method for this damage.",
                            ),
                        ),
                        ("method_version", fleet.fields.Count(high=10000, low=0)),
                        ("schema_version", fleet.fields.Count(high=1000, low=1)),
                        ("inputs", models.TextField(help_text="Canonical JSON.")),
                        ("outputs", models.TextField(help_text="Canonical JSON.")),
                        (
                            "applicability",
                            models.TextField(help_text="Canonical JSON."),
                        ),
                        ("note", models.TextField(help_text="Canonical JSON.")),
                        ("libraries", models.TextField(help_text="Canonical JSON.")),
                        ("content_digest", models.TextField()),
                        (
                            "residual_strength_mpa",
                            fleet.fields.Measure(
                                blank=True, high=100000.0, low=0, null=True
                            ),
                        ),
                        (
                            "required_residual_mpa",
                            fleet.fields.Measure(
                                blank=True, high=100000.0, low=0, null=True
                            ),
                        ),
                        ("residual_case", models.TextField(blank=True, default="")),
                        (
                            "margin_residual",
                            fleet.fields.Measure(
                                blank=True, high=1000000.0, low=-1, null=True
                            ),
                        ),
                        (
                            "ultimate_mpa",
                            fleet.fields.Measure(
                                blank=True, high=100000.0, low=0, null=True
                            ),
                        ),
                        ("ultimate_case", models.TextField(blank=True, default="")),
                        (
                            "margin_ultimate",
                            fleet.fields.Measure(
                                blank=True, high=1000000.0, low=-1, null=True
                            ),
                        ),
                        (
                            "ultimate_kept",
                            fleet.fields.Word(words=["yes", "no", "not_shown"]),
                        ),
                        (
                            "life_cycles",
                            fleet.fields.Count(
                                blank=True,
                                help_text="Before the scatter factor.",
                                high=1000000000000000,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "life_base",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="Since new, since release of R-..., from finding.",
                            ),
                        ),
                        (
                            "usable_life_cycles",
                            fleet.fields.Count(
                                blank=True,
                                help_text="After the scatter factor.",
                                high=1000000000000000,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "scatter_factor",
                            fleet.fields.Measure(
                                blank=True, high=100, low=1, null=True
                            ),
                        ),
                        (
                            "threshold_cycles",
                            fleet.fields.Count(
                                blank=True, high=1000000000000000, low=0, null=True
                            ),
                        ),
                        ("threshold_base", models.TextField(blank=True, default="")),
                        (
                            "repeat_cycles",
                            fleet.fields.Count(
                                blank=True,
                                help_text="Empty: the method or the use gives none.",
                                high=1000000000000000,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "uncapped_threshold_cycles",
                            fleet.fields.Count(
                                blank=True, high=1000000000000000, low=0, null=True
                            ),
                        ),
                        (
                            "uncapped_repeat_cycles",
                            fleet.fields.Count(
                                blank=True, high=1000000000000000, low=0, null=True
                            ),
                        ),
                        (
                            "cap",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="What capped threshold or repeat.",
                            ),
                        ),
                        (
                            "source_from_memory",
                            models.BooleanField(help_text="Bars it from approval."),
                        ),
                        (
                            "barred_reason",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="Why it cannot be approved as it stands.",
                            ),
                        ),
                        (
                            "replaces",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="replaced_by",
                                to="repairs.evaluation",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["-entered_at", "-pk"],
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
                                name="repairs_evaluation_one_subject",
                                violation_error_message="Name exactly one of: finding, repair.",
                            ),
                            models.UniqueConstraint(
                                fields=("operator", "number"),
                                name="repairs_evaluation_one_number",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("outcome", "computed"),
                                    models.Q(
                                        ("life_cycles__isnull", True),
                                        ("margin_residual__isnull", True),
                                        ("margin_ultimate__isnull", True),
                                        ("repeat_cycles__isnull", True),
                                        ("residual_strength_mpa__isnull", True),
                                        ("threshold_cycles__isnull", True),
                                        ("usable_life_cycles__isnull", True),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_evaluation_no_number_unless_computed",
                                violation_error_message="What no method covers is never a number.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(("use", "found_damage"), _negated=True),
                                    models.Q(
                                        ("repeat_cycles__isnull", True),
                                        ("threshold_cycles__isnull", True),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_evaluation_no_interval_for_found_damage",
                                violation_error_message="Known damage gets no inspection interval.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="EvaluationInput",
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
                            "evaluation",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="input_rows",
                                to="repairs.evaluation",
                            ),
                        ),
                        ("number", fleet.fields.Count(high=999, low=1)),
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
                            "panel_on_aircraft",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.panelonaircraft",
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
                            "measurement",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="repairs.measurement",
                            ),
                        ),
                        (
                            "fatigue_policy",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.fatiguepolicy",
                            ),
                        ),
                        (
                            "detectable_size",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.detectablesize",
                            ),
                        ),
                        (
                            "adopted_value",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.adoptedvalue",
                            ),
                        ),
                        (
                            "policy",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.policy",
                            ),
                        ),
                        ("used_digest", models.TextField()),
                    ],
                    options={
                        "ordering": ["evaluation", "number"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("evaluation", "number"),
                                name="repairs_evaluationinput_once",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("panel__isnull", False),
                                        ("panel_on_aircraft__isnull", True),
                                        ("material__isnull", True),
                                        ("spectrum__isnull", True),
                                        ("measurement__isnull", True),
                                        ("fatigue_policy__isnull", True),
                                        ("detectable_size__isnull", True),
                                        ("adopted_value__isnull", True),
                                        ("policy__isnull", True),
                                    ),
                                    models.Q(
                                        ("panel__isnull", True),
                                        ("panel_on_aircraft__isnull", False),
                                        ("material__isnull", True),
                                        ("spectrum__isnull", True),
                                        ("measurement__isnull", True),
                                        ("fatigue_policy__isnull", True),
                                        ("detectable_size__isnull", True),
                                        ("adopted_value__isnull", True),
                                        ("policy__isnull", True),
                                    ),
                                    models.Q(
                                        ("panel__isnull", True),
                                        ("panel_on_aircraft__isnull", True),
                                        ("material__isnull", False),
                                        ("spectrum__isnull", True),
                                        ("measurement__isnull", True),
                                        ("fatigue_policy__isnull", True),
                                        ("detectable_size__isnull", True),
                                        ("adopted_value__isnull", True),
                                        ("policy__isnull", True),
                                    ),
                                    models.Q(
                                        ("panel__isnull", True),
                                        ("panel_on_aircraft__isnull", True),
                                        ("material__isnull", True),
                                        ("spectrum__isnull", False),
                                        ("measurement__isnull", True),
                                        ("fatigue_policy__isnull", True),
                                        ("detectable_size__isnull", True),
                                        ("adopted_value__isnull", True),
                                        ("policy__isnull", True),
                                    ),
                                    models.Q(
                                        ("panel__isnull", True),
                                        ("panel_on_aircraft__isnull", True),
                                        ("material__isnull", True),
                                        ("spectrum__isnull", True),
                                        ("measurement__isnull", False),
                                        ("fatigue_policy__isnull", True),
                                        ("detectable_size__isnull", True),
                                        ("adopted_value__isnull", True),
                                        ("policy__isnull", True),
                                    ),
                                    models.Q(
                                        ("panel__isnull", True),
                                        ("panel_on_aircraft__isnull", True),
                                        ("material__isnull", True),
                                        ("spectrum__isnull", True),
                                        ("measurement__isnull", True),
                                        ("fatigue_policy__isnull", False),
                                        ("detectable_size__isnull", True),
                                        ("adopted_value__isnull", True),
                                        ("policy__isnull", True),
                                    ),
                                    models.Q(
                                        ("panel__isnull", True),
                                        ("panel_on_aircraft__isnull", True),
                                        ("material__isnull", True),
                                        ("spectrum__isnull", True),
                                        ("measurement__isnull", True),
                                        ("fatigue_policy__isnull", True),
                                        ("detectable_size__isnull", False),
                                        ("adopted_value__isnull", True),
                                        ("policy__isnull", True),
                                    ),
                                    models.Q(
                                        ("panel__isnull", True),
                                        ("panel_on_aircraft__isnull", True),
                                        ("material__isnull", True),
                                        ("spectrum__isnull", True),
                                        ("measurement__isnull", True),
                                        ("fatigue_policy__isnull", True),
                                        ("detectable_size__isnull", True),
                                        ("adopted_value__isnull", False),
                                        ("policy__isnull", True),
                                    ),
                                    models.Q(
                                        ("panel__isnull", True),
                                        ("panel_on_aircraft__isnull", True),
                                        ("material__isnull", True),
                                        ("spectrum__isnull", True),
                                        ("measurement__isnull", True),
                                        ("fatigue_policy__isnull", True),
                                        ("detectable_size__isnull", True),
                                        ("adopted_value__isnull", True),
                                        ("policy__isnull", False),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_evaluationinput_one_source",
                                violation_error_message="Name exactly one of: panel, panel_on_aircraft, material, spectrum, measurement, fatigue_policy, detectable_size, adopted_value, policy.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="InspectionRequirement",
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
                                related_name="requirements",
                                to="fleet.operator",
                            ),
                        ),
                        ("number", models.TextField()),
                        ("title", models.TextField()),
                        (
                            "requirement_class",
                            fleet.fields.Word(
                                words=[
                                    "directive",
                                    "limitation",
                                    "repair",
                                    "corrosion",
                                    "programme",
                                    "operator",
                                ]
                            ),
                        ),
                        (
                            "source_document",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.document",
                            ),
                        ),
                        ("source_page", models.TextField(blank=True, default="")),
                        (
                            "finding",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="requirements",
                                to="repairs.finding",
                            ),
                        ),
                        (
                            "repair",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="requirements",
                                to="repairs.repair",
                            ),
                        ),
                        (
                            "event",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="requirements",
                                to="repairs.event",
                            ),
                        ),
                        (
                            "disposition",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="requirements",
                                to="repairs.disposition",
                            ),
                        ),
                        (
                            "evaluation",
                            models.ForeignKey(
                                blank=True,
                                help_text="The calculation its intervals came from.",
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="requirements",
                                to="repairs.evaluation",
                            ),
                        ),
                        (
                            "sisters",
                            models.BooleanField(
                                default=False, help_text="A look on the sisters."
                            ),
                        ),
                        (
                            "state",
                            fleet.fields.Word(
                                words=[
                                    "draft",
                                    "effective",
                                    "suspended",
                                    "termination_unverified",
                                    "terminated",
                                    "replaced",
                                ]
                            ),
                        ),
                        (
                            "verified",
                            models.BooleanField(
                                default=False,
                                help_text="Keyed again by another person, and alike.",
                            ),
                        ),
                        (
                            "interim",
                            models.BooleanField(
                                default=False,
                                help_text="From an unapproved calculation.",
                            ),
                        ),
                        ("task", models.TextField(blank=True, default="")),
                        (
                            "method",
                            fleet.fields.Word(
                                words=[
                                    "general_visual",
                                    "detailed_visual",
                                    "tap",
                                    "eddy_current_high",
                                    "eddy_current_low",
                                    "ultrasonic",
                                    "penetrant",
                                    "magnetic",
                                    "radiographic",
                                    "thermography",
                                    "unknown",
                                ]
                            ),
                        ),
                        ("procedure", models.TextField(blank=True, default="")),
                        ("area", models.TextField()),
                        ("access", models.TextField(blank=True, default="")),
                        ("criteria", models.TextField(help_text="Accept or reject.")),
                        ("applicability", models.TextField(blank=True, default="")),
                        (
                            "anchor",
                            fleet.fields.Word(
                                default="scheduled_if_late",
                                words=["actual", "scheduled_if_late", "window"],
                            ),
                        ),
                        (
                            "calendar",
                            fleet.fields.Word(
                                default="date", words=["date", "month_end"]
                            ),
                        ),
                        (
                            "window_percent",
                            fleet.fields.Count(blank=True, high=100, low=0, null=True),
                        ),
                        (
                            "policy_source",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="Where anchor, calendar and tolerance are laid down.",
                            ),
                        ),
                        (
                            "assumed_minutes_per_cycle",
                            fleet.fields.Count(
                                blank=True,
                                help_text="Flight length assumed.",
                                high=2000,
                                low=1,
                                null=True,
                            ),
                        ),
                        ("effective_on", models.DateField()),
                        (
                            "keyed_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to=settings.AUTH_USER_MODEL,
                            ),
                        ),
                        (
                            "replaces",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="replaced_by",
                                to="repairs.inspectionrequirement",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["number", "pk"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("operator", "number"),
                                name="repairs_inspectionrequirement_one_number",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("finding__isnull", True),
                                        ("repair__isnull", True),
                                        ("event__isnull", True),
                                        ("disposition__isnull", True),
                                    ),
                                    models.Q(
                                        ("finding__isnull", False),
                                        ("repair__isnull", True),
                                        ("event__isnull", True),
                                        ("disposition__isnull", True),
                                    ),
                                    models.Q(
                                        ("finding__isnull", True),
                                        ("repair__isnull", False),
                                        ("event__isnull", True),
                                        ("disposition__isnull", True),
                                    ),
                                    models.Q(
                                        ("finding__isnull", True),
                                        ("repair__isnull", True),
                                        ("event__isnull", False),
                                        ("disposition__isnull", True),
                                    ),
                                    models.Q(
                                        ("finding__isnull", True),
                                        ("repair__isnull", True),
                                        ("event__isnull", True),
                                        ("disposition__isnull", False),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_inspectionrequirement_one_origin",
                                violation_error_message="Name at most one of: finding, repair, event, disposition.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("source_document__isnull", False),
                                    ("finding__isnull", False),
                                    ("repair__isnull", False),
                                    ("event__isnull", False),
                                    ("disposition__isnull", False),
                                    _connector="OR",
                                ),
                                name="repairs_inspectionrequirement_has_origin",
                                violation_error_message="A requirement names its document or the record it came from.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(("area", ""), _negated=True),
                                name="repairs_inspectionrequirement_has_area",
                                violation_error_message="Give the area.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(("criteria", ""), _negated=True),
                                name="repairs_inspectionrequirement_has_criteria",
                                violation_error_message="Give the criteria.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="RequirementSubject",
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
                            "requirement",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="subjects",
                                to="repairs.inspectionrequirement",
                            ),
                        ),
                        (
                            "aircraft",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="requirements",
                                to="fleet.aircraft",
                            ),
                        ),
                        (
                            "part",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="requirements",
                                to="fleet.safelifepart",
                            ),
                        ),
                        (
                            "applies",
                            fleet.fields.Word(words=["yes", "no", "unanswered"]),
                        ),
                        (
                            "reason",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="Why it does not apply.",
                            ),
                        ),
                        (
                            "state",
                            fleet.fields.Word(
                                words=[
                                    "draft",
                                    "effective",
                                    "suspended",
                                    "termination_unverified",
                                    "terminated",
                                    "replaced",
                                ]
                            ),
                        ),
                        ("terminated_on", models.DateField(blank=True, null=True)),
                        (
                            "termination_evidence",
                            models.TextField(blank=True, default=""),
                        ),
                    ],
                    options={
                        "ordering": ["requirement", "pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("aircraft__isnull", False),
                                        ("part__isnull", True),
                                    ),
                                    models.Q(
                                        ("aircraft__isnull", True),
                                        ("part__isnull", False),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_requirementsubject_one_subject",
                                violation_error_message="Name exactly one of: aircraft, part.",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(("aircraft__isnull", False)),
                                fields=("requirement", "aircraft"),
                                name="repairs_requirementsubject_once_per_aircraft",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(("part__isnull", False)),
                                fields=("requirement", "part"),
                                name="repairs_requirementsubject_once_per_part",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(("applies", "no"), _negated=True),
                                    models.Q(("reason", ""), _negated=True),
                                    _connector="OR",
                                ),
                                name="repairs_requirementsubject_reason_given",
                                violation_error_message="Say why it does not apply.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="RequirementLimit",
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
                            "requirement",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="limits",
                                to="repairs.inspectionrequirement",
                            ),
                        ),
                        (
                            "phase",
                            fleet.fields.Word(words=["threshold", "repeat", "replace"]),
                        ),
                        ("group", fleet.fields.Count(default=1, high=9, low=1)),
                        (
                            "combine",
                            fleet.fields.Word(default="first", words=["first", "last"]),
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
                        (
                            "value",
                            fleet.fields.Count(
                                help_text="Minutes for flight hours.",
                                high=2000000000,
                                low=1,
                            ),
                        ),
                        (
                            "entered",
                            models.TextField(help_text="As typed, as: 250 FC."),
                        ),
                        (
                            "base",
                            fleet.fields.Word(
                                words=[
                                    "new",
                                    "release",
                                    "effective",
                                    "installed",
                                    "overhaul",
                                    "last_done",
                                    "other_task",
                                    "date",
                                ]
                            ),
                        ),
                        (
                            "base_on",
                            models.DateField(
                                blank=True,
                                help_text="When the base is a date.",
                                null=True,
                            ),
                        ),
                        (
                            "base_value",
                            fleet.fields.Count(
                                blank=True,
                                help_text="Counter at the base, when it is stated.",
                                high=2000000000,
                                low=0,
                                null=True,
                            ),
                        ),
                        (
                            "base_requirement",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="repairs.inspectionrequirement",
                            ),
                        ),
                        (
                            "tolerance",
                            fleet.fields.Count(default=0, high=2000000000, low=0),
                        ),
                        ("tolerance_source", models.TextField(blank=True, default="")),
                    ],
                    options={
                        "ordering": ["requirement", "phase", "group", "counter", "pk"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=(
                                    "requirement",
                                    "phase",
                                    "group",
                                    "counter",
                                    "base",
                                ),
                                name="repairs_requirementlimit_once",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(("base", "other_task"), _negated=True),
                                    ("base_requirement__isnull", False),
                                    _connector="OR",
                                ),
                                name="repairs_requirementlimit_other_task_named",
                                violation_error_message="Name the other task.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(("base", "date"), _negated=True),
                                    ("base_on__isnull", False),
                                    _connector="OR",
                                ),
                                name="repairs_requirementlimit_date_named",
                                violation_error_message="Give the date it counts from.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("tolerance", 0),
                                    models.Q(("tolerance_source", ""), _negated=True),
                                    _connector="OR",
                                ),
                                name="repairs_requirementlimit_tolerance_sourced",
                                violation_error_message="A tolerance names the programme that grants it.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Accomplishment",
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
                            "subject",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="accomplishments",
                                to="repairs.requirementsubject",
                            ),
                        ),
                        ("number", fleet.fields.Count(high=99999, low=1)),
                        ("done_on", models.DateField()),
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
                        (
                            "result",
                            fleet.fields.Word(
                                words=[
                                    "no_finding",
                                    "finding",
                                    "terminated",
                                    "not_applicable",
                                ]
                            ),
                        ),
                        (
                            "finding",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="found_in",
                                to="repairs.finding",
                            ),
                        ),
                        (
                            "release_document",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.document",
                            ),
                        ),
                        ("evidence", models.TextField(blank=True, default="")),
                        ("late_approved", models.BooleanField(default=False)),
                        ("late_approval", models.TextField(blank=True, default="")),
                        (
                            "replaces",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="replaced_by",
                                to="repairs.accomplishment",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["subject", "number"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("subject", "number"),
                                name="repairs_accomplishment_once",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("late_approved", False),
                                    models.Q(("late_approval", ""), _negated=True),
                                    _connector="OR",
                                ),
                                name="repairs_accomplishment_late_approval_named",
                                violation_error_message="Name the approval of the lateness.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="ZoneInspected",
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
                                related_name="zones_inspected",
                                to="fleet.aircraft",
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
                            "area",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="In words, when it is not a whole zone.",
                            ),
                        ),
                        ("inspected_on", models.DateField()),
                        (
                            "level",
                            fleet.fields.Word(
                                words=["general_visual", "detailed", "special"]
                            ),
                        ),
                        (
                            "method",
                            fleet.fields.Word(
                                words=[
                                    "general_visual",
                                    "detailed_visual",
                                    "tap",
                                    "eddy_current_high",
                                    "eddy_current_low",
                                    "ultrasonic",
                                    "penetrant",
                                    "magnetic",
                                    "radiographic",
                                    "thermography",
                                    "unknown",
                                ]
                            ),
                        ),
                        (
                            "inspected_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.person",
                            ),
                        ),
                        ("found", models.BooleanField()),
                    ],
                    options={
                        "verbose_name_plural": "zones inspected",
                        "ordering": ["aircraft", "inspected_on", "pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("zone__isnull", False),
                                    models.Q(("area", ""), _negated=True),
                                    _connector="OR",
                                ),
                                name="repairs_zoneinspected_says_where",
                                violation_error_message="Name the zone or the area.",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Approval",
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
                                related_name="+",
                                to="fleet.operator",
                            ),
                        ),
                        (
                            "disposition",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="approvals",
                                to="repairs.disposition",
                            ),
                        ),
                        (
                            "repair",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="approvals",
                                to="repairs.repair",
                            ),
                        ),
                        (
                            "evaluation",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="approvals",
                                to="repairs.evaluation",
                            ),
                        ),
                        (
                            "requirement",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="approvals",
                                to="repairs.inspectionrequirement",
                            ),
                        ),
                        (
                            "accomplishment",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="approvals",
                                to="repairs.accomplishment",
                            ),
                        ),
                        (
                            "finding",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="approvals",
                                to="repairs.finding",
                            ),
                        ),
                        (
                            "event",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="approvals",
                                to="repairs.event",
                            ),
                        ),
                        (
                            "meaning",
                            fleet.fields.Word(
                                words=[
                                    "prepared",
                                    "checked",
                                    "approved",
                                    "stage_1",
                                    "stage_2",
                                    "stage_3",
                                    "performed",
                                    "inspected",
                                    "released",
                                    "deferred",
                                    "rejected",
                                ]
                            ),
                        ),
                        ("statement", models.TextField()),
                        (
                            "content",
                            models.TextField(
                                help_text="The exact canonical text that was shown."
                            ),
                        ),
                        ("content_digest", models.TextField()),
                        (
                            "signer",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to=settings.AUTH_USER_MODEL,
                            ),
                        ),
                        (
                            "signer_person",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.person",
                            ),
                        ),
                        ("signer_name", models.TextField()),
                        (
                            "authorisation",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.authorisation",
                            ),
                        ),
                        ("authorisation_number", models.TextField()),
                        ("second_factor", models.BooleanField(default=False)),
                        ("signed_at", models.DateTimeField()),
                        ("document_kind", models.TextField(blank=True, default="")),
                        ("document_number", models.TextField(blank=True, default="")),
                        ("document_issuer", models.TextField(blank=True, default="")),
                        ("document_revision", models.TextField(blank=True, default="")),
                        ("document_date", models.DateField(blank=True, null=True)),
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
                    ],
                    options={
                        "ordering": ["signed_at", "pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("disposition__isnull", False),
                                        ("repair__isnull", True),
                                        ("evaluation__isnull", True),
                                        ("requirement__isnull", True),
                                        ("accomplishment__isnull", True),
                                        ("finding__isnull", True),
                                        ("event__isnull", True),
                                    ),
                                    models.Q(
                                        ("disposition__isnull", True),
                                        ("repair__isnull", False),
                                        ("evaluation__isnull", True),
                                        ("requirement__isnull", True),
                                        ("accomplishment__isnull", True),
                                        ("finding__isnull", True),
                                        ("event__isnull", True),
                                    ),
                                    models.Q(
                                        ("disposition__isnull", True),
                                        ("repair__isnull", True),
                                        ("evaluation__isnull", False),
                                        ("requirement__isnull", True),
                                        ("accomplishment__isnull", True),
                                        ("finding__isnull", True),
                                        ("event__isnull", True),
                                    ),
                                    models.Q(
                                        ("disposition__isnull", True),
                                        ("repair__isnull", True),
                                        ("evaluation__isnull", True),
                                        ("requirement__isnull", False),
                                        ("accomplishment__isnull", True),
                                        ("finding__isnull", True),
                                        ("event__isnull", True),
                                    ),
                                    models.Q(
                                        ("disposition__isnull", True),
                                        ("repair__isnull", True),
                                        ("evaluation__isnull", True),
                                        ("requirement__isnull", True),
                                        ("accomplishment__isnull", False),
                                        ("finding__isnull", True),
                                        ("event__isnull", True),
                                    ),
                                    models.Q(
                                        ("disposition__isnull", True),
                                        ("repair__isnull", True),
                                        ("evaluation__isnull", True),
                                        ("requirement__isnull", True),
                                        ("accomplishment__isnull", True),
                                        ("finding__isnull", False),
                                        ("event__isnull", True),
                                    ),
                                    models.Q(
                                        ("disposition__isnull", True),
                                        ("repair__isnull", True),
                                        ("evaluation__isnull", True),
                                        ("requirement__isnull", True),
                                        ("accomplishment__isnull", True),
                                        ("finding__isnull", True),
                                        ("event__isnull", False),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_approval_one_subject",
                                violation_error_message="Name exactly one of: disposition, repair, evaluation, requirement, accomplishment, finding, event.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(("content", ""), _negated=True),
                                name="repairs_approval_has_content",
                                violation_error_message="Give the content.",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(("disposition__isnull", False)),
                                fields=("disposition", "meaning", "signer_person"),
                                name="repairs_approval_once_per_disposition",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(("repair__isnull", False)),
                                fields=("repair", "meaning", "signer_person"),
                                name="repairs_approval_once_per_repair",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(("evaluation__isnull", False)),
                                fields=("evaluation", "meaning", "signer_person"),
                                name="repairs_approval_once_per_evaluation",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(("requirement__isnull", False)),
                                fields=("requirement", "meaning", "signer_person"),
                                name="repairs_approval_once_per_requirement",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="Photograph",
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
                            "attachment",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="photographs",
                                to="fleet.attachment",
                            ),
                        ),
                        (
                            "finding",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="photographs",
                                to="repairs.finding",
                            ),
                        ),
                        (
                            "measurement",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="photographs",
                                to="repairs.measurement",
                            ),
                        ),
                        (
                            "repair",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="photographs",
                                to="repairs.repair",
                            ),
                        ),
                        (
                            "event",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="photographs",
                                to="repairs.event",
                            ),
                        ),
                        (
                            "accomplishment",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="photographs",
                                to="repairs.accomplishment",
                            ),
                        ),
                        (
                            "disposition",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="photographs",
                                to="repairs.disposition",
                            ),
                        ),
                        (
                            "safe_life_part",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="photographs",
                                to="fleet.safelifepart",
                            ),
                        ),
                        (
                            "role",
                            fleet.fields.Word(
                                words=[
                                    "wide",
                                    "close",
                                    "scale",
                                    "before_covering",
                                    "sketch",
                                    "evidence",
                                ]
                            ),
                        ),
                        ("caption", models.TextField(blank=True, default="")),
                    ],
                    options={
                        "ordering": ["pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("finding__isnull", False),
                                        ("measurement__isnull", True),
                                        ("repair__isnull", True),
                                        ("event__isnull", True),
                                        ("accomplishment__isnull", True),
                                        ("disposition__isnull", True),
                                        ("safe_life_part__isnull", True),
                                    ),
                                    models.Q(
                                        ("finding__isnull", True),
                                        ("measurement__isnull", False),
                                        ("repair__isnull", True),
                                        ("event__isnull", True),
                                        ("accomplishment__isnull", True),
                                        ("disposition__isnull", True),
                                        ("safe_life_part__isnull", True),
                                    ),
                                    models.Q(
                                        ("finding__isnull", True),
                                        ("measurement__isnull", True),
                                        ("repair__isnull", False),
                                        ("event__isnull", True),
                                        ("accomplishment__isnull", True),
                                        ("disposition__isnull", True),
                                        ("safe_life_part__isnull", True),
                                    ),
                                    models.Q(
                                        ("finding__isnull", True),
                                        ("measurement__isnull", True),
                                        ("repair__isnull", True),
                                        ("event__isnull", False),
                                        ("accomplishment__isnull", True),
                                        ("disposition__isnull", True),
                                        ("safe_life_part__isnull", True),
                                    ),
                                    models.Q(
                                        ("finding__isnull", True),
                                        ("measurement__isnull", True),
                                        ("repair__isnull", True),
                                        ("event__isnull", True),
                                        ("accomplishment__isnull", False),
                                        ("disposition__isnull", True),
                                        ("safe_life_part__isnull", True),
                                    ),
                                    models.Q(
                                        ("finding__isnull", True),
                                        ("measurement__isnull", True),
                                        ("repair__isnull", True),
                                        ("event__isnull", True),
                                        ("accomplishment__isnull", True),
                                        ("disposition__isnull", False),
                                        ("safe_life_part__isnull", True),
                                    ),
                                    models.Q(
                                        ("finding__isnull", True),
                                        ("measurement__isnull", True),
                                        ("repair__isnull", True),
                                        ("event__isnull", True),
                                        ("accomplishment__isnull", True),
                                        ("disposition__isnull", True),
                                        ("safe_life_part__isnull", False),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_photograph_one_subject",
                                violation_error_message="Name exactly one of: finding, measurement, repair, event, accomplishment, disposition, safe_life_part.",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="OccurrenceReport",
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
                                related_name="+",
                                to="fleet.operator",
                            ),
                        ),
                        (
                            "finding",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="reports",
                                to="repairs.finding",
                            ),
                        ),
                        (
                            "event",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="reports",
                                to="repairs.event",
                            ),
                        ),
                        ("regime", models.TextField()),
                        (
                            "state",
                            fleet.fields.Word(
                                words=[
                                    "to_assess",
                                    "not_reportable",
                                    "reportable",
                                    "sent",
                                    "closed",
                                ]
                            ),
                        ),
                        ("reason", models.TextField(blank=True, default="")),
                        ("detected_at", models.DateTimeField()),
                        ("due_at", models.DateTimeField(blank=True, null=True)),
                        ("sent_at", models.DateTimeField(blank=True, null=True)),
                        ("sent_reference", models.TextField(blank=True, default="")),
                        (
                            "supplements",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="supplemented",
                                to="repairs.occurrencereport",
                            ),
                        ),
                        ("number", fleet.fields.Count(default=1, high=9999, low=1)),
                    ],
                    options={
                        "ordering": ["detected_at", "pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("finding__isnull", False),
                                        ("event__isnull", True),
                                    ),
                                    models.Q(
                                        ("finding__isnull", True),
                                        ("event__isnull", False),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_occurrencereport_one_subject",
                                violation_error_message="Name exactly one of: finding, event.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("state__in", ("sent", "closed")), _negated=True
                                    ),
                                    models.Q(
                                        ("sent_at__isnull", False),
                                        models.Q(("sent_reference", ""), _negated=True),
                                    ),
                                    models.Q(("reason__gt", ""), ("state", "closed")),
                                    _connector="OR",
                                ),
                                name="repairs_occurrencereport_sent_whole",
                                violation_error_message="A sent report has its time and reference.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("state", "not_reportable"), _negated=True
                                    ),
                                    models.Q(("reason", ""), _negated=True),
                                    _connector="OR",
                                ),
                                name="repairs_occurrencereport_no_has_reason",
                                violation_error_message="Say why it is not reportable.",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="DuePoint",
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
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="due_points",
                                to="fleet.aircraft",
                            ),
                        ),
                        (
                            "part",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="due_points",
                                to="fleet.safelifepart",
                            ),
                        ),
                        (
                            "subject",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="due_points",
                                to="repairs.requirementsubject",
                            ),
                        ),
                        (
                            "disposition",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="due_points",
                                to="repairs.disposition",
                            ),
                        ),
                        (
                            "repair",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="due_points",
                                to="repairs.repair",
                            ),
                        ),
                        (
                            "event",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="due_points",
                                to="repairs.event",
                            ),
                        ),
                        (
                            "life_of",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="life_due_points",
                                to="fleet.safelifepart",
                            ),
                        ),
                        (
                            "kind",
                            fleet.fields.Word(
                                words=[
                                    "threshold",
                                    "repeat",
                                    "deferral",
                                    "replace",
                                    "stage_clock",
                                    "validity",
                                    "phase",
                                    "life",
                                ]
                            ),
                        ),
                        ("group", fleet.fields.Count(default=1, high=9, low=1)),
                        (
                            "combine",
                            fleet.fields.Word(default="first", words=["first", "last"]),
                        ),
                        (
                            "due_minutes",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        (
                            "due_cycles",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        (
                            "due_landings",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        (
                            "due_pressurisations",
                            fleet.fields.Count(
                                blank=True, high=2000000000, low=0, null=True
                            ),
                        ),
                        ("due_on", models.DateField(blank=True, null=True)),
                        ("cannot_compute", models.TextField(blank=True, default="")),
                        (
                            "after",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="opened",
                                to="repairs.accomplishment",
                            ),
                        ),
                        (
                            "replaces",
                            models.OneToOneField(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="replaced_by",
                                to="repairs.duepoint",
                            ),
                        ),
                        (
                            "basis",
                            models.TextField(
                                blank=True,
                                default="",
                                help_text="How it came about, in words.",
                            ),
                        ),
                        ("opened_on", models.DateField()),
                        ("closed_on", models.DateField(blank=True, null=True)),
                        (
                            "closed_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="closed",
                                to="repairs.accomplishment",
                            ),
                        ),
                        ("closed_reason", models.TextField(blank=True, default="")),
                    ],
                    options={
                        "ordering": ["pk"],
                        "indexes": [
                            models.Index(
                                condition=models.Q(("closed_on__isnull", True)),
                                fields=["aircraft"],
                                name="repairs_due_open_aircraft",
                            ),
                            models.Index(
                                condition=models.Q(("closed_on__isnull", True)),
                                fields=["part"],
                                name="repairs_due_open_part",
                            ),
                            models.Index(
                                fields=["subject", "id"], name="repairs_due_chain"
                            ),
                        ],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("aircraft__isnull", False),
                                        ("part__isnull", True),
                                    ),
                                    models.Q(
                                        ("aircraft__isnull", True),
                                        ("part__isnull", False),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_duepoint_one_subject",
                                violation_error_message="Name exactly one of: aircraft, part.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("subject__isnull", False),
                                        ("disposition__isnull", True),
                                        ("repair__isnull", True),
                                        ("event__isnull", True),
                                        ("life_of__isnull", True),
                                    ),
                                    models.Q(
                                        ("subject__isnull", True),
                                        ("disposition__isnull", False),
                                        ("repair__isnull", True),
                                        ("event__isnull", True),
                                        ("life_of__isnull", True),
                                    ),
                                    models.Q(
                                        ("subject__isnull", True),
                                        ("disposition__isnull", True),
                                        ("repair__isnull", False),
                                        ("event__isnull", True),
                                        ("life_of__isnull", True),
                                    ),
                                    models.Q(
                                        ("subject__isnull", True),
                                        ("disposition__isnull", True),
                                        ("repair__isnull", True),
                                        ("event__isnull", False),
                                        ("life_of__isnull", True),
                                    ),
                                    models.Q(
                                        ("subject__isnull", True),
                                        ("disposition__isnull", True),
                                        ("repair__isnull", True),
                                        ("event__isnull", True),
                                        ("life_of__isnull", False),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_duepoint_one_origin",
                                violation_error_message="Name exactly one of: subject, disposition, repair, event, life_of.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("life_of__isnull", True),
                                    ("life_of", models.F("part")),
                                    _connector="OR",
                                ),
                                name="repairs_duepoint_life_of_itself",
                                violation_error_message="A life limit is due on the part itself.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("due_minutes__isnull", False),
                                    ("due_cycles__isnull", False),
                                    ("due_landings__isnull", False),
                                    ("due_pressurisations__isnull", False),
                                    ("due_on__isnull", False),
                                    models.Q(("cannot_compute", ""), _negated=True),
                                    _connector="OR",
                                ),
                                name="repairs_duepoint_says_when",
                                violation_error_message="Say when it is due, or why that cannot be computed.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("closed_by__isnull", True),
                                        ("closed_on__isnull", True),
                                        ("closed_reason", ""),
                                    ),
                                    models.Q(
                                        ("closed_on__isnull", False),
                                        models.Q(("closed_reason", ""), _negated=True),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_duepoint_closed_whole",
                                violation_error_message="A closed due point says when and why.",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(
                                    ("closed_on__isnull", True),
                                    ("subject__isnull", False),
                                ),
                                fields=("subject", "group"),
                                name="repairs_duepoint_one_open_per_subject",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(
                                    ("closed_on__isnull", True),
                                    ("disposition__isnull", False),
                                ),
                                fields=("disposition", "kind", "group"),
                                name="repairs_duepoint_one_open_per_disposition",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(
                                    ("closed_on__isnull", True),
                                    ("repair__isnull", False),
                                ),
                                fields=("repair", "kind", "group"),
                                name="repairs_duepoint_one_open_per_repair",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(
                                    ("closed_on__isnull", True),
                                    ("event__isnull", False),
                                ),
                                fields=("event", "kind", "group"),
                                name="repairs_duepoint_one_open_per_event",
                            ),
                            models.UniqueConstraint(
                                condition=models.Q(
                                    ("closed_on__isnull", True),
                                    ("life_of__isnull", False),
                                ),
                                fields=("life_of", "group"),
                                name="repairs_duepoint_one_open_per_life",
                            ),
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="RecordedLimit",
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
                                related_name="recorded_limits",
                                to="fleet.operator",
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
                        ("paragraph", models.TextField(blank=True, default="")),
                        (
                            "aircraft_type",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="recorded_limits",
                                to="fleet.aircrafttype",
                            ),
                        ),
                        (
                            "section",
                            models.ForeignKey(
                                blank=True,
                                help_text="Empty: any section.",
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="fleet.section",
                            ),
                        ),
                        (
                            "panel_label",
                            models.TextField(
                                blank=True, default="", help_text="Empty: any panel."
                            ),
                        ),
                        (
                            "damage_type",
                            fleet.fields.Word(
                                words=[
                                    "dent",
                                    "scratch",
                                    "gouge",
                                    "nick",
                                    "crack",
                                    "corrosion",
                                    "hole",
                                    "crease",
                                    "delamination",
                                    "disbond",
                                    "impact",
                                    "lightning",
                                    "heat",
                                    "wear",
                                    "fastener",
                                    "bird_strike",
                                ]
                            ),
                        ),
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
                                to="repairs.recordedlimit",
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["document", "paragraph", "pk"],
                        "indexes": [
                            models.Index(
                                condition=models.Q(("state", "in_force")),
                                fields=["operator", "aircraft_type", "damage_type"],
                                name="repairs_limit_in_force",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="LimitRule",
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
                            "limit",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="rules",
                                to="repairs.recordedlimit",
                            ),
                        ),
                        ("number", fleet.fields.Count(high=99, low=1)),
                        ("quantity", models.TextField()),
                        (
                            "comparison",
                            fleet.fields.Word(
                                words=["at_most", "at_least", "less_than", "more_than"]
                            ),
                        ),
                        ("value", fleet.fields.Measure(high=1000000.0, low=-1000000.0)),
                        ("entered", models.TextField()),
                    ],
                    options={
                        "ordering": ["limit", "number"],
                        "constraints": [
                            models.UniqueConstraint(
                                fields=("limit", "number"),
                                name="repairs_limitrule_once",
                            )
                        ],
                    },
                ),
                migrations.CreateModel(
                    name="LimitCheck",
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
                            "finding",
                            models.ForeignKey(
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="limit_checks",
                                to="repairs.finding",
                            ),
                        ),
                        (
                            "measurement",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="repairs.measurement",
                            ),
                        ),
                        (
                            "limit",
                            models.ForeignKey(
                                blank=True,
                                help_text="Empty: none recorded for it.",
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="checks",
                                to="repairs.recordedlimit",
                            ),
                        ),
                        (
                            "outcome",
                            fleet.fields.Word(
                                words=[
                                    "within",
                                    "beyond",
                                    "not_covered",
                                    "missing_input",
                                ]
                            ),
                        ),
                        ("checked_at", models.DateTimeField()),
                        (
                            "lines",
                            models.TextField(
                                help_text="Each rule with both numbers, canonical JSON."
                            ),
                        ),
                    ],
                    options={
                        "ordering": ["finding", "checked_at", "pk"],
                    },
                ),
                migrations.CreateModel(
                    name="BlindReentry",
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
                            "recorded_limit",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to="repairs.recordedlimit",
                            ),
                        ),
                        (
                            "requirement",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="reentries",
                                to="repairs.inspectionrequirement",
                            ),
                        ),
                        (
                            "life_limit",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="reentries",
                                to="fleet.lifelimit",
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
                            "first_keyed_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to=settings.AUTH_USER_MODEL,
                            ),
                        ),
                        (
                            "keyed_by",
                            models.ForeignKey(
                                blank=True,
                                null=True,
                                on_delete=django.db.models.deletion.PROTECT,
                                related_name="+",
                                to=settings.AUTH_USER_MODEL,
                            ),
                        ),
                        ("keyed_at", models.DateTimeField()),
                        (
                            "content",
                            models.TextField(
                                help_text="Canonical text of what was keyed."
                            ),
                        ),
                        ("first_digest", models.TextField()),
                        ("content_digest", models.TextField()),
                        ("agrees", models.BooleanField()),
                    ],
                    options={
                        "verbose_name_plural": "blind re-entries",
                        "ordering": ["keyed_at", "pk"],
                        "constraints": [
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("recorded_limit__isnull", False),
                                        ("requirement__isnull", True),
                                        ("life_limit__isnull", True),
                                    ),
                                    models.Q(
                                        ("recorded_limit__isnull", True),
                                        ("requirement__isnull", False),
                                        ("life_limit__isnull", True),
                                    ),
                                    models.Q(
                                        ("recorded_limit__isnull", True),
                                        ("requirement__isnull", True),
                                        ("life_limit__isnull", False),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_blindreentry_one_subject",
                                violation_error_message="Name exactly one of: recorded_limit, requirement, life_limit.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    ("first_keyed_by__isnull", True),
                                    models.Q(
                                        ("keyed_by", models.F("first_keyed_by")),
                                        _negated=True,
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_blindreentry_other_person",
                                violation_error_message="The value is keyed again by someone else.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(
                                    models.Q(
                                        ("agrees", True),
                                        ("first_digest", models.F("content_digest")),
                                    ),
                                    models.Q(
                                        ("agrees", False),
                                        models.Q(
                                            (
                                                "first_digest",
                                                models.F("content_digest"),
                                            ),
                                            _negated=True,
                                        ),
                                    ),
                                    _connector="OR",
                                ),
                                name="repairs_blindreentry_agrees_iff_equal",
                                violation_error_message="It agrees when both were keyed alike, and only then.",
                            ),
                            models.CheckConstraint(
                                condition=models.Q(("content", ""), _negated=True),
                                name="repairs_blindreentry_has_content",
                                violation_error_message="Give the content.",
                            ),
                        ],
                    },
                ),
            ],
        ),
    ]
