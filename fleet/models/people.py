"""Who keeps, judges, signs and may see the records."""

from __future__ import annotations

import datetime as dt

from django.contrib.auth.hashers import check_password
from django.contrib.auth.models import AbstractUser
from django.db import models
from django.db.models import Q
from django.utils.functional import cached_property

from fleet.constraints import check, has_text, not_before, unique
from fleet.fields import Count, Word, text
from fleet.models.columns import Entered
from fleet.scoping import ScopedQuerySet


class OrganisationKind(models.TextChoices):
    OPERATOR = "operator", "operator"
    CAMO = "camo", "continuing-airworthiness organisation"
    MAINTENANCE = "maintenance", "maintenance organisation"
    DESIGN = "design_approval_holder", "design approval holder"
    OWNER = "owner", "owner"
    AUTHORITY = "authority", "authority"


class Role(models.TextChoices):
    RECORDER = "recorder", "recorder"
    ENGINEER = "engineer", "structures engineer"
    CERTIFIER = "certifier", "certifying staff"
    SIGNATORY = "signatory", "authorised signatory"
    PLANNER = "planner", "maintenance planner"
    MANAGER = "manager", "manager"
    AUDITOR = "auditor", "auditor"
    ADMINISTRATOR = "administrator", "administrator"


class AuthorisationScope(models.TextChoices):
    CERTIFY = "certify", "certify release and decide deferrals"
    INSPECT = "inspect", "independent inspection"
    NDT = "ndt", "non-destructive testing"
    ASSESS = "assess", "assess structural damage"
    CHECK = "check", "check calculations"
    APPROVE = "approve", "approve design data"


class Organisation(models.Model):
    """A company or authority named in the records."""

    code = models.TextField(unique=True)
    name = models.TextField()
    kind = Word(choices=OrganisationKind)

    class Meta:
        ordering = ["name", "pk"]

    def __str__(self) -> str:
        return self.name


class Operator(models.Model):
    """An organisation that keeps its fleet's records here; each sees only its own."""

    organisation = models.OneToOneField(
        Organisation, on_delete=models.PROTECT, related_name="operator"
    )
    code = models.TextField(unique=True)
    name = models.TextField()
    regime = models.TextField(help_text="Rules it works under; the key of policy rows.")
    time_zone = models.TextField(default="UTC")
    programme_three_stages = models.BooleanField(
        default=False,
        help_text="Its programme adopts the three-stage approval of repairs.",
    )
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("pk",)

    class Meta:
        ordering = ["name", "pk"]

    def __str__(self) -> str:
        return self.name


class Person(models.Model):
    """Someone who finds, inspects, decides or signs; a login is not needed."""

    organisation = models.ForeignKey(
        Organisation, on_delete=models.PROTECT, related_name="people"
    )
    name = models.TextField()
    staff_number = text()

    class Meta:
        ordering = ["name", "pk"]

    def __str__(self) -> str:
        return self.name


class User(AbstractUser):
    """A login. What it may do follows from its memberships."""

    person = models.OneToOneField(
        Person, on_delete=models.PROTECT, null=True, blank=True, related_name="user"
    )
    sees_all_operators = models.BooleanField(default=False)
    second_factor_since = models.DateTimeField(
        null=True, blank=True, help_text="Empty: signs in with the password alone."
    )

    class Meta:
        ordering = ["username"]

    def __str__(self) -> str:
        return self.get_full_name() or self.username

    def check_password(self, raw_password: str | None) -> bool:
        """Only an answer: a hash of older parameters is renewed by a service, because
        what the framework would write here the history would not know."""
        return check_password(raw_password, self.password)

    @cached_property
    def open_memberships(self) -> list[Membership]:
        """Memberships in force, read once a request; causes a query."""
        rows = self.memberships.filter(ended_on__isnull=True)
        return list(rows.select_related("operator").order_by("operator__name", "pk"))

    def operator_ids(self) -> list[int]:
        return [row.operator_id for row in self.open_memberships]

    def roles_at(self, operator_id: int) -> set[str]:
        return {
            row.role for row in self.open_memberships if row.operator_id == operator_id
        }


