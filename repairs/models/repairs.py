"""Repairs: what was done to the structure, with which data, and what it covers."""

from __future__ import annotations

from django.db import models
from django.db.models import F, Q

from fleet.constraints import all_or_none, check, has_text, unique
from fleet.fields import Count, Word, optional_counter, optional_measure, text
from fleet.models import (
    Aircraft,
    Document,
    Material,
    Operator,
    Organisation,
    Person,
    SafeLifePart,
)
from fleet.models.columns import AtCounters, Entered
from fleet.scoping import ScopedQuerySet
from repairs.models.columns import (
    Place,
    RepairCategory,
    StructuralItem,
    place_constraints,
)
from repairs.models.dispositions import Disposition
from repairs.models.findings import Finding
from repairs.models.substantiations import Substantiation


class RepairType(models.TextChoices):
    BLEND = "blend", "blend-out"
    EXTERNAL_DOUBLER = "external_doubler", "external doubler"
    INTERNAL_DOUBLER = "internal_doubler", "internal doubler"
    FLUSH = "flush", "flush insert"
    SPLICE = "splice", "splice"
    BONDED = "bonded", "bonded patch"
    OVERSIZE_FASTENER = "oversize_fastener", "oversize fastener"
    REPLACEMENT = "replacement", "replacement"
    STOP_DRILL = "stop_drill", "stop-drilled crack"
    OTHER = "other", "other"


class RepairState(models.TextChoices):
    PLANNED = "planned", "planned"
    IN_WORK = "in_work", "in work"
    EMBODIED = "embodied", "embodied"
    REMOVED = "removed", "removed"
    SUPERSEDED = "superseded", "superseded"
    CANCELLED = "cancelled", "cancelled"


class ApprovalBasis(models.TextChoices):
    REPAIR_MANUAL = "repair_manual", "repair manual"
    LETTER = "letter", "design approval holder's letter"
    DESIGN_APPROVAL = "design_approval", "design organisation approval"
    UNKNOWN = "unknown", "unknown"


