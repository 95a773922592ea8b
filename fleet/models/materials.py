"""Materials, load spectra and the adopted numbers that calculations stand on."""

from __future__ import annotations

from django.db import models
from django.db.models import F, Q

from fleet.constraints import all_or_none, check, has_text, unique
from fleet.fields import Count, Measure, Word, optional_measure, text
from fleet.models.columns import Entered
from fleet.models.people import Operator, Person
from fleet.scoping import ScopedQuerySet

WIDE = 1e12


class Basis(models.TextChoices):
    A = "a", "A-basis"
    B = "b", "B-basis"
    S = "s", "S-basis"
    TYPICAL = "typical", "typical"
    FIT = "fit", "fit to test data"
    ADOPTED = "adopted", "adopted value"


class Grade(models.TextChoices):
    """How far a number's source was read."""

    PRINT = "print", "read in print"
    QUOTED = "quoted", "read in a public quotation"
    MEMORY = "memory", "from memory, unverified"
    ADOPTED = "adopted", "adopted by an engineer"


class Material(models.Model):
    """An alloy in one temper and form; a revision is a new row."""

    name = models.TextField()
    temper = text()
    form = text()
    revision = Count(low=1, high=10_000, default=1)
    replaces = models.OneToOneField(
        "self",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="replaced_by",
    )

    class Meta:
        ordering = ["name", "temper", "form", "revision"]
        constraints = [
            unique("fleet_material", "once", "name", "temper", "form", "revision")
        ]

    def __str__(self) -> str:
        return " ".join(part for part in (self.name, self.temper, self.form) if part)


class MaterialProperty(models.Model):
    """One number of a material; the unit is the end of the quantity's name."""

    material = models.ForeignKey(
        Material, on_delete=models.PROTECT, related_name="properties"
    )
    quantity = models.TextField()
    value = Measure(low=-WIDE, high=WIDE)
    thickness_min_mm = Measure(low=0, high=500, default=0)
    thickness_max_mm = optional_measure(0, 500, help_text="Empty: no upper end.")
    direction = text(help_text="L, LT, L-T and so on; empty: any.")
    basis = Word(choices=Basis)
    source = models.TextField()
    seen = Word(choices=Grade)
    append_only = True

    class Meta:
        ordering = ["material", "quantity", "direction", "thickness_min_mm"]
        verbose_name_plural = "material properties"
        constraints = [
            has_text("fleet_materialproperty", "source"),
            unique(
                "fleet_materialproperty",
                "once",
                "material",
                "quantity",
                "direction",
                "basis",
                "thickness_min_mm",
            ),
        ]

    def __str__(self) -> str:
        return f"{self.quantity} = {self.value:g}"


class Spectrum(models.Model):
    """A stress sequence or cycle per flight, frozen as canonical JSON text."""

    name = models.TextField()
    revision = Count(low=1, high=10_000, default=1)
    content = models.TextField()
    content_digest = models.TextField()
    schema_version = Count(low=1, high=1_000, default=1)
    source = models.TextField()
    replaces = models.OneToOneField(
        "self",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="replaced_by",
    )

    class Meta:
        ordering = ["name", "revision"]
        verbose_name_plural = "spectra"
        constraints = [unique("fleet_spectrum", "once", "name", "revision")]

    def __str__(self) -> str:
        return f"{self.name} rev {self.revision}"


