"""Inputs of a calculation that an engineer states for one place, from a document."""

from __future__ import annotations

from django.db import models
from django.db.models import Q

from fleet.constraints import check, exactly_one, has_text, unique
from fleet.fields import optional_measure, text
from fleet.models import Operator, Person, Spectrum
from fleet.models.columns import Entered
from fleet.scoping import ScopedQuerySet
from repairs.models.findings import Finding
from repairs.models.repairs import Repair

LARGEST = 1e15


class StatedInput(Entered):
    """A load, section or option the type's data do not give here, and its document.

    One that replaces another holds in its place; one without number, word and spectrum
    takes the earlier one back.
    """

    operator = models.ForeignKey(
        Operator, on_delete=models.PROTECT, related_name="stated_inputs"
    )
    finding = models.ForeignKey(
        Finding,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="stated_inputs",
    )
    repair = models.ForeignKey(
        Repair,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="stated_inputs",
    )
    name = models.TextField(help_text="The input's name, as the methods know it.")
    value = optional_measure(-LARGEST, LARGEST, help_text="In the input's own unit.")
    uncertainty = optional_measure(0, LARGEST, help_text="Plus or minus, same unit.")
    word = text()
    spectrum = models.ForeignKey(
        Spectrum, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    entered = text(help_text="As typed, with its unit.")
    document = models.TextField()
    page = text()
    revision = text()
    person = models.ForeignKey(Person, on_delete=models.PROTECT, related_name="+")
    stated_on = models.DateField()
    replaces = models.OneToOneField(
        "self",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="replaced_by",
    )
    objects = ScopedQuerySet.as_manager()
    operator_paths = (
        "finding__aircraft__operator",
        "repair__aircraft__operator",
        "operator",
    )
    append_only = True

    class Meta:
        ordering = ["name", "stated_on", "pk"]
        constraints = [
            exactly_one("repairs_statedinput", "one_subject", "finding", "repair"),
            has_text("repairs_statedinput", "document"),
            check(
                "repairs_statedinput",
                "one_answer",
                Q(value__isnull=False, word="", spectrum__isnull=True)
                | Q(value__isnull=True, spectrum__isnull=True) & ~Q(word="")
                | Q(value__isnull=True, word="", spectrum__isnull=False)
                | Q(
                    value__isnull=True,
                    word="",
                    spectrum__isnull=True,
                    replaces__isnull=False,
                ),
                "State one number, one word or one spectrum; nothing takes back.",
            ),
            unique(
                "repairs_statedinput",
                "one_first_of_finding",
                "finding",
                "name",
                when=Q(replaces__isnull=True, finding__isnull=False),
            ),
            unique(
                "repairs_statedinput",
                "one_first_of_repair",
                "repair",
                "name",
                when=Q(replaces__isnull=True, repair__isnull=False),
            ),
        ]

    def __str__(self) -> str:
        return (
            f"{self.name} {self.entered or self.word or self.spectrum or 'taken back'}"
        )