class Repair(Place, StructuralItem, AtCounters, Entered):
    """The embodied answer to findings; date and counters are those at release."""

    operator = models.ForeignKey(
        Operator, on_delete=models.PROTECT, related_name="repairs"
    )
    aircraft = models.ForeignKey(
        Aircraft, on_delete=models.PROTECT, related_name="repairs"
    )
    safe_life_part = models.ForeignKey(
        SafeLifePart,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="repairs",
    )
    number = models.TextField()
    chart_number = text(help_text="Number on the damage and repair chart.")
    kind = Word(choices=RepairType)
    state = Word(choices=RepairState)
    description = models.TextField()
    length_mm = optional_measure(0.01, 100_000, help_text="Along the section.")
    width_mm = optional_measure(0.01, 100_000, help_text="Across the section.")
    category = Word(choices=RepairCategory)
    category_reason = text()
    disposition = models.ForeignKey(
        Disposition,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="repairs",
    )
    substantiation = models.ForeignKey(
        Substantiation,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="repairs",
        help_text="The revision that was used.",
    )
    inspection_required = models.BooleanField(
        null=True, blank=True, help_text="Independent inspection; empty: not said."
    )
    approval_basis = Word(choices=ApprovalBasis)
    approval_document = models.ForeignKey(
        Document, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    approval_page = text()
    release_document = models.ForeignKey(
        Document, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    released_on = models.DateField(
        null=True, blank=True, help_text="Empty: not released."
    )
    organisation = models.ForeignKey(
        Organisation, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    performed_by = models.ForeignKey(
        Person, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    inspected_by = models.ForeignKey(
        Person, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    released_by = models.ForeignKey(
        Person, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    legacy = models.BooleanField(default=False, help_text="From before our records.")
    evidence = Word(
        words=("seen", "not_seen", "not_applicable"), default="not_applicable"
    )
    weight_change_g = Count(low=-(10**7), high=10**7, null=True, blank=True)
    arm_mm = optional_measure(-200_000, 200_000)
    remaining_thickness_mm = optional_measure(0.01, 500, help_text="Blends: minimum.")
    blend_depth_mm = optional_measure(0, 500)
    replacement_limit_cycles = optional_counter(
        help_text="Category C, aircraft counter."
    )
    replacement_limit_minutes = optional_counter()
    replacement_limit_on = models.DateField(null=True, blank=True)
    stage_reached = Word(
        words=("none", "1", "2", "3", "not_applicable"), default="not_applicable"
    )
    temporary_limit_cycles = optional_counter(
        help_text="Approved at stage 1; stage 2 is due before it."
    )
    superseded_by = models.ForeignKey(
        "self",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="supersedes",
        help_text="A larger repair may supersede several.",
    )
    removed_on = models.DateField(null=True, blank=True)
    removal_reason = text()
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("aircraft__operator", "operator")

    class Meta:
        ordering = ["-released_on", "-pk"]
        constraints = [
            *place_constraints("repairs_repair"),
            unique("repairs_repair", "one_number", "operator", "number"),
            has_text("repairs_repair", "number"),
            check(
                "repairs_repair",
                "embodied_whole",
                ~Q(state__in=("embodied", "removed", "superseded"))
                | Q(released_on__isnull=False)
                & (
                    Q(legacy=True)
                    | Q(at_cycles__isnull=False, at_minutes__isnull=False)
                ),
                "An embodied repair has its release date and counters.",
            ),
            check(
                "repairs_repair",
                "approved_data",
                ~Q(state__in=("embodied", "removed", "superseded"))
                | Q(legacy=True)
                | Q(approval_document__isnull=False),
                "An embodied repair names its approval data.",
            ),
            check(
                "repairs_repair",
                "two_people",
                Q(inspected_by__isnull=True) | ~Q(inspected_by=F("performed_by")),
                "Inspected by someone other than who performed it.",
            ),
            check(
                "repairs_repair",
                "reason_given",
                ~Q(category="not_applicable") | ~Q(category_reason=""),
                "Say why no category applies.",
            ),
        ]
        indexes = [
            models.Index(
                fields=["aircraft", "section", "x1_mm"], name="repairs_repair_near"
            ),
            models.Index(
                fields=["aircraft", "section", "x2_mm"],
                name="repairs_repair_long",
                condition=Q(x2_mm__gt=F("x1_mm") + 500.0),
            ),
            models.Index(
                fields=["section", "along_half", "around_half", "aircraft"],
                name="repairs_repair_cell",
            ),
        ]

    def __str__(self) -> str:
        return self.number


class RepairFinding(models.Model):
    """A finding the repair answers or covers, and whether the damage is gone."""

    repair = models.ForeignKey(
        Repair, on_delete=models.PROTECT, related_name="finding_rows"
    )
    finding = models.ForeignKey(
        Finding, on_delete=models.PROTECT, related_name="repair_rows"
    )
    covers = models.BooleanField(help_text="The repair hides it from sight.")
    damage_removed = Word(words=("yes", "no", "partly", "unknown"))
    edge_margin_mm = optional_measure(
        -10_000, 10_000, help_text="Damage edge to repair edge; empty: unknown."
    )
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("repair__aircraft__operator", "repair__operator")

    class Meta:
        ordering = ["repair", "finding"]
        constraints = [unique("repairs_repairfinding", "once", "repair", "finding")]

    def __str__(self) -> str:
        return f"removed: {self.damage_removed}"


class RepairLayer(models.Model):
    """One doubler, filler or insert."""

    repair = models.ForeignKey(Repair, on_delete=models.PROTECT, related_name="layers")
    number = Count(low=1, high=99)
    material = models.ForeignKey(
        Material, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    material_entered = models.TextField()
    thickness_mm = optional_measure(0.01, 500)
    thickness_entered = text()
    batch = text()
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("repair__aircraft__operator", "repair__operator")

    class Meta:
        ordering = ["repair", "number"]
        constraints = [unique("repairs_repairlayer", "once", "repair", "number")]

    def __str__(self) -> str:
        return self.material_entered


class RepairFastener(models.Model):
    """One kind of fastener used."""

    repair = models.ForeignKey(
        Repair, on_delete=models.PROTECT, related_name="fasteners"
    )
    number = Count(low=1, high=99)
    fastener = models.TextField()
    diameter_mm = optional_measure(0.1, 100)
    pitch_mm = optional_measure(0.1, 1_000)
    edge_distance_mm = optional_measure(0.1, 1_000)
    rows = Count(low=1, high=99, null=True, blank=True)
    count = Count(low=1, high=100_000, null=True, blank=True)
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("repair__aircraft__operator", "repair__operator")

    class Meta:
        ordering = ["repair", "number"]
        constraints = [unique("repairs_repairfastener", "once", "repair", "number")]

    def __str__(self) -> str:
        return self.fastener


class RepairRequired(models.Model):
    """What the approved data ask for in one layer, to hold against what was fitted."""

    repair = models.ForeignKey(
        Repair, on_delete=models.PROTECT, related_name="required"
    )
    number = Count(low=1, high=99, help_text="Of the layer it stands against.")
    material = models.ForeignKey(
        Material, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    material_entered = models.TextField()
    thickness_mm = optional_measure(0.01, 500)
    thickness_entered = text()
    page = text(help_text="Where the approved data say so.")
    difference = text(help_text="What differs from the layer fitted; empty: nothing.")
    answer = text(help_text="Why the difference stands, with its document.")
    answered_by = models.ForeignKey(
        Person, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("repair__aircraft__operator", "repair__operator")

    class Meta:
        ordering = ["repair", "number"]
        verbose_name_plural = "repair materials required"
        constraints = [
            unique("repairs_repairrequired", "once", "repair", "number"),
            check(
                "repairs_repairrequired",
                "answer_whole",
                Q(answer="", answered_by__isnull=True)
                | (~Q(answer="") & Q(answered_by__isnull=False)),
                "An answered difference has words and a person.",
            ),
        ]

    def __str__(self) -> str:
        return self.material_entered


class RepairStep(models.Model):
    """One part of a repair that is done in several, or at several times."""

    repair = models.ForeignKey(Repair, on_delete=models.PROTECT, related_name="steps")
    number = Count(low=1, high=99)
    title = models.TextField()
    option = text(help_text="Which of the data's options was chosen.")
    done_on = models.DateField(null=True, blank=True, help_text="Empty: not done.")
    done_by = models.ForeignKey(
        Person, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("repair__aircraft__operator", "repair__operator")

    class Meta:
        ordering = ["repair", "number"]
        constraints = [
            unique("repairs_repairstep", "once", "repair", "number"),
            all_or_none("repairs_repairstep", "done_whole", "done_on", "done_by"),
        ]

    def __str__(self) -> str:
        return self.title
