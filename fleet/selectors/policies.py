"""The rules' numbers as an operator reads them: its own and those offered to it."""

from __future__ import annotations

import datetime as dt
from collections.abc import Callable, Sequence
from dataclasses import dataclass

from django.db.models import Q

from fleet.models import Operator, Policy

RULES = {
    "backup_hours": "the last backup is no older than",
    "detection_target_percent": "a plan finds the crack, in the worst phase, in",
    "fitted_thickness_percent": "a thickness fitted may differ by",
    "largest_interval_fatigue_critical": "inspections of FCS repeat at most every",
    "largest_interval_principal": "inspections of PSE repeat at most every",
    "largest_interval_secondary": "inspections of secondary structure, at most every",
    "late_entry_days": "a release is entered within",
    "report_final_months": "final analysis of an occurrence within",
    "report_holiday": "a holiday, not counted as a workday",
    "report_hours": "an occurrence is reported within",
    "report_level_3_days": "level 3 corrosion: report and fleet inspection within",
    "report_period_begins": "a reporting period begins, local time, at",
    "report_period_hours": "an occurrence is reported, from the period's end, within",
    "report_preliminary_days": "preliminary analysis of an occurrence within",
    "report_text_characters": "characters in the text of a report, at most",
    "review_reach_mm": "neighbours are reviewed within",
    "second_factor_required": "a second factor is needed to sign",
    "stage_2_months": "stage 2 of a repair's approval within",
    "survey_answer_days": "what a survey found is answered within",
}
"""What each rule that the program reads says, before its number."""

SAID: dict[str, Callable[[Policy], str]] = {
    "report_holiday": lambda row: row.effective_from.isoformat(),
    "report_period_begins": lambda row: f"{row.value:02d}:00",
    "second_factor_required": lambda row: "yes" if row.value else "no",
}
"""Rules whose number is read otherwise than as an amount."""

SAYS = "{rule} {value}: {source}, from {since}"
OF_REGIME = "{regime}: {rule}"


def rule_words(key: str) -> str:
    """What a rule says, before its number; a key of the operator's own as words."""
    return RULES.get(key, key.replace("_", " "))


def policy_number(row: Policy) -> str:
    """The number with its unit: "12 months", "508 mm", "10 %"."""
    if row.key in SAID:
        return SAID[row.key](row)
    unit = row.unit if row.unit == "hours" else row.get_unit_display()
    if row.value == 1:
        unit = unit.removesuffix("s")
    return f"{row.value:,} {unit}".strip()


def policy_words(row: Policy) -> str:
    """One edition as every list prints it: the rule, its number, source and start."""
    rule = rule_words(row.key)
    if row.regime:
        rule = OF_REGIME.format(rule=rule, regime=row.regime)
    return SAYS.format(
        rule=rule,
        value=policy_number(row),
        source=policy_source(row),
        since=row.effective_from,
    )


def policy_source(row: Policy) -> str:
    """The document and its edition."""
    return ", ".join(filter(None, (row.source, row.edition)))


@dataclass(frozen=True)
class PolicyLine:
    """One row, and whether it is the one that counts on the day of the page."""

    row: Policy
    governs: bool

    @property
    def words(self) -> str:
        return rule_words(self.row.key)

    @property
    def unread(self) -> bool:
        return self.row.grade == "memory"


def policy_lines(operator: Operator, *, day: dt.date) -> list[PolicyLine]:
    """Every revision of every key, the governing one of each first; one query."""
    rows = Policy.objects.filter(
        Q(operator=operator)
        | Q(operator__isnull=True, regime__in=("", operator.regime))
    ).select_related("operator")
    by_key: dict[str, list[Policy]] = {}
    for row in rows:
        by_key.setdefault(row.key, []).append(row)
    lines: list[PolicyLine] = []
    for key in sorted(by_key):
        governing = _governing(by_key[key], day)
        ordered = sorted(
            by_key[key], key=lambda row: (row is governing, row.effective_from)
        )
        lines += [PolicyLine(row, row is governing) for row in reversed(ordered)]
    return lines


def _governing(rows: Sequence[Policy], day: dt.date) -> Policy | None:
    """The operator's own before the one offered; the newest that is in force."""
    in_force = [
        row
        for row in rows
        if row.effective_from <= day
        and (row.effective_to is None or day <= row.effective_to)
    ]
    return max(
        in_force,
        key=lambda row: (row.operator_id is not None, row.effective_from),
        default=None,
    )


def policy_to_replace(operator: Operator, key: str) -> Policy | None:
    """The operator's own newest row of the key, which the next revision replaces."""
    own = Policy.objects.filter(operator=operator, key=key, replaced_by__isnull=True)
    return own.order_by("effective_from", "pk").last()
