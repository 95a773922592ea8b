"""Who changed what, when, from what to what, and why: chained, append-only.

Two chains run under one lock. The global one proves the whole; the one of a stream
(an aircraft, or the fleet) lets one aircraft's file be verified alone.
"""

from __future__ import annotations

from django.conf import settings
from django.db import models
from django.db.models import Q

from fleet.constraints import check, unique
from fleet.fields import Count, Word, text
from fleet.models.people import Operator
from fleet.scoping import ScopedQuerySet

DONE = {
    "add": "added", "adopt": "adopted", "answer": "answered", "assess": "assessed",
    "cancel": "cancelled", "change": "changed", "close": "closed",
    "compare": "compared", "confirm": "confirmed", "correct": "corrected",
    "create": "created",
    "decide": "decided", "determine": "determined", "do": "done",
    "draft": "drafted", "edit": "edited", "find": "looked for",
    "embody": "embodied", "end": "ended",
    "grant": "granted", "import": "imported", "inspect": "inspected",
    "install": "installed", "key": "keyed",
    "leave": "left", "link": "linked", "load": "loaded", "make": "made",
    "match": "matched", "open": "opened", "plan": "planned",
    "publish": "published", "raise": "raised", "reclassify": "reclassified",
    "record": "recorded",
    "rekey": "keyed again", "relocate": "located anew", "remove": "removed",
    "renew": "renewed", "reset": "reset",
    "restore": "restored", "send": "sent", "set": "set", "sign": "signed",
    "start": "begun", "state": "stated",
    "review": "reviewed", "revise": "revised", "withdraw": "withdrawn",
    "supplement": "supplemented", "void": "voided",
}  # fmt: skip
"""Last word of a service's name to what it did."""


def action_words(action: str) -> str:
    """finding_record -> finding recorded."""
    *what, verb = action.split("_")
    return " ".join([*what, DONE.get(verb, verb)])


class HistoryHead(models.Model):
    """The end of the chain, and the lock that orders writers; one row."""

    sequence = Count(low=0, high=2**62, default=0)
    digest = text()

    class Meta:
        constraints = [
            check("fleet_historyhead", "single", Q(id=1), "There is one head only.")
        ]

    def __str__(self) -> str:
        return f"entry {self.sequence}"


class HistoryEntry(models.Model):
    """One call of one service."""

    sequence = models.BigIntegerField(primary_key=True)
    previous_digest = models.TextField(unique=True)
    digest = models.TextField(unique=True)
    stream = models.TextField()
    stream_sequence = Count(low=1, high=2**62)
    stream_previous_digest = text()
    operator = models.ForeignKey(
        Operator, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    actor = models.ForeignKey(
        settings.AUTH_USER_MODEL,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="+",
        help_text="Empty: the program.",
    )
    actor_name = models.TextField()
    at = models.DateTimeField()
    action = models.TextField()
    reason = text()
    origin = text()
    items_digest = models.TextField()
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("operator",)
    append_only = True

    class Meta:
        ordering = ["sequence"]
        verbose_name_plural = "history entries"
        constraints = [
            unique("fleet_historyentry", "one_in_stream", "stream", "stream_sequence")
        ]

    def __str__(self) -> str:
        return f"{self.sequence} {self.action}"

    @property
    def action_words(self) -> str:
        return action_words(self.action)


class HistoryItem(models.Model):
    """One row, or one unbroken run of new rows, that an entry wrote."""

    entry = models.ForeignKey(
        HistoryEntry, on_delete=models.PROTECT, related_name="items"
    )
    number = Count(low=1, high=1_000_000)
    kind = Word(words=("created", "changed", "created_range"))
    table = models.TextField()
    first_pk = models.BigIntegerField()
    last_pk = models.BigIntegerField()
    row_digest = models.TextField()
    changes = models.TextField(help_text="{column: [from, to]} as canonical text.")
    append_only = True

    class Meta:
        ordering = ["entry", "number"]
        constraints = [unique("fleet_historyitem", "once", "entry", "number")]
        indexes = [
            models.Index(
                fields=["table", "first_pk", "entry"], name="fleet_history_of_row"
            )
        ]

    def __str__(self) -> str:
        return f"{self.kind} {self.table} {self.first_pk}"


class HistorySeal(models.Model):
    """A head that was printed, mailed or signed outside this database."""

    sequence = Count(low=1, high=2**62)
    digest = models.TextField()
    sealed_at = models.DateTimeField()
    where_published = models.TextField()
    signature = text()
    append_only = True

    class Meta:
        ordering = ["sequence", "pk"]

    def __str__(self) -> str:
        return f"seal of entry {self.sequence}"
