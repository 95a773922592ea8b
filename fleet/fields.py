"""Columns that carry their own bounds down into the database.

A check on the column stops what a form, a service or a hand at the SQL prompt lets
through: NaN and infinity, a word outside its list, a counter below zero.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import Any

from django.core.exceptions import ValidationError
from django.core.validators import MaxValueValidator, MinValueValidator
from django.db import models


def finite(value: float) -> None:
    """NaN compares false with every bound, so it needs a test of its own."""
    if not math.isfinite(value):
        raise ValidationError(
            "Read %(value)s; expected a number.", params={"value": value}
        )


class _Bounded(models.Field):
    """A number with bounds, checked by Django and by the database."""

    def __init__(self, *args: Any, low: float, high: float, **kwargs: Any) -> None:
        self.low, self.high = low, high
        super().__init__(*args, **kwargs)
        self.validators = [
            *self.validators,
            finite,
            MinValueValidator(low),
            MaxValueValidator(high),
        ]

    def deconstruct(self) -> Any:
        name, path, args, kwargs = super().deconstruct()
        kwargs |= {"low": self.low, "high": self.high}
        kwargs.pop("validators", None)
        return name, path, args, kwargs

    def db_check(self, connection: Any) -> str:
        column = connection.ops.quote_name(self.column)
        return f"{column} >= {self.low!r} AND {column} <= {self.high!r}"


class Measure(_Bounded, models.FloatField):
    """A measured or calculated number; the unit is the end of the column's name."""


class Count(_Bounded, models.BigIntegerField):
    """A counted number: cycles, minutes, days, an ordinal."""


class Word(models.TextField):
    """One word of a closed list; the database knows the list too."""

    def __init__(
        self, *, choices: Any = None, words: Sequence[str] = (), **kwargs: Any
    ) -> None:
        if choices is None:
            choices = [(word, word.replace("_", " ")) for word in words]
        self.words = tuple(value for value, _ in getattr(choices, "choices", choices))
        super().__init__(choices=choices, **kwargs)

    def deconstruct(self) -> Any:
        name, path, args, kwargs = super().deconstruct()
        kwargs.pop("choices", None)
        kwargs["words"] = list(self.words)
        return name, path, args, kwargs

    def db_check(self, connection: Any) -> str:
        allowed = (*self.words, "") if self.blank else self.words
        listed = ", ".join(f"'{word}'" for word in allowed)
        return f"{connection.ops.quote_name(self.column)} IN ({listed})"


COUNTER_HIGH = 2_000_000_000
MM_HIGH = 200_000.0


def counter(**kwargs: Any) -> Count:
    """An accumulated counter: minutes, cycles, landings or pressurisation cycles."""
    return Count(low=0, high=COUNTER_HIGH, **kwargs)


def optional_counter(**kwargs: Any) -> Count:
    """A counter that may be unknown (NULL); unknown is never zero."""
    return Count(low=0, high=COUNTER_HIGH, null=True, blank=True, **kwargs)


def optional_measure(low: float, high: float, **kwargs: Any) -> Measure:
    """A number that may be unknown (NULL)."""
    return Measure(low=low, high=high, null=True, blank=True, **kwargs)


def text(**kwargs: Any) -> models.TextField:
    """Free text that may be empty."""
    return models.TextField(blank=True, default="", **kwargs)
