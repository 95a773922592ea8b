"""Opening counters are keyed twice: the second person does not see the first entry."""

from __future__ import annotations

import datetime as dt
from collections.abc import Mapping

from django.core.exceptions import ValidationError

from fleet.models import Aircraft, User
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing

COLUMNS = {
    "opening_minutes": "flight hours",
    "opening_cycles": "flight cycles",
    "opening_landings": "landings",
    "opening_pressurisations": "pressurisation cycles",
}
DISAGREES = (
    "Your {what} differs from the first entry. Read the evidence again; if yours is "
    "right, {who} corrects the first entry, and you key it once more."
)
AGREED = "These opening counters were keyed by two people who agreed; they stand."
SAME_PERSON = "You keyed these counters first; a second person keys them again."
NOT_YOURS = "Only {who}, who keyed the counters first, corrects that entry."
NO_REASON = "Say why the first entry is corrected."


def opening_rekey(
    *,
    aircraft: Aircraft,
    counters: Mapping[str, int | None],
    actor: User,
    at: dt.datetime,
) -> None:
    """The blind second entry; any difference is refused without showing the first."""
    with _writing(aircraft, "opening_rekey", actor, at) as w:
        row = _unagreed(w, aircraft)
        if row.opening_keyed_by_id == actor.pk:
            raise ValidationError(SAME_PERSON)
        who = row.opening_keyed_by or "an administrator"
        differing = {
            column: DISAGREES.format(what=what, who=who)
            for column, what in COLUMNS.items()
            if getattr(row, column) != counters[column]
        }
        if differing:
            raise ValidationError(differing)
        w.change(row, opening_rekeyed_by_id=actor.pk)


def opening_correct(
    *,
    aircraft: Aircraft,
    counters: Mapping[str, int | None],
    reason: str,
    actor: User,
    at: dt.datetime,
) -> None:
    """The first entry mended by whoever keyed it, as long as nobody agreed with it."""
    if not reason.strip():
        raise ValidationError({"reason": NO_REASON})
    with _writing(aircraft, "opening_correct", actor, at, reason) as w:
        row = _unagreed(w, aircraft)
        if row.opening_keyed_by_id not in (None, actor.pk):
            raise ValidationError(NOT_YOURS.format(who=row.opening_keyed_by))
        period = row.periods.order_by("from_on").first()
        values = {column: counters[column] for column in COLUMNS}
        w.change(row, opening_keyed_by_id=actor.pk, **values)
        if period is not None:
            began = {k.replace("opening", "at"): v for k, v in values.items()}
            w.change(period, **began)


def _unagreed(w: Writing, aircraft: Aircraft) -> Aircraft:
    row = w.locked(Aircraft.objects.all(), pk=aircraft.pk)
    if row.opening_rekeyed_by_id is not None:
        raise ValidationError(AGREED)
    return row


def _writing(
    aircraft: Aircraft, action: str, actor: User, at: dt.datetime, reason: str = ""
) -> Writing:
    return Writing(
        actor=actor,
        action=action,
        at=at,
        operator=aircraft.operator,
        stream=stream_of(aircraft),
        reason=reason,
    )
