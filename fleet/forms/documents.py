"""For which variant and serials a document says it holds."""

from __future__ import annotations

from typing import Any

from django import forms

from fleet.models import Variant

RANGE_HELP = "As in the document: 12, 0012 or A-101. Empty: {end}."


class ApplicabilityForm(forms.Form):
    """One range, with the page that says so."""

    variant = forms.ModelChoiceField(
        Variant.objects.none(), required=False, empty_label="any variant"
    )
    first_serial = forms.CharField(
        required=False,
        label="first serial",
        help_text=RANGE_HELP.format(end="from the first"),
    )
    last_serial = forms.CharField(
        required=False,
        label="last serial",
        help_text=RANGE_HELP.format(end="and later"),
    )
    page = forms.CharField(
        label="page or paragraph", help_text="Where the document says so."
    )

    def __init__(self, *args: Any, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        rows = Variant.objects.select_related("aircraft_type")
        self.fields["variant"].queryset = rows  # type: ignore[attr-defined]
