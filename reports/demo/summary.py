"""What the demo holds, in a few lines for the terminal."""

from __future__ import annotations

import datetime as dt
from collections import Counter

from fleet.due import Bucket
from fleet.models import Aircraft, SafeLifePart
from repairs.models import Evaluation, Finding, Outcome, Repair, StatedInput
from reports.due_list import DueQuery, due_list

WITHIN_DAYS = 90


def summary_lines(today: dt.date, seconds: float) -> list[str]:
    """Counts as the pages show them, and how long it took."""
    outcomes = Counter(
        Evaluation.objects.filter(replaced_by__isnull=True).values_list(
            "outcome", flat=True
        )
    )
    tally = due_list(DueQuery(today, WITHIN_DAYS)).tally
    soon = sum(n for bucket, n in tally.items() if bucket is not Bucket.OVERDUE)
    lines = (
        ("Aircraft", Aircraft.objects.count()),
        ("Findings", Finding.objects.count()),
        ("Repairs", Repair.objects.count()),
        ("Evaluated", outcomes[Outcome.COMPUTED]),
        ("No method applies", outcomes[Outcome.NOT_COVERED]),
        ("Incomplete", outcomes[Outcome.MISSING_INPUT]),
        ("Inputs stated", StatedInput.objects.count()),
        ("Safe-life parts", SafeLifePart.objects.count()),
        ("Overdue", tally[Bucket.OVERDUE]),
        (f"Due within {WITHIN_DAYS} days", soon),
    )
    return [
        f"Demo as of {today}",
        *(f"{name:20} {number:6,}" for name, number in lines),
        f"{'Seconds':20} {seconds:6.1f}",
    ]
