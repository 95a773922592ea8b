"""Safe-life parts: their life limits, their serials, and where each has been."""

from __future__ import annotations

from django.db import models
from django.db.models import F, Q

from fleet.constraints import all_or_none, check, has_text, not_before, unique
from fleet.fields import Count, Word, counter, optional_counter, text
from fleet.models.aircraft import Aircraft, Configuration
from fleet.models.columns import Entered
from fleet.models.people import Document, Operator, Person
from fleet.scoping import ScopedQuerySet


class Counter(models.TextChoices):
    MINUTES = "minutes", "FH"
    CYCLES = "cycles", "FC"
    LANDINGS = "landings", "landings"
    PRESSURISATIONS = "pressurisations", "pressurisation cycles"
    DAYS = "days", "days"
    MONTHS = "months", "months"


class KeyedState(models.TextChoices):
    KEYED = "keyed", "keyed, awaiting blind re-entry"
    IN_FORCE = "in_force", "in force"
    REPLACED = "replaced", "replaced"
    REJECTED = "rejected", "rejected"


class PartState(models.TextChoices):
    IN_STORE = "in_store", "in store"
    INSTALLED = "installed", "installed"
    UNSERVICEABLE = "unserviceable", "unserviceable"
    QUARANTINED = "quarantined", "quarantined"
    EXPIRED = "expired", "life expired"
    SCRAPPED = "scrapped", "scrapped"


class PartNumber(Entered):
    """A kind of part with a life limit."""

    operator = models.ForeignKey(
        Operator, on_delete=models.PROTECT, related_name="part_numbers"
    )
    number = models.TextField()
    title = models.TextField()
    ata = text()
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("operator",)

    class Meta:
        ordering = ["number", "pk"]
        constraints = [unique("fleet_partnumber", "once", "operator", "number")]

    def __str__(self) -> str:
        return self.number


class LifeLimit(Entered):
    """The published maximum on one counter, for one configuration or for all."""

    part_number = models.ForeignKey(
        PartNumber, on_delete=models.PROTECT, related_name="life_limits"
    )
    configuration = models.ForeignKey(
        Configuration,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="life_limits",
        help_text="Empty: every configuration.",
    )
    counter = Word(choices=Counter)
    value = Count(low=1, high=2_000_000_000)
    entered = models.TextField(help_text="As keyed, as: 30,000 FC.")
    base = Word(words=("birth", "first_fitted", "overhaul"))
    carry_over = Word(words=("most_restrictive", "linear"), default="most_restrictive")
    document = models.ForeignKey(Document, on_delete=models.PROTECT, related_name="+")
    page = text()
    state = Word(choices=KeyedState)
    effective_from = models.DateField()
    replaces = models.OneToOneField(
        "self",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="replaced_by",
    )
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("part_number__operator",)
    changeable = frozenset({"state"})

    class Meta:
        ordering = ["part_number", "counter", "pk"]
        constraints = [
            unique(
                "fleet_lifelimit",
                "one_in_force",
                "part_number",
                "configuration",
                "counter",
                "base",
                when=Q(state="in_force", configuration__isnull=False),
            ),
            unique(
                "fleet_lifelimit",
                "one_in_force_for_all",
                "part_number",
                "counter",
                "base",
                when=Q(state="in_force", configuration__isnull=True),
            ),
        ]

    def __str__(self) -> str:
        return self.entered


class SafeLifePart(Entered):
    """One serial. Its life is the sum of its stints; no total is stored."""

    operator = models.ForeignKey(
        Operator, on_delete=models.PROTECT, related_name="safe_life_parts"
    )
    part_number = models.ForeignKey(
        PartNumber, on_delete=models.PROTECT, related_name="serials"
    )
    serial = models.TextField()
    manufactured_on = models.DateField(
        null=True, blank=True, help_text="Empty: unknown."
    )
    state = Word(choices=PartState)
    chain = Word(
        words=("complete", "reconstructed", "broken"),
        help_text="Back-to-birth record.",
    )
    release_reference = text(help_text="Birth certificate or release to service.")
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("operator",)

    class Meta:
        ordering = ["part_number", "serial", "pk"]
        constraints = [unique("fleet_safelifepart", "once", "part_number", "serial")]

    def __str__(self) -> str:
        return f"s/n {self.serial}"


