"""Stage clocks on the due list: opened, counted anew, closed.

A clock hangs on the repair that uses the folder; for damage that stays unrepaired on
the folder itself, from the day and counters of the first decision citing it.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterable

from django.db.models import Q

from fleet.due import Counters
from fleet.models import Criticality
from fleet.selectors.life_limits import columns
from fleet.services.history import Writing
from repairs.models import (
    Disposition,
    DispositionKind,
    DueKind,
    DuePoint,
    Finding,
    FindingState,
    Repair,
    RepairCategory,
    RepairState,
    RequirementState,
    Substantiation,
)
from repairs.selectors.review_reach import findings_covered
from repairs.selectors.stage_clock import (
    Clock,
    Limited,
    Start,
    clock_of,
    folder_clock,
)
from repairs.selectors.substantiation_stages import (
    approved_revision,
    revisions_of,
    stage_reached,
)
from repairs.services.due_points import (
    due_point_close,
    due_point_open,
    due_points_close,
)

SETTLED = (
    FindingState.RECTIFIED,
    FindingState.CLOSED,
    FindingState.DUPLICATE,
    FindingState.VOIDED,
)
PENDING_STAGES = ("none", "1", "2")
KEEPS_DAMAGE = (
    DispositionKind.ACCEPT,
    DispositionKind.ACCEPT_WITH_INSPECTION,
    DispositionKind.DEFER,
)
STAGE_APPROVED = "stage {stage} approved: {folder}"
CLOCK_AGREES_NOW = "counted anew after {folder}"
REPAIR_SAYS_NOW = "{repair}: category {category}; approval stage reached: {stage}"
CARRIED_BY = "the clock runs on {repair}"


def stage_clocks_follow(w: Writing, folder: Substantiation, *, on: dt.date) -> None:
    """After a stage was approved: the clocks of the folder's repairs, or its own."""
    repairs = Repair.objects.filter(
        substantiation__operator=folder.operator_id,
        substantiation__number=folder.number,
        state=RepairState.EMBODIED,
    )
    keys = list(repairs.order_by("pk").values_list("pk", flat=True))
    for key in keys:
        row = w.locked(Repair.objects.select_related("aircraft", "operator"), pk=key)
        repair_clock_follow(w, row, on=on)
    if not keys:
        _own_clock_follow(w, folder, on)


def repair_clock_follow(w: Writing, repair: Repair, *, on: dt.date) -> None:
    """The repair's stage and clock as its folder, or what was said of it, has them.

    Opened when an approval stage is still to come, moved when one was approved, closed
    after the last; the old one stays in the record as it was.
    """
    folder = repair.substantiation
    if folder is not None:
        w.change(repair, stage_reached=_stage_word(repair, folder))
    clock = _repair_clock(repair) if repair.state == RepairState.EMBODIED else None
    if folder is not None and repair.state == RepairState.EMBODIED:
        _own_clocks_close(w, folder, on, CARRIED_BY.format(repair=repair))
    reason = _reason(folder) if folder else _of_repair(repair)
    _follow(w, repair, [repair], clock, on, reason)


def _of_repair(repair: Repair) -> str:
    """Why a clock without a folder ends: what the repair says of itself now."""
    return REPAIR_SAYS_NOW.format(
        repair=repair,
        category=repair.get_category_display(),
        stage=repair.get_stage_reached_display(),
    )


def _stage_word(repair: Repair, folder: Substantiation) -> str:
    reached = stage_reached(folder)
    if not reached and not _critical(repair):
        return "not_applicable"
    return str(reached) if reached else "none"


def _repair_clock(repair: Repair) -> Clock | None:
    start = Start(
        repair.number,
        f"release of {repair.number}",
        repair.released_on or repair.entered_at.date(),
        columns(repair, "at"),
    )
    if repair.substantiation is not None:
        return folder_clock(repair.substantiation, start) if _critical(repair) else None
    b_waits = (
        repair.category == RepairCategory.B
        and repair.stage_reached in PENDING_STAGES
        and not repair.requirements.filter(state=RequirementState.EFFECTIVE).exists()
    )
    pending = repair.category == RepairCategory.PENDING and _critical(repair)
    if not (b_waits or pending):
        return None
    reached = int(repair.stage_reached) if repair.stage_reached in ("1", "2") else 0
    temporary = Limited(Counters(cycles=repair.temporary_limit_cycles))
    return clock_of(repair.operator, start, reached, temporary, Limited())


