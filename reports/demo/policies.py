"""Numbers of rules that the demo offers, each with its source and how it was read.

They are true rules, not invented ones; a clock from memory says so on its page. Only
the reach of a review, one bay, and the days in which a survey is answered are the
invented operator's own choice.
"""

from __future__ import annotations

from dataclasses import dataclass

EUROPE = "EASA"
"""The rules both demo operators work under; the others are offered for a further
report, and to an operator under them."""

OCCURRENCES = (
    "Regulation (EU) 2015/1018, annex II 3(1), with (EU) No 376/2014, article 4"
)
ANALYSIS = "Regulation (EU) No 376/2014, article 13"
DIFFICULTIES = "14 CFR 121.703(d)"
NOT_NOTED = "edition not noted"


@dataclass(frozen=True, slots=True)
class DemoPolicy:
    regime: str
    key: str
    value: int
    unit: str
    source: str
    edition: str = NOT_NOTED
    grade: str = "quoted"


POLICIES = (
    DemoPolicy(EUROPE, "stage_2_months", 12, "months", "AMC 20-20A app. 3 annex 1"),
    DemoPolicy(
        EUROPE, "review_reach_mm", 508, "mm", "engineering procedure EP-07 (invented)",
        "", "adopted",
    ),
    DemoPolicy(
        EUROPE, "survey_answer_days", 10, "days", "intake procedure IP-03 (invented)",
        "", "adopted",
    ),
    DemoPolicy(EUROPE, "report_hours", 72, "hours", OCCURRENCES, "2015"),
    DemoPolicy(
        EUROPE, "report_preliminary_days", 30, "days", ANALYSIS, "2014", "memory"
    ),
    DemoPolicy(
        EUROPE, "report_final_months", 3, "months", ANALYSIS, "2014", "memory"
    ),
    DemoPolicy(EUROPE, "backup_hours", 24, "hours", "AMC CAMO.A.220, AMC M.A.614"),
    DemoPolicy(EUROPE, "late_entry_days", 30, "days", "M.A.305(a)"),
    DemoPolicy("FAA", "report_period_hours", 96, "hours", DIFFICULTIES),
    DemoPolicy("FAA", "report_period_begins", 9, "hours", DIFFICULTIES),
    DemoPolicy(
        "FAA", "report_text_characters", 1_500, "count",
        "instructions of the service difficulty report form",
    ),
    DemoPolicy("FAA", "report_level_3_days", 7, "days", "AD 90-25-07"),
    DemoPolicy("FAA 145", "report_hours", 96, "hours", "14 CFR 145.221"),
    DemoPolicy("FAA 21.3", "report_hours", 24, "hours", "14 CFR 21.3(e)"),
)  # fmt: skip
