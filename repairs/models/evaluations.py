"""Calculated entries of residual strength and fatigue life, frozen when made."""

from __future__ import annotations

from django.db import models
from django.db.models import Q

from fleet.constraints import check, exactly_one, unique
from fleet.fields import Count, Word, optional_measure, text
from fleet.models import (
    AdoptedValue,
    DetectableSize,
    FatiguePolicy,
    Material,
    Operator,
    Panel,
    PanelOnAircraft,
    Policy,
    Spectrum,
)
from fleet.models.columns import Entered
from fleet.scoping import ScopedQuerySet
from repairs.models.findings import Finding, Measurement
from repairs.models.repairs import Repair


class Use(models.TextChoices):
    FOUND_DAMAGE = "found_damage", "found damage"
    NO_KNOWN_CRACK = "no_known_crack", "structure without known crack"


class Outcome(models.TextChoices):
    COMPUTED = "computed", "computed"
    NOT_COVERED = "not_covered", "no method applies"
    MISSING_INPUT = "missing_input", "incomplete"


def life(**kwargs: str) -> Count:
    return Count(low=0, high=10**15, null=True, blank=True, **kwargs)


class Evaluation(Entered):
    """One calculation for a finding or repair; a later one supersedes it."""

    operator = models.ForeignKey(
        Operator, on_delete=models.PROTECT, related_name="evaluations"
    )
    finding = models.ForeignKey(
        Finding,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="evaluations",
    )
    repair = models.ForeignKey(
        Repair,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="evaluations",
    )
    number = models.TextField()
    use = Word(choices=Use)
    outcome = Word(choices=Outcome)
    governing = text(help_text="Which mode or requirement governs.")
    method = text(help_text="Empty: no method for this damage.")
    method_version = Count(low=0, high=10_000)
    methods = text(help_text="Every method asked with its version, as |id@version|.")
    schema_version = Count(low=1, high=1_000)
    inputs = models.TextField(help_text="Canonical JSON.")
    outputs = models.TextField(help_text="Canonical JSON.")
    applicability = models.TextField(help_text="Canonical JSON.")
    note = models.TextField(help_text="Canonical JSON.")
    libraries = models.TextField(help_text="Canonical JSON.")
    content_digest = models.TextField()
    residual_strength_mpa = optional_measure(0, 1e5)
    required_residual_mpa = optional_measure(0, 1e5)
    residual_case = text()
    margin_residual = optional_measure(-1, 1e6)
    ultimate_mpa = optional_measure(0, 1e5)
    ultimate_case = text()
    margin_ultimate = optional_measure(-1, 1e6)
    ultimate_kept = Word(words=("yes", "no", "not_shown"))
    life_cycles = life(help_text="Before the scatter factor.")
    life_base = text(help_text="Since new, since release of R-..., from finding.")
    usable_life_cycles = life(help_text="After the scatter factor.")
    scatter_factor = optional_measure(1, 100)
    threshold_cycles = life()
    threshold_base = text()
    repeat_cycles = life(help_text="Empty: the method or the use gives none.")
    uncapped_threshold_cycles = life()
    uncapped_repeat_cycles = life()
    cap = text(help_text="What capped threshold or repeat.")
    source_from_memory = models.BooleanField(help_text="Bars it from approval.")
    barred_reason = text(help_text="Why it cannot be approved as it stands.")
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
        ordering = ["-entered_at", "-pk"]
        constraints = [
            exactly_one("repairs_evaluation", "one_subject", "finding", "repair"),
            unique("repairs_evaluation", "one_number", "operator", "number"),
            check(
                "repairs_evaluation",
                "no_number_unless_computed",
                Q(outcome="computed")
                | Q(
                    residual_strength_mpa__isnull=True,
                    margin_residual__isnull=True,
                    margin_ultimate__isnull=True,
                    life_cycles__isnull=True,
                    usable_life_cycles__isnull=True,
                    threshold_cycles__isnull=True,
                    repeat_cycles__isnull=True,
                ),
                "What no method covers is never a number.",
            ),
            check(
                "repairs_evaluation",
                "no_interval_for_found_damage",
                ~Q(use="found_damage")
                | Q(threshold_cycles__isnull=True, repeat_cycles__isnull=True),
                "Known damage gets no inspection interval.",
            ),
        ]

    def __str__(self) -> str:
        return self.number


class EvaluationInput(models.Model):
    """A row the calculation read, with the digest of what it read. Append-only."""

    evaluation = models.ForeignKey(
        Evaluation, on_delete=models.PROTECT, related_name="input_rows"
    )
    number = Count(low=1, high=999)
    panel = models.ForeignKey(
        Panel, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    panel_on_aircraft = models.ForeignKey(
        PanelOnAircraft,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="+",
    )
    material = models.ForeignKey(
        Material, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    spectrum = models.ForeignKey(
        Spectrum, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    measurement = models.ForeignKey(
        Measurement, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    fatigue_policy = models.ForeignKey(
        FatiguePolicy, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    detectable_size = models.ForeignKey(
        DetectableSize,
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="+",
    )
    adopted_value = models.ForeignKey(
        AdoptedValue, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    policy = models.ForeignKey(
        Policy, on_delete=models.PROTECT, null=True, blank=True, related_name="+"
    )
    stated_input = models.ForeignKey(
        "repairs.StatedInput",
        on_delete=models.PROTECT,
        null=True,
        blank=True,
        related_name="+",
    )
    used_digest = models.TextField()
    objects = ScopedQuerySet.as_manager()
    operator_paths = (
        "evaluation__finding__aircraft__operator",
        "evaluation__repair__aircraft__operator",
        "evaluation__operator",
    )
    append_only = True

    class Meta:
        ordering = ["evaluation", "number"]
        constraints = [
            unique("repairs_evaluationinput", "once", "evaluation", "number"),
            exactly_one(
                "repairs_evaluationinput",
                "one_source",
                "panel",
                "panel_on_aircraft",
                "material",
                "spectrum",
                "measurement",
                "fatigue_policy",
                "detectable_size",
                "adopted_value",
                "policy",
                "stated_input",
            ),
        ]

    def __str__(self) -> str:
        return f"input {self.number}"
