"""What every writing on a draft needs: the draft itself, held, and its neighbours."""

from __future__ import annotations

from django.core.exceptions import ValidationError

from fleet.models import Joint
from fleet.services.history import Writing
from repairs.models import Finding, Repair, Substantiation, SubstantiationNeighbour
from repairs.selectors.review_reach import (
    Neighbour,
    Within,
    review_reach,
    reviewed_from,
    within_reach,
)

SIGNED = (
    "{folder} is signed, so it does not change any more; revise it, and change the new "
    "revision."
)
REVISED_ALREADY = "{folder} was revised already; {later} is the latest."


def draft_of(substantiation: Substantiation) -> Substantiation:
    """The revision, held; ValidationError when somebody has signed it."""
    row = held(substantiation)
    if row.approvals.exists():
        raise ValidationError(SIGNED.format(folder=row))
    return row


def latest_of(substantiation: Substantiation) -> Substantiation:
    """The revision, held; ValidationError when a later one replaces it."""
    row = held(substantiation)
    later = Substantiation.objects.filter(
        operator=row.operator, number=row.number
    ).latest("revision")
    if later.pk != row.pk:
        raise ValidationError(REVISED_ALREADY.format(folder=row, later=later))
    return row


def held(substantiation: Substantiation) -> Substantiation:
    """The revision, fresh and held until the end of the writing."""
    rows = Substantiation.objects.select_for_update(of=("self",))
    related = ("aircraft__operator", "operator", "prepared_by")
    return rows.select_related(*related).get(pk=substantiation.pk)


def neighbours_write(w: Writing, row: Substantiation) -> list[Within]:
    """List what is within reach and not listed yet; what it was is returned.

    What has come to be covered, or is out of reach now, is withdrawn; a gap that is
    no longer the same is measured anew, and its answer has to be given again.
    """
    reach = review_reach(row, w.at.date())
    near = within_reach(reviewed_from(row), float(reach.value) if reach else None)
    rows = row.neighbours.select_related("finding", "repair", "joint")
    listed = {_key(one): one for one in rows}
    added = [one for one in near if one.key not in listed]
    for found in added:
        w.create(_neighbour(row, found))
    inside = {one.key: one for one in near}
    for key, held_row in listed.items():
        _relisted(w, held_row, inside.get(key))
    return added


def _key(row: SubstantiationNeighbour) -> tuple[type[Neighbour], int]:
    item = row.finding or row.repair or row.joint
    assert item is not None  # the table's own rule: exactly one
    return type(item), item.pk


def _neighbour(row: Substantiation, one: Within) -> SubstantiationNeighbour:
    item = one.item
    return SubstantiationNeighbour(
        substantiation=row,
        finding=item if isinstance(item, Finding) else None,
        repair=item if isinstance(item, Repair) else None,
        joint=item if isinstance(item, Joint) else None,
        gap_mm=one.gap_mm,
    )


def _relisted(w: Writing, row: SubstantiationNeighbour, now: Within | None) -> None:
    if now is None:
        w.change(row, withdrawn=True)
        return
    if row.gap_mm is not None and abs(row.gap_mm - now.gap_mm) < 0.05:
        w.change(row, withdrawn=False)
        return
    w.change(
        row,
        withdrawn=False,
        gap_mm=now.gap_mm,
        answer="",
        reason="",
        reviewed_by_id=None,
        reviewed_on=None,
    )
