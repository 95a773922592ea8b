"""Adding an aircraft, its opening counters and its state."""

from __future__ import annotations

from django.contrib import messages
from django.http import HttpResponse
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods

from fleet.access import operators_for, require, require_somewhere, visible_or_404
from fleet.clock import now, today
from fleet.forms.aircraft import (
    AircraftForm,
    OpeningCorrectionForm,
    OpeningForm,
    PeriodForm,
    StateForm,
)
from fleet.selectors.aircraft import aircraft_visible
from fleet.services.aircraft import aircraft_add, aircraft_set_state
from fleet.services.opening import opening_correct, opening_rekey
from fleet.services.periods import aircraft_period_open
from fleet.views.requests import Request
from fleet.views.sending import sent

FORM_METHODS = ["GET", "HEAD", "POST"]
ADDED = "Recorded. A second person now keys the opening counters."
AGREED = "Both entries of the opening counters agree."
CORRECTED = "The first entry is corrected; a second person keys it again."
PERIOD_OPENED = "The period is recorded."
STATE_SET = "The state is recorded."


@require_http_methods(FORM_METHODS)
def aircraft_new(request: Request) -> HttpResponse:
    """A new aircraft with its first period, state and opening counters."""
    require_somewhere(request.user, "fleet_change")
    operators = operators_for(request.user, "fleet_change")
    form = AircraftForm(request.POST or None, operators=operators)
    made = sent(
        form,
        lambda: aircraft_add(**form.cleaned_data, actor=request.user, at=now()),
    )
    if made:
        messages.success(request, ADDED)
        return redirect("aircraft", made.pk)
    return render(request, "fleet/aircraft_new.html", {"form": form})


@require_http_methods(FORM_METHODS)
def aircraft_state(request: Request, pk: int) -> HttpResponse:
    """The next state of an aircraft, from a day on."""
    aircraft = visible_or_404(aircraft_visible(request.user), request.user, pk=pk)
    require(request.user, "fleet_change", aircraft.operator_id)
    form = StateForm(
        request.POST or None,
        type_id=aircraft.variant.aircraft_type_id,
        initial={"from_on": today()},
    )
    service = {"aircraft": aircraft, "actor": request.user, "at": now()}
    if sent(
        form,
        lambda: aircraft_set_state(**form.cleaned_data, **service),
        about=[aircraft, aircraft.spans.all()],
    ):
        messages.success(request, STATE_SET)
        return redirect("aircraft", pk)
    context = {"form": form, "aircraft": aircraft}
    return render(request, "fleet/aircraft_state.html", context)


@require_http_methods(FORM_METHODS)
def aircraft_period(request: Request, pk: int) -> HttpResponse:
    """Its next period: another registration, operator or set of rules."""
    aircraft = visible_or_404(aircraft_visible(request.user), request.user, pk=pk)
    require(request.user, "fleet_change", aircraft.operator_id)
    before = aircraft.periods.last()
    names = ("operator", "registration", "regime", "camo", "owner")
    form = PeriodForm(
        request.POST or None,
        operators=operators_for(request.user, "fleet_change"),
        initial={name: getattr(before, name, None) for name in names},
    )
    service = {"aircraft": aircraft, "actor": request.user, "at": now()}
    if sent(
        form,
        lambda: aircraft_period_open(**form.cleaned_data, **service),
        about=[aircraft, aircraft.periods.all()],
    ):
        messages.success(request, PERIOD_OPENED)
        return redirect("aircraft", pk)
    context = {"form": form, "aircraft": aircraft}
    return render(request, "fleet/aircraft_period.html", context)


@require_http_methods(FORM_METHODS)
def aircraft_opening(request: Request, pk: int) -> HttpResponse:
    """The blind second entry of the opening counters; its keyer may mend the first."""
    aircraft = visible_or_404(aircraft_visible(request.user), request.user, pk=pk)
    require(request.user, "opening_rekey", aircraft.operator_id)
    first = aircraft.opening_keyed_by_id == request.user.pk
    form = (OpeningCorrectionForm if first else OpeningForm)(request.POST or None)
    service = {"aircraft": aircraft, "actor": request.user, "at": now()}

    def save() -> None:
        counters = dict(form.cleaned_data)
        if first:
            reason = counters.pop("reason")
            opening_correct(counters=counters, reason=reason, **service)
        else:
            opening_rekey(counters=counters, **service)

    if sent(form, save, about=[aircraft], blind=not first):
        messages.success(request, CORRECTED if first else AGREED)
        return redirect("aircraft", pk)
    context = {"form": form, "aircraft": aircraft, "first": first}
    return render(request, "fleet/aircraft_opening.html", context)
