"""An inspection requirement raised along with a disposition or a repair."""

from __future__ import annotations

import datetime as dt
from typing import Any

from django import forms

from fleet.amounts import AmountError, amount_read
from fleet.models import Aircraft, Operator
from repairs.models import DetectionMethod, RequirementClass
from repairs.services.requirement_draft import LimitEntry, RequirementDraft

NEEDED = "Needed for a new inspection requirement; or leave them all empty."
LIMIT_NEEDED = "Give a threshold or a repeat interval, with its unit."
AMOUNTS = "Such as 500 FC, 1,200 FH, 90 days; several with commas or semicolons."


class RaisedForm(forms.Form):
    """All empty raises none."""

    title = forms.CharField(required=False, label="what is inspected")
    requirement_class = forms.ChoiceField(
        label="class", choices=RequirementClass.choices, initial=RequirementClass.REPAIR
    )
    method = forms.ChoiceField(choices=DetectionMethod.choices, initial="unknown")
    procedure = forms.CharField(required=False)
    area = forms.CharField(required=False)
    criteria = forms.CharField(required=False, label="accept or reject")
    threshold = forms.CharField(required=False, help_text=AMOUNTS)
    repeat = forms.CharField(required=False, label="repeat interval", help_text=AMOUNTS)

    def __init__(self, *args: Any, **kwargs: Any) -> None:
        kwargs.setdefault("prefix", "raised")
        super().__init__(*args, **kwargs)

    def clean(self) -> dict[str, Any]:
        data = super().clean() or {}
        said = [data.get(name) for name in ("title", "criteria")]
        limits = [data.get("threshold"), data.get("repeat")]
        if not any((*said, *limits)):
            return data
        for name in ("title", "area", "criteria"):
            if not data.get(name):
                self.add_error(name, NEEDED)
        if not any(limits):
            self.add_error("repeat", LIMIT_NEEDED)
        for name in ("threshold", "repeat"):
            for amount in _amounts(data.get(name) or ""):
                try:
                    amount_read(amount)
                except AmountError as error:
                    self.add_error(name, str(error))
        return data

    @property
    def said(self) -> bool:
        return bool(self.cleaned_data.get("title"))

    def draft(
        self, *, operator: Operator, aircraft: Aircraft, on: dt.date, base: str
    ) -> RequirementDraft | None:
        """The requirement from that day on; thresholds count from `base`."""
        data = self.cleaned_data
        if not self.said:
            return None
        limits = [
            LimitEntry("threshold", amount, base=base)
            for amount in _amounts(data["threshold"])
        ]
        limits += [LimitEntry("repeat", amount) for amount in _amounts(data["repeat"])]
        return RequirementDraft(
            operator=operator,
            title=data["title"],
            requirement_class=data["requirement_class"],
            area=data["area"],
            criteria=data["criteria"],
            method=data["method"],
            procedure=data["procedure"],
            effective_on=on,
            limits=limits,
            aircraft=(aircraft,),
        )


def _amounts(text: str) -> list[str]:
    """Several limits in one field; a comma inside a number stays."""
    parts = text.replace(", ", ";").split(";")
    return [part.strip() for part in parts if part.strip()]
