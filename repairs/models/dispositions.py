"""The signed answer to findings. Append-only: a change of mind is a new row."""

from __future__ import annotations

from django.db import models
from django.db.models import Q

from fleet.constraints import check, exactly_one, has_text, unique
from fleet.fields import Count, Measure, Word, optional_counter, text
from fleet.models import Aircraft, Authorisation, Document, Operator, Person
from fleet.models.columns import AtCounters, Entered
from fleet.scoping import ScopedQuerySet
from repairs.models.columns import RepairCategory
from repairs.models.findings import Finding
from repairs.models.substantiations import Substantiation


class DispositionKind(models.TextChoices):
    ACCEPT = "accept", "accept as is"
    ACCEPT_WITH_INSPECTION = "accept_with_inspection", "accept with inspection"
    DEFER = "defer", "defer"
    RECTIFY = "rectify", "rectify before further flight"
    REPLACE = "replace", "replace"
    NOT_DAMAGE = "not_damage", "not damage"


HOLDER_DOCUMENTS = (Document.Kind.LETTER, Document.Kind.DESIGN_APPROVAL)
IN_LIMITS = (Document.Kind.REPAIR_MANUAL, Document.Kind.MAINTENANCE_DATA)
"""A page of these is the in-limits reference."""


class Disposition(AtCounters, Entered):
    """One decision on one or more findings, with its basis and its maker."""

    operator = models.ForeignKey(
        Operator, on_delete=models.PROTECT, related_name="dispositions"
    )
    aircraft = models.ForeignKey(
        Aircraft, on_delete=models.PROTECT, related_name="dispositions"
    )
    number = models.TextField()
    revision = Count(low=0, high=9_999, default=0)
    replaces = models.OneToOneField(
        "self",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="replaced_by",
    )
    kind = Word(choices=DispositionKind)
    scale = Word(words=("minor", "major", "undecided"), default="undecided")
    scale_reason = text()
    category = Word(choices=RepairCategory, blank=True, default="")
    found_on = models.DateField(help_text="Original date, kept through every revision.")
    basis_document = models.ForeignKey(
        Document, on_delete=models.PROTECT, related_name="dispositions"
    )
    basis_page = models.TextField(help_text="Page or paragraph of the basis.")
    reason = models.TextField()
    substantiation = models.ForeignKey(
        Substantiation,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="dispositions",
    )
    crew_informed_on = models.DateField(
        null=True, blank=True, help_text="Deferral: the crew was told."
    )
    decided_by = models.ForeignKey(Person, on_delete=models.PROTECT, related_name="+")
    authorisation = models.ForeignKey(
        Authorisation, on_delete=models.PROTECT, related_name="+"
    )
    decided_on = models.DateField()
    limit_minutes = optional_counter(help_text="Deferral limit, aircraft counters.")
    limit_cycles = optional_counter()
    limit_landings = optional_counter()
    limit_on = models.DateField(null=True, blank=True)
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("aircraft__operator", "operator")
    append_only = True

    class Meta:
        ordering = ["-decided_on", "-pk"]
        constraints = [
            unique(
                "repairs_disposition", "one_number", "operator", "number", "revision"
            ),
            has_text("repairs_disposition", "basis_page"),
            has_text("repairs_disposition", "reason"),
            check(
                "repairs_disposition",
                "deferral_has_limit",
                ~Q(kind="defer")
                | Q(limit_minutes__isnull=False)
                | Q(limit_cycles__isnull=False)
                | Q(limit_landings__isnull=False)
                | Q(limit_on__isnull=False),
                "A deferral has a limit in flight hours, cycles, landings or a date.",
            ),
        ]

    def __str__(self) -> str:
        return self.number

    @property
    def revised(self) -> str:
        """Its number with the revision, as "D-0644 rev 1"."""
        return f"{self.number} rev {self.revision}" if self.revision else self.number


class DispositionFinding(models.Model):
    """A finding that a disposition answers. Append-only."""

    disposition = models.ForeignKey(
        Disposition, on_delete=models.PROTECT, related_name="finding_rows"
    )
    finding = models.ForeignKey(
        Finding, on_delete=models.PROTECT, related_name="disposition_rows"
    )
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("disposition__aircraft__operator", "disposition__operator")
    append_only = True

    class Meta:
        ordering = ["disposition", "finding"]
        constraints = [
            unique("repairs_dispositionfinding", "once", "disposition", "finding")
        ]

    def __str__(self) -> str:
        return "answered"


class DispositionBasis(models.Model):
    """An evaluation or a limits check that a disposition relied on. Append-only."""

    disposition = models.ForeignKey(
        Disposition, on_delete=models.PROTECT, related_name="basis_rows"
    )
    evaluation = models.ForeignKey(
        "repairs.Evaluation",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="disposition_rows",
    )
    limit_check = models.ForeignKey(
        "repairs.LimitCheck",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="disposition_rows",
    )
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("disposition__aircraft__operator", "disposition__operator")
    append_only = True

    class Meta:
        ordering = ["disposition", "pk"]
        constraints = [
            exactly_one(
                "repairs_dispositionbasis", "one_basis", "evaluation", "limit_check"
            )
        ]

    def __str__(self) -> str:
        return "basis"


class NeighbourReview(models.Model):
    """A neighbour looked at before the decision, with the answer. Append-only."""

    disposition = models.ForeignKey(
        Disposition, on_delete=models.PROTECT, related_name="neighbour_reviews"
    )
    finding = models.ForeignKey(
        Finding, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    repair = models.ForeignKey(
        "repairs.Repair",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="+",
    )
    gap_mm = Measure(low=0, high=200_000)
    interacts = models.BooleanField()
    reason = models.TextField()
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("disposition__aircraft__operator", "disposition__operator")
    append_only = True

    class Meta:
        ordering = ["disposition", "pk"]
        constraints = [
            exactly_one("repairs_neighbourreview", "one_neighbour", "finding", "repair")
        ]

    def __str__(self) -> str:
        return "interacts" if self.interacts else "does not interact"
