"""Logging a finding: location, type, then its own dimensions; nothing typed is lost.

Works in plain HTML: choosing a damage type, reading the location or taking an offer is
a button that sends the form and gets it back with what it learnt.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Any

from django.contrib import messages
from django.http import HttpResponse, QueryDict
from django.shortcuts import redirect, render
from django.views.decorators.http import require_http_methods

from fleet.access import operators_for, require_somewhere
from fleet.clock import now, today
from fleet.models import Aircraft
from fleet.views.requests import Request
from fleet.views.sending import sent
from repairs.forms.dimensions import DimensionsForm
from repairs.forms.findings import LINK_KINDS, FindingForm
from repairs.forms.groups import Group, group
from repairs.measured import MeasuredError, Typed, measured_read, sizes_of
from repairs.models import DamageType, Finding
from repairs.selectors.choices import (
    aircraft_chosen,
    aircraft_of,
    events_of,
    people_at,
)
from repairs.selectors.duplicates import Candidate, duplicate_candidates
from repairs.selectors.neighbours import Near, neighbours
from repairs.services.findings import (
    FindingEntry,
    Link,
    finding_record,
    standing_on,
)
from repairs.services.photographs import Photo
from repairs.services.places import Placed, place_try

RECORDED = "{number} is recorded."
TO_PLACE = "{number} is recorded, to be placed."
ANSWER_FIRST = "Say for each earlier finding whether it is the same damage."
REFUSED = "{message} ({code})"
COUNTERS = ("minutes", "cycles", "landings")


@dataclass
class EntryPage:
    """The form as it stands, and what is known about what it says."""

    form: FindingForm
    dimensions: DimensionsForm
    aircraft: Aircraft | None
    placed: Placed | None = None
    candidates: list[tuple[Candidate, str]] = field(default_factory=list)
    near: list[Near] = field(default_factory=list)
    link_kinds: list[tuple[str, str]] = field(default_factory=lambda: LINK_KINDS)

    def groups(self) -> list[Group]:
        """The form's fields in the order they are asked; the rarer ones folded."""
        form = self.form
        return [
            group(form, "Counters when it was found", form.counter_fields),
            group(form, "How it was found", form.how_fields),
            group(form, "Photographs", form.photo_fields),
            group(form, "Structural item", form.item_fields, True),
            group(form, "More on how it was found", form.more_fields, True),
        ]

    def sizes(self) -> list[Group]:
        """The dimensions that are needed, then the others folded."""
        form = self.dimensions
        others = [name for name in form.fields if name not in form.first_names]
        return [
            group(form, "Dimensions", form.first_names),
            group(form, "Further dimensions", others, True),
        ]

    def first(self) -> list[Any]:
        return [self.form[name] for name in self.form.first_fields]


@require_http_methods(["GET", "HEAD", "POST"])
def finding_new(request: Request) -> HttpResponse:
    """The form; on save the finding, or the form with what is in the way."""
    require_somewhere(request.user, "finding_record")
    saving = request.POST.get("step") == "save"
    page = page_of(request, _said(request), bound=saving)
    if saving:
        made = sent(page.form, lambda: _save(request, page)) if _ready(page) else None
        if made:
            text = RECORDED if made.section_id else TO_PLACE
            messages.success(request, text.format(number=made))
            return redirect("finding", made.pk)
    return render(request, "repairs/finding_new.html", {"page": page})


def page_of(request: Request, said: QueryDict, *, bound: bool) -> EntryPage:
    """Forms filled with what was said, the location read, likely doubles found."""
    operators = operators_for(request.user, "finding_record")
    choices = aircraft_of(operators)
    aircraft = aircraft_chosen(choices, said.get("aircraft", ""))
    options: dict[str, Any] = {
        "aircraft": choices,
        "people": people_at(operators),
        "events": events_of(request.user, aircraft),
        "today": today(),
    }
    damage_type = said.get("damage_type", "")
    unit = aircraft.variant.aircraft_type.entry_unit if aircraft else "in"
    if bound:
        form = FindingForm(said, request.FILES, **options)
        dimensions = DimensionsForm(said, damage_type=damage_type, entry_unit=unit)
    else:
        form = FindingForm(initial=_initial(request, said, aircraft), **options)
        typed = {k[2:]: said.get(k) for k in said if k.startswith("d-")}
        dimensions = DimensionsForm(
            initial=typed, damage_type=damage_type, entry_unit=unit
        )
    page = EntryPage(form, dimensions, aircraft)
    if aircraft is not None and said.get("place_entered", "").strip():
        _look(request, page, said)
    return page


