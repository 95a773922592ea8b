"""Deferrals of a finding, from the first to the one that runs, and what is past."""

from __future__ import annotations

import datetime as dt
from collections.abc import Iterable, Sequence
from dataclasses import dataclass

from fleet.amounts import amount_write, counters_write
from fleet.due import COUNTED, Counters
from repairs.models import (
    Disposition,
    DispositionFinding,
    DispositionKind,
    Finding,
    FindingLink,
    FindingState,
)

SAME = ("same_damage", "grew_from", "duplicate_report")
OVER = (FindingState.RECTIFIED, FindingState.CLOSED, FindingState.VOIDED)
UNRESOLVED = (FindingState.DEFERRED, FindingState.TO_RECTIFY)
ORDINALS = {1: "st", 2: "nd", 3: "rd"}
DEFERRED_AGAIN = "found {found_on}, deferred {ordinal} time"


@dataclass(frozen=True)
class Running:
    """The deferral that damage flies on: whether it names this very finding, and which
    of its limits are passed."""

    deferral: Disposition
    own: bool
    passed: str


@dataclass(frozen=True)
class Deferred:
    """One deferral of the chain: which one it is, and its limit in words."""

    disposition: Disposition
    nth: int
    limit: str
    current: bool


@dataclass(frozen=True)
class Chain:
    """All deferrals of the damage, the first one first, with its first date."""

    found_on: dt.date
    rows: Sequence[Deferred]

    @property
    def words(self) -> str:
        """As "found 2024-03-02, deferred 3rd time"; empty when it never was."""
        if not self.rows:
            return ""
        nth = ordinal(len(self.rows))
        return DEFERRED_AGAIN.format(found_on=self.found_on, ordinal=nth)


def ordinal(number: int) -> str:
    teens = 10 < number % 100 < 14
    return f"{number}{'th' if teens else ORDINALS.get(number % 10, 'th')}"


def limit_words(row: Disposition) -> str:
    """The deferral limit as "10,300 FC · 2025-03-01"; empty without one."""
    at = Counters(row.limit_minutes, row.limit_cycles, row.limit_landings)
    parts = [counters_write(at), str(row.limit_on or "")]
    return " · ".join(part for part in parts if part)


def same_damage(findings: Iterable[Finding]) -> list[Finding]:
    """The findings with the earlier records of the same damage, oldest first.

    What was rectified or closed is over: damage seen there later is new. One query for
    each link of the chain.
    """
    known = {one.pk: one for one in findings}
    fresh = set(known)
    while fresh:
        links = FindingLink.objects.filter(finding__in=fresh, kind__in=SAME)
        rows = links.exclude(earlier__state__in=OVER).select_related("earlier")
        earlier = {link.earlier_id: link.earlier for link in rows}
        fresh = set(earlier) - set(known)
        known |= {pk: earlier[pk] for pk in fresh}
    return sorted(known.values(), key=lambda one: (one.found_on, one.pk))


def origin_on(findings: Iterable[Finding]) -> dt.date:
    """The day the damage was first found, under whatever number; it never moves."""
    return same_damage(findings)[0].found_on


def deferrals_of(records: Iterable[Finding]) -> list[Disposition]:
    """Deferrals of these records, in the order they were signed."""
    rows = Disposition.objects.filter(
        kind=DispositionKind.DEFER,
        finding_rows__finding__in=[one.pk for one in records],
    )
    shown = rows.select_related(
        "basis_document", "decided_by", "authorisation", "replaced_by"
    )
    return list(shown.order_by("decided_on", "pk").distinct())


def answered_with(row: DispositionFinding, finding: Finding) -> list[Finding]:
    """The other findings that this deferral of a finding holds to this day."""
    rows = Finding.objects.filter(
        disposition_rows__disposition=row.disposition_id, state=FindingState.DEFERRED
    )
    return list(rows.exclude(pk=finding.pk).order_by("pk"))


def chain_of(findings: Iterable[Finding]) -> Chain:
    """Every deferral of the damage with its limit: what was promised, until when."""
    records = same_damage(findings)
    rows = [
        Deferred(row, nth, limit_words(row), not hasattr(row, "replaced_by"))
        for nth, row in enumerate(deferrals_of(records), 1)
    ]
    return Chain(records[0].found_on, rows)


def running_deferral(finding: Finding, at: Counters, on: dt.date) -> Running | None:
    """The last deferral of damage that is still unresolved, held against counters and
    day; None when there is none."""
    records = same_damage([finding])
    open_ones = [one for one in records if one.state in UNRESOLVED]
    rows = deferrals_of(open_ones)
    if not rows:
        return None
    last = max(rows, key=lambda row: row.pk)
    own = last.finding_rows.filter(finding=finding).exists()
    return Running(last, own, passed_words(last, at, on))


def passed_words(row: Disposition, at: Counters, on: dt.date) -> str:
    """Which limits lie behind, as "10,300 FC, now 10,400 FC"; empty: none does.

    At its limit a deferral is used up, not passed. A counter that is not stated is not
    compared here; the due list counts it as due.
    """
    limit = Counters(row.limit_minutes, row.limit_cycles, row.limit_landings)
    passed = []
    for counter in COUNTED:
        most, now = limit[counter], at[counter]
        if most is not None and now is not None and now > most:
            words = amount_write(counter, most), amount_write(counter, now)
            passed.append(f"{words[0]}, now {words[1]}")
    if row.limit_on is not None and on > row.limit_on:
        passed.append(f"{row.limit_on}, now {on}")
    return " and ".join(passed)