class PartInstallation(Entered):
    """One stint of a serial on an aircraft in one configuration."""

    part = models.ForeignKey(
        SafeLifePart, on_delete=models.PROTECT, related_name="installations"
    )
    aircraft = models.ForeignKey(
        Aircraft, on_delete=models.PROTECT, related_name="installations"
    )
    position = models.TextField()
    configuration = models.ForeignKey(
        Configuration, on_delete=models.PROTECT, related_name="installations"
    )
    carried_by = models.ForeignKey(
        "self", on_delete=models.PROTECT, null=True, blank=True, related_name="carries"
    )
    installed_on = models.DateField()
    installed_minutes = counter()
    installed_cycles = counter()
    installed_landings = counter()
    installed_pressurisations = optional_counter()
    removed_on = models.DateField(
        null=True, blank=True, help_text="Empty: still there."
    )
    removed_minutes = optional_counter()
    removed_cycles = optional_counter()
    removed_landings = optional_counter()
    removed_pressurisations = optional_counter()
    removal_reason = text()
    release_reference = text()
    installed_by = models.ForeignKey(
        Person, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("aircraft__operator", "part__operator")

    class Meta:
        ordering = ["part", "installed_on", "pk"]
        constraints = [
            unique(
                "fleet_partinstallation",
                "one_open_per_part",
                "part",
                when=Q(removed_on__isnull=True),
            ),
            unique(
                "fleet_partinstallation",
                "one_open_per_position",
                "aircraft",
                "position",
                when=Q(removed_on__isnull=True),
            ),
            all_or_none(
                "fleet_partinstallation",
                "removal_whole",
                "removed_on",
                "removed_minutes",
                "removed_cycles",
                "removed_landings",
            ),
            *(
                not_before(
                    "fleet_partinstallation",
                    f"{name}_forward",
                    f"removed_{name}",
                    f"installed_{name}",
                )
                for name in ("on", "minutes", "cycles", "landings", "pressurisations")
            ),
        ]
        indexes = [
            models.Index(
                fields=["part", "installed_on"], name="fleet_installation_chain"
            )
        ]

    def __str__(self) -> str:
        return f"{self.position} from {self.installed_on}"


class PartAssembly(Entered):
    """A part carried inside another part."""

    child = models.ForeignKey(
        SafeLifePart, on_delete=models.PROTECT, related_name="carried_in"
    )
    parent = models.ForeignKey(
        SafeLifePart, on_delete=models.PROTECT, related_name="contains"
    )
    position = models.TextField()
    from_on = models.DateField()
    to_on = models.DateField(null=True, blank=True)
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("child__operator",)

    class Meta:
        ordering = ["child", "from_on", "pk"]
        verbose_name_plural = "part assemblies"
        constraints = [
            not_before("fleet_partassembly", "ordered", "to_on", "from_on"),
            unique(
                "fleet_partassembly",
                "one_open_per_child",
                "child",
                when=Q(to_on__isnull=True),
            ),
            unique(
                "fleet_partassembly",
                "one_open_per_position",
                "parent",
                "position",
                when=Q(to_on__isnull=True),
            ),
            check(
                "fleet_partassembly",
                "not_itself",
                ~Q(child=F("parent")),
                "A part cannot carry itself.",
            ),
        ]

    def __str__(self) -> str:
        return f"{self.position} from {self.from_on}"


class PartEarlierLife(Entered):
    """Life before our records, or a gap in them, as a row of its own; append-only."""

    part = models.ForeignKey(
        SafeLifePart, on_delete=models.PROTECT, related_name="earlier_lives"
    )
    kind = Word(words=("documented", "reconstructed", "gap"))
    treatment = Word(words=("counted", "assumed_maximum", "blocked"))
    configuration = models.ForeignKey(
        Configuration, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    from_on = models.DateField(null=True, blank=True)
    to_on = models.DateField(null=True, blank=True)
    minutes = counter()
    cycles = counter()
    landings = counter()
    pressurisations = optional_counter()
    evidence = models.TextField()
    acceptance = text(help_text="Who accepted a reconstruction, and by which paper.")
    accepted_by = models.ForeignKey(
        Person, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
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
    operator_paths = ("part__operator",)
    append_only = True

    class Meta:
        ordering = ["part", "from_on", "pk"]
        verbose_name_plural = "parts' earlier lives"
        constraints = [
            has_text("fleet_partearlierlife", "evidence"),
            not_before("fleet_partearlierlife", "ordered", "to_on", "from_on"),
            check(
                "fleet_partearlierlife",
                "gap_is_treated",
                ~Q(kind="gap", treatment="counted"),
                "A gap is blocked or assumed; it is never plainly counted.",
            ),
            check(
                "fleet_partearlierlife",
                "assumption_accepted",
                ~Q(treatment="assumed_maximum")
                | (
                    ~Q(acceptance="")
                    & Q(accepted_by__isnull=False, second_person__isnull=False)
                    & ~Q(accepted_by=F("second_person"))
                ),
                "An assumed life names its acceptance and two people.",
            ),
        ]

    def __str__(self) -> str:
        return f"{self.kind}: {self.cycles} FC"


class PartEvent(Entered):
    """An overhaul, disposition or transfer of a serial."""

    part = models.ForeignKey(
        SafeLifePart, on_delete=models.PROTECT, related_name="events"
    )
    kind = Word(words=("overhaul", "disposition", "transfer"))
    happened_on = models.DateField()
    life_minutes = optional_counter()
    life_cycles = optional_counter()
    life_landings = optional_counter()
    life_pressurisations = optional_counter()
    method = text()
    document = models.ForeignKey(
        Document, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    objects = ScopedQuerySet.as_manager()
    operator_paths = ("part__operator",)

    class Meta:
        ordering = ["part", "happened_on", "pk"]

    def __str__(self) -> str:
        return f"{self.kind} {self.happened_on}"
