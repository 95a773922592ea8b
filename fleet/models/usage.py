"""What each aircraft flew. Totals are always summed from these rows."""

from __future__ import annotations

from django.db import models
from django.db.models import F, Q

from fleet.constraints import check, has_text, unique
from fleet.fields import Count, Word
from fleet.models.aircraft import Aircraft
from fleet.models.columns import Entered
from fleet.scoping import ScopedQuerySet


class UsageRecord(Entered):
    """One day, or one flight, of an aircraft; append-only, corrected by a new row.

    No row is unknown, not zero: a day without a flight is a row of zeros.
    """

    aircraft = models.ForeignKey(
        Aircraft, on_delete=models.PROTECT, related_name="usage"
    )
    day = models.DateField()
    grain = Word(words=("day", "flight"))
    flight_number = Count(low=0, high=99, default=0)
    revision = Count(low=0, high=999, default=0)
    replaces = models.OneToOneField(
        "self",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="replaced_by",
    )
    minutes = Count(
        low=0, high=1_500, null=True, blank=True, help_text="Empty: unknown."
    )
    cycles = Count(low=0, high=60)
    landings = Count(low=0, high=200)
    pressurisations = Count(
        low=0, high=60, null=True, blank=True, help_text="Empty: not recorded."
    )
    cycles_without_minutes = Count(
        low=0, high=60, default=0, help_text="Flown, hours unknown."
    )
    source = models.TextField()
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("aircraft__operator",)
    append_only = True

    class Meta:
        ordering = ["aircraft", "day", "flight_number", "revision"]
        constraints = [
            unique(
                "fleet_usagerecord",
                "once",
                "aircraft",
                "day",
                "flight_number",
                "revision",
            ),
            check(
                "fleet_usagerecord",
                "flight_number_by_grain",
                Q(grain="day", flight_number=0)
                | Q(grain="flight", flight_number__gte=1),
                "A day has flight number 0, a flight 1 to 99.",
            ),
            check(
                "fleet_usagerecord",
                "missing_hours_bounded",
                Q(cycles_without_minutes__lte=F("cycles")),
                "More flights without hours than flights.",
            ),
            check(
                "fleet_usagerecord",
                "unknown_hours_counted",
                Q(minutes__isnull=False) | Q(cycles_without_minutes=F("cycles")),
                "Hours are unknown, so every flight of the row is without hours.",
            ),
            check(
                "fleet_usagerecord",
                "revision_points_back",
                Q(revision=0, replaces__isnull=True)
                | Q(revision__gt=0, replaces__isnull=False),
                "A correction names the row it corrects.",
            ),
            has_text("fleet_usagerecord", "source"),
        ]
        indexes = [
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
        ]

    def __str__(self) -> str:
        return f"{self.day}: {self.cycles} FC"