class AdoptedValue(Entered):
    """A number an engineer takes responsibility for, from a document's page."""

    operator = models.ForeignKey(
        Operator, on_delete=models.PROTECT, related_name="adopted_values"
    )
    material = models.ForeignKey(
        Material,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="adopted_values",
        help_text="Empty: not a material's property.",
    )
    quantity = models.TextField()
    value = Measure(low=-WIDE, high=WIDE)
    unit = models.TextField()
    document = models.TextField()
    page = text()
    revision = text()
    person = models.ForeignKey(Person, on_delete=models.PROTECT, related_name="+")
    adopted_on = models.DateField()
    second_person = models.ForeignKey(
        Person, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
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
        ordering = ["quantity", "adopted_on", "pk"]
        constraints = [
            has_text("fleet_adoptedvalue", "document"),
            check(
                "fleet_adoptedvalue",
                "two_people",
                Q(second_person__isnull=True) | ~Q(second_person=F("person")),
                "The second person is someone else.",
            ),
        ]

    def __str__(self) -> str:
        return f"{self.quantity} = {self.value:g} {self.unit}"


class FatiguePolicy(models.Model):
    """What divides a mean life into a usable one, and why."""

    aircraft_type = models.ForeignKey(
        "fleet.AircraftType", on_delete=models.PROTECT, related_name="fatigue_policies"
    )
    name = models.TextField(help_text="What it applies to, as: stress life, growth.")
    revision = Count(low=1, high=10_000, default=1)
    factor = Measure(low=1, high=100)
    multiplies = models.TextField(help_text="Test mean, analysis median, growth life.")
    log_life_deviation = optional_measure(0, 5, help_text="s of log10 life.")
    specimens = Count(low=1, high=10_000, null=True, blank=True)
    reliability = optional_measure(0, 1)
    confidence = optional_measure(0, 1)
    spectrum_severity_inside = models.BooleanField()
    source = models.TextField()
    grade = Word(choices=Grade)
    replaces = models.OneToOneField(
        "self",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="replaced_by",
    )

    class Meta:
        ordering = ["aircraft_type", "name", "revision"]
        verbose_name_plural = "fatigue policies"
        constraints = [
            has_text("fleet_fatiguepolicy", "source"),
            unique("fleet_fatiguepolicy", "once", "aircraft_type", "name", "revision"),
        ]

    def __str__(self) -> str:
        return f"{self.name}: factor {self.factor:g}"


DETECTION = (
    "half_found_mm",
    "curve_deviation",
    "smallest_tried_mm",
    "largest_tried_mm",
    "flaws_tried",
    "done_share",
    "never_share",
)
"""A detection curve, with what it was tried on and how surely it is used."""


class DetectableSize(models.Model):
    """What an inspection method finds, and what hides part of it.

    Where the chance of finding other lengths is known, it is a curve over visible
    length, as MIL-HDBK-1823A draws it.
    """

    aircraft_type = models.ForeignKey(
        "fleet.AircraftType", on_delete=models.PROTECT, related_name="detectable_sizes"
    )
    method = models.TextField()
    detail = text(
        help_text="Where it holds: open skin, at fastener head, under doubler."
    )
    revision = Count(low=1, high=10_000, default=1)
    length_mm = Measure(low=0.001, high=10_000, help_text="Visible length.")
    hidden_mm = Measure(
        low=0, high=10_000, help_text="Part hidden by head, doubler or fairing."
    )
    curve_link = Word(words=("normal", "logistic"), blank=True, default="")
    half_found_mm = optional_measure(
        0.001, 10_000, help_text="Visible length found half the time."
    )
    curve_deviation = optional_measure(1e-4, 10, help_text="Of ln length.")
    smallest_tried_mm = optional_measure(0.001, 10_000)
    largest_tried_mm = optional_measure(0.001, 10_000)
    flaws_tried = Count(low=1, high=100_000, null=True, blank=True)
    done_share = optional_measure(
        0, 1, help_text="Chance that the inspection is done there, each time."
    )
    never_share = optional_measure(
        0, 1, help_text="Share of cases in which it is never done there."
    )
    source = models.TextField()
    grade = Word(choices=Grade)
    replaces = models.OneToOneField(
        "self",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="replaced_by",
    )

    class Meta:
        ordering = ["aircraft_type", "method", "detail", "revision"]
        constraints = [
            has_text("fleet_detectablesize", "source"),
            all_or_none("fleet_detectablesize", "curve_whole", *DETECTION),
            unique(
                "fleet_detectablesize",
                "once",
                "aircraft_type",
                "method",
                "detail",
                "revision",
            ),
        ]

    def __str__(self) -> str:
        return f"{self.method} {self.length_mm:g} mm"
