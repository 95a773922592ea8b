"""Fields of a form under headings, the rarer ones folded away."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from django.forms import Form
from django.forms.boundfield import BoundField


@dataclass(frozen=True)
class Group:
    """Fields under one heading; folded unless one of them says something."""

    legend: str
    fields: list[BoundField]
    folded: bool = False

    @property
    def is_open(self) -> bool:
        return any(one.errors or _said(one) for one in self.fields)


def group(form: Form, legend: str, names: Iterable[str], folded: bool = False) -> Group:
    """Those of the named fields that the form has."""
    return Group(legend, [form[n] for n in names if n in form.fields], folded)


def _said(one: BoundField) -> bool:
    return one.value() not in (None, "", [], one.field.initial)
