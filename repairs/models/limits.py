"""The operator's own allowable-damage limits, and the checks made against them."""

from __future__ import annotations

from django.db import models
from django.db.models import F, Q

from fleet.constraints import check, exactly_one, has_text, unique
from fleet.fields import Count, Measure, Word, text
from fleet.models import (
    AircraftType,
    Document,
    KeyedState,
    LifeLimit,
    Operator,
    Section,
    User,
)
from fleet.models.columns import Entered
from fleet.scoping import ScopedQuerySet
from repairs.models.findings import DamageType, Finding, Measurement


class RecordedLimit(Entered):
    """One paragraph of an approved document that allows damage of a kind somewhere."""

    operator = models.ForeignKey(
        Operator, on_delete=models.PROTECT, related_name="recorded_limits"
    )
    document = models.ForeignKey(Document, on_delete=models.PROTECT, related_name="+")
    paragraph = text()
    aircraft_type = models.ForeignKey(
        AircraftType, on_delete=models.PROTECT, related_name="recorded_limits"
    )
    section = models.ForeignKey(
        Section,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="+",
        help_text="Empty: any section.",
    )
    panel_label = text(help_text="Empty: any panel.")
    damage_type = Word(choices=DamageType)
    state = Word(choices=KeyedState)
    effective_from = models.DateField()
    replaces = models.OneToOneField(
        "self",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="replaced_by",
    )
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("operator",)

    class Meta:
        ordering = ["document", "paragraph", "pk"]
        indexes = [
            models.Index(
                fields=["operator", "aircraft_type", "damage_type"],
                name="repairs_limit_in_force",
                condition=Q(state="in_force"),
            )
        ]

    def __str__(self) -> str:
        return self.paragraph


class LimitRule(models.Model):
    """One comparison of a recorded limit."""

    limit = models.ForeignKey(
        RecordedLimit, on_delete=models.PROTECT, related_name="rules"
    )
    number = Count(low=1, high=99)
    quantity = models.TextField()
    comparison = Word(words=("at_most", "at_least", "less_than", "more_than"))
    value = Measure(low=-1e6, high=1e6)
    entered = models.TextField()
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("limit__operator",)

    class Meta:
        ordering = ["limit", "number"]
        constraints = [unique("repairs_limitrule", "once", "limit", "number")]

    def __str__(self) -> str:
        return f"{self.quantity} {self.comparison} {self.entered}"


class LimitCheck(models.Model):
    """A finding compared with a recorded limit, both numbers kept. Append-only."""

    finding = models.ForeignKey(
        Finding, on_delete=models.PROTECT, related_name="limit_checks"
    )
    measurement = models.ForeignKey(
        Measurement, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    limit = models.ForeignKey(
        RecordedLimit,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="checks",
        help_text="Empty: none recorded for it.",
    )
    outcome = Word(words=("within", "beyond", "not_covered", "missing_input"))
    checked_at = models.DateTimeField()
    lines = models.TextField(help_text="Each rule with both numbers, canonical JSON.")
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("finding__aircraft__operator", "finding__operator")
    append_only = True

    class Meta:
        ordering = ["finding", "checked_at", "pk"]

    def __str__(self) -> str:
        return self.outcome


class BlindReentry(models.Model):
    """A value keyed again by another person who did not see the first. Append-only."""

    recorded_limit = models.ForeignKey(
        RecordedLimit, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    requirement = models.ForeignKey(
        "repairs.InspectionRequirement",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="reentries",
    )
    life_limit = models.ForeignKey(
        LifeLimit,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="reentries",
    )
    operator = models.ForeignKey(Operator, on_delete=models.PROTECT, related_name="+")
    first_keyed_by = models.ForeignKey(
        User, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    keyed_by = models.ForeignKey(
        User, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    keyed_at = models.DateTimeField()
    content = models.TextField(help_text="Canonical text of what was keyed.")
    first_digest = models.TextField()
    content_digest = models.TextField()
    agrees = models.BooleanField()
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("operator",)
    append_only = True

    class Meta:
        ordering = ["keyed_at", "pk"]
        verbose_name_plural = "blind re-entries"
        constraints = [
            exactly_one(
                "repairs_blindreentry",
                "one_subject",
                "recorded_limit",
                "requirement",
                "life_limit",
            ),
            check(
                "repairs_blindreentry",
                "other_person",
                Q(first_keyed_by__isnull=True) | ~Q(keyed_by=F("first_keyed_by")),
                "The value is keyed again by someone else.",
            ),
            check(
                "repairs_blindreentry",
                "agrees_iff_equal",
                Q(agrees=True, first_digest=F("content_digest"))
                | (Q(agrees=False) & ~Q(first_digest=F("content_digest"))),
                "It agrees when both were keyed alike, and only then.",
            ),
            has_text("repairs_blindreentry", "content"),
        ]

    def __str__(self) -> str:
        return "agrees" if self.agrees else "differs"
