"""Every address of the site: what it is for, and who gets it.

A page that is not here fails tests/reports/test_access_matrix.py, so that nobody adds
one without saying whose it is.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass
from typing import Any

from django.urls import URLPattern, URLResolver

from fleet.access import ROLES_FOR
from fleet.models import Role
from tests.one_of_each import OneOfEach

WHAT_IF = "?use=found_damage&if_crack_length=30+mm&sensitivity=1"
READ, FORM, SEND, PUBLIC = "read", "form", "send", "public"
Keys = Callable[[OneOfEach], dict[str, Any]]


def nothing(_: OneOfEach) -> dict[str, Any]:
    return {}


@dataclass(frozen=True)
class Page:
    """What an address is for.

    `action` is the act its roles follow from; empty opens it to every role. `keys` are
    the parts of its address. `former` is what a former operator of the aircraft gets.
    `query` shows the page at work in a browser; what is no page has no `looks`.
    `sends` is the act behind a form on a page that every role may read.
    """

    kind: str = READ
    action: str = ""
    keys: Keys = nothing
    former: int = 404
    shared: bool = False
    query: str = ""
    looks: bool = True
    sends: str = ""

    @property
    def roles(self) -> frozenset[str]:
        return self.roles_for("get")

    def roles_for(self, method: str) -> frozenset[str]:
        action = (method == "post" and self.sends) or self.action
        return ROLES_FOR[action] if action else frozenset(Role.values)

    @property
    def methods(self) -> list[str]:
        """How the address is used; as a page first."""
        if self.kind == SEND:
            return ["post"]
        return ["get", "post"] if self.kind == FORM or self.sends else ["get"]


def key(name: str) -> Keys:
    return lambda each: {"pk": getattr(each, name).pk}


def aircraft(each: OneOfEach) -> dict[str, Any]:
    return {"pk": each.world.aircraft.pk}


def subject(each: OneOfEach) -> dict[str, Any]:
    return {"pk": each.requirement.pk, "subject_pk": each.subject.pk}


def neighbour(each: OneOfEach) -> dict[str, Any]:
    return {"pk": each.folder.pk, "row_pk": each.folder.neighbours.earliest("pk").pk}


def folder_row(each: OneOfEach) -> dict[str, Any]:
    row = each.folder.cases.get()
    return {"pk": each.folder.pk, "what": "case", "row_pk": row.pk}


def stating(what: str) -> Keys:
    return lambda each: {"pk": getattr(each, what).pk, "name": "hole_pitch"}


def flown(each: OneOfEach) -> dict[str, Any]:
    row = each.world.aircraft.usage.earliest("day")
    return {"pk": row.aircraft_id, "row_pk": row.pk}


def of_kind(_: OneOfEach) -> dict[str, Any]:
    return {"kind": "sequence"}


def of_type(**more: str) -> Keys:
    return lambda each: {"code": each.world.variant.aircraft_type.code, **more}


PAGES: dict[str, Page] = {
    "sign_in": Page(PUBLIC),
    "sign_in_code": Page(PUBLIC),
    "password_new": Page(PUBLIC),
    "account": Page(),
    "password": Page(FORM),
    "second_factor": Page(FORM),
    "second_factor_reset": Page(FORM, "people_change", key("membership")),
    "password_reset": Page(FORM, "people_change", key("membership")),
    "sign_in_unlock": Page(FORM, "people_change", key("membership")),
    "sign_out": Page(SEND),
    "overview": Page(),
    "aircraft_list": Page(),
    "aircraft_new": Page(FORM, "fleet_change"),
    "aircraft": Page(keys=aircraft, former=200),
    "aircraft_state": Page(FORM, "fleet_change", aircraft, former=403),
    "aircraft_period": Page(FORM, "fleet_change", aircraft, former=403),
    "aircraft_opening": Page(FORM, "opening_rekey", aircraft, former=403),
    "type": Page(keys=of_type(), shared=True),
    "structure_map": Page(keys=of_type(section="FUS"), shared=True),
    "people": Page(action="people_change"),
    "person_new": Page(FORM, "people_change"),
    "organisation_new": Page(FORM, "people_change"),
    "membership_new": Page(FORM, "people_change"),
    "membership_end": Page(FORM, "people_change", key("membership")),
    "authorisation_new": Page(FORM, "people_change"),
    "adopted_list": Page(),
    "spectrum_list": Page(),
    "spectrum": Page(keys=key("spectrum"), shared=True),
    "spectrum_new": Page(FORM, "value_adopt", of_kind, shared=True),
    "spectrum_revise": Page(FORM, "value_adopt", key("spectrum"), shared=True),
    "adopted_new": Page(FORM, "value_adopt"),
    "adopted_confirm": Page(FORM, "value_confirm", key("adopted")),
    "documents": Page(),
    "document_applicability": Page(
        FORM, "document_applicability_record", key("document")
    ),
    "policies": Page(),
    "policy_new": Page(FORM, "policy_set"),
    "history": Page(action="history_read"),
    "seals": Page(action="history_read"),
    "keeping": Page(action="history_read"),
    "due_list": Page(),
    "density": Page(),
    "finding_list": Page(),
    "finding_new": Page(FORM, "finding_record"),
    "finding": Page(keys=key("finding")),
    "finding_place": Page(FORM, "finding_record", key("finding")),
    "finding_measure": Page(FORM, "finding_measure", key("finding")),
    "finding_assess": Page(FORM, "finding_assess", key("finding")),
    "finding_close": Page(FORM, "finding_assess", key("finding")),
    "finding_link": Page(FORM, "finding_assess", key("finding")),
    "finding_void": Page(FORM, "finding_assess", key("finding")),
    "finding_level": Page(FORM, "level_determine", key("corroded")),
    "finding_report": Page(FORM, "report_decide", key("finding")),
    "report_list": Page(),
    "late_list": Page(),
    "report": Page(keys=key("report")),
    "report_decide": Page(FORM, "report_decide", key("report")),
    "report_send": Page(FORM, "report_send", key("report")),
    "report_supplement": Page(FORM, "report_send", key("report")),
    "report_close": Page(FORM, "report_send", key("report")),
    "finding_photographs": Page(FORM, "finding_measure", key("finding")),
    "finding_answer": Page(SEND, "finding_assess", key("question")),
    "sisters_new": Page(FORM, "requirement_raise", key("finding")),
    "requirement_list": Page(),
    "requirement_new": Page(FORM, "requirement_raise"),
    "requirement": Page(keys=key("requirement")),
    "requirement_answer": Page(FORM, "requirement_raise", key("requirement")),
    "requirement_again": Page(FORM, "requirement_rekey", key("requirement")),
    "accomplishment_new": Page(FORM, "accomplishment_record", subject),
    "accomplishment_correct": Page(
        FORM, "accomplishment_record", key("accomplishment")
    ),
    "requirement_verify": Page(FORM, "accomplishment_record", subject),
    "attachment": Page(keys=key("attachment"), looks=False),
    "evaluation_new": Page(FORM, "evaluation_make", key("crack"), query=WHAT_IF),
    "evaluation_new_repair": Page(FORM, "evaluation_make", key("repair")),
    "evaluation_list": Page(),
    "recalculation_list": Page(sends="evaluation_make"),
    "recalculation": Page(keys=key("recalculation")),
    "recalculation_go_on": Page(SEND, "evaluation_make", key("recalculation")),
    "evaluation": Page(keys=key("evaluation")),
    "evaluation_note": Page(keys=key("evaluation")),
    "input_state": Page(FORM, "evaluation_make", stating("crack")),
    "input_state_repair": Page(FORM, "evaluation_make", stating("repair")),
    "input_take_back": Page(FORM, "evaluation_make", key("stated")),
    "checks": Page(action="checks_read"),
    "evaluation_again": Page(SEND, "evaluation_make", key("evaluation")),
    "disposition_new": Page(FORM, "disposition_decide", key("finding")),
    "disposition": Page(keys=key("disposition")),
    "repair_list": Page(),
    "repair_new": Page(FORM, "repair_record"),
    "repair": Page(keys=key("repair")),
    "repair_plan": Page(FORM, "repair_record"),
    "repair_release": Page(FORM, "repair_record", key("planned")),
    "repair_start": Page(SEND, "repair_record", key("planned")),
    "repair_step": Page(FORM, "repair_record", key("planned")),
    "repair_inspect": Page(FORM, "repair_inspect", key("planned")),
    "repair_cancel": Page(FORM, "repair_record", key("planned")),
    "repair_reclassify": Page(FORM, "repair_reclassify", key("repair")),
    "repair_photographs": Page(FORM, "repair_record", key("repair")),
    "repair_remove": Page(FORM, "repair_record", key("repair")),
    "repair_status": Page(keys=aircraft, former=200),
    "disposition_sign": Page(FORM, "approval_sign", key("disposition")),
    "repair_sign": Page(FORM, "approval_sign", key("repair")),
    "evaluation_sign": Page(FORM, "approval_sign", key("evaluation")),
    "before_release": Page(keys=aircraft),
    "survey_list": Page(keys=aircraft),
    "survey_new": Page(FORM, "survey_record", aircraft),
    "survey": Page(keys=key("survey")),
    "survey_lines": Page(FORM, "survey_record", key("survey")),
    "survey_import": Page(FORM, "survey_record", key("survey")),
    "survey_compare": Page(SEND, "survey_record", key("survey")),
    "survey_close": Page(FORM, "survey_answer", key("survey")),
    "survey_match": Page(SEND, "survey_record", key("survey_item")),
    "survey_answer": Page(FORM, "survey_answer", key("survey_item")),
    "substantiation_list": Page(),
    "substantiation_new": Page(FORM, "substantiation_draft"),
    "substantiation": Page(keys=key("folder")),
    "substantiation_edit": Page(FORM, "substantiation_draft", key("folder")),
    "substantiation_revise": Page(FORM, "substantiation_draft", key("folder")),
    "substantiation_neighbours": Page(SEND, "substantiation_draft", key("folder")),
    "substantiation_neighbour": Page(FORM, "substantiation_draft", neighbour),
    "substantiation_finding": Page(FORM, "substantiation_draft", key("folder")),
    "substantiation_repair": Page(FORM, "substantiation_draft", key("folder")),
    "substantiation_case": Page(FORM, "substantiation_draft", key("folder")),
    "substantiation_effects": Page(FORM, "substantiation_draft", key("folder")),
    "substantiation_document": Page(FORM, "substantiation_draft", key("folder")),
    "substantiation_withdraw": Page(SEND, "substantiation_draft", folder_row),
    "substantiation_sign": Page(FORM, "approval_sign", key("folder")),
    "usage": Page(keys=aircraft, sends="usage_record"),
    "usage_correct": Page(FORM, "usage_record", flown),
    "part_list": Page(),
    "part_new": Page(FORM, "part_change"),
    "life_limit_new": Page(FORM, "part_change"),
    "life_limit_again": Page(FORM, "requirement_rekey", key("life_limit")),
    "part": Page(keys=key("part")),
    "part_install": Page(FORM, "part_change", key("part")),
    "part_remove": Page(FORM, "part_change", key("part")),
}


def names(patterns: list[Any]) -> Iterator[str]:
    for pattern in patterns:
        if isinstance(pattern, URLResolver):
            yield from names(pattern.url_patterns)
        elif isinstance(pattern, URLPattern):
            yield pattern.name or str(pattern.pattern)
