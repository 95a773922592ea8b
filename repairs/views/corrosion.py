"""Determining the corrosion level of a finding."""

from __future__ import annotations

from typing import Any

from django.contrib import messages
from django.forms.models import model_to_dict
from django.http import HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods

from fleet.access import require, visible_or_404
from fleet.clock import now, today
from fleet.views.requests import Request
from fleet.views.sending import sent
from repairs.forms.corrosion import LevelForm
from repairs.models import Finding
from repairs.selectors.choices import people_at
from repairs.selectors.findings import finding_whole
from repairs.selectors.report_triggers import level_now
from repairs.services.corrosion import LevelEntry, corrosion_level_determine

METHODS = ["GET", "HEAD", "POST"]
DETERMINED = "{number}: {level}, as determined. A correction replaces it."
INTRO = (
    "The level follows the definitions of your corrosion programme; name them. What "
    "is saved replaces the level before it, which stays on record."
)


@require_http_methods(METHODS)
def finding_level(request: Request, pk: int) -> HttpResponse:
    """The corrosion level of a finding, or its correction."""
    row: Finding = visible_or_404(finding_whole(request.user), request.user, pk=pk)
    require(request.user, "level_determine", row.aircraft.operator_id)
    form = LevelForm(
        request.POST or None,
        people=people_at([row.aircraft.operator]),
        today=today(),
        initial=_initial(request, row),
    )
    made = sent(
        form,
        lambda: corrosion_level_determine(
            finding=row,
            entry=LevelEntry(**form.cleaned_data),
            actor=request.user,
            at=now(),
        ),
        about=[row, *filter(None, [level_now(row)])],
    )
    if made:
        messages.success(request, DETERMINED.format(number=row, level=made))
        return redirect("finding", row.pk)
    context = {
        "finding": row,
        "forms": [form],
        "heading": "Corrosion level",
        "action": "Save the level",
        "intro": [INTRO],
    }
    return render(request, "repairs/finding_form.html", context)


def _initial(request: Request, row: Finding) -> dict[str, Any]:
    """The level that holds, to be corrected; the one who corrects determines it."""
    before = level_now(row)
    now_said = model_to_dict(before) if before else {
        "spread": "unknown", "single_rework": "unknown", "cumulative": "unknown",
        "task": row.task_reference, "last_inspected_on": row.last_clean_on,
    }  # fmt: skip
    return now_said | {
        "determined_by": request.user.person_id,
        "determined_on": today(),
    }
