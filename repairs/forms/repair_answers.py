"""What a repair answers of one finding, and how it lies to an earlier repair."""

from __future__ import annotations

from typing import Any

from django import forms

from repairs.described import APART, OVER
from repairs.forms.fields import LengthField
from repairs.models import Finding, Repair
from repairs.services.repair_entry import Answered, Lies

REMOVED = [
    ("unknown", "unknown"),
    ("yes", "yes"),
    ("partly", "partly"),
    ("no", "no"),
]
SUPERSEDES = "supersedes"
HOW_IT_LIES = [
    ("", "choose"),
    (SUPERSEDES, "supersedes it"),
    (OVER, "lies over it"),
    (APART, "does not touch it"),
]


class AnsweredForm(forms.Form):
    """Whether the repair answers one finding, and what became of the damage."""

    answers = forms.BooleanField(label="answers it", required=False)
    covers = forms.BooleanField(label="covers it from sight", required=False)
    damage_removed = forms.ChoiceField(choices=REMOVED, label="damage removed")
    edge_margin_mm = LengthField(
        label="edge margin",
        signed=True,
        help_text="Empty: worked out from the two extents.",
    )

    def __init__(self, *args: Any, finding: Finding, unit: str, **kwargs: Any) -> None:
        kwargs["prefix"] = f"finding-{finding.pk}"
        super().__init__(*args, **kwargs)
        self.finding = finding
        self.fields["edge_margin_mm"].unit = unit  # type: ignore[attr-defined]

    def answered(self) -> Answered | None:
        data = self.cleaned_data
        if not data["answers"]:
            return None
        return Answered(
            self.finding, data["covers"], data["damage_removed"], data["edge_margin_mm"]
        )


class LiesForm(forms.Form):
    """How the repair lies to an earlier one whose extent it meets."""

    how = forms.ChoiceField(choices=HOW_IT_LIES, label="this repair")

    def __init__(self, *args: Any, repair: Repair, **kwargs: Any) -> None:
        kwargs["prefix"] = f"over-{repair.pk}"
        super().__init__(*args, **kwargs)
        self.repair = repair

    @property
    def supersedes(self) -> bool:
        return self.cleaned_data["how"] == SUPERSEDES

    def lies(self) -> Lies:
        return Lies(self.repair, self.cleaned_data["how"])
