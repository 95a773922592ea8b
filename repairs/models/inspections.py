"""Inspection requirements, their subjects and limits, and what was done."""

from __future__ import annotations

from django.db import models
from django.db.models import Q

from fleet.constraints import at_most_one, check, exactly_one, has_text, unique
from fleet.fields import Count, Word, optional_counter, text
from fleet.models import (
    Aircraft,
    Counter,
    Document,
    Operator,
    Person,
    SafeLifePart,
    Zone,
)
from fleet.models.columns import AtCounters, Entered
from fleet.scoping import ScopedQuerySet
from repairs.models.dispositions import Disposition
from repairs.models.evaluations import Evaluation
from repairs.models.events import Event
from repairs.models.findings import DetectionMethod, Finding
from repairs.models.repairs import Repair


class RequirementClass(models.TextChoices):
    """Whose requirement it is; decides whether tolerance is possible."""

    DIRECTIVE = "directive", "airworthiness directive"
    LIMITATION = "limitation", "airworthiness limitation"
    REPAIR = "repair", "damage-tolerance inspection of a repair"
    CORROSION = "corrosion", "corrosion programme"
    PROGRAMME = "programme", "maintenance programme"
    OPERATOR = "operator", "operator"


class RequirementState(models.TextChoices):
    DRAFT = "draft", "draft"
    EFFECTIVE = "effective", "effective"
    SUSPENDED = "suspended", "suspended"
    TERMINATION_UNVERIFIED = "termination_unverified", "terminated, unverified"
    TERMINATED = "terminated", "terminated"
    REPLACED = "replaced", "replaced"


