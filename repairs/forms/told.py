"""Choices of one record, each told in a few words so that its number need not be known.

Their rows come from `repairs.selectors.choices`, with what the words name.
"""

from __future__ import annotations

from typing import Any

from django import forms

from fleet.forms.signing import NO_END

DECISION = "{number} {kind}, {findings}, {decided_on}"
EVENT = "{number} {kind}, {aircraft}, {happened_on}"
HOLDER = "{person}, {held}"
HELD = "{number} ({valid_from} to {valid_to})"


class DecisionChoice(forms.ModelChoiceField):
    """A disposition: what was decided, on which damage, when."""

    def label_from_instance(self, obj: Any) -> str:
        findings = [row.finding for row in obj.finding_rows.all()]
        return DECISION.format(
            number=obj.revised,
            kind=obj.get_kind_display(),
            findings=" and ".join(
                f"{one} {one.get_damage_type_display()}" for one in findings
            ),
            decided_on=obj.decided_on,
        )


class EventChoice(forms.ModelChoiceField):
    """An event: what happened, to which aircraft, when."""

    def label_from_instance(self, obj: Any) -> str:
        return EVENT.format(
            number=obj.number,
            kind=obj.get_kind_display(),
            aircraft=obj.aircraft,
            happened_on=obj.happened_on,
        )


class HolderChoice(forms.ModelChoiceField):
    """Who holds or held the authorisation asked: its number, from when until when."""

    def label_from_instance(self, obj: Any) -> str:
        held = [
            HELD.format(
                number=row.number,
                valid_from=row.valid_from,
                valid_to=row.valid_to or NO_END,
            )
            for row in obj.held
        ]
        return HOLDER.format(person=obj, held="; ".join(held))
