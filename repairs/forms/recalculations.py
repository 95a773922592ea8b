"""What to make again, and which part of a run's report to show."""

from __future__ import annotations

from typing import Any

from django import forms

from fleet.models import Operator, User
from repairs.selectors.recalculations import ERRORS, LESS, MOVED, SHORTER


class RecalculationForm(forms.Form):
    """Whose evaluations, and whether all of them."""

    operator = forms.ModelChoiceField(queryset=Operator.objects.none())
    which = forms.ChoiceField(
        choices=(("stale", "stale ones"), ("all", "all that are in force")),
        label="make again",
        help_text="What gives the very same is left as it is.",
    )

    def __init__(self, *args: Any, user: User, **kwargs: Any) -> None:
        super().__init__(*args, **kwargs)
        held = [row.operator_id for row in user.open_memberships]
        rows = Operator.objects.filter(pk__in=held)
        self.fields["operator"].queryset = rows  # type: ignore[attr-defined]
        self.fields["operator"].initial = rows.first()


class ReportFilter(forms.Form):
    """Which items of a run."""

    which = forms.ChoiceField(
        required=False,
        label="show",
        choices=(
            ("", "all"),
            (SHORTER, "shorter life or interval"),
            (LESS, "smaller margin"),
            (MOVED, "made again"),
            (ERRORS, "errors"),
        ),
    )
