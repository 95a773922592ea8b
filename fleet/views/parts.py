"""Safe-life parts: the list, one serial with its installation card, on and off."""

from __future__ import annotations

from typing import Any

from django.contrib import messages
from django.core.paginator import Paginator
from django.http import HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods, require_safe

from fleet.access import (
    may,
    may_somewhere,
    operators_for,
    require,
    require_somewhere,
    visible_or_404,
)
from fleet.clock import now, today
from fleet.due import COUNTED
from fleet.forms.part_records import LifeLimitForm, PartForm
from fleet.forms.parts import InstallForm, PartFilter, RemoveForm
from fleet.models import PartNumber, PartState, SafeLifePart
from fleet.selectors.history import history_of
from fleet.selectors.part_lines import PartLine, card_of, nearest_first, parts_shown
from fleet.selectors.parts import part_life, part_lives
from fleet.services.part_records import life_limit_key, part_record
from fleet.services.parts import part_install, part_remove
from fleet.views.aircraft import FORM_METHODS
from fleet.views.pages import query_without_page
from fleet.views.requests import Request
from fleet.views.sending import sent

ACTION = "part_change"
PER_PAGE = 100
INSTALLED = "{part} is installed; its life counts from these counters."
ADDED = "{part} is in store."
KEYED = (
    "The life limit {limit} is keyed. Another person keys it again; meanwhile it "
    "governs where it is the smaller."
)
REMOVED = "{part} is removed."


@require_safe
def part_list(request: Request) -> HttpResponse:
    """Every serial with each of its life limits; what ends first leads."""
    form = PartFilter(request.GET)
    wanted = form.cleaned_data if form.is_valid() else {}
    lives = part_lives(parts_shown(request.user, **wanted), as_of=today())
    pages = Paginator(nearest_first(lives), PER_PAGE)
    context = {
        "form": form,
        "page": pages.get_page(request.GET.get("page")),
        "query": query_without_page(request),
        "may_add": may_somewhere(request.user, ACTION),
    }
    return render(request, "fleet/part_list.html", context)


@require_safe
def part(request: Request, pk: int) -> HttpResponse:
    """Life status in every counter, and the installation history card."""
    row = _part(request, pk)
    life = part_life(row, as_of=today())
    allowed = may(request.user, ACTION, row.operator_id)
    context = {
        "part": row,
        "line": PartLine(life, life.status()),
        "life": life,
        "card": card_of(life),
        "history": history_of(row),
        "may_key_again": may(request.user, "requirement_rekey", row.operator_id),
        "may_install": allowed and row.state == PartState.IN_STORE,
        "may_remove": allowed and row.state == PartState.INSTALLED,
    }
    return render(request, "fleet/part.html", context)


def _part(request: Request, pk: int) -> SafeLifePart:
    return visible_or_404(parts_shown(request.user), request.user, pk=pk)


@require_http_methods(FORM_METHODS)
def part_on(request: Request, pk: int) -> HttpResponse:
    """Install a part from store."""
    row = _part(request, pk)
    require(request.user, ACTION, row.operator_id)
    form = InstallForm(
        request.POST or None, operator=row.operator, initial={"on": today()}
    )
    service: dict[str, Any] = {"actor": request.user, "at": now(), "part": row}
    if sent(
        form, lambda: part_install(**service, **form.service_columns()), about=[row]
    ):
        messages.success(request, INSTALLED.format(part=row))
        return redirect("part", pk)
    return render(request, "fleet/part_install.html", {"form": form, "part": row})


@require_http_methods(FORM_METHODS)
def part_off(request: Request, pk: int) -> HttpResponse:
    """Remove a part, with the aircraft's counters as flown filled in."""
    row = _part(request, pk)
    require(request.user, ACTION, row.operator_id)
    carrier = part_life(row, as_of=today()).carrier
    initial: dict[str, Any] = {"on": today(), "state": PartState.IN_STORE}
    if carrier is not None:
        initial |= {f"at_{x.value}": carrier.counters[x] for x in COUNTED}
    form = RemoveForm(request.POST or None, initial=initial)
    service: dict[str, Any] = {"actor": request.user, "at": now(), "part": row}
    if sent(form, lambda: _remove(form, service), about=[row]):
        messages.success(request, REMOVED.format(part=row))
        return redirect("part", pk)
    return render(request, "fleet/part_remove.html", {"form": form, "part": row})


def _remove(form: RemoveForm, service: dict[str, Any]) -> Any:
    columns = form.service_columns()
    return part_remove(**service, **columns | {"state": PartState(columns["state"])})


@require_http_methods(FORM_METHODS)
def part_new(request: Request) -> HttpResponse:
    """A serial, in store; its part number may be new."""
    require_somewhere(request.user, ACTION)
    operator = operators_for(request.user, ACTION)[0]
    form = PartForm(request.POST or None, operator=operator)

    def save() -> SafeLifePart:
        data = dict(form.cleaned_data)
        service: dict[str, Any] = {"actor": request.user, "at": now()}
        number, title = data.pop("new_number"), data.pop("new_title")
        if number:
            data["part_number"] = PartNumber(
                operator=operator, number=number, title=title
            )
        return part_record(**service, **data)

    made = sent(form, save)
    if made:
        messages.success(request, ADDED.format(part=made))
        return redirect("part", made.pk)
    return render(request, "fleet/part_new.html", {"form": form})


@require_http_methods(FORM_METHODS)
def life_limit_new(request: Request) -> HttpResponse:
    """A life limit keyed from its document."""
    require_somewhere(request.user, ACTION)
    operator = operators_for(request.user, ACTION)[0]
    form = LifeLimitForm(
        request.POST or None, operator=operator, initial={"effective_from": today()}
    )
    service: dict[str, Any] = {"actor": request.user, "at": now()}
    made = sent(form, lambda: life_limit_key(**service, **form.cleaned_data))
    if made:
        messages.success(request, KEYED.format(limit=made))
        return redirect("part_list")
    return render(request, "fleet/life_limit_new.html", {"form": form})
