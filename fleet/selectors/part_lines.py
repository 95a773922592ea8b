"""Safe-life parts in one line each: where, how much is left, until when."""

from __future__ import annotations

import datetime as dt
from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from django.db.models import Q

from fleet.amounts import amount_write, counters_write, due_write
from fleet.due import COUNTED, Counter, DueState, DueStatus
from fleet.models import KeyedState, SafeLifePart, User
from fleet.scoping import ScopedQuerySet
from fleet.selectors.life_limits import (
    LimitLine,
    Stint,
    blocks,
    columns,
    earlier_counters,
)
from fleet.selectors.parts import PartLife

BASES = {
    "birth": "from manufacture",
    "first_fitted": "from first installation",
    "overhaul": "since overhaul",
}


@dataclass(frozen=True)
class LimitRow:
    """One life limit in words; `unverified` is its key while it awaits its second
    keying."""

    limit: str
    source: str
    ends: str
    accumulated: str
    remaining: str
    consumed: str
    carrier_ends: str
    unverified: int | None


@dataclass(frozen=True)
class PartLine:
    """A part with its life status."""

    life: PartLife
    status: DueStatus

    @property
    def part(self) -> SafeLifePart:
        return self.life.part

    @property
    def where(self) -> str:
        stint = self.life.current
        if stint is None:
            return "not installed"
        return f"{stint.installation.aircraft}, {stint.installation.position}"

    @property
    def left(self) -> str:
        """What is left on the limiting counter; a dash where that is not known."""
        limiting = self.status.limiting
        if self.reason or limiting is None:
            return "—"
        return amount_write(limiting.counter, limiting.remaining)

    @property
    def reason(self) -> str:
        """Why it cannot be computed; empty when it can."""
        unknown = self.status.state is DueState.CANNOT_COMPUTE
        return self.status.note if unknown or self.status.limiting is None else ""

    @property
    def forecast(self) -> dt.date | None:
        return self.status.forecast

    @property
    def rows(self) -> list[LimitRow]:
        """Every limit that governs, the one that ends first in bold on the page."""
        left = {line.counter: line.remaining for line in self.status.lines}
        return [self._row(line, left) for line in self.life.lines]

    def _row(self, line: LimitLine, left: Mapping[Counter, int]) -> LimitRow:
        counter = line.counter if line.counter in COUNTED else Counter.DAYS
        ends, remaining = line.ends_at, left.get(counter)
        total = self.life.facts.total[counter] if counter in COUNTED else None
        if isinstance(ends, int) and total is not None:
            remaining = ends - total
        carrier = self.life.carrier_end(counter) if counter in COUNTED else None
        percent = line.consumed_percent
        return LimitRow(
            limit=f"{line.limit.entered} {BASES[line.limit.base]}",
            source=f"{line.limit.document}, {line.limit.page}".rstrip(", "),
            ends="" if ends is None else due_write(counter, ends),
            accumulated="" if total is None else amount_write(counter, total),
            remaining="" if remaining is None else amount_write(counter, remaining),
            consumed="" if percent is None else f"{percent} %",
            carrier_ends="" if carrier is None else amount_write(counter, carrier),
            unverified=line.limit.pk if line.limit.state == KeyedState.KEYED else None,
        )

    @property
    def overdue(self) -> bool:
        return self.status.state in (
            DueState.OVERDUE,
            DueState.PRESUMED_OVERDUE,
            DueState.CANNOT_COMPUTE,
            DueState.DUE,
        )


def nearest_first(lives: Sequence[PartLife]) -> list[PartLine]:
    """By forecast; what is due or cannot be computed leads."""
    lines = [PartLine(life, life.status()) for life in lives]
    return sorted(
        lines,
        key=lambda line: (not line.overdue, line.forecast or dt.date.max, line.where),
    )


def parts_shown(user: User, *, text: str = "") -> ScopedQuerySet:
    """Serials of the user's operators, by part number, serial, title or aircraft."""
    rows = SafeLifePart.objects.visible_to(user).select_related(
        "part_number", "operator"
    )
    if text:
        rows = rows.filter(
            Q(part_number__number__icontains=text)
            | Q(part_number__title__icontains=text)
            | Q(serial__iexact=text)
            | Q(
                installations__removed_on__isnull=True,
                installations__aircraft__registration__iexact=text,
            )
        )
    return rows.distinct()


@dataclass(frozen=True)
class CardRow:
    """One line of the installation history card: a stint, an earlier life or a gap."""

    what: str
    from_words: str
    to_words: str
    flown: str
    note: str
    gap: bool = False


def card_of(life: PartLife) -> list[CardRow]:
    """The back-to-birth record, oldest first; a gap is a row like any other."""
    earlier = [
        CardRow(
            what=f"{row.kind}, {row.treatment.replace('_', ' ')}",
            from_words=str(row.from_on or "unknown"),
            to_words=str(row.to_on or "unknown"),
            flown="blocked" if blocks(row) else counters_write(earlier_counters(row)),
            note="; ".join(filter(None, (row.evidence, row.acceptance))),
            gap=row.kind == "gap",
        )
        for row in life.facts.earlier
    ]
    return earlier + [_stint_row(stint) for stint in life.facts.stints]


def _stint_row(stint: Stint) -> CardRow:
    row = stint.installation
    removed = stint.removed_on
    there = counters_write(columns(row, "removed")) if removed else ""
    return CardRow(
        what=f"{row.aircraft}, {row.position}, {row.configuration}",
        from_words=f"{row.installed_on}, {counters_write(columns(row, 'installed'))}",
        to_words=f"{removed}, {there}" if removed else "still installed",
        flown=counters_write(stint.flown),
        note="; ".join(filter(None, (row.release_reference, row.removal_reason))),
    )