class Membership(models.Model):
    """A user's role at an operator, from one day to another."""

    user = models.ForeignKey(User, on_delete=models.PROTECT, related_name="memberships")
    operator = models.ForeignKey(
        Operator, on_delete=models.PROTECT, related_name="memberships"
    )
    role = Word(choices=Role)
    began_on = models.DateField()
    ended_on = models.DateField(null=True, blank=True, help_text="Empty: still.")
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("operator",)

    class Meta:
        ordering = ["user", "operator", "role", "pk"]
        constraints = [
            not_before("fleet_membership", "ends_after_start", "ended_on", "began_on"),
            unique(
                "fleet_membership",
                "one_open",
                "user",
                "operator",
                "role",
                when=Q(ended_on__isnull=True),
            ),
        ]

    def __str__(self) -> str:
        return f"{self.role} since {self.began_on}"


class Authorisation(Entered):
    """What a person may sign for an operator, and until when."""

    person = models.ForeignKey(
        Person, on_delete=models.PROTECT, related_name="authorisations"
    )
    operator = models.ForeignKey(
        Operator, on_delete=models.PROTECT, related_name="authorisations"
    )
    number = models.TextField()
    scope = Word(choices=AuthorisationScope)
    valid_from = models.DateField()
    valid_to = models.DateField(null=True, blank=True, help_text="Empty: open.")
    source = models.TextField(help_text="Document that grants it.")
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("operator",)

    class Meta:
        ordering = ["person", "scope", "valid_from", "pk"]
        constraints = [
            not_before(
                "fleet_authorisation", "ends_after_start", "valid_to", "valid_from"
            ),
            unique(
                "fleet_authorisation",
                "once",
                "operator",
                "number",
                "scope",
                "valid_from",
            ),
        ]

    def __str__(self) -> str:
        return f"{self.number} ({self.scope})"

    def holds_on(self, day: dt.date) -> bool:
        return self.valid_from <= day and (
            self.valid_to is None or day <= self.valid_to
        )


class PolicyUnit(models.TextChoices):
    HOURS = "hours", "h"
    DAYS = "days", "days"
    MONTHS = "months", "months"
    PERCENT = "percent", "%"
    CYCLES = "cycles", "FC"
    MINUTES = "minutes", "min"
    COUNT = "count", ""
    MM = "mm", "mm"


class Policy(Entered):
    """A clock, cap, tolerance or distance: a rule's number with its source."""

    operator = models.ForeignKey(
        Operator,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="policies",
        help_text="Empty: offered to every operator of the regime.",
    )
    regime = text()
    key = models.TextField()
    value = Count(low=-1_000_000_000, high=1_000_000_000)
    unit = Word(choices=PolicyUnit)
    source = models.TextField()
    edition = text()
    grade = Word(
        words=("print", "quoted", "memory", "practice", "adopted"),
        help_text="How far the source was read.",
    )
    effective_from = models.DateField()
    effective_to = models.DateField(null=True, blank=True)
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
        ordering = ["key", "effective_from", "pk"]
        verbose_name_plural = "policies"
        constraints = [
            has_text("fleet_policy", "source"),
            not_before(
                "fleet_policy", "ends_after_start", "effective_to", "effective_from"
            ),
            unique(
                "fleet_policy",
                "once_per_operator",
                "operator",
                "key",
                "effective_from",
                when=Q(operator__isnull=False),
            ),
            unique(
                "fleet_policy",
                "once_offered",
                "regime",
                "key",
                "effective_from",
                when=Q(operator__isnull=True),
            ),
        ]

    def __str__(self) -> str:
        return f"{self.key} = {self.value} {self.unit}"


