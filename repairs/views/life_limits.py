"""The blind second keying of a life limit."""

from __future__ import annotations

from django.contrib import messages
from django.http import HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods

from fleet.access import require, visible_or_404
from fleet.clock import now
from fleet.models import LifeLimit
from fleet.views.requests import Request
from fleet.views.sending import sent
from repairs.forms.life_limits import LifeLimitForm
from repairs.services.reentry import life_limit_rekey

AGREED = "Both keyings of the life limit of {number} agree: it is in force."
DIFFERS = (
    "The second keying of the life limit of {number} differs from the first. The "
    "smaller of what is recorded governs meanwhile; compare both with the document."
)


@require_http_methods(["GET", "HEAD", "POST"])
def life_limit_again(request: Request, pk: int) -> HttpResponse:
    """Another person keys the limit from its document; the first is not shown."""
    rows = LifeLimit.objects.select_related(
        "part_number__operator", "configuration", "document"
    )
    limit = visible_or_404(rows, request.user, pk=pk)
    require(request.user, "requirement_rekey", limit.part_number.operator_id)
    form = LifeLimitForm(request.POST or None)
    made = sent(
        form,
        lambda: life_limit_rekey(
            actor=request.user, at=now(), limit=limit, **form.cleaned_data
        ),
        about=[limit],
        blind=True,
    )
    if made:
        text = (AGREED if made.agrees else DIFFERS).format(number=limit.part_number)
        (messages.success if made.agrees else messages.warning)(request, text)
        return redirect("part_list")
    context = {"form": form, "limit": limit}
    return render(request, "repairs/life_limit_again.html", context)
