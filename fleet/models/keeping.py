"""How the records are kept: copies made of them, and forms that were sent once."""

from __future__ import annotations

from django.db import models
from django.db.models import Q

from fleet.constraints import check
from fleet.fields import Count, Word, text
from fleet.models.columns import Entered
from fleet.models.people import User


class Backup(Entered):
    """A copy of the records that was made, or one that was restored and verified.

    Append-only. `sequence` is the history entry that the copy reaches to.
    """

    kind = Word(words=("made", "restored"))
    made_at = models.DateTimeField()
    place = models.TextField(help_text="Where the copy was written.")
    byte_count = Count(low=1, high=2**50)
    digest = models.TextField(help_text="SHA-256 of the copy's list of contents.")
    sequence = Count(low=0, high=2**62)
    problems = text(help_text="What the check after restoring found; empty: nothing.")
    append_only = True

    class Meta:
        ordering = ["made_at", "pk"]

    def __str__(self) -> str:
        return f"{self.kind} {self.made_at:%Y-%m-%d %H:%M}"


class SentForm(models.Model):
    """A form that was sent: the same one sent again does nothing. Not recorded in the
    history, whose entry it points to; kept so that a second sending is recognised."""

    key = models.UUIDField(unique=True)
    user = models.ForeignKey(User, on_delete=models.PROTECT, related_name="+")
    sent_at = models.DateTimeField()
    path = models.TextField()
    content = models.TextField(help_text="Keyed digest of what was typed.")
    entry = models.ForeignKey(
        "fleet.HistoryEntry",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="+",
    )
    answer = text(help_text="Address that the first sending led to.")

    class Meta:
        ordering = ["sent_at", "pk"]
        constraints = [
            check("fleet_sentform", "has_path", ~Q(path=""), "A form has an address.")
        ]

    def __str__(self) -> str:
        return self.path
