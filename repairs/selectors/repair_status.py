"""The current repair status of one aircraft: every repair that stands on it.

The columns are those that AMC M.A.305(c)2 asks of a current repair status: number,
description, location, dimensions, remaining material, release with counters, data and
approval, category, linked inspections and limits; and beside them what lies beneath,
what it supersedes, and how complete its file is.
"""

from __future__ import annotations

import datetime as dt
from collections import defaultdict
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from django.db.models import Q

from fleet.canonical import canonical, digest
from fleet.models import Aircraft, Policy, User
from fleet.selectors.people import policy
from fleet.selectors.policies import policy_number, policy_source, rule_words
from repairs.models import DuePoint, Repair
from repairs.selectors.hidden import with_hiding
from repairs.selectors.repair_files import repair_files
from repairs.selectors.repair_fitted import THICKNESS_PERCENT
from repairs.selectors.repair_status_cells import HEADER, RepairCells, cells_of

UNDER_WAY = ("planned", "in_work")
POLICIES = ("stage_2_months", THICKNESS_PERCENT)
NO_POLICY = "not recorded"


@dataclass(frozen=True)
class StatusRow:
    """One repair with its cells by the names of the header."""

    repair: Repair
    told: Mapping[str, Any]

    @property
    def cells(self) -> Sequence[Any]:
        return [self.told[name] for name in HEADER]

    @property
    def by_name(self) -> Mapping[str, Any]:
        """The cells under names a page can ask for: `from_station`."""
        return {_name(name): value for name, value in self.told.items()}


@dataclass(frozen=True)
class Status:
    """The list, and what is printed with every copy of it."""

    aircraft: Aircraft
    as_of: dt.date
    known_at: dt.datetime
    rows: Sequence[StatusRow]
    under_way: Sequence[Repair] = ()
    policies: Sequence[tuple[str, Policy | None]] = ()

    @property
    def digest(self) -> str:
        """Over the cells as exported."""
        return digest(canonical([[str(c) for c in row.cells] for row in self.rows]))

    def facts(self) -> list[tuple[str, str]]:
        return [
            ("aircraft", f"{self.aircraft} msn {self.aircraft.serial_number}"),
            ("as of", self.as_of.isoformat()),
            ("known at", self.known_at.isoformat(timespec="seconds")),
            *((rule_words(key), _edition(row)) for key, row in self.policies),
            ("rows", str(len(self.rows))),
            ("digest of the rows (SHA-256)", self.digest),
        ]

    def csv_rows(self) -> list[Sequence[Any]]:
        """The rows, then an empty line and what belongs to the print."""
        return [*(row.cells for row in self.rows), [], *self.facts()]


def repair_status(
    aircraft: Aircraft, *, as_of: dt.date, known_at: dt.datetime, user: User
) -> Status:
    """Repairs that stood on the aircraft that day, as known then, and those under way;
    a fixed number of queries."""
    seen = Repair.objects.visible_to(user).filter(
        aircraft=aircraft, entered_at__lte=known_at
    )
    repairs = list(
        with_hiding(seen)
        .filter(
            Q(removed_on__isnull=True) | Q(removed_on__gt=as_of),
            released_on__lte=as_of,
        )
        .exclude(state="cancelled")
        .select_related(
            "section", "geometry", "zone", "approval_document", "release_document"
        )
        .prefetch_related(
            "requirements", "supersedes", "approval_document__applicability"
        )
        .order_by("number")
        .distinct()
    )
    points, files = _points(repairs, as_of), repair_files(repairs)
    variant = aircraft.variant
    unit = variant.aircraft_type.entry_unit
    rows = [
        StatusRow(
            one,
            cells_of(
                RepairCells(one, points[one.pk], files[one.pk], variant.code, unit),
                aircraft,
            ),
        )
        for one in repairs
    ]
    return Status(
        aircraft,
        as_of,
        known_at,
        rows,
        list(seen.filter(state__in=UNDER_WAY).distinct().order_by("number")),
        [(key, policy(aircraft.operator, key, as_of)) for key in POLICIES],
    )


def _points(repairs: Sequence[Repair], as_of: dt.date) -> dict[int, list[DuePoint]]:
    """Due points open that day, of the repair itself or of its requirements."""
    rows = DuePoint.objects.filter(
        Q(repair__in=repairs) | Q(subject__requirement__repair__in=repairs),
        Q(closed_on__isnull=True) | Q(closed_on__gt=as_of),
        opened_on__lte=as_of,
    ).select_related("subject__requirement")
    found: dict[int, list[DuePoint]] = defaultdict(list)
    for row in rows:
        key = row.subject.requirement.repair_id if row.subject else row.repair_id
        if key is not None:
            found[key].append(row)
    return found


def _edition(row: Policy | None) -> str:
    if row is None:
        return NO_POLICY
    return f"{policy_number(row)}: {policy_source(row)}"


def _name(header: str) -> str:
    words = "".join(c if c.isalnum() else " " for c in header)
    return "_".join(words.lower().split())
