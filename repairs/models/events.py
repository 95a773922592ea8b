"""Hard landings, lightning, bird strikes and the like, with their inspections."""

from __future__ import annotations

from django.db import models

from fleet.constraints import all_or_none, unique
from fleet.fields import Count, Measure, Word, text
from fleet.models import Aircraft, Document, Operator, Person
from fleet.models.columns import AtCounters, Entered
from fleet.scoping import ScopedQuerySet


class EventKind(models.TextChoices):
    HARD_LANDING = "hard_landing", "hard landing"
    OVERWEIGHT_LANDING = "overweight_landing", "overweight landing"
    TURBULENCE = "turbulence", "severe turbulence or manoeuvre"
    OVERSPEED = "overspeed", "overspeed"
    EXCURSION = "excursion", "runway excursion or high side load"
    LIGHTNING = "lightning", "lightning strike"
    BIRD = "bird", "bird strike"
    HAIL = "hail", "hail"
    FOREIGN_OBJECT = "foreign_object", "foreign object"
    TAIL_STRIKE = "tail_strike", "tail, wing or pod strike"
    ASH = "ash", "volcanic ash"
    GROUND = "ground", "ground handling or vehicle contact"
    HEAT = "heat", "overheating"
    TOWING = "towing", "towing or jacking overload"


class Event(AtCounters, Entered):
    """Something that happened to the aircraft and calls for an inspection."""

    operator = models.ForeignKey(
        Operator, on_delete=models.PROTECT, related_name="events"
    )
    aircraft = models.ForeignKey(
        Aircraft, on_delete=models.PROTECT, related_name="events"
    )
    number = models.TextField()
    kind = Word(choices=EventKind)
    state = Word(words=("open", "closed"))
    happened_on = models.DateField()
    description = text()
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("aircraft__operator", "operator")

    class Meta:
        ordering = ["-happened_on", "-pk"]
        constraints = [unique("repairs_event", "one_number", "operator", "number")]

    def __str__(self) -> str:
        return self.number


class EventValue(models.Model):
    """One recorded figure of an event, as vertical acceleration, with its source."""

    event = models.ForeignKey(Event, on_delete=models.PROTECT, related_name="values")
    quantity = models.TextField()
    value = Measure(low=-1e9, high=1e9)
    source = text()
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("event__aircraft__operator",)

    class Meta:
        ordering = ["event", "quantity"]
        constraints = [unique("repairs_eventvalue", "once", "event", "quantity")]

    def __str__(self) -> str:
        return f"{self.quantity} = {self.value:g}"


class EventPhase(models.Model):
    """One required step of the event's inspection."""

    event = models.ForeignKey(Event, on_delete=models.PROTECT, related_name="phases")
    number = Count(low=1, high=99)
    title = models.TextField()
    document = models.ForeignKey(
        Document, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    required = models.BooleanField(default=True)
    done_on = models.DateField(null=True, blank=True)
    done_by = models.ForeignKey(
        Person, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    result = text()
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("event__aircraft__operator",)

    class Meta:
        ordering = ["event", "number"]
        constraints = [
            unique("repairs_eventphase", "once", "event", "number"),
            all_or_none("repairs_eventphase", "done_whole", "done_on", "done_by"),
        ]

    def __str__(self) -> str:
        return self.title
