"""Damage as it was found: where, what, how big, by whom."""

from __future__ import annotations

from django.db import models
from django.db.models import F, Q

from fleet.constraints import all_or_none, check, has_text, unique
from fleet.fields import Count, Word, optional_counter, optional_measure, text
from fleet.models import Aircraft, Operator, Person, SafeLifePart, User
from fleet.models.columns import AtCounters, Entered
from fleet.scoping import ScopedQuerySet
from repairs.models.columns import Place, StructuralItem, place_constraints
from repairs.models.events import Event


class DamageType(models.TextChoices):
    DENT = "dent", "dent"
    SCRATCH = "scratch", "scratch"
    GOUGE = "gouge", "gouge"
    NICK = "nick", "nick"
    CRACK = "crack", "crack"
    CORROSION = "corrosion", "corrosion"
    HOLE = "hole", "hole or puncture"
    CREASE = "crease", "crease, buckle or wrinkle"
    DELAMINATION = "delamination", "delamination"
    DISBOND = "disbond", "disbond"
    IMPACT = "impact", "impact on composite"
    LIGHTNING = "lightning", "lightning strike"
    HEAT = "heat", "heat damage"
    WEAR = "wear", "wear, fretting or chafing"
    FASTENER = "fastener", "fastener loose or missing"
    BIRD_STRIKE = "bird_strike", "bird strike"


class FindingState(models.TextChoices):
    REPORTED = "reported", "reported"
    ASSESSED = "assessed", "assessed"
    ACCEPTED = "accepted", "accepted, damage remains"
    DEFERRED = "deferred", "deferred"
    TO_RECTIFY = "to_rectify", "to rectify"
    RECTIFIED = "rectified", "rectified"
    CLOSED = "closed", "closed"
    DUPLICATE = "duplicate", "duplicate"
    VOIDED = "voided", "voided"


OPEN_STATES = ("reported", "assessed", "deferred", "to_rectify", "rectified")
ASIDE_STATES = ("duplicate", "voided")


class Cause(models.TextChoices):
    FATIGUE = "fatigue", "fatigue"
    CORROSION = "corrosion", "corrosion"
    ACCIDENTAL = "accidental", "accidental"
    MAINTENANCE = "maintenance", "maintenance-induced"
    MANUFACTURING = "manufacturing", "manufacturing"
    WEAR = "wear", "wear"
    OVERLOAD = "overload", "overload"
    UNKNOWN = "unknown", "unknown"


class Occasion(models.TextChoices):
    TASK = "task", "scheduled task"
    CHECK = "check", "check"
    RAMP = "ramp", "walk-round or ramp"
    EVENT = "event", "after an event"
    REPAIR = "repair", "during repair access"
    OTHER = "other", "other"


class DetectionMethod(models.TextChoices):
    GENERAL_VISUAL = "general_visual", "general visual"
    DETAILED_VISUAL = "detailed_visual", "detailed visual"
    TAP = "tap", "tap test"
    EDDY_CURRENT_HIGH = "eddy_current_high", "high-frequency eddy current"
    EDDY_CURRENT_LOW = "eddy_current_low", "low-frequency eddy current"
    ULTRASONIC = "ultrasonic", "ultrasonic"
    PENETRANT = "penetrant", "penetrant"
    MAGNETIC = "magnetic", "magnetic particle"
    RADIOGRAPHIC = "radiographic", "radiographic"
    THERMOGRAPHY = "thermography", "thermography"
    UNKNOWN = "unknown", "unknown"


