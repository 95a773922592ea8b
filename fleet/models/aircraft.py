"""Aircraft, their periods with an operator, and what differs on one tail."""

from __future__ import annotations

from django.db import models
from django.db.models import F, Q

from fleet.constraints import check, has_text, not_before, unique
from fleet.fields import Word, counter, optional_counter, optional_measure, text
from fleet.models.columns import AtCounters, Entered
from fleet.models.people import Document, Operator, Organisation, User
from fleet.models.structure import AircraftType, Panel, Variant
from fleet.scoping import ScopedQuerySet


class AircraftState(models.TextChoices):
    IN_SERVICE = "in_service", "in service"
    PARKED = "parked", "parked"
    STORED = "stored", "stored"
    IN_MAINTENANCE = "in_maintenance", "in maintenance"
    WITHDRAWN = "withdrawn", "withdrawn"


class Configuration(models.Model):
    """A model, weight variant or role that a life limit depends on."""

    aircraft_type = models.ForeignKey(
        AircraftType, on_delete=models.PROTECT, related_name="configurations"
    )
    code = models.TextField()
    name = models.TextField()

    class Meta:
        ordering = ["aircraft_type", "code"]
        constraints = [unique("fleet_configuration", "once", "aircraft_type", "code")]

    def __str__(self) -> str:
        return self.name


class Aircraft(Entered):
    """One airframe. The manufacturer's serial number is its key; marks change."""

    operator = models.ForeignKey(
        Operator, on_delete=models.PROTECT, related_name="aircraft"
    )
    variant = models.ForeignKey(
        Variant, on_delete=models.PROTECT, related_name="aircraft"
    )
    serial_number = models.TextField()
    registration = models.TextField(help_text="Today's.")
    manufactured_on = models.DateField(
        null=True, blank=True, help_text="Empty: unknown."
    )
    data_from = models.DateField(help_text="First day with records here.")
    data_to = models.DateField(null=True, blank=True, help_text="Empty: still here.")
    opening_minutes = counter()
    opening_cycles = counter()
    opening_landings = counter()
    opening_pressurisations = optional_counter(help_text="Empty: not tracked.")
    opening_source = models.TextField(help_text="Evidence of the opening counters.")
    opening_keyed_by = models.ForeignKey(
        User, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    opening_rekeyed_by = models.ForeignKey(
        User, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    validity_cycles = optional_counter(help_text="Own limit of validity, if extended.")
    validity_minutes = optional_counter()
    validity_source = text()
    environment = Word(words=("mild", "moderate", "severe"), blank=True, default="")
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("operator", "periods__operator")

    class Meta:
        ordering = ["registration", "pk"]
        verbose_name_plural = "aircraft"
        constraints = [
            unique("fleet_aircraft", "one_serial", "variant", "serial_number"),
            unique(
                "fleet_aircraft",
                "one_registration",
                "registration",
                when=Q(data_to__isnull=True),
            ),
            not_before(
                "fleet_aircraft", "leaves_after_joining", "data_to", "data_from"
            ),
            check(
                "fleet_aircraft",
                "two_people",
                Q(opening_rekeyed_by__isnull=True)
                | ~Q(opening_rekeyed_by=F("opening_keyed_by")),
                "Opening counters are keyed again by someone else.",
            ),
        ]

    def __str__(self) -> str:
        return self.registration


class AircraftPeriod(AtCounters, Entered):
    """The aircraft under one operator, registration and set of rules."""

    aircraft = models.ForeignKey(
        Aircraft, on_delete=models.PROTECT, related_name="periods"
    )
    operator = models.ForeignKey(
        Operator, on_delete=models.PROTECT, related_name="periods"
    )
    registration = models.TextField()
    camo = models.ForeignKey(
        Organisation, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    owner = models.ForeignKey(
        Organisation, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    regime = models.TextField()
    from_on = models.DateField()
    to_on = models.DateField(null=True, blank=True, help_text="Empty: still.")
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("operator", "aircraft__operator")

    class Meta:
        ordering = ["aircraft", "from_on", "pk"]
        constraints = [
            not_before("fleet_aircraftperiod", "ordered", "to_on", "from_on"),
            unique(
                "fleet_aircraftperiod",
                "one_open",
                "aircraft",
                when=Q(to_on__isnull=True),
            ),
            unique("fleet_aircraftperiod", "one_start", "aircraft", "from_on"),
        ]

    def __str__(self) -> str:
        return f"{self.registration} from {self.from_on}"


class AircraftSpan(Entered):
    """The aircraft's state and configuration from one day to another."""

    aircraft = models.ForeignKey(
        Aircraft, on_delete=models.PROTECT, related_name="spans"
    )
    state = Word(choices=AircraftState)
    configuration = models.ForeignKey(
        Configuration,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="spans",
    )
    from_on = models.DateField()
    to_on = models.DateField(null=True, blank=True, help_text="Empty: still.")
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("aircraft__operator",)

    class Meta:
        ordering = ["aircraft", "from_on", "pk"]
        constraints = [
            not_before("fleet_aircraftspan", "ordered", "to_on", "from_on"),
            unique(
                "fleet_aircraftspan", "one_open", "aircraft", when=Q(to_on__isnull=True)
            ),
            unique("fleet_aircraftspan", "one_start", "aircraft", "from_on"),
        ]

    def __str__(self) -> str:
        return f"{self.state} from {self.from_on}"


class PanelOnAircraft(AtCounters, Entered):
    """Replaced, modified or blended skin on one tail; read before the type's panel."""

    aircraft = models.ForeignKey(
        Aircraft, on_delete=models.PROTECT, related_name="panels"
    )
    panel = models.ForeignKey(
        Panel, on_delete=models.PROTECT, related_name="on_aircraft"
    )
    reason = Word(words=("replaced", "modified", "blended"))
    from_on = models.DateField()
    thickness_mm = optional_measure(0.01, 500)
    material = models.ForeignKey(
        "fleet.Material",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="+",
    )
    map1_mm = optional_measure(
        -200_000, 200_000, help_text="Extent; empty: whole panel."
    )
    map2_mm = optional_measure(-200_000, 200_000)
    s1_mm = optional_measure(-200_000, 200_000)
    s2_mm = optional_measure(-200_000, 200_000)
    document = models.ForeignKey(
        Document, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    source = models.TextField()
    replaces = models.OneToOneField(
        "self",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="replaced_by",
    )
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("aircraft__operator",)

    class Meta:
        ordering = ["aircraft", "panel", "from_on", "pk"]
        verbose_name_plural = "panels on aircraft"
        constraints = [
            has_text("fleet_panelonaircraft", "source"),
            not_before("fleet_panelonaircraft", "along_ordered", "map2_mm", "map1_mm"),
            not_before("fleet_panelonaircraft", "across_ordered", "s2_mm", "s1_mm"),
        ]

    def __str__(self) -> str:
        return f"{self.reason} from {self.from_on}"
