"""What comes next for a finding, and whether the reader may do it."""

from __future__ import annotations

from dataclasses import dataclass

from django.urls import reverse

from fleet.access import may
from fleet.models import User
from repairs.models import Disposition, DispositionKind, Finding, FindingState

S = FindingState


@dataclass(frozen=True, slots=True)
class Step:
    """A page to go to, and its word."""

    address: str
    words: str


def next_step(finding: Finding, problems: list[str], user: User) -> Step | None:
    """The one step that comes next; None when it is not the reader's to take."""
    name, words, action = _next(finding, problems)
    if not name or not may(user, action, finding.aircraft.operator_id):
        return None
    address = reverse(name, args=[] if name == "repair_new" else [finding.pk])
    if name == "repair_new":
        address += f"?aircraft={finding.aircraft_id}&finding={finding.pk}"
    return Step(address, words)


def deferral_to_extend(row: Disposition, user: User) -> Step | None:
    """Where a deferral that runs is extended; None when it is over or replaced."""
    if row.kind != DispositionKind.DEFER or hasattr(row, "replaced_by"):
        return None
    rows = row.finding_rows.filter(finding__state=S.DEFERRED).order_by("finding")
    key = rows.values_list("finding", flat=True).first()
    if key is None or not may(user, "disposition_decide", row.aircraft.operator_id):
        return None
    return _extend(key)


def _extend(key: int) -> Step:
    return Step(f"{reverse('disposition_new', args=[key])}?kind=defer", "Extend")


def further_steps(finding: Finding, user: User) -> list[Step]:
    """Other pages of the finding that the reader may use."""
    open_to_change = finding.state not in (S.DUPLICATE, S.VOIDED)
    offered = [
        ("finding_measure", "Measure", "finding_measure", open_to_change),
        (
            "finding_place",
            "Place",
            "finding_record",
            finding.state == S.REPORTED,
        ),
        ("evaluation_new", "Evaluate", "evaluation_make", open_to_change),
        ("sisters_new", "Look on the sisters", "requirement_raise", open_to_change),
        ("finding_photographs", "Add photographs", "finding_measure", True),
        ("finding_link", "Link", "finding_assess", open_to_change),
        (
            "finding_void",
            "Void",
            "finding_assess",
            finding.state in (S.REPORTED, S.ASSESSED),
        ),
    ]
    steps = [
        Step(reverse(name, args=[finding.pk]), words)
        for name, words, action, possible in offered
        if possible and may(user, action, finding.aircraft.operator_id)
    ]
    may_decide = may(user, "disposition_decide", finding.aircraft.operator_id)
    if finding.state == S.DEFERRED and may_decide:
        steps.insert(0, _extend(finding.pk))
    may_draft = may(user, "substantiation_draft", finding.aircraft.operator_id)
    if open_to_change and may_draft:
        address = f"{reverse('substantiation_new')}?finding={finding.pk}"
        steps.append(Step(address, "Draft a substantiation"))
    if open_to_change and may(user, "repair_record", finding.aircraft.operator_id):
        said = f"?aircraft={finding.aircraft_id}&finding={finding.pk}"
        steps.append(Step(reverse("repair_plan") + said, "Plan a repair"))
    return steps


def _next(finding: Finding, problems: list[str]) -> tuple[str, str, str]:
    if finding.state == S.REPORTED:
        if finding.section_id is None:
            return "finding_place", "Place it", "finding_record"
        if any(text.startswith("Measure") for text in problems):
            return "finding_measure", "Measure", "finding_measure"
        return "finding_assess", "Assess", "finding_assess"
    if finding.state in (S.ASSESSED, S.ACCEPTED, S.DEFERRED):
        return "disposition_new", "Disposition", "disposition_decide"
    if finding.state == S.TO_RECTIFY:
        return "repair_new", "Record the repair", "repair_record"
    if finding.state == S.RECTIFIED:
        return "finding_close", "Close", "finding_assess"
    return "", "", ""
