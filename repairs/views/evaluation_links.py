"""Where each input of a calculation is entered, as an address."""

from __future__ import annotations

from django.urls import reverse

from repairs.models import Finding
from repairs.services.evaluation_place import Subject
from repairs.services.evaluation_prepare import InputLine, Where

MEASURE, STATE, ADOPT = "Measure it", "State it", "Adopt it"
LOOK = "Where it is recorded"
MEASURED = (Where.MEASURE, Where.SPREAD)


def entry_link(subject: Subject, line: InputLine) -> tuple[str, str]:
    """Address and words of the page an input is entered on; empty where there is none.

    What may be stated is stated; what the type or a policy holds is shown where it is
    kept.
    """
    if line.may_be_stated:
        return state_address(subject, line.name), STATE
    finding = subject.pk if isinstance(subject, Finding) else None
    if line.where in MEASURED and finding:
        return reverse("finding_measure", args=[finding]), MEASURE
    if line.where is Where.GEOMETRY and finding:
        return reverse("finding_place", args=[finding]), "Place it"
    if line.where in (Where.MATERIAL, Where.ADOPTED, Where.FLAW):
        return reverse("adopted_new"), ADOPT
    return _kept(subject, line.where)


def _kept(subject: Subject, where: Where) -> tuple[str, str]:
    aircraft = subject.aircraft
    if where in (Where.COUNTERS, Where.SKIN_COUNTERS):
        return reverse("usage", args=[aircraft.pk]), LOOK
    if where is Where.OPERATOR:
        return reverse("policies"), LOOK
    if where in (Where.VALIDITY, Where.EARLIER, Where.PERIOD):
        return reverse("aircraft", args=[aircraft.pk]), LOOK
    if where in (Where.FINDING, Where.REPAIR, Where.GEOMETRY, *MEASURED):
        what = "finding" if isinstance(subject, Finding) else "repair"
        return reverse(what, args=[subject.pk]), LOOK
    if where in (Where.ASKED, Where.DETECTABLE):
        return "#ask", "Choose it"
    if where is Where.EVALUATION:
        return "", ""
    code = aircraft.variant.aircraft_type.code
    return reverse("type", args=[code]), LOOK


def state_address(subject: Subject, name: str) -> str:
    """The page on which an input is stated."""
    what = "input_state" if isinstance(subject, Finding) else "input_state_repair"
    return reverse(what, args=[subject.pk, name])
