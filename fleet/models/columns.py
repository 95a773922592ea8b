"""Groups of columns that several tables share."""

from __future__ import annotations

from django.conf import settings
from django.db import models

from fleet.fields import optional_counter


class Entered(models.Model):
    """Who typed the row in, and when; the effective date is the row's own column."""

    entered_by = models.ForeignKey(
        settings.AUTH_USER_MODEL,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="+",
        help_text="Empty when the program entered it.",
    )
    entered_at = models.DateTimeField()

    class Meta:
        abstract = True


class AtCounters(models.Model):
    """The counters at an event, as a recorded fact; empty means not stated."""

    at_minutes = optional_counter(help_text="Flight time in minutes.")
    at_cycles = optional_counter(help_text="Flight cycles.")
    at_landings = optional_counter(help_text="Landings.")
    at_pressurisations = optional_counter(help_text="Pressurisation cycles.")

    class Meta:
        abstract = True
