"""Filters that put a number, its unit and its separators on screen, one way each."""

from __future__ import annotations

from django import template

from fleet.models import Criticality
from fleet.units import measure_write

register = template.Library()


@register.filter
def thousands(value: int | None) -> str:
    """12345 -> 12,345; unknown -> an em dash."""
    return "—" if value is None else f"{value:,}"


@register.filter
def hours(minutes: int | None) -> str:
    """Flight time as h:mm; unknown -> an em dash."""
    if minutes is None:
        return "—"
    sign = "−" if minutes < 0 else ""
    whole, rest = divmod(abs(minutes), 60)
    return f"{sign}{whole:,}:{rest:02d}"


@register.filter
def decimals(value: float | None, places: int = 1) -> str:
    """A number with so many decimals and a true minus sign; unknown -> an em dash."""
    if value is None:
        return "—"
    return f"{value:,.{places}f}".replace("-", "−")


@register.filter
def measure(value: float | None, unit: str) -> str:
    """A canonical value in a reader's unit, with that unit; unknown -> an em dash."""
    return "—" if value is None else measure_write(value, unit)


@register.filter
def words(value: str) -> str:
    """A stored word as it is said: detailed_visual -> detailed visual."""
    return value.replace("_", " ")


@register.filter
def criticality(value: str) -> str:
    """A stored criticality as its mark: principal -> PSE."""
    return str(Criticality(value).label)
