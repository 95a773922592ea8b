"""Occurrence reports: the list, one of them, and its steps."""

from __future__ import annotations

import datetime as dt
from collections.abc import Callable
from typing import Any

from django.contrib import messages
from django.core.paginator import Paginator
from django.forms import Form
from django.http import HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods, require_safe

from fleet.access import may, require, visible_or_404
from fleet.canonical import digest
from fleet.clock import moment, now, today
from fleet.selectors.history import history_of
from fleet.tables import csv_response
from fleet.views.pages import query_without_page
from fleet.views.requests import Request
from fleet.views.sending import sent
from repairs.forms.reports import (
    CloseReportForm,
    DecideReportForm,
    OpenReportForm,
    ReportFilter,
    SendReportForm,
    SupplementForm,
)
from repairs.models import Finding, OccurrenceReport
from repairs.selectors.findings import finding_whole
from repairs.selectors.report_draft import length_notice, report_draft
from repairs.selectors.report_rules import asked_by, regimes_open, zone_of
from repairs.selectors.report_triggers import triggers
from repairs.selectors.reports import (
    HEADER,
    export_row,
    open_only,
    report_lines,
    reports_shown,
)
from repairs.services.reports import (
    Reportability,
    Sending,
    report_close,
    report_decide,
    report_open,
    report_send,
    report_supplement,
)

METHODS = ["GET", "HEAD", "POST"]
PER_PAGE = 50
SAVED = "Saved."
SENT = "Recorded as sent; its text can no longer be altered, only supplemented."


@require_safe
def report_list(request: Request) -> HttpResponse:
    """Reports that are open, the overdue first; as a table file too."""
    form = ReportFilter(request.GET)
    rows = reports_shown(request.user)
    if not (form.is_valid() and form.cleaned_data["show"]):
        rows = open_only(rows)
    lines = report_lines(rows, moment=moment())
    if request.GET.get("format") == "csv":
        return csv_response("reports.csv", HEADER, map(export_row, lines))
    context = {
        "form": form,
        "page": Paginator(lines, PER_PAGE).get_page(request.GET.get("page")),
        "late": sum(line.late for line in lines),
        "query": query_without_page(request),
    }
    return render(request, "repairs/report_list.html", context)


@require_safe
def report(request: Request, pk: int) -> HttpResponse:
    """One report with its clock, what was sent, and its supplements."""
    row = visible_or_404(reports_shown(request.user), request.user, pk=pk)
    (line,) = report_lines([row], moment=moment())
    operator = row.operator_id
    known = may(request.user, "report_identity_read", operator)
    context = {
        "report": row,
        "line": line,
        "because": asked_by(row.operator, row.regime, row.detected_at).because,
        "triggers": triggers(row.finding) if row.finding else [],
        "supplements": [
            (one, digest(one.content)) for one in row.supplemented.order_by("number")
        ],
        "digest": digest(row.content) if row.content else "",
        "draft": None if row.content else report_draft(row),
        "zone": zone_of(row.operator)[0].key,
        "known": known,
        "history": history_of(row) if known else [],
        "may_decide": may(request.user, "report_decide", operator),
        "may_send": may(request.user, "report_send", operator),
    }
    return render(request, "repairs/report.html", context)


@require_http_methods(METHODS)
def report_decide_page(request: Request, pk: int) -> HttpResponse:
    """The answer, with its reason; undecided is no answer."""
    row = _row(request, pk, "report_decide")
    zone, _ = zone_of(row.operator)
    detected = row.detected_at.astimezone(zone)
    form = DecideReportForm(
        request.POST or None, zone=zone, until=moment(),
        initial={"detected_on": detected.date(), "detected_time": detected.time()},
    )  # fmt: skip

    def save() -> object:
        data = form.cleaned_data
        return report_decide(
            report=row,
            answer=Reportability(data["reportable"] == "yes", data["reason"]),
            decided_by=request.user.person,
            detected_at=form.moment("detected_on", "detected_time"),
            actor=request.user,
            at=now(),
        )

    return _page(request, row, form, save, "Is it reportable?", "Save the answer")


