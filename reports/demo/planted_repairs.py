"""Repairs planted on purpose: hidden damage, overlap, stage clocks, lost papers."""

from __future__ import annotations

import datetime as dt
from dataclasses import replace

from reports.demo.fleet import BY_MSN
from reports.demo.places import fuselage_truth
from reports.demo.records import DemoDocument, DemoRepair
from reports.demo.usage import Logbook

MISSING_DOCUMENTS = 4
ELEVEN_MONTHS_AGO = dt.date(2024, 2, 1)
OTHER_PENDING = ((1010, dt.date(2024, 7, 9)), (1022, dt.date(2024, 10, 3)))
INTERIM_LIMIT_FC = 21_000
UNKNOWN_PAPER = DemoDocument("other", "none found", "", "none", "unknown", held=False)


def repairs_plant(
    logbooks: dict[int, Logbook],
    repairs: list[DemoRepair],
    planted: dict[str, list[str]],
) -> None:
    """Add to and alter the drawn repairs; the order is fixed."""
    _stage_clocks(logbooks, repairs, planted)
    _overlap(logbooks, repairs, planted)
    _hidden_damage(repairs, planted)
    _found_not_recorded(logbooks, repairs, planted)
    _missing_documents(repairs, planted)


def stage_two_due(released_on: dt.date) -> dt.date:
    """Twelve months after release to service."""
    return released_on.replace(year=released_on.year + 1)


def _doubler(
    logbooks: dict[int, Logbook],
    key: str,
    msn: int,
    released_on: dt.date,
    where: tuple[float, float, str],
) -> DemoRepair:
    sta, deg, text = where
    return DemoRepair(
        key=key,
        msn=msn,
        kind="external_doubler",
        location=text,
        truth=fuselage_truth(sta, deg, BY_MSN[msn].variant, 0.6, 4.5),
        length_in=12.0,
        width_in=8.0,
        released_on=released_on,
        at=logbooks[msn].at(released_on),
        category="a",
        category_reason="",
        document=DemoDocument(
            "design_approval", f"TS-DA-{key[2:]}", "1", "p. 3", "Tarrant Structures"
        ),
        performed_by="hangar_2",
        inspected_by="inspector",
        released_by="certifier",
        description=f"External doubler at {text}.",
        layers=(("2024-T3 clad sheet", "1.8 mm"),),
    )


def _stage_clocks(
    logbooks: dict[int, Logbook],
    repairs: list[DemoRepair],
    planted: dict[str, list[str]],
) -> None:
    made = ((1009, ELEVEN_MONTHS_AGO), *OTHER_PENDING)
    wheres = (
        (452.0, -117.0, "STA 452 S-14L"),
        (648.0, 126.0, "STA 648 S-15R"),
        (352.0, 45.0, "STA 352 S-6R"),
    )
    for (msn, released_on), where in zip(made, wheres, strict=True):
        key = f"R-{msn}-P01"
        repairs.append(
            replace(
                _doubler(logbooks, key, msn, released_on, where),
                category="pending",
                category_reason="damage-tolerance data awaited",
                stage_due_on=stage_two_due(released_on),
            )
        )
    planted["stage_clock_eleven_months"] = ["R-1009-P01"]


def _overlap(
    logbooks: dict[int, Logbook],
    repairs: list[DemoRepair],
    planted: dict[str, list[str]],
) -> None:
    """The second doubler covers the edge of the first, six inches forward of it."""
    where = ((388.0, 135.0, "STA 388 S-16R"), (394.0, 135.0, "STA 394 S-16R"))
    dates = (dt.date(2020, 3, 12), dt.date(2022, 11, 4))
    keys = ["R-1005-P02", "R-1005-P03"]
    for key, released_on, here in zip(keys, dates, where, strict=True):
        repairs.append(_doubler(logbooks, key, 1005, released_on, here))
    planted["overlapping_doublers"] = keys


def _hidden_damage(repairs: list[DemoRepair], planted: dict[str, list[str]]) -> None:
    """A doubler over a dent that nobody says was removed, its margin unknown."""
    index = next(
        i
        for i, repair in enumerate(repairs)
        if repair.findings and repair.kind == "external_doubler" and repair.msn == 1001
    )
    repairs[index] = replace(
        repairs[index], damage_removed="unknown", edge_margin_in=None
    )
    planted["damage_hidden_under_doubler"] = [repairs[index].key]


def _found_not_recorded(
    logbooks: dict[int, Logbook],
    repairs: list[DemoRepair],
    planted: dict[str, list[str]],
) -> None:
    """On the aircraft at the joining survey, in no paper that came with it."""
    joined = BY_MSN[1010].joined_on
    where = (692.0, -135.0, "STA 692 S-16L")
    repairs.append(
        replace(
            _doubler(logbooks, "R-1010-P04", 1010, joined, where),
            category="pending",
            category_reason="no approval found; flown on the interim limit of "
            "TS-DA-1010-IL until its data are found or made",
            document=UNKNOWN_PAPER,
            legacy=True,
            stage_due_on=stage_two_due(joined),
            temporary_limit_cycles=INTERIM_LIMIT_FC,
            description="External doubler found at the joining survey; "
            "no record of it in the files received with the aircraft.",
        )
    )
    planted["found_not_recorded"] = ["R-1010-P04"]


def _missing_documents(
    repairs: list[DemoRepair], planted: dict[str, list[str]]
) -> None:
    """Four approvals of the aircraft handed back are named but not on file."""
    held = [i for i, repair in enumerate(repairs) if repair.msn == 1006]
    for index in held[:MISSING_DOCUMENTS]:
        document = replace(repairs[index].document, held=False)
        repairs[index] = replace(repairs[index], document=document)
    planted["missing_documents"] = [repairs[i].key for i in held[:MISSING_DOCUMENTS]]
