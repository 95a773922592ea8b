"""A finding against the operator's own recorded limits, both numbers kept."""

from __future__ import annotations

import operator
from collections.abc import Iterable

from django.db.models import Q

from fleet.canonical import canonical
from fleet.models import KeyedState
from fleet.services.history import Writing
from repairs.models import Finding, LimitCheck, LimitRule, Measurement, RecordedLimit

COMPARISONS = {
    "at_most": ("≤", operator.le),
    "at_least": ("≥", operator.ge),
    "less_than": ("<", operator.lt),
    "more_than": (">", operator.gt),
}


def limits_check(
    w: Writing, *, finding: Finding, measurement: Measurement | None
) -> list[LimitCheck]:
    """Inside a writing: one row for each recorded limit in force, or one saying none.

    A dimension that was not measured is a missing input, never within a limit.
    """
    limits = list(limits_in_force(finding))
    if not limits:
        return w.create_many([_row(w, finding, measurement, None, "not_covered", [])])
    sizes = {}
    if measurement is not None:
        known = measurement.values.filter(value__isnull=False)
        sizes = dict(known.values_list("quantity", "value"))
    rows = []
    for limit in limits:
        lines = [_line(rule, sizes.get(rule.quantity)) for rule in limit.rules.all()]
        rows.append(_row(w, finding, measurement, limit, _outcome(lines), lines))
    return w.create_many(rows)


def limits_in_force(finding: Finding) -> Iterable[RecordedLimit]:
    """Recorded limits for this damage type here, of the day it was found."""
    panel = finding.panel.label if finding.panel else ""
    return RecordedLimit.objects.filter(
        Q(section__isnull=True) | Q(section=finding.section_id),
        panel_label__in=("", panel),
        operator=finding.operator_id,
        aircraft_type=finding.aircraft.variant.aircraft_type_id,
        damage_type=finding.damage_type,
        state=KeyedState.IN_FORCE,
        effective_from__lte=finding.found_on,
    ).prefetch_related("rules")


def _line(rule: LimitRule, measured: float | None) -> dict[str, object]:
    sign, holds = COMPARISONS[rule.comparison]
    return {
        "quantity": rule.quantity,
        "measured": measured,
        "sign": sign,
        "limit": rule.value,
        "entered": rule.entered,
        "holds": None if measured is None else bool(holds(measured, rule.value)),
    }


def _outcome(lines: list[dict[str, object]]) -> str:
    answers = [line["holds"] for line in lines]
    if False in answers:
        return "beyond"
    return "missing_input" if None in answers or not answers else "within"


def _row(
    w: Writing,
    finding: Finding,
    measurement: Measurement | None,
    limit: RecordedLimit | None,
    outcome: str,
    lines: list[dict[str, object]],
) -> LimitCheck:
    return LimitCheck(
        finding=finding,
        measurement=measurement,
        limit=limit,
        outcome=outcome,
        checked_at=w.at,
        lines=canonical(lines),
    )