@require_http_methods(METHODS)
def report_send_page(request: Request, pk: int) -> HttpResponse:
    """What was sent; the draft may be altered here, and is kept as it went out."""
    row = _row(request, pk, "report_send")
    draft = report_draft(row)
    form = SendReportForm(
        request.POST or None, zone=zone_of(row.operator)[0], until=moment(),
        initial={"sent_on": today(), "content": draft.text},
    )  # fmt: skip

    def save() -> object:
        return report_send(
            report=row, sending=_sending(form), actor=request.user, at=now()
        )

    lacking = draft.lacking
    return _page(request, row, form, save, "Send", "Record as sent", lacking=lacking)


@require_http_methods(METHODS)
def report_supplement_page(request: Request, pk: int) -> HttpResponse:
    """More on a report that was sent, as a row of its own."""
    row = _row(request, pk, "report_send")
    (line,) = report_lines([row], moment=moment())
    form = SupplementForm(
        request.POST or None, zone=zone_of(row.operator)[0], until=moment(),
        waiting=line.waiting, initial={"sent_on": today()},
    )  # fmt: skip

    def save() -> object:
        chosen = form.waiting.get(form.cleaned_data["answers"])
        return report_supplement(
            report=row,
            sending=_sending(form),
            answers=chosen.policy if chosen else None,
            decided_by=request.user.person,
            actor=request.user,
            at=now(),
        )

    return _page(request, row, form, save, "Supplement", "Record as sent")


@require_http_methods(METHODS)
def report_close_page(request: Request, pk: int) -> HttpResponse:
    """The organisation is done with it."""
    row = _row(request, pk, "report_send")
    form = CloseReportForm(request.POST or None)

    def save() -> object:
        return report_close(
            report=row, **form.cleaned_data, actor=request.user, at=now()
        )

    return _page(request, row, form, save, "Close", "Close the report")


@require_http_methods(METHODS)
def finding_report(request: Request, pk: int) -> HttpResponse:
    """Ask whether it is reportable, under rules that do not ask by themselves."""
    row: Finding = visible_or_404(finding_whole(request.user), request.user, pk=pk)
    require(request.user, "report_decide", row.aircraft.operator_id)
    form = OpenReportForm(request.POST or None, regimes=regimes_open(row))
    made = sent(
        form,
        lambda: report_open(
            subject=row, **form.cleaned_data, actor=request.user, at=now()
        ),
    )
    if made:
        return redirect("report_decide", made.pk)
    context = {
        "finding": row,
        "forms": [form],
        "heading": "Occurrence report",
        "action": "Ask the question",
    }
    return render(request, "repairs/finding_form.html", context)


def _row(request: Request, pk: int, action: str) -> OccurrenceReport:
    row = visible_or_404(reports_shown(request.user), request.user, pk=pk)
    require(request.user, action, row.operator_id)
    return row


def _sending(form: SendReportForm) -> Sending:
    data = form.cleaned_data
    return Sending(
        form.moment("sent_on", "sent_time").astimezone(dt.UTC),
        data["reference"],
        data["recipients"],
        data["content"],
    )


def _page(
    request: Request,
    row: OccurrenceReport,
    form: Form,
    save: Callable[[], object],
    heading: str,
    action: str,
    **more: Any,
) -> HttpResponse:
    """Save and go back to the report, or the page with what is in the way."""
    content = form.data.get("content", form.initial.get("content", ""))
    notice = length_notice(row, content) if content else ""
    if sent(form, save, about=[row]):
        messages.success(request, SENT if content else SAVED)
        if notice:
            messages.warning(request, notice)
        return redirect("report", row.pk)
    (line,) = report_lines([row], moment=moment())
    context = {
        "report": row, "line": line, "form": form, "heading": heading,
        "action": action, "notice": notice,
    }  # fmt: skip
    return render(request, "repairs/report_form.html", context | more)
