"""The signed folder behind a repair, or behind damage that stays: what was looked at,
what was calculated, what it changes, and how far its approval has come.

A revision is drafted, and may change, until somebody has signed it; from then on a
change is a new revision. The stages reached are read from the approvals of all
revisions of one number.
"""

from __future__ import annotations

from django.db import models
from django.db.models import Q

from fleet.constraints import check, exactly_one, has_text, unique
from fleet.fields import Count, Word, optional_counter, optional_measure, text
from fleet.models import Aircraft, Attachment, Document, Operator, Person
from fleet.models.columns import Entered
from fleet.scoping import ScopedQuerySet
from repairs.models.columns import RepairCategory
from repairs.models.findings import Finding


class Answer(models.TextChoices):
    """What the folder substantiates."""

    ACCEPT = "accept", "allowable as is"
    BLEND = "blend", "blend-out"
    TIME_LIMITED = "time_limited", "time-limited repair"
    PERMANENT = "permanent", "permanent repair"
    REPLACE = "replace", "replace the part"
    LIMITATION = "limitation", "continued flight with a limitation"
    SPECIAL_FLIGHT = "special_flight", "special flight"


class Substantiation(Entered):
    """One revision of the folder: findings, neighbours, load cases, effects, stages.

    The temporary limit is what stage 1 approved; stage 2 is due before it. The
    threshold is what stage 2 approved; it is a hard limit until stage 3. Both are
    counted from the release of the repair.
    """

    operator = models.ForeignKey(
        Operator, on_delete=models.PROTECT, related_name="substantiations"
    )
    aircraft = models.ForeignKey(
        Aircraft, on_delete=models.PROTECT, related_name="substantiations"
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
    revision_reason = text(help_text="Why this revision; empty for the first.")
    title = models.TextField()
    answer = Word(choices=Answer)
    limitation = text(help_text="What the aircraft may not do.")
    scale = Word(words=("minor", "major", "undecided"), default="undecided")
    scale_reason = text()
    category = Word(choices=RepairCategory, blank=True, default="")
    category_reason = text()
    data_due_on = models.DateField(
        null=True, blank=True, help_text="Schedule for the damage-tolerance data."
    )
    temporary_limit_cycles = optional_counter(help_text="From release, approved.")
    temporary_limit_minutes = optional_counter()
    temporary_limit_on = models.DateField(null=True, blank=True)
    temporary_limit_source = text()
    threshold_cycles = optional_counter(help_text="From release, approved at stage 2.")
    threshold_minutes = optional_counter()
    threshold_on = models.DateField(null=True, blank=True)
    threshold_source = text()
    inspections = text(help_text="Method, procedure, criteria and repeat of stage 3.")
    prepared_by = models.ForeignKey(Person, on_delete=models.PROTECT, related_name="+")
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("aircraft__operator", "operator")

    class Meta:
        ordering = ["-pk"]
        constraints = [
            unique(
                "repairs_substantiation", "one_number", "operator", "number", "revision"
            ),
            has_text("repairs_substantiation", "title"),
            check(
                "repairs_substantiation",
                "limitation_said",
                ~Q(answer__in=("limitation", "special_flight")) | ~Q(limitation=""),
                "Say what the limitation is.",
            ),
            check(
                "repairs_substantiation",
                "temporary_limit_has_source",
                Q(
                    temporary_limit_cycles__isnull=True,
                    temporary_limit_minutes__isnull=True,
                    temporary_limit_on__isnull=True,
                )
                | ~Q(temporary_limit_source=""),
                "A temporary limit names the document that approves it.",
            ),
            check(
                "repairs_substantiation",
                "threshold_has_source",
                Q(
                    threshold_cycles__isnull=True,
                    threshold_minutes__isnull=True,
                    threshold_on__isnull=True,
                )
                | ~Q(threshold_source=""),
                "A stage 2 threshold names the document that approves it.",
            ),
        ]

    def __str__(self) -> str:
        return f"{self.number} rev {self.revision}" if self.revision else self.number


class SubstantiationRow(models.Model):
    """A row of one revision; it may change only while that is a draft."""

    objects = ScopedQuerySet.as_manager()
    operator_paths = (
        "substantiation__aircraft__operator",
        "substantiation__operator",
    )

    class Meta:
        abstract = True


class SubstantiationFinding(SubstantiationRow):
    """A finding that the folder covers."""

    substantiation = models.ForeignKey(
        Substantiation, on_delete=models.PROTECT, related_name="finding_rows"
    )
    finding = models.ForeignKey(
        Finding, on_delete=models.PROTECT, related_name="substantiation_rows"
    )
    withdrawn = models.BooleanField(default=False)

    class Meta:
        ordering = ["substantiation", "finding"]
        constraints = [
            unique("repairs_substantiationfinding", "once", "substantiation", "finding")
        ]

    def __str__(self) -> str:
        return "covered"


class SubstantiationNeighbour(SubstantiationRow):
    """A finding, repair or joint within reach, and the answer given for it."""

    substantiation = models.ForeignKey(
        Substantiation, on_delete=models.PROTECT, related_name="neighbours"
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
    joint = models.ForeignKey(
        "fleet.Joint", on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    gap_mm = optional_measure(0, 200_000, help_text="Empty: not known.")
    answer = Word(
        words=("interacts", "does_not_interact"),
        blank=True,
        default="",
        help_text="Empty: not reviewed yet.",
    )
    reason = text()
    reviewed_by = models.ForeignKey(
        Person, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    reviewed_on = models.DateField(null=True, blank=True)
    withdrawn = models.BooleanField(default=False)

    class Meta:
        ordering = ["substantiation", "gap_mm", "pk"]
        constraints = [
            exactly_one(
                "repairs_substantiationneighbour",
                "one_neighbour",
                "finding",
                "repair",
                "joint",
            ),
            check(
                "repairs_substantiationneighbour",
                "answer_whole",
                Q(answer="", reviewed_by__isnull=True, reviewed_on__isnull=True)
                | (
                    ~Q(answer="")
                    & ~Q(reason="")
                    & Q(reviewed_by__isnull=False, reviewed_on__isnull=False)
                ),
                "An answered neighbour has a reason, a person and a day.",
            ),
        ]

    def __str__(self) -> str:
        return self.answer or "not reviewed"


class SubstantiationCase(SubstantiationRow):
    """A load case: the requirement, how it was shown, and the margin."""

    substantiation = models.ForeignKey(
        Substantiation, on_delete=models.PROTECT, related_name="cases"
    )
    number = Count(low=1, high=999)
    kind = Word(words=("static_ultimate", "residual", "fatigue"))
    requirement = models.TextField(help_text="Rule and paragraph.")
    case = models.TextField(help_text="The critical load case.")
    method = text()
    allowable_source = text()
    margin = optional_measure(-1, 1e6, help_text="Empty: not shown as a number.")
    evaluation = models.ForeignKey(
        "repairs.Evaluation",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="case_rows",
        help_text="Empty: calculated elsewhere, see the method.",
    )
    withdrawn = models.BooleanField(default=False)

    class Meta:
        ordering = ["substantiation", "number"]
        constraints = [
            unique("repairs_substantiationcase", "once", "substantiation", "number"),
            has_text("repairs_substantiationcase", "requirement"),
        ]

    def __str__(self) -> str:
        return self.case


class SubstantiationEffect(SubstantiationRow):
    """What else the answer touches, or that it touches it not."""

    substantiation = models.ForeignKey(
        Substantiation, on_delete=models.PROTECT, related_name="effects"
    )
    touches = Word(
        words=(
            "weight_and_balance",
            "control_surface_balance",
            "performance",
            "systems",
            "flight_manual",
            "limitations_section",
            "maintenance_programme",
        )
    )
    answer = Word(words=("none", "affected", "unknown"))
    note = text()

    class Meta:
        ordering = ["substantiation", "pk"]
        constraints = [
            unique("repairs_substantiationeffect", "once", "substantiation", "touches"),
            check(
                "repairs_substantiationeffect",
                "effect_said",
                ~Q(answer="affected") | ~Q(note=""),
                "Say what is affected, and how.",
            ),
        ]

    def __str__(self) -> str:
        return f"{self.touches}: {self.answer}"


class SubstantiationDocument(SubstantiationRow):
    """A document or file that belongs to the folder."""

    substantiation = models.ForeignKey(
        Substantiation, on_delete=models.PROTECT, related_name="documents"
    )
    role = Word(
        words=(
            "approval_data",
            "correspondence",
            "drawing",
            "calculation",
            "test_report",
            "inspection_report",
            "other",
        )
    )
    document = models.ForeignKey(
        Document, on_delete=models.PROTECT, related_name="substantiation_rows"
    )
    page = text()
    attachment = models.ForeignKey(
        Attachment, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    withdrawn = models.BooleanField(default=False)

    class Meta:
        ordering = ["substantiation", "pk"]

    def __str__(self) -> str:
        return self.role