class RecordNumber(models.Model):
    """The last number given to a kind of record of one operator; never reused."""

    operator = models.ForeignKey(Operator, on_delete=models.PROTECT, related_name="+")
    kind = Word(words=("F", "D", "E", "S", "R", "I", "V"))
    last = Count(low=0, high=1_000_000_000, default=0)

    class Meta:
        ordering = ["operator", "kind"]
        constraints = [unique("fleet_recordnumber", "once", "operator", "kind")]

    def __str__(self) -> str:
        return f"{self.kind}-{self.last:04d}"


class Document(Entered):
    """One revision of a document that a record cites."""

    class Kind(models.TextChoices):
        REPAIR_MANUAL = "repair_manual", "repair manual"
        MAINTENANCE_DATA = "maintenance_data", "maintenance data"
        LETTER = "letter", "design approval holder's letter"
        DESIGN_APPROVAL = "design_approval", "design approval"
        PROGRAMME = "programme", "maintenance programme"
        DIRECTIVE = "directive", "airworthiness directive"
        RELEASE = "release", "release certificate"
        LIMITATIONS = "limitations", "airworthiness limitations"
        OTHER = "other", "other"

    operator = models.ForeignKey(
        Operator, on_delete=models.PROTECT, related_name="documents"
    )
    kind = Word(
        choices=Kind,
    )
    reference = models.TextField()
    revision = text()
    title = text()
    issued_on = models.DateField(null=True, blank=True, help_text="Empty: unknown.")
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
        ordering = ["reference", "revision", "pk"]
        constraints = [
            has_text("fleet_document", "reference"),
            unique("fleet_document", "once", "operator", "reference", "revision"),
        ]

    def __str__(self) -> str:
        return (
            f"{self.reference} rev {self.revision}" if self.revision else self.reference
        )


class DocumentApplicability(Entered):
    """Which serials a document holds for; several rows are read as "or"."""

    document = models.ForeignKey(
        Document, on_delete=models.PROTECT, related_name="applicability"
    )
    variant = models.ForeignKey(
        "fleet.Variant",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="+",
        help_text="Empty: any variant.",
    )
    first_serial = text(help_text="Empty: from the first.")
    last_serial = text(help_text="Empty: and later.")
    page = models.TextField(help_text="Where the document says so.")
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("document__operator",)

    class Meta:
        ordering = ["document", "pk"]
        verbose_name_plural = "document applicability"
        constraints = [has_text("fleet_documentapplicability", "page")]

    def __str__(self) -> str:
        first, last = self.first_serial, self.last_serial
        if not (first or last):
            return "every serial"
        return f"serial {first or 'first'} to {last or 'later'}"


class Attachment(models.Model):
    """A file outside the database: the original as evidence, a copy to show."""

    class Kind(models.TextChoices):
        PHOTOGRAPH = "photograph", "photograph"
        SCAN = "scan", "scanned document"
        REPORT = "report", "report"
        OTHER = "other", "other"

    operator = models.ForeignKey(
        Operator, on_delete=models.PROTECT, related_name="attachments"
    )
    kind = Word(choices=Kind)
    title = text()
    revision = text()
    page = text()
    sha256 = models.TextField(help_text="Digest of the copy that is shown.")
    original_sha256 = models.TextField(help_text="Digest of the bytes as received.")
    media_type = models.TextField()
    byte_count = Count(low=1, high=2**40)
    original_name = models.TextField()
    width_px = Count(low=1, high=100_000, null=True, blank=True)
    height_px = Count(low=1, high=100_000, null=True, blank=True)
    document = models.ForeignKey(
        Document,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="attachments",
        help_text="Empty: a photograph or other file.",
    )
    added_by = models.ForeignKey(
        User, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    added_at = models.DateTimeField()
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("operator",)

    class Meta:
        ordering = ["pk"]
        constraints = [
            unique("fleet_attachment", "once", "operator", "original_sha256"),
            check(
                "fleet_attachment",
                "image_has_both_sides",
                Q(width_px__isnull=True, height_px__isnull=True)
                | Q(width_px__isnull=False, height_px__isnull=False),
                "An image has a width and a height.",
            ),
        ]

    def __str__(self) -> str:
        return self.title or self.original_name
