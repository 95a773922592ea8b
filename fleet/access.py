"""Who may do what, in one place.

A row of another operator is not found (404); an act the role may not do is refused
(403). Reading is open to every role of the operator.
"""

from __future__ import annotations

from typing import Any, TypeVar

from django.core.exceptions import PermissionDenied
from django.db.models import Model, QuerySet
from django.http import Http404

from fleet.models import Operator, Role, User

Row = TypeVar("Row", bound=Model)

RECORDER, ENGINEER, CERTIFIER = Role.RECORDER, Role.ENGINEER, Role.CERTIFIER
SIGNATORY, PLANNER, ADMIN = Role.SIGNATORY, Role.PLANNER, Role.ADMINISTRATOR
MANAGER, AUDITOR = Role.MANAGER, Role.AUDITOR

ROLES_FOR: dict[str, frozenset[str]] = {
    action: frozenset(roles)
    for action, roles in {
        "finding_record": (RECORDER, ENGINEER, CERTIFIER),
        "finding_measure": (RECORDER, ENGINEER, CERTIFIER),
        "finding_assess": (ENGINEER, CERTIFIER),
        "level_determine": (ENGINEER, CERTIFIER),
        "report_decide": (ENGINEER, CERTIFIER, MANAGER),
        "report_send": (ENGINEER, CERTIFIER, MANAGER),
        "report_identity_read": (ENGINEER, CERTIFIER, MANAGER, ADMIN),
        "disposition_decide": (ENGINEER, CERTIFIER, SIGNATORY),
        "evaluation_make": (ENGINEER, SIGNATORY),
        "checks_read": (ENGINEER, SIGNATORY, AUDITOR),
        "approval_sign": (ENGINEER, SIGNATORY),
        "substantiation_draft": (ENGINEER, SIGNATORY),
        "repair_record": (RECORDER, ENGINEER, CERTIFIER),
        "repair_inspect": (ENGINEER, CERTIFIER, SIGNATORY),
        "repair_reclassify": (ENGINEER,),
        "document_applicability_record": (ENGINEER, SIGNATORY),
        "requirement_raise": (ENGINEER,),
        "requirement_rekey": (ENGINEER, PLANNER, SIGNATORY),
        "accomplishment_record": (CERTIFIER, ENGINEER),
        "usage_record": (PLANNER, CERTIFIER),
        "part_change": (PLANNER, CERTIFIER),
        "survey_record": (RECORDER, ENGINEER, CERTIFIER),
        "survey_answer": (ENGINEER, CERTIFIER),
        "event_record": (RECORDER, ENGINEER, CERTIFIER, PLANNER),
        "fleet_change": (ADMIN,),
        "opening_rekey": (ADMIN, PLANNER, ENGINEER, CERTIFIER),
        "people_change": (ADMIN,),
        "policy_set": (ADMIN,),
        "value_adopt": (ENGINEER,),
        "value_confirm": (ENGINEER, SIGNATORY),
        "history_read": (AUDITOR, MANAGER, ADMIN),
        "backup_watch": (ADMIN,),
    }.items()
}


def may(user: User, action: str, operator_id: int) -> bool:
    """Whether the user's roles at that operator allow the action."""
    return not ROLES_FOR[action].isdisjoint(user.roles_at(operator_id))


def may_somewhere(user: User, action: str) -> bool:
    """Whether any operator of the user allows the action: for menus and forms."""
    return any(may(user, action, row.operator_id) for row in user.open_memberships)


def require(user: User, action: str, operator_id: int) -> None:
    """Raise PermissionDenied (403) unless the user's roles allow the action there."""
    if not may(user, action, operator_id):
        raise refused(action)


def require_somewhere(user: User, action: str) -> None:
    """Raise PermissionDenied (403) unless it is allowed at one of the operators."""
    if not may_somewhere(user, action):
        raise refused(action)


def refused(action: str) -> PermissionDenied:
    return PermissionDenied(
        f"Your role does not allow this ({action.replace('_', ' ')}). "
        f"It is open to: {', '.join(sorted(ROLES_FOR[action]))}."
    )


def visible_or_404(rows: QuerySet[Row], user: User, **key: Any) -> Row:
    """The row, if the user may see it; otherwise it is not found (404)."""
    row = rows.visible_to(user).filter(**key).distinct().first()  # type: ignore[attr-defined]
    if row is None:
        raise Http404("No such record, or it belongs to another operator.")
    return row


def operators_for(user: User, action: str) -> list[Operator]:
    """Operators at which the user may do the action."""
    seen = {row.operator_id: row.operator for row in user.open_memberships}
    return [operator for pk, operator in seen.items() if may(user, action, pk)]