def _critical(item: Repair | Finding) -> bool:
    """PSE, FCS, or nobody has said: unknown is not acceptable."""
    return item.criticality != Criticality.SECONDARY


def disposition_clock_follow(w: Writing, disposition: Disposition) -> None:
    """A decision cites a folder: the clock of damage that stays starts with it."""
    folder = disposition.substantiation
    if folder is None:
        return
    used = Repair.objects.filter(
        substantiation__operator=folder.operator_id,
        substantiation__number=folder.number,
        state=RepairState.EMBODIED,
    )
    if not used.exists():
        _own_clock_follow(w, folder, disposition.decided_on)


def _own_clock_follow(w: Writing, folder: Substantiation, on: dt.date) -> None:
    first = (
        Disposition.objects.filter(
            substantiation__operator=folder.operator_id,
            substantiation__number=folder.number,
            kind__in=KEEPS_DAMAGE,
        )
        .order_by("decided_on", "pk")
        .first()
    )
    revisions = list(revisions_of(folder).select_related("aircraft"))
    standing = [one for one in findings_covered(folder) if one.state not in SETTLED]
    clock = None
    if first is not None and any(map(_critical, standing)):
        words = f"the decision {first.number}"
        at = columns(first, "at")
        start = Start(folder.number, words, first.decided_on, at)
        clock = folder_clock(folder, start)
    _follow(w, folder, revisions, clock, on, _reason(folder))


def findings_clocks_close(
    w: Writing, findings: Iterable[Finding], *, on: dt.date, reason: str
) -> None:
    """Close the clocks of folders whose last open finding is settled by this."""
    folders = Substantiation.objects.filter(
        Q(finding_rows__finding__in=list(findings), finding_rows__withdrawn=False),
        due_points__closed_on__isnull=True,
        due_points__kind=DueKind.STAGE_CLOCK,
    )
    for folder in folders.distinct().order_by("pk"):
        if all(one.state in SETTLED for one in findings_covered(folder)):
            _own_clocks_close(w, folder, on, reason)


def _own_clocks_close(
    w: Writing, folder: Substantiation, on: dt.date, reason: str
) -> None:
    for one in revisions_of(folder).select_related("aircraft"):
        kinds = (DueKind.STAGE_CLOCK,)
        due_points_close(w, origin=one, on=on, reason=reason, kinds=kinds)


def _reason(folder: Substantiation) -> str:
    reached = stage_reached(folder)
    if not reached:
        return CLOCK_AGREES_NOW.format(folder=folder)
    by = approved_revision(folder, reached)
    return STAGE_APPROVED.format(stage=reached, folder=by)


def _follow(
    w: Writing,
    origin: Repair | Substantiation,
    origins: list[Repair] | list[Substantiation],
    clock: Clock | None,
    on: dt.date,
    reason: str,
) -> None:
    """One open clock that says what the records say; what said otherwise is closed."""
    column = "repair" if isinstance(origin, Repair) else "substantiation"
    points = DuePoint.objects.filter(
        **{f"{column}__in": origins},
        kind=DueKind.STAGE_CLOCK,
        closed_on__isnull=True,
    )
    earlier = points.first()
    if earlier is not None:
        if clock is not None and _says(earlier, clock):
            return
        due_point_close(w, earlier, on=on, reason=reason)
    if clock is not None:
        due_point_open(
            w,
            origin=origin,
            kind=DueKind.STAGE_CLOCK,
            due=clock.due,
            opened_on=on,
            basis=clock.basis,
            replaces=earlier,
        )


def _says(point: DuePoint, clock: Clock) -> bool:
    return point.basis == clock.basis and (
        (point.due_cycles, point.due_minutes, point.due_on, point.cannot_compute)
        == (
            clock.due.at.cycles,
            clock.due.at.minutes,
            clock.due.on,
            clock.due.cannot_compute,
        )
    )
