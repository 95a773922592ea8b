"""An input stated from a document, and its being taken back."""

from __future__ import annotations

from typing import Any

from django import forms

from repairs.input_text import units_offered
from repairs.selectors.spectra import spectra_in_force
from repairs.services.evaluation_spectrum import SPECTRUM
from repairs.services.stated import Document, spec_of

ENTERED = "With its unit: {offered}. An uncertainty goes behind ±."
CHOOSE = "choose one"


class StateForm(forms.Form):
    """The value, and the document, revision and page it was read from."""

    entered = forms.CharField(label="value")
    document = forms.CharField(help_text="Reference of the document you read it in.")
    revision = forms.CharField(required=False)
    page = forms.CharField(help_text="Page, table, figure or drawing zone.")

    def __init__(self, *args: Any, name: str, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        spec = spec_of(name)
        if name == SPECTRUM:
            choices = [("", CHOOSE)]
            choices += [(str(row.pk), str(row)) for row in spectra_in_force()]
            self.fields["entered"] = forms.ChoiceField(choices=choices, label=name)
        elif spec.words:
            choices = [("", CHOOSE)]
            choices += [(word, word.replace("_", " ")) for word in spec.words]
            self.fields["entered"] = forms.ChoiceField(choices=choices, label="answer")
        else:
            offered = units_offered(spec.unit)
            self.fields["entered"].help_text = ENTERED.format(offered=offered)

    def document_read(self) -> Document:
        """Where the value is from."""
        data = self.cleaned_data
        return Document(data["document"], data["page"], data["revision"])


class TakeBackForm(forms.Form):
    """Why a stated input holds no longer."""

    reason = forms.CharField(label="why", help_text="Kept with the record.")
