"""What the aircraft list and an aircraft's page say, gathered from every app."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from dataclasses import dataclass

from django.db.models import Count, Q

from fleet.models import (
    Aircraft,
    AircraftPeriod,
    AircraftSpan,
    AircraftState,
    PanelOnAircraft,
    PartState,
    SafeLifePart,
    Section,
    User,
)
from fleet.selectors.aircraft import (
    Seen,
    aircraft_visible,
    fleet_seen,
    is_own,
    periods_seen,
    seen_until,
)
from fleet.selectors.history import Told, history_of
from fleet.selectors.part_lines import PartLine, nearest_first
from fleet.selectors.parts import part_lives
from repairs.models import OPEN_STATES, Finding, Repair
from repairs.selectors.hidden import hiding_damage, with_hiding
from repairs.selectors.unknowns import Unknown, unknowns
from reports.due_list import DueQuery, due_list
from reports.selectors.due_shown import DueShown

SHOWN = 12
STANDING_REPAIRS = ("planned", "in_work", "embodied")


@dataclass(frozen=True)
class FleetRow:
    """One line of the aircraft list."""

    seen: Seen
    open_findings: int
    to_be_placed: int
    accepted: int

    @property
    def state_words(self) -> str:
        return str(AircraftState(self.seen.standing.state).label)


@dataclass(frozen=True)
class Shown:
    """The first rows of a list, and how many there are in all."""

    rows: Sequence[object]
    count: int

    @property
    def more(self) -> int:
        return self.count - len(self.rows)


@dataclass(frozen=True)
class AircraftPage:
    """Everything the page of one aircraft says."""

    seen: Seen
    own: bool
    periods: list[AircraftPeriod]
    spans: list[AircraftSpan]
    sections: list[Section]
    due: DueShown | None
    open_findings: Shown
    accepted: Shown
    repairs: Shown
    hiding: int
    panels: list[PanelOnAircraft]
    parts: list[PartLine]
    history: list[Told]
    unknowns: list[Unknown]

    @property
    def period(self) -> AircraftPeriod | None:
        """The reader's newest."""
        return self.periods[-1] if self.periods else None

    @property
    def registration(self) -> str:
        """The mark it bore on the last day its reader may know of."""
        return (self.period or self.seen.aircraft).registration

    @property
    def here(self) -> bool:
        return self.own and self.seen.aircraft.data_to is None

    @property
    def state_words(self) -> str:
        if not self.here:
            return "left"
        return str(AircraftState(self.seen.standing.state).label)

    @property
    def rates(self) -> dict[str, float]:
        """Per day, over the last 90 in service; empty when none is known."""
        rates = self.seen.standing.standing.rates
        return {
            counter.value: round(rate) if counter == "minutes" else float(rate)
            for counter, rate in rates.items()
        }

    @property
    def counters_unagreed(self) -> bool:
        return self.own and self.seen.aircraft.opening_rekeyed_by_id is None


def aircraft_rows(
    user: User, *, as_of: dt.date, text: str = "", state: str = ""
) -> tuple[list[FleetRow], list[AircraftPeriod]]:
    """Present aircraft with their counters and findings, and periods that ended."""
    visible = list(aircraft_visible(user, text=text))
    own = [item for item in visible if is_own(user, item)]
    counts = _finding_counts(own)
    rows = [
        FleetRow(seen, *counts.get(seen.aircraft.pk, (0, 0, 0)))
        for seen in fleet_seen([a for a in own if a.data_to is None], as_of=as_of)
        if not state or seen.standing.state == state
    ]
    ended = AircraftPeriod.objects.filter(aircraft__in=visible, to_on__isnull=False)
    if not user.sees_all_operators:
        ended = ended.filter(operator__in=user.operator_ids())
    return rows, list(ended.select_related("aircraft", "operator"))


def _finding_counts(aircraft: list[Aircraft]) -> dict[int, tuple[int, int, int]]:
    rows = (
        Finding.objects.filter(aircraft__in=aircraft)
        .order_by()
        .values("aircraft_id")
        .annotate(
            opened=Count("pk", filter=Q(state__in=OPEN_STATES)),
            unplaced=Count("pk", filter=Q(section__isnull=True, state__in=OPEN_STATES)),
            accepted=Count("pk", filter=Q(state="accepted")),
        )
    )
    return {
        row["aircraft_id"]: (row["opened"], row["unplaced"], row["accepted"])
        for row in rows
    }


def aircraft_page(user: User, aircraft: Aircraft, *, as_of: dt.date) -> AircraftPage:
    """A former operator reads its own period, with the counters of its last day."""
    own, periods = is_own(user, aircraft), periods_seen(user, aircraft)
    until = seen_until(periods, as_of)
    findings = Finding.objects.visible_to(user).filter(aircraft=aircraft).distinct()
    repairs = Repair.objects.visible_to(user).filter(
        aircraft=aircraft, state__in=STANDING_REPAIRS
    )
    return AircraftPage(
        seen=fleet_seen([aircraft], as_of=until)[0],
        own=own,
        periods=periods,
        spans=list(aircraft.spans.select_related("configuration").reverse()[:6])
        if own
        else [],
        sections=list(aircraft.variant.aircraft_type.sections.all()),
        due=_due(user, aircraft, as_of) if own and aircraft.data_to is None else None,
        open_findings=_shown(findings.filter(state__in=OPEN_STATES)),
        accepted=_shown(findings.filter(state="accepted")),
        repairs=_shown(with_hiding(repairs).distinct()),
        hiding=hiding_damage(repairs).distinct().count(),
        panels=list(
            PanelOnAircraft.objects.visible_to(user)
            .filter(aircraft=aircraft, replaced_by__isnull=True)
            .select_related("panel__section", "material", "document")
        ),
        parts=_installed(user, aircraft, until) if own else [],
        history=history_of(aircraft) if own else [],
        unknowns=unknowns(aircraft) if own else [],
    )


def _due(user: User, aircraft: Aircraft, as_of: dt.date) -> DueShown:
    query = DueQuery(as_of, registration=aircraft.registration)
    return DueShown.of(due_list(query, user=user), SHOWN)


def _shown(rows: object) -> Shown:
    return Shown(list(rows[:SHOWN]), rows.count())  # type: ignore[index,attr-defined]


def _installed(user: User, aircraft: Aircraft, as_of: dt.date) -> list[PartLine]:
    """Lives of the parts on the aircraft now, the nearest to its limit first."""
    parts = (
        SafeLifePart.objects.visible_to(user)
        .filter(
            installations__aircraft=aircraft,
            installations__removed_on__isnull=True,
            state=PartState.INSTALLED,
        )
        .select_related("part_number")
        .distinct()
    )
    return nearest_first(part_lives(parts, as_of=as_of))