class InspectionRequirement(Entered):
    """What to inspect, where and how, with its source; its limits are rows."""

    operator = models.ForeignKey(
        Operator, on_delete=models.PROTECT, related_name="requirements"
    )
    number = models.TextField()
    title = models.TextField()
    requirement_class = Word(choices=RequirementClass)
    source_document = models.ForeignKey(
        Document, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    source_page = text()
    finding = models.ForeignKey(
        Finding,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="requirements",
    )
    repair = models.ForeignKey(
        Repair,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="requirements",
    )
    event = models.ForeignKey(
        Event,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="requirements",
    )
    disposition = models.ForeignKey(
        Disposition,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="requirements",
    )
    evaluation = models.ForeignKey(
        Evaluation,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="requirements",
        help_text="The calculation its intervals came from.",
    )
    sisters = models.BooleanField(default=False, help_text="A look on the sisters.")
    state = Word(choices=RequirementState)
    verified = models.BooleanField(
        default=False, help_text="Keyed again by another person, and alike."
    )
    interim = models.BooleanField(
        default=False, help_text="From an unapproved calculation."
    )
    task = text()
    method = Word(choices=DetectionMethod)
    procedure = text()
    area = models.TextField()
    access = text()
    criteria = models.TextField(help_text="Accept or reject.")
    applicability = text()
    anchor = Word(
        words=("actual", "scheduled_if_late", "window"), default="scheduled_if_late"
    )
    calendar = Word(words=("date", "month_end"), default="date")
    window_percent = Count(low=0, high=100, null=True, blank=True)
    policy_source = text(
        help_text="Where anchor, calendar and tolerance are laid down."
    )
    assumed_minutes_per_cycle = Count(
        low=1, high=2_000, null=True, blank=True, help_text="Flight length assumed."
    )
    effective_on = models.DateField()
    keyed_by = models.ForeignKey(
        "fleet.User", on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    replaces = models.OneToOneField(
        "self",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="replaced_by",
    )
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("operator",)
    changeable = frozenset({"state", "verified", "interim"})

    class Meta:
        ordering = ["number", "pk"]
        constraints = [
            unique("repairs_inspectionrequirement", "one_number", "operator", "number"),
            at_most_one(
                "repairs_inspectionrequirement",
                "one_origin",
                "finding",
                "repair",
                "event",
                "disposition",
            ),
            check(
                "repairs_inspectionrequirement",
                "has_origin",
                Q(source_document__isnull=False)
                | Q(finding__isnull=False)
                | Q(repair__isnull=False)
                | Q(event__isnull=False)
                | Q(disposition__isnull=False),
                "A requirement names its document or the record it came from.",
            ),
            has_text("repairs_inspectionrequirement", "area"),
            has_text("repairs_inspectionrequirement", "criteria"),
        ]

    def __str__(self) -> str:
        return self.number


class RequirementSubject(Entered):
    """Whether the requirement applies to one aircraft or serial, and how it stands."""

    requirement = models.ForeignKey(
        InspectionRequirement, on_delete=models.PROTECT, related_name="subjects"
    )
    aircraft = models.ForeignKey(
        Aircraft,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="requirements",
    )
    part = models.ForeignKey(
        SafeLifePart,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="requirements",
    )
    applies = Word(words=("yes", "no", "unanswered"))
    reason = text(help_text="Why it does not apply.")
    state = Word(choices=RequirementState)
    terminated_on = models.DateField(null=True, blank=True)
    termination_evidence = text()
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("requirement__operator",)

    class Meta:
        ordering = ["requirement", "pk"]
        constraints = [
            exactly_one(
                "repairs_requirementsubject", "one_subject", "aircraft", "part"
            ),
            unique(
                "repairs_requirementsubject",
                "once_per_aircraft",
                "requirement",
                "aircraft",
                when=Q(aircraft__isnull=False),
            ),
            unique(
                "repairs_requirementsubject",
                "once_per_part",
                "requirement",
                "part",
                when=Q(part__isnull=False),
            ),
            check(
                "repairs_requirementsubject",
                "reason_given",
                ~Q(applies="no") | ~Q(reason=""),
                "Say why it does not apply.",
            ),
        ]

    def __str__(self) -> str:
        return f"applies: {self.applies}"


class RequirementLimit(models.Model):
    """One number of a requirement: threshold, repeat or replace-by on one counter."""

    requirement = models.ForeignKey(
        InspectionRequirement, on_delete=models.PROTECT, related_name="limits"
    )
    phase = Word(words=("threshold", "repeat", "replace"))
    group = Count(low=1, high=9, default=1)
    combine = Word(words=("first", "last"), default="first")
    counter = Word(choices=Counter)
    value = Count(low=1, high=2_000_000_000, help_text="Minutes for flight hours.")
    entered = models.TextField(help_text="As typed, as: 250 FC.")
    base = Word(
        words=(
            "new",
            "release",
            "effective",
            "installed",
            "overhaul",
            "last_done",
            "other_task",
            "date",
        )
    )
    base_on = models.DateField(
        null=True, blank=True, help_text="When the base is a date."
    )
    base_value = optional_counter(help_text="Counter at the base, when it is stated.")
    base_requirement = models.ForeignKey(
        InspectionRequirement,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="+",
    )
    tolerance = Count(low=0, high=2_000_000_000, default=0)
    tolerance_source = text()
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("requirement__operator",)
    changeable = frozenset[str]()

    class Meta:
        ordering = ["requirement", "phase", "group", "counter", "pk"]
        constraints = [
            unique(
                "repairs_requirementlimit",
                "once",
                "requirement",
                "phase",
                "group",
                "counter",
                "base",
            ),
            check(
                "repairs_requirementlimit",
                "other_task_named",
                ~Q(base="other_task") | Q(base_requirement__isnull=False),
                "Name the other task.",
            ),
            check(
                "repairs_requirementlimit",
                "date_named",
                ~Q(base="date") | Q(base_on__isnull=False),
                "Give the date it counts from.",
            ),
            check(
                "repairs_requirementlimit",
                "tolerance_sourced",
                Q(tolerance=0) | ~Q(tolerance_source=""),
                "A tolerance names the programme that grants it.",
            ),
        ]

    def __str__(self) -> str:
        return self.entered


class Accomplishment(AtCounters, Entered):
    """One doing of a requirement on one subject, in its counters. Append-only."""

    subject = models.ForeignKey(
        RequirementSubject, on_delete=models.PROTECT, related_name="accomplishments"
    )
    number = Count(low=1, high=99_999)
    done_on = models.DateField()
    done_by = models.ForeignKey(
        Person, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    result = Word(words=("no_finding", "finding", "terminated", "not_applicable"))
    finding = models.ForeignKey(
        Finding,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="found_in",
    )
    release_document = models.ForeignKey(
        Document, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    evidence = text()
    late_approved = models.BooleanField(default=False)
    late_approval = text()
    replaces = models.OneToOneField(
        "self",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="replaced_by",
    )
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("subject__requirement__operator",)
    append_only = True

    class Meta:
        ordering = ["subject", "number"]
        constraints = [
            unique("repairs_accomplishment", "once", "subject", "number"),
            check(
                "repairs_accomplishment",
                "late_approval_named",
                Q(late_approved=False) | ~Q(late_approval=""),
                "Name the approval of the lateness.",
            ),
        ]

    def __str__(self) -> str:
        return f"{self.get_result_display()} {self.done_on}"


class ZoneInspected(AtCounters, Entered):
    """Proof that somebody looked: the denominator of a rate per inspection."""

    aircraft = models.ForeignKey(
        Aircraft, on_delete=models.PROTECT, related_name="zones_inspected"
    )
    zone = models.ForeignKey(
        Zone, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    area = text(help_text="In words, when it is not a whole zone.")
    inspected_on = models.DateField()
    level = Word(words=("general_visual", "detailed", "special"))
    method = Word(choices=DetectionMethod)
    inspected_by = models.ForeignKey(
        Person, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    found = models.BooleanField()
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("aircraft__operator",)

    class Meta:
        ordering = ["aircraft", "inspected_on", "pk"]
        verbose_name_plural = "zones inspected"
        constraints = [
            check(
                "repairs_zoneinspected",
                "says_where",
                Q(zone__isnull=False) | ~Q(area=""),
                "Name the zone or the area.",
            )
        ]

    def __str__(self) -> str:
        return f"{self.level} {self.inspected_on}"
