"""Addresses of findings, repairs, evaluations, inspections and structure maps."""

from __future__ import annotations

from django.urls import path

from repairs.views import (
    accomplishments,
    adopted,
    approvals,
    attachments,
    checks,
    corrosion,
    dispositions,
    evaluation_list,
    evaluations,
    finding_entry,
    finding_steps,
    findings,
    late_entries,
    life_limits,
    maps,
    recalculations,
    repair_entry,
    repair_steps,
    repairs,
    reports,
    requirements,
    spectra,
    stated,
    substantiation_rows,
    substantiations,
    surveys,
)

urlpatterns = [
    path("spectra/", spectra.spectrum_list, name="spectrum_list"),
    path("spectra/new/<str:kind>/", spectra.spectrum_new, name="spectrum_new"),
    path("spectra/<int:pk>/", spectra.spectrum, name="spectrum"),
    path(
        "spectra/<int:pk>/revise/",
        spectra.spectrum_revise_page,
        name="spectrum_revise",
    ),
    path("adopted/", adopted.adopted_list, name="adopted_list"),
    path("adopted/new/", adopted.adopted_new, name="adopted_new"),
    path("adopted/<int:pk>/confirm/", adopted.adopted_confirm, name="adopted_confirm"),
    path("findings/", findings.finding_list, name="finding_list"),
    path("findings/new/", finding_entry.finding_new, name="finding_new"),
    path("findings/<int:pk>/", findings.finding, name="finding"),
    path("findings/<int:pk>/place/", finding_steps.finding_place, name="finding_place"),
    path(
        "findings/<int:pk>/measure/",
        finding_steps.finding_measure,
        name="finding_measure",
    ),
    path(
        "findings/<int:pk>/assess/",
        finding_steps.finding_assess_page,
        name="finding_assess",
    ),
    path(
        "findings/<int:pk>/close/",
        finding_steps.finding_close_page,
        name="finding_close",
    ),
    path(
        "findings/<int:pk>/link/",
        finding_steps.finding_link_page,
        name="finding_link",
    ),
    path(
        "findings/<int:pk>/void/",
        finding_steps.finding_void_page,
        name="finding_void",
    ),
    path(
        "findings/<int:pk>/photographs/",
        finding_steps.finding_photographs,
        name="finding_photographs",
    ),
    path("findings/<int:pk>/level/", corrosion.finding_level, name="finding_level"),
    path("findings/<int:pk>/report/", reports.finding_report, name="finding_report"),
    path("late/", late_entries.late_list, name="late_list"),
    path("reports/", reports.report_list, name="report_list"),
    path("reports/<int:pk>/", reports.report, name="report"),
    path("reports/<int:pk>/decide/", reports.report_decide_page, name="report_decide"),
    path("reports/<int:pk>/send/", reports.report_send_page, name="report_send"),
    path(
        "reports/<int:pk>/supplement/",
        reports.report_supplement_page,
        name="report_supplement",
    ),
    path("reports/<int:pk>/close/", reports.report_close_page, name="report_close"),
    path("questions/<int:pk>/", finding_steps.finding_answer, name="finding_answer"),
    path("findings/<int:pk>/sisters/", accomplishments.sisters_new, name="sisters_new"),
    path("requirements/", requirements.requirement_list, name="requirement_list"),
    path("requirements/new/", requirements.requirement_new, name="requirement_new"),
    path("requirements/<int:pk>/", requirements.requirement, name="requirement"),
    path(
        "requirements/<int:pk>/again/",
        requirements.requirement_again,
        name="requirement_again",
    ),
    path(
        "requirements/<int:pk>/answer/",
        accomplishments.subject_new,
        name="requirement_answer",
    ),
    path(
        "requirements/<int:pk>/done/<int:subject_pk>/",
        accomplishments.accomplishment_new,
        name="accomplishment_new",
    ),
    path(
        "accomplishments/<int:pk>/correct/",
        accomplishments.accomplishment_correct,
        name="accomplishment_correct",
    ),
    path(
        "requirements/<int:pk>/verify/<int:subject_pk>/",
        accomplishments.termination_check,
        name="requirement_verify",
    ),
    path(
        "findings/<int:pk>/disposition/",
        dispositions.disposition_new,
        name="disposition_new",
    ),
    path("dispositions/<int:pk>/", dispositions.disposition, name="disposition"),
    *(
        path(
            f"{what}s/<int:pk>/sign/",
            approvals.approval_new,
            {"what": what},
            name=f"{what}_sign",
        )
        for what in approvals.SUBJECTS
    ),
    path("repairs/", repairs.repair_list, name="repair_list"),
    path("repairs/new/", repair_entry.repair_new, name="repair_new"),
    path("repairs/plan/", repair_entry.repair_plan_page, name="repair_plan"),
    path("repairs/<int:pk>/", repairs.repair, name="repair"),
    path(
        "repairs/<int:pk>/release/", repair_entry.repair_release, name="repair_release"
    ),
    *(
        path(f"repairs/<int:pk>/{word}/", page, name=f"repair_{word}")
        for word, page in {
            "start": repair_steps.repair_start_page,
            "step": repair_steps.repair_step_page,
            "inspect": repair_steps.repair_inspect_page,
            "reclassify": repair_steps.repair_reclassify_page,
            "cancel": repair_steps.repair_cancel_page,
        }.items()
    ),
    path(
        "repairs/<int:pk>/photographs/",
        repair_steps.repair_photographs,
        name="repair_photographs",
    ),
    path(
        "repairs/<int:pk>/remove/",
        repair_steps.repair_remove_page,
        name="repair_remove",
    ),
    path(
        "aircraft/<int:pk>/repairs/", repairs.repair_status_page, name="repair_status"
    ),
    path(
        "life-limits/<int:pk>/again/",
        life_limits.life_limit_again,
        name="life_limit_again",
    ),
    path("aircraft/<int:pk>/surveys/", surveys.survey_list, name="survey_list"),
    path("aircraft/<int:pk>/surveys/new/", surveys.survey_new, name="survey_new"),
    path("surveys/<int:pk>/", surveys.survey, name="survey"),
    path("surveys/<int:pk>/lines/", surveys.survey_lines, name="survey_lines"),
    path("surveys/<int:pk>/import/", surveys.survey_import, name="survey_import"),
    path(
        "surveys/<int:pk>/compare/", surveys.survey_compare_page, name="survey_compare"
    ),
    path("surveys/<int:pk>/close/", surveys.survey_close_page, name="survey_close"),
    path(
        "survey-items/<int:pk>/match/", surveys.survey_match_page, name="survey_match"
    ),
    path(
        "survey-items/<int:pk>/answer/",
        surveys.survey_answer_page,
        name="survey_answer",
    ),
    path("attachments/<int:pk>/", attachments.attachment, name="attachment"),
    path(
        "findings/<int:pk>/evaluate/",
        evaluations.evaluation_new,
        name="evaluation_new",
    ),
    path(
        "repairs/<int:pk>/evaluate/",
        evaluations.evaluation_new_repair,
        name="evaluation_new_repair",
    ),
    path(
        "substantiations/",
        substantiations.substantiation_list,
        name="substantiation_list",
    ),
    path(
        "substantiations/new/",
        substantiations.substantiation_new,
        name="substantiation_new",
    ),
    path(
        "substantiations/<int:pk>/",
        substantiations.substantiation,
        name="substantiation",
    ),
    path(
        "substantiations/<int:pk>/edit/",
        substantiations.substantiation_edit_page,
        name="substantiation_edit",
    ),
    path(
        "substantiations/<int:pk>/revise/",
        substantiations.substantiation_revise_page,
        name="substantiation_revise",
    ),
    *(
        path(f"substantiations/<int:pk>/{one}/", view, name=f"substantiation_{one}")
        for one, view in substantiation_rows.ADDED.items()
    ),
    path(
        "substantiations/<int:pk>/neighbours/<int:row_pk>/",
        substantiation_rows.substantiation_neighbour,
        name="substantiation_neighbour",
    ),
    path(
        "substantiations/<int:pk>/<str:what>/<int:row_pk>/withdraw/",
        substantiation_rows.substantiation_withdraw,
        name="substantiation_withdraw",
    ),
    path(
        "recalculations/", recalculations.recalculation_list, name="recalculation_list"
    ),
    path(
        "recalculations/<int:pk>/", recalculations.recalculation, name="recalculation"
    ),
    path(
        "recalculations/<int:pk>/go-on/",
        recalculations.recalculation_go_on,
        name="recalculation_go_on",
    ),
    path(
        "findings/<int:pk>/state/<str:name>/",
        stated.input_state_finding,
        name="input_state",
    ),
    path(
        "repairs/<int:pk>/state/<str:name>/",
        stated.input_state_repair,
        name="input_state_repair",
    ),
    path(
        "stated/<int:pk>/take-back/",
        stated.input_take_back_page,
        name="input_take_back",
    ),
    path("checks/", checks.checks, name="checks"),
    path("evaluations/", evaluation_list.evaluation_list, name="evaluation_list"),
    path("evaluations/<int:pk>/", evaluations.evaluation, name="evaluation"),
    path(
        "evaluations/<int:pk>/note/",
        evaluations.evaluation_note,
        name="evaluation_note",
    ),
    path(
        "evaluations/<int:pk>/again/",
        evaluations.evaluation_again,
        name="evaluation_again",
    ),
    path(
        "types/<str:code>/<str:section>/map/",
        maps.structure_map,
        name="structure_map",
    ),
]
