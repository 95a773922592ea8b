"""The state of a record as a word with a shape that no damage symbol uses."""

from __future__ import annotations

from django import template
from django.utils.html import format_html
from django.utils.safestring import SafeString, mark_safe

from fleet.units import measure_write

register = template.Library()

_SHAPES = {
    "reported": "",
    "assessed": '<path d="M4.5 8h7"/>',
    "accepted": '<path d="M4.5 8h7M8 4.5v7"/>',
    "deferred": '<path d="M8 4.5V8h3.5"/>',
    "to_rectify": '<path d="M4.5 4.5l7 7M11.5 4.5l-7 7"/>',
    "rectified": '<path d="M4.5 8.5l2.5 3 4.5-7"/>',
    "closed": '<path d="M4.5 6h7M4.5 10h7"/>',
    "duplicate": '<path d="M1.5 14.5l13-13"/>',
    "voided": '<path d="M1.5 14.5l13-13"/>',
}
_URGENT = frozenset({"to_rectify"})


@register.filter
def about(value: float, unit: str) -> str:
    """A distance to be read at a glance: 11.1 in, 282 mm."""
    return measure_write(value, unit, digits=1 if unit == "in" else 0)


@register.simple_tag
def state_mark(row: object) -> SafeString:
    """ "assessed" and its square; urgent ones in the colour of what is overdue."""
    state = row.state  # type: ignore[attr-defined]
    words = row.get_state_display()  # type: ignore[attr-defined]
    shape = mark_safe(_SHAPES.get(state, ""))
    return format_html(
        '<span class="state{}"><svg viewBox="0 0 16 16" width="14" height="14" '
        'aria-hidden="true"><rect x="1.5" y="1.5" width="13" height="13"/>{}</svg> '
        "{}</span>",
        " bad" if state in _URGENT else "",
        shape,
        words,
    )
