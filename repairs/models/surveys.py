"""The aircraft as it stands, held against its records: intake of one with a past."""

from __future__ import annotations

from django.db import models
from django.db.models import Q

from fleet.constraints import check, unique
from fleet.fields import Count, Word, optional_measure, text
from fleet.models import Aircraft, Document, Operator, Person
from fleet.models.columns import AtCounters, Entered
from fleet.scoping import ScopedQuerySet
from repairs.models.columns import Place, place_constraints
from repairs.models.findings import Finding
from repairs.models.repairs import Repair


class Survey(AtCounters, Entered):
    """One look at the whole aircraft, or at an area, sheet against records."""

    operator = models.ForeignKey(
        Operator, on_delete=models.PROTECT, related_name="surveys"
    )
    aircraft = models.ForeignKey(
        Aircraft, on_delete=models.PROTECT, related_name="surveys"
    )
    number = Count(low=1, high=9_999)
    area = models.TextField(help_text="What was looked at, as: whole aircraft.")
    surveyed_on = models.DateField()
    surveyed_by = models.ForeignKey(Person, on_delete=models.PROTECT, related_name="+")
    document = models.ForeignKey(
        Document,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="+",
        help_text="The signed sheet; empty: none.",
    )
    state = Word(words=("open", "closed"), default="open")
    closed_on = models.DateField(null=True, blank=True)
    closed_by = models.ForeignKey(
        Person, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("aircraft__operator", "operator")

    class Meta:
        ordering = ["-surveyed_on", "-pk"]
        constraints = [
            unique("repairs_survey", "one_number", "aircraft", "number"),
            check(
                "repairs_survey",
                "closed_whole",
                Q(state="open", closed_on__isnull=True, closed_by__isnull=True)
                | Q(state="closed", closed_on__isnull=False, closed_by__isnull=False),
                "A closed survey says when and by whom.",
            ),
        ]

    def __str__(self) -> str:
        return f"survey {self.number}"


class SurveyItem(Place, Entered):
    """A line of the sheet, or a record that the sheet does not show.

    Matched: seen and recorded. Recorded, not found: a record with nothing seen. Found,
    not recorded: something seen with no record; it opens an engineering item.
    """

    survey = models.ForeignKey(Survey, on_delete=models.PROTECT, related_name="items")
    number = Count(low=1, high=99_999)
    outcome = Word(
        words=("to_match", "matched", "recorded_not_found", "found_not_recorded"),
        default="to_match",
    )
    seen_as = Word(
        words=("damage", "repair", "unclear", "nothing"), help_text="What was seen."
    )
    description = text()
    length_mm = optional_measure(0, 100_000)
    width_mm = optional_measure(0, 100_000)
    finding = models.ForeignKey(
        Finding,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="survey_items",
        help_text="The record it matches, or the one it opened.",
    )
    repair = models.ForeignKey(
        Repair,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="survey_items",
    )
    answer = text(help_text="How the difference was settled.")
    answered_by = models.ForeignKey(
        Person, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    answered_on = models.DateField(null=True, blank=True)
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("survey__aircraft__operator", "survey__operator")

    class Meta:
        ordering = ["survey", "number"]
        constraints = [
            *place_constraints("repairs_surveyitem"),
            unique("repairs_surveyitem", "once", "survey", "number"),
            check(
                "repairs_surveyitem",
                "match_named",
                ~Q(outcome__in=("matched", "recorded_not_found"))
                | Q(finding__isnull=False)
                | Q(repair__isnull=False),
                "Name the finding or repair it is.",
            ),
            check(
                "repairs_surveyitem",
                "answer_whole",
                Q(answer="", answered_by__isnull=True, answered_on__isnull=True)
                | (
                    ~Q(answer="")
                    & Q(answered_by__isnull=False, answered_on__isnull=False)
                ),
                "A settled difference has words, a person and a day.",
            ),
        ]

    def __str__(self) -> str:
        return f"{self.survey} item {self.number}"

    @property
    def aircraft(self) -> Aircraft:
        return self.survey.aircraft

    @property
    def record(self) -> Finding | Repair | None:
        """The finding or repair it is, or that it opened."""
        return self.finding or self.repair

    @property
    def settled(self) -> bool:
        return self.outcome == "matched" or bool(self.answer)
