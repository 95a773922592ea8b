"""Evaluations made again in bulk: what was asked, what has been done, what moved."""

from __future__ import annotations

from django.db import models
from django.db.models import Q

from fleet.constraints import check, unique
from fleet.fields import Count, text
from fleet.models import Aircraft, Operator
from fleet.models.columns import Entered
from fleet.scoping import ScopedQuerySet
from repairs.models.evaluations import Evaluation


class Recalculation(Entered):
    """One run over an operator's current evaluations, or over the stale ones only."""

    operator = models.ForeignKey(
        Operator, on_delete=models.PROTECT, related_name="recalculations"
    )
    stale_only = models.BooleanField()
    as_of = models.DateField()
    last_evaluation = Count(
        low=0, high=2**62, help_text="Evaluations up to this key are wanted."
    )
    wanted_count = Count(low=0, high=10**9)
    finished_at = models.DateTimeField(null=True, blank=True)
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("operator",)
    changeable = frozenset({"finished_at"})

    class Meta:
        ordering = ["-entered_at", "-pk"]
        constraints = [
            unique(
                "repairs_recalculation",
                "one_at_a_time",
                "operator",
                when=Q(finished_at__isnull=True),
            )
        ]

    def __str__(self) -> str:
        return f"recalculation of {self.entered_at:%Y-%m-%d %H:%M}"


class RecalculationPart(models.Model):
    """One aircraft's share of a run, and which worker holds it until when.

    Not recorded in the history: a worker that dies loses its hold, and another goes on
    where the items end.
    """

    run = models.ForeignKey(
        Recalculation, on_delete=models.PROTECT, related_name="parts"
    )
    aircraft = models.ForeignKey(Aircraft, on_delete=models.PROTECT, related_name="+")
    holder = text()
    held_until = models.DateTimeField(null=True, blank=True)
    done = models.BooleanField(default=False)
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("run__operator",)

    class Meta:
        ordering = ["run", "pk"]
        constraints = [unique("repairs_recalculationpart", "once", "run", "aircraft")]

    def __str__(self) -> str:
        return f"{self.run}, {self.aircraft}"


class RecalculationItem(models.Model):
    """One evaluation made again, found the same, or why neither. Append-only."""

    run = models.ForeignKey(
        Recalculation, on_delete=models.PROTECT, related_name="items"
    )
    before = models.ForeignKey(Evaluation, on_delete=models.PROTECT, related_name="+")
    after = models.OneToOneField(
        Evaluation,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="recalculated",
    )
    unchanged = models.BooleanField(
        default=False, help_text="Made again it gives the very same; none was kept."
    )
    error = text(help_text="Why it could not be made again.")
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("run__operator",)
    append_only = True

    class Meta:
        ordering = ["run", "pk"]
        constraints = [
            unique("repairs_recalculationitem", "once", "run", "before"),
            check(
                "repairs_recalculationitem",
                "made_or_not",
                Q(after__isnull=False, unchanged=False, error="")
                | Q(after__isnull=True, unchanged=True, error="")
                | Q(after__isnull=True, unchanged=False) & ~Q(error=""),
                "An evaluation was made again, or the item says why not.",
            ),
        ]

    def __str__(self) -> str:
        return f"{self.before} → {self.after or self.error or 'the same'}"
