"""Recorded spectra: the newest of each name, and where each is used."""

from __future__ import annotations

from dataclasses import dataclass

from django.db.models import Count, Q, QuerySet

from fleet.models import Panel, Spectrum, User
from fleet.selectors.kept import of_the_fleet
from repairs.models import EvaluationInput, StatedInput

PUBLISHED = "published"


def spectra_in_force() -> QuerySet[Spectrum]:
    """The newest revision of every spectrum, by name."""
    return Spectrum.objects.filter(replaced_by__isnull=True)


@of_the_fleet
def spectrum_newest(pk: int) -> Spectrum:
    """The revision in force of a spectrum that a panel or a statement names."""
    row = Spectrum.objects.select_related("replaced_by").get(pk=pk)
    while hasattr(row, "replaced_by"):
        row = row.replaced_by
    return row


def spectra_listed() -> QuerySet[Spectrum]:
    """The newest revisions with how many panels of geometries in force name them."""
    named = Count("panels", filter=Q(panels__geometry__state=PUBLISHED))
    return spectra_in_force().annotate(panels_count=named)


@dataclass(frozen=True, slots=True)
class Uses:
    """Where a spectrum is used, as far as the user may see."""

    panels: list[Panel]
    stated: list[StatedInput]
    evaluations: int


def spectrum_uses(row: Spectrum, user: User) -> Uses:
    """Panels that name it, places it is stated for, evaluations read from it."""
    panels = Panel.objects.filter(spectrum=row, geometry__state=PUBLISHED)
    stated = StatedInput.objects.visible_to(user).filter(
        spectrum=row, replaced_by__isnull=True
    )
    made = EvaluationInput.objects.visible_to(user).filter(spectrum=row)
    return Uses(
        list(panels.select_related("section", "geometry__aircraft_type")),
        list(stated.select_related("finding__aircraft", "repair__aircraft")),
        made.count(),
    )


def spectrum_revisions(row: Spectrum) -> QuerySet[Spectrum]:
    """Every revision of its name, the newest first."""
    return Spectrum.objects.filter(name=row.name).order_by("-revision")