class Finding(Place, StructuralItem, AtCounters, Entered):
    """The record of damage seen at a location on an aircraft at a date and counters."""

    operator = models.ForeignKey(
        Operator,
        on_delete=models.PROTECT,
        related_name="findings",
        help_text="Who operated the aircraft when it was found.",
    )
    aircraft = models.ForeignKey(
        Aircraft, on_delete=models.PROTECT, related_name="findings"
    )
    safe_life_part = models.ForeignKey(
        SafeLifePart,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="findings",
        help_text="Empty: not on a removable part.",
    )
    number = models.TextField()
    damage_type = Word(choices=DamageType)
    cluster_count = Count(
        low=1, high=100_000, default=1, help_text="Hail: one, n dents."
    )
    state = Word(choices=FindingState)
    cause = Word(choices=Cause, default="unknown")
    found_on = models.DateField()
    found_by = models.ForeignKey(
        Person, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    counters_source = text(help_text="From usage, or from which document.")
    counters_ahead = models.BooleanField(default=False, help_text="Ahead of usage.")
    occasion = Word(choices=Occasion, default="other")
    task_reference = text()
    detection_method = Word(choices=DetectionMethod, default="unknown")
    detection_procedure = text()
    last_clean_on = models.DateField(
        null=True, blank=True, help_text="Last inspection here without a finding."
    )
    last_clean_cycles = optional_counter()
    last_clean_method = text()
    event = models.ForeignKey(
        Event, on_delete=models.PROTECT, null=True, blank=True, related_name="findings"
    )
    description = text()
    client_key = models.UUIDField(
        null=True, blank=True, unique=True, help_text="A form is sent once."
    )
    replaces = models.OneToOneField(
        "self",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="replaced_by",
    )
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("aircraft__operator", "operator")

    class Meta:
        ordering = ["-found_on", "-pk"]
        constraints = [
            *place_constraints("repairs_finding"),
            unique("repairs_finding", "one_number", "operator", "number"),
            has_text("repairs_finding", "number"),
            check(
                "repairs_finding",
                "placed_before_assessed",
                Q(section__isnull=False) | Q(state__in=("reported", *ASIDE_STATES)),
                "A finding to be placed cannot be assessed.",
            ),
        ]
        indexes = [
            models.Index(
                fields=["aircraft", "section", "x1_mm"], name="repairs_finding_near"
            ),
            models.Index(
                fields=["aircraft", "section", "x2_mm"],
                name="repairs_finding_long",
                condition=Q(x2_mm__gt=F("x1_mm") + 500.0),
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
                fields=["state", "aircraft"],
                name="repairs_finding_open",
                condition=Q(state__in=OPEN_STATES),
            ),
            models.Index(
                fields=["aircraft", "found_on"], name="repairs_finding_by_date"
            ),
        ]

    def __str__(self) -> str:
        return self.number


class FindingQuestion(models.Model):
    """A doubt raised on entry, kept with its answer; it blocks assessment till then."""

    finding = models.ForeignKey(
        Finding, on_delete=models.PROTECT, related_name="questions"
    )
    code = models.TextField()
    asked = models.TextField()
    answer = text()
    answered_by = models.ForeignKey(
        User, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    answered_at = models.DateTimeField(null=True, blank=True)
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("finding__aircraft__operator", "finding__operator")

    class Meta:
        ordering = ["finding", "pk"]
        constraints = [
            unique("repairs_findingquestion", "once", "finding", "code"),
            all_or_none(
                "repairs_findingquestion", "answer_whole", "answered_by", "answered_at"
            ),
            check(
                "repairs_findingquestion",
                "answer_said",
                Q(answered_at__isnull=True) | ~Q(answer=""),
                "An answer has words.",
            ),
        ]

    def __str__(self) -> str:
        return self.asked


class FindingLink(Entered):
    """How a finding relates to an earlier one; decided by a person, never merged."""

    finding = models.ForeignKey(Finding, on_delete=models.PROTECT, related_name="links")
    earlier = models.ForeignKey(
        Finding, on_delete=models.PROTECT, related_name="later_links"
    )
    kind = Word(words=("same_damage", "duplicate_report", "different", "grew_from"))
    decided_by = models.ForeignKey(
        Person, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    decided_on = models.DateField()
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("finding__aircraft__operator", "finding__operator")

    class Meta:
        ordering = ["finding", "earlier"]
        constraints = [
            unique("repairs_findinglink", "once", "finding", "earlier"),
            check(
                "repairs_findinglink",
                "not_itself",
                ~Q(finding=F("earlier")),
                "A finding cannot be linked to itself.",
            ),
        ]

    def __str__(self) -> str:
        return self.kind


class CorrosionLevel(Entered):
    """The level of a corrosion finding under the operator's prevention programme.

    Levels are worded differently in different sources: `definitions` says whose were
    used. Levels 2 and 3 want an action on the programme, level 3 one on the fleet.
    """

    finding = models.ForeignKey(
        Finding, on_delete=models.PROTECT, related_name="corrosion_levels"
    )
    replaces = models.OneToOneField(
        "self",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="replaced_by",
    )
    level = Count(low=1, high=3)
    definitions = models.TextField(help_text="Document and paragraph of the wording.")
    task = models.TextField(help_text="Task or area of the programme.")
    first_inspection = models.BooleanField(null=True, blank=True)
    last_inspected_on = models.DateField(null=True, blank=True)
    spread = Word(words=("local", "widespread", "unknown"))
    single_rework = Word(
        words=("within", "beyond", "unknown"), help_text="Allowable after one rework."
    )
    cumulative = Word(
        words=("within", "beyond", "unknown"), help_text="With earlier reworks."
    )
    determined_by = models.ForeignKey(
        Person, on_delete=models.PROTECT, related_name="+"
    )
    determined_on = models.DateField()
    programme_action = text()
    fleet_action = text()
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("finding__aircraft__operator", "finding__operator")

    class Meta:
        ordering = ["finding", "pk"]
        constraints = [has_text("repairs_corrosionlevel", "definitions")]

    def __str__(self) -> str:
        return f"level {self.level}"


class Measurement(AtCounters, Entered):
    """One measuring of a finding; a later measuring is a new row. Append-only."""

    finding = models.ForeignKey(
        Finding, on_delete=models.PROTECT, related_name="measurements"
    )
    number = Count(low=1, high=9_999)
    stage = Word(words=("as_found", "after_rework", "repeat"))
    measured_on = models.DateField()
    measured_by = models.ForeignKey(
        Person, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    method = text()
    instrument = text()
    light = text()
    accomplishment = models.ForeignKey(
        "repairs.Accomplishment",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="measurements",
    )
    replaces = models.OneToOneField(
        "self",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="replaced_by",
    )
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("finding__aircraft__operator", "finding__operator")
    append_only = True

    class Meta:
        ordering = ["finding", "number"]
        constraints = [unique("repairs_measurement", "once", "finding", "number")]

    def __str__(self) -> str:
        return f"measurement {self.number}"


class MeasuredValue(models.Model):
    """One dimension: known, unknown or not applicable. Append-only."""

    measurement = models.ForeignKey(
        Measurement, on_delete=models.PROTECT, related_name="values"
    )
    quantity = models.TextField(help_text="The unit is the end of the name.")
    status = Word(words=("known", "unknown", "not_applicable"))
    value = optional_measure(-1e6, 1e6)
    word = text(help_text="For dimensions that are a word, as: longitudinal.")
    entered = text(help_text="As typed, with its unit.")
    uncertainty = optional_measure(0, 1e6)
    worked_out = optional_measure(
        -1e6, 1e6, help_text="The ratio as the technician had it."
    )
    objects = ScopedQuerySet.as_manager()
    operator_paths = (
        "measurement__finding__aircraft__operator",
        "measurement__finding__operator",
    )
    append_only = True

    class Meta:
        ordering = ["measurement", "pk"]
        constraints = [
            unique("repairs_measuredvalue", "once", "measurement", "quantity"),
            check(
                "repairs_measuredvalue",
                "value_iff_known",
                (Q(status="known") & (Q(value__isnull=False) ^ ~Q(word="")))
                | (~Q(status="known") & Q(value__isnull=True, word="")),
                "A known dimension has a value; an unknown one has none.",
            ),
        ]

    def __str__(self) -> str:
        return f"{self.quantity}: {self.entered or self.status}"


class HoleCrack(models.Model):
    """One hole of a cracked row. Append-only; empty means no crack or not measured."""

    measurement = models.ForeignKey(
        Measurement, on_delete=models.PROTECT, related_name="holes"
    )
    hole_number = Count(low=1, high=9_999)
    fore_length_mm = optional_measure(0, 10_000)
    aft_length_mm = optional_measure(0, 10_000)
    hole_diameter_mm = optional_measure(0.01, 1_000)
    pitch_to_next_mm = optional_measure(0.01, 10_000)
    objects = ScopedQuerySet.as_manager()
    operator_paths = (
        "measurement__finding__aircraft__operator",
        "measurement__finding__operator",
    )
    append_only = True

    class Meta:
        ordering = ["measurement", "hole_number"]
        constraints = [
            unique("repairs_holecrack", "once", "measurement", "hole_number")
        ]

    def __str__(self) -> str:
        return f"hole {self.hole_number}"
