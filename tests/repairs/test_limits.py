"""A finding against the operator's recorded limits: both numbers, never a guess."""

from __future__ import annotations

import json

import pytest

from fleet.services.documents import document_get_or_create
from fleet.services.history import Writing
from repairs.measured import Typed
from repairs.models import LimitRule, RecordedLimit
from repairs.services.limits import limits_check
from tests.factories import NOW
from tests.record_rows import DENT, FOUND, found

pytestmark = pytest.mark.django_db


def limit(world, *rules: tuple[str, str, float], **changes) -> RecordedLimit:
    with Writing(actor=None, action="limit_record", at=NOW) as w:
        document = document_get_or_create(
            w,
            operator=world.operator,
            kind="repair_manual",
            reference="SRM 53-00",
            revision="14",
        )
        columns = {
            "operator": world.operator,
            "document": document,
            "paragraph": "3.A",
            "aircraft_type": world.variant.aircraft_type,
            "damage_type": "dent",
            "state": "in_force",
            "effective_from": FOUND,
        }
        row = w.create(RecordedLimit(**(columns | changes)))
        for number, (quantity, comparison, value) in enumerate(rules, 1):
            w.create(
                LimitRule(
                    limit=row,
                    number=number,
                    quantity=quantity,
                    comparison=comparison,
                    value=value,
                    entered=f"{value} mm",
                )
            )
    return row


def check(finding) -> list[tuple[str, str | None]]:
    with Writing(actor=None, action="limits_check", at=NOW) as w:
        rows = limits_check(w, finding=finding, measurement=finding.measurements.last())
    return [(row.outcome, row.limit and row.limit.paragraph) for row in rows]


# The dent is 2.4 x 1.8 x 0.040 in: 60.96 x 45.72 x 1.016 mm.
@pytest.mark.parametrize(
    ("rules", "outcome"),
    [
        ((("depth_mm", "at_most", 1.1),), "within"),
        ((("depth_mm", "at_most", 1.0),), "beyond"),
        ((("depth_mm", "less_than", 1.1), ("length_mm", "at_most", 60)), "beyond"),
        ((("depth_mm", "at_most", 1.1), ("edge_distance_mm", "at_least", 25)),
         "missing_input"),
        ((("depth_mm", "at_most", 1.0), ("edge_distance_mm", "at_least", 25)),
         "beyond"),
    ],
)  # fmt: skip
def test_each_rule_is_compared_and_a_missing_size_never_passes(world, rules, outcome):
    limit(world, *rules)
    assert check(found(world)) == [(outcome, "3.A")]


def test_both_numbers_are_kept(world):
    limit(world, ("depth_mm", "at_most", 1.0))
    finding = found(world)
    check(finding)
    (line,) = json.loads(finding.limit_checks.get().lines)
    assert line["measured"] == pytest.approx(1.016)
    assert (line["limit"], line["sign"], line["holds"]) == (1.0, "≤", False)


@pytest.mark.parametrize(
    "changes",
    [
        {"damage_type": "scratch"},
        {"state": "keyed"},
        {"panel_label": "ANOTHER"},
        {"effective_from": FOUND.replace(year=2025)},
    ],
)
def test_a_limit_for_something_else_does_not_apply(world, changes):
    limit(world, ("depth_mm", "at_most", 5.0), **changes)
    assert check(found(world)) == [("not_covered", None)]


def test_an_unmeasured_dent_cannot_be_compared(world):
    limit(world, ("depth_mm", "at_most", 5.0))
    finding = found(world, typed=(*DENT[:2], Typed("depth_mm", "unknown")))
    assert check(finding) == [("missing_input", "3.A")]
