"""The second keying of a life limit, from the document."""

from __future__ import annotations

from django import forms

from fleet.forms.fields import AmountField
from fleet.forms.part_records import BASES
from repairs.forms.requirements import INTERVAL


class LifeLimitForm(forms.Form):
    entered = AmountField(label="life limit", help_text=INTERVAL)
    base = forms.ChoiceField(label="counted from", choices=BASES)
