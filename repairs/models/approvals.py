"""Signatures bound to what was signed, photographs, and reports to authorities."""

from __future__ import annotations

from django.db import models
from django.db.models import Q

from fleet.constraints import check, exactly_one, has_text, unique
from fleet.fields import Count, Word, text
from fleet.models import Attachment, Authorisation, Operator, Person, SafeLifePart, User
from fleet.models.columns import Entered
from fleet.scoping import ScopedQuerySet
from repairs.models.dispositions import Disposition
from repairs.models.evaluations import Evaluation
from repairs.models.events import Event
from repairs.models.findings import Finding, Measurement
from repairs.models.inspections import Accomplishment, InspectionRequirement
from repairs.models.repairs import Repair
from repairs.models.substantiations import Substantiation


class Meaning(models.TextChoices):
    PREPARED = "prepared", "prepared"
    CHECKED = "checked", "checked"
    APPROVED = "approved", "approved"
    STAGE_1 = "stage_1", "approved, stage 1"
    STAGE_2 = "stage_2", "approved, stage 2"
    STAGE_3 = "stage_3", "approved, stage 3"
    PERFORMED = "performed", "performed"
    INSPECTED = "inspected", "inspected"
    RELEASED = "released", "released"
    DEFERRED = "deferred", "deferred"
    REJECTED = "rejected", "rejected"


APPROVING = (Meaning.APPROVED, Meaning.STAGE_1, Meaning.STAGE_2, Meaning.STAGE_3)


class Approval(Entered):
    """A named person's signature under the exact content shown. Append-only."""

    operator = models.ForeignKey(Operator, on_delete=models.PROTECT, related_name="+")
    disposition = models.ForeignKey(
        Disposition,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="approvals",
    )
    repair = models.ForeignKey(
        Repair,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="approvals",
    )
    evaluation = models.ForeignKey(
        Evaluation,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="approvals",
    )
    requirement = models.ForeignKey(
        InspectionRequirement,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="approvals",
    )
    accomplishment = models.ForeignKey(
        Accomplishment,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="approvals",
    )
    finding = models.ForeignKey(
        Finding,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="approvals",
    )
    event = models.ForeignKey(
        Event, on_delete=models.PROTECT, null=True, blank=True, related_name="approvals"
    )
    substantiation = models.ForeignKey(
        Substantiation,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="approvals",
    )
    overrules = models.OneToOneField(
        "self",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="overruled_by",
        help_text="The rejection that this one overrules.",
    )
    meaning = Word(choices=Meaning)
    statement = models.TextField()
    content = models.TextField(help_text="The exact canonical text that was shown.")
    content_digest = models.TextField()
    signer = models.ForeignKey(
        User, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    signer_person = models.ForeignKey(
        Person, on_delete=models.PROTECT, related_name="+"
    )
    signer_name = models.TextField()
    authorisation = models.ForeignKey(
        Authorisation, on_delete=models.PROTECT, related_name="+"
    )
    authorisation_number = models.TextField()
    second_factor = models.BooleanField(default=False)
    signed_at = models.DateTimeField()
    document_kind = text()
    document_number = text()
    document_issuer = text()
    document_revision = text()
    document_date = models.DateField(null=True, blank=True)
    attachment = models.ForeignKey(
        Attachment, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("operator",)
    append_only = True

    class Meta:
        ordering = ["signed_at", "pk"]
        constraints = [
            exactly_one(
                "repairs_approval",
                "one_subject",
                "disposition",
                "repair",
                "evaluation",
                "requirement",
                "accomplishment",
                "finding",
                "event",
                "substantiation",
            ),
            has_text("repairs_approval", "content"),
            *(
                unique(
                    "repairs_approval",
                    f"once_per_{field}",
                    field,
                    "meaning",
                    "signer_person",
                    when=Q(**{f"{field}__isnull": False}),
                )
                for field in (
                    "disposition",
                    "repair",
                    "evaluation",
                    "requirement",
                    "substantiation",
                )
            ),
        ]

    def __str__(self) -> str:
        return f"{self.meaning} by {self.signer_name}"


class Photograph(models.Model):
    """What a photograph shows, and of which record."""

    attachment = models.ForeignKey(
        Attachment, on_delete=models.PROTECT, related_name="photographs"
    )
    finding = models.ForeignKey(
        Finding,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="photographs",
    )
    measurement = models.ForeignKey(
        Measurement,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="photographs",
    )
    repair = models.ForeignKey(
        Repair,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="photographs",
    )
    event = models.ForeignKey(
        Event,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="photographs",
    )
    accomplishment = models.ForeignKey(
        Accomplishment,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="photographs",
    )
    disposition = models.ForeignKey(
        Disposition,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="photographs",
    )
    safe_life_part = models.ForeignKey(
        SafeLifePart,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="photographs",
    )
    role = Word(
        words=("wide", "close", "scale", "before_covering", "sketch", "evidence")
    )
    caption = text()
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("attachment__operator",)

    class Meta:
        ordering = ["pk"]
        constraints = [
            exactly_one(
                "repairs_photograph",
                "one_subject",
                "finding",
                "measurement",
                "repair",
                "event",
                "accomplishment",
                "disposition",
                "safe_life_part",
            )
        ]

    def __str__(self) -> str:
        return self.caption or self.role


class OccurrenceReport(Entered):
    """The answer to "is this reportable?" under one regime, and what was sent."""

    operator = models.ForeignKey(Operator, on_delete=models.PROTECT, related_name="+")
    finding = models.ForeignKey(
        Finding, on_delete=models.PROTECT, null=True, blank=True, related_name="reports"
    )
    event = models.ForeignKey(
        Event, on_delete=models.PROTECT, null=True, blank=True, related_name="reports"
    )
    regime = models.TextField()
    rule = text(help_text="The paragraph that asks for the report.")
    policy = models.ForeignKey(
        "fleet.Policy",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="+",
        help_text="The clock that was used; empty: none is recorded.",
    )
    content = text(help_text="The report's text, as it was sent.")
    recipients = text(help_text="Authority, design approval holder, owner.")
    decided_by = models.ForeignKey(
        Person, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    state = Word(words=("to_assess", "not_reportable", "reportable", "sent", "closed"))
    reason = text()
    detected_at = models.DateTimeField()
    due_at = models.DateTimeField(null=True, blank=True)
    sent_at = models.DateTimeField(null=True, blank=True)
    sent_reference = text()
    supplements = models.ForeignKey(
        "self",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="supplemented",
    )
    number = Count(low=1, high=9_999, default=1)
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("operator",)

    class Meta:
        ordering = ["detected_at", "pk"]
        constraints = [
            exactly_one("repairs_occurrencereport", "one_subject", "finding", "event"),
            unique(
                "repairs_occurrencereport",
                "one_per_finding",
                "finding",
                "regime",
                "number",
                when=Q(finding__isnull=False),
            ),
            unique(
                "repairs_occurrencereport",
                "one_per_event",
                "event",
                "regime",
                "number",
                when=Q(event__isnull=False),
            ),
            check(
                "repairs_occurrencereport",
                "sent_whole",
                ~Q(state__in=("sent", "closed"))
                | (Q(sent_at__isnull=False) & ~Q(sent_reference=""))
                | Q(state="closed", reason__gt=""),
                "A sent report has its time and reference.",
            ),
            check(
                "repairs_occurrencereport",
                "no_has_reason",
                ~Q(state="not_reportable") | ~Q(reason=""),
                "Say why it is not reportable.",
            ),
        ]

    def __str__(self) -> str:
        return f"{self.regime}: {self.state}"
