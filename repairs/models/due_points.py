"""Due points: every "not later than" of an aircraft or a serial."""

from __future__ import annotations

from django.db import models
from django.db.models import Q

from fleet.constraints import check, exactly_one, unique
from fleet.fields import Count, Word, optional_counter, text
from fleet.models import Aircraft, SafeLifePart
from fleet.models.columns import Entered
from fleet.scoping import ScopedQuerySet
from repairs.models.dispositions import Disposition
from repairs.models.events import Event
from repairs.models.inspections import Accomplishment, RequirementSubject
from repairs.models.repairs import Repair
from repairs.models.substantiations import Substantiation
from repairs.models.surveys import SurveyItem


class DueKind(models.TextChoices):
    THRESHOLD = "threshold", "first inspection"
    REPEAT = "repeat", "repeat inspection"
    DEFERRAL = "deferral", "deferral limit"
    REPLACE = "replace", "replacement limit"
    STAGE_CLOCK = "stage_clock", "stage clock"
    VALIDITY = "validity", "limit of validity"
    PHASE = "phase", "event inspection"
    LIFE = "life", "life limit"
    ENGINEERING = "engineering", "engineering answer"


class DuePoint(Entered):
    """One "not later than" of one subject; inserted, closed once, never moved.

    Due values are in the subject's own counters; empty means that counter does not
    apply. What cannot be computed says why, and counts as due.
    """

    aircraft = models.ForeignKey(
        Aircraft,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="due_points",
    )
    part = models.ForeignKey(
        SafeLifePart,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="due_points",
    )
    subject = models.ForeignKey(
        RequirementSubject,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="due_points",
    )
    disposition = models.ForeignKey(
        Disposition,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="due_points",
    )
    repair = models.ForeignKey(
        Repair,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="due_points",
    )
    event = models.ForeignKey(
        Event,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="due_points",
    )
    substantiation = models.ForeignKey(
        Substantiation,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="due_points",
    )
    survey_item = models.ForeignKey(
        SurveyItem,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="due_points",
    )
    life_of = models.ForeignKey(
        SafeLifePart,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="life_due_points",
    )
    kind = Word(choices=DueKind)
    group = Count(low=1, high=9, default=1)
    combine = Word(words=("first", "last"), default="first")
    due_minutes = optional_counter()
    due_cycles = optional_counter()
    due_landings = optional_counter()
    due_pressurisations = optional_counter()
    due_on = models.DateField(null=True, blank=True)
    cannot_compute = text()
    after = models.ForeignKey(
        Accomplishment,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="opened",
    )
    replaces = models.OneToOneField(
        "self",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="replaced_by",
    )
    basis = text(help_text="How it came about, in words.")
    opened_on = models.DateField()
    closed_on = models.DateField(null=True, blank=True)
    closed_by = models.ForeignKey(
        Accomplishment,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="closed",
    )
    closed_reason = text()
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("aircraft__operator", "part__operator")
    changeable = frozenset({"closed_on", "closed_reason", "closed_by_id"})

    class Meta:
        ordering = ["pk"]
        constraints = [
            exactly_one("repairs_duepoint", "one_subject", "aircraft", "part"),
            exactly_one(
                "repairs_duepoint",
                "one_origin",
                "subject",
                "disposition",
                "repair",
                "event",
                "substantiation",
                "survey_item",
                "life_of",
            ),
            check(
                "repairs_duepoint",
                "life_of_itself",
                Q(life_of__isnull=True) | Q(life_of=models.F("part")),
                "A life limit is due on the part itself.",
            ),
            check(
                "repairs_duepoint",
                "says_when",
                Q(due_minutes__isnull=False)
                | Q(due_cycles__isnull=False)
                | Q(due_landings__isnull=False)
                | Q(due_pressurisations__isnull=False)
                | Q(due_on__isnull=False)
                | ~Q(cannot_compute=""),
                "Say when it is due, or why that cannot be computed.",
            ),
            check(
                "repairs_duepoint",
                "closed_whole",
                Q(closed_on__isnull=True, closed_by__isnull=True, closed_reason="")
                | (Q(closed_on__isnull=False) & ~Q(closed_reason="")),
                "A closed due point says when and why.",
            ),
            *(
                unique(
                    "repairs_duepoint",
                    f"one_open_per_{rule}",
                    *fields,
                    when=Q(closed_on__isnull=True)
                    & Q(**{f"{fields[0]}__isnull": False}),
                )
                for rule, fields in {
                    "subject": ("subject", "group"),
                    "disposition": ("disposition", "kind", "group"),
                    "repair": ("repair", "kind", "group"),
                    "event": ("event", "kind", "group"),
                    "substantiation": ("substantiation", "kind", "group"),
                    "survey_item": ("survey_item", "kind", "group"),
                    "life": ("life_of", "group"),
                }.items()
            ),
        ]
        indexes = [
            models.Index(
                fields=["aircraft"],
                name="repairs_due_open_aircraft",
                condition=Q(closed_on__isnull=True),
            ),
            models.Index(
                fields=["part"],
                name="repairs_due_open_part",
                condition=Q(closed_on__isnull=True),
            ),
            models.Index(fields=["subject", "id"], name="repairs_due_chain"),
        ]

    def __str__(self) -> str:
        return self.kind