def _said(request: Request) -> QueryDict:
    """What was sent; taking an offer puts it in the place of the location."""
    said = (request.POST or request.GET).copy()
    if offer := said.get("offer"):
        said["place_entered"] = offer
    return said


def _initial(
    request: Request, said: QueryDict, aircraft: Aircraft | None
) -> dict[str, Any]:
    """What was said before, else today, the user and the counters as flown."""
    initial: dict[str, Any] = {"found_on": today(), "found_by": request.user.person_id}
    if aircraft is not None:
        flown = standing_on(aircraft, today()).at
        initial |= {
            "at_minutes": flown.minutes,
            "at_cycles": flown.cycles,
            "at_landings": flown.landings,
        }
    return initial | {name: value for name, value in said.items() if value}


def _look(request: Request, page: EntryPage, said: QueryDict) -> None:
    """Read the location, and look who was there before."""
    aircraft = page.aircraft
    assert aircraft is not None
    page.placed = placed = place_try(aircraft, said.get("place_entered", ""))
    damage_type = said.get("damage_type", "")
    seen = Finding(aircraft=aircraft, damage_type=damage_type, **placed.columns)
    if placed.place is not None:
        page.near = neighbours(seen, user=request.user).here
    if damage_type in DamageType.values:
        found = duplicate_candidates(seen, _sizes(said, page.dimensions))
        page.candidates = [
            (one, said.get(f"link-{one.finding.pk}", "")) for one in found
        ]


def _sizes(said: QueryDict, form: DimensionsForm) -> dict[str, float]:
    """Sizes as far as they can be read yet."""
    typed = [Typed(k[2:], said.get(k, "")) for k in said if k.startswith("d-")]
    found: dict[str, float] = {}
    for one in typed:
        try:
            found |= sizes_of(
                measured_read(form.damage_type, [one], entry_unit=form.entry_unit)
            )
        except MeasuredError:
            continue
    return found


def _ready(page: EntryPage) -> bool:
    """Whether nothing is in the way; each form says what is."""
    whole = page.form.is_valid() & page.dimensions.is_valid()
    refused = page.placed.refused if page.placed else None
    if refused is not None and not page.form.cleaned_data.get("unplaced"):
        text = REFUSED.format(code=refused.code, message=refused.message)
        page.form.add_error("place_entered", text)
        whole = False
    key = page.form.cleaned_data.get("client_key")
    asked = [a for one, a in page.candidates if one.finding.client_key != key]
    if not all(asked):
        page.form.add_error(None, ANSWER_FIRST)
        whole = False
    return whole


def _save(request: Request, page: EntryPage) -> Finding:
    data = dict(page.form.cleaned_data)
    aircraft = data["aircraft"]
    photographs = [
        Photo(upload, data["role"], data["caption"]) for upload in data["photographs"]
    ]
    stated = page.form.counters()
    flown = standing_on(aircraft, today()).at
    as_flown = all(
        getattr(stated, name) in (None, getattr(flown, name)) for name in COUNTERS
    )
    for name in (*page.form.counter_fields, "role", "caption", "unplaced"):
        data.pop(name)
    data["photographs"] = photographs
    return finding_record(
        entry=FindingEntry(
            **data,
            typed=page.dimensions.typed(),
            holes=page.dimensions.holes(),
            at=None if as_flown else stated,
            links=[Link(one.finding, kind) for one, kind in page.candidates],
        ),
        actor=request.user,
        at=now(),
    )
