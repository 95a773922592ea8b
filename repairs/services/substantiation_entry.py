"""A substantiation as it is written down, and what may stand against drafting it."""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from dataclasses import asdict, dataclass, field, fields

from fleet.due import Counters
from fleet.models import Aircraft, Person
from repairs.models import (
    ASIDE_STATES,
    Answer,
    Evaluation,
    Finding,
    Repair,
    Substantiation,
)

LIMITED = (Answer.LIMITATION, Answer.SPECIAL_FLIGHT)

NOTHING_COVERED = (
    "A substantiation covers at least one finding, or is the folder of a repair."
)
OTHER_AIRCRAFT = "{row} is not on {aircraft}; a substantiation is for one aircraft."
ASIDE = "{finding} is {state}; cover the finding that stands."
HAS_A_FOLDER = "{repair} uses {folder} already; revise that one."
LIMITATION_NEEDED = "Say what the aircraft may not do."
SOURCE_NEEDED = "Name the document that approves it."
NOT_ABOVE_NOUGHT = "A limit counted from release is above zero."
SAID_WHY = "Say why no category applies."


@dataclass(frozen=True, slots=True)
class FolderEntry:
    """The columns of one revision. Limits are counted from release; empty is none."""

    title: str
    answer: str
    prepared_by: Person
    limitation: str = ""
    scale: str = "undecided"
    scale_reason: str = ""
    category: str = ""
    category_reason: str = ""
    data_due_on: dt.date | None = None
    temporary_limit: Counters = field(default_factory=Counters)
    temporary_limit_on: dt.date | None = None
    temporary_limit_source: str = ""
    threshold: Counters = field(default_factory=Counters)
    threshold_on: dt.date | None = None
    threshold_source: str = ""
    inspections: str = ""

    def columns(self) -> dict[str, object]:
        """The entry as columns of a revision."""
        same = {
            one.name: getattr(self, one.name)
            for one in fields(self)
            if one.name not in ("temporary_limit", "threshold", "prepared_by")
        }
        return same | {
            "prepared_by_id": self.prepared_by.pk,
            "temporary_limit_cycles": self.temporary_limit.cycles,
            "temporary_limit_minutes": self.temporary_limit.minutes,
            "threshold_cycles": self.threshold.cycles,
            "threshold_minutes": self.threshold.minutes,
        }


def entry_of(row: Substantiation) -> FolderEntry:
    """A revision as it would be written down again."""
    same = {
        one.name: getattr(row, one.name)
        for one in fields(FolderEntry)
        if one.name not in ("temporary_limit", "threshold")
    }
    return FolderEntry(
        **same,
        temporary_limit=Counters(
            row.temporary_limit_minutes, row.temporary_limit_cycles
        ),
        threshold=Counters(row.threshold_minutes, row.threshold_cycles),
    )


@dataclass(frozen=True, slots=True)
class CaseEntry:
    """A load case; the margin is empty where it was not shown as a number."""

    kind: str
    requirement: str
    case: str
    method: str = ""
    allowable_source: str = ""
    margin: float | None = None
    evaluation: Evaluation | None = None


@dataclass(frozen=True, slots=True)
class DocumentEntry:
    """A document that belongs to the folder, and where in it."""

    role: str
    kind: str
    reference: str
    revision: str = ""
    page: str = ""
    title: str = ""


def entry_problems(entry: FolderEntry) -> dict[str, str]:
    """What stands against the columns, by the field that mends it."""
    problems = {}
    if entry.answer in LIMITED and not entry.limitation.strip():
        problems["limitation"] = LIMITATION_NEEDED
    if entry.category == "not_applicable" and not entry.category_reason.strip():
        problems["category_reason"] = SAID_WHY
    for name in ("temporary_limit", "threshold"):
        amounts = asdict(getattr(entry, name))
        for counter in ("cycles", "minutes"):
            if amounts[counter] is not None and amounts[counter] <= 0:
                problems[f"{name}_{counter}"] = NOT_ABOVE_NOUGHT
        given = any(one is not None for one in amounts.values())
        given = given or getattr(entry, f"{name}_on") is not None
        if given and not getattr(entry, f"{name}_source").strip():
            problems[f"{name}_source"] = SOURCE_NEEDED
    return problems


def covering_problems(
    aircraft: Aircraft, findings: Sequence[Finding], repair: Repair | None
) -> list[str]:
    """What stands against covering these findings, or being this repair's folder."""
    problems = [] if findings or repair else [NOTHING_COVERED]
    for finding in findings:
        problems += finding_problems(aircraft, finding)
    return problems + (repair_problems(aircraft, repair) if repair else [])


def finding_problems(aircraft: Aircraft, finding: Finding) -> list[str]:
    if finding.aircraft_id != aircraft.pk:
        return [OTHER_AIRCRAFT.format(row=finding, aircraft=aircraft)]
    if finding.state in ASIDE_STATES:
        return [ASIDE.format(finding=finding, state=finding.get_state_display())]
    return []


def repair_problems(aircraft: Aircraft, repair: Repair) -> list[str]:
    if repair.aircraft_id != aircraft.pk:
        return [OTHER_AIRCRAFT.format(row=repair, aircraft=aircraft)]
    folder: Substantiation | None = repair.substantiation
    if folder is not None:
        return [HAS_A_FOLDER.format(repair=repair, folder=folder)]
    return []
