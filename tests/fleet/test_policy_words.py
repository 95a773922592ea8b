"""A policy edition as lists print it: a rule, its number, its source.

The three stages and their twelve months are AMC 20-20A appendix 3 annex 1; a report
within 72 hours is Regulation (EU) 2015/1018 with No 376/2014, article 4; the period
from 0900 to 0900 local time, 14 CFR 121.703(d).
"""

from __future__ import annotations

import datetime as dt
from importlib import import_module

import pytest

from fleet.models import Policy
from fleet.selectors.policies import RULES, policy_words, rule_words


@pytest.mark.parametrize(
    ("columns", "words"),
    [
        (
            {"key": "stage_2_months", "value": 12, "unit": "months",
             "source": "AMC 20-20A app. 3 annex 1", "edition": "2023"},
            "stage 2 of a repair's approval within 12 months: AMC 20-20A app. 3 "
            "annex 1, 2023, from 2024-01-01",
        ),
        (
            {"key": "report_hours", "value": 72, "unit": "hours", "regime": "EASA",
             "source": "Regulation (EU) No 376/2014, article 4"},
            "EASA: an occurrence is reported within 72 hours: Regulation (EU) No "
            "376/2014, article 4, from 2024-01-01",
        ),
        (
            {"key": "report_period_begins", "value": 9, "unit": "hours",
             "source": "14 CFR 121.703(d)"},
            "a reporting period begins, local time, at 09:00: 14 CFR 121.703(d), from "
            "2024-01-01",
        ),
        (
            {"key": "report_level_3_days", "value": 1, "unit": "days", "source": "X"},
            "level 3 corrosion: report and fleet inspection within 1 day: X, from "
            "2024-01-01",
        ),
    ],
)  # fmt: skip
def test_an_edition_is_told_as_a_rule(columns, words):
    row = Policy(effective_from=dt.date(2024, 1, 1), **columns)
    assert policy_words(row) == words


def test_every_rule_that_the_program_reads_has_words():
    """The keys stand where they are read."""
    read = {
        "fleet.selectors.keeping": ("BACKUP_HOURS",),
        "fleet.selectors.people": ("SECOND_FACTOR",),
        "repairs.selectors.late_entries": ("DAYS",),
        "repairs.selectors.repair_fitted": ("THICKNESS_PERCENT",),
        "repairs.selectors.report_rules": (
            "HOURS", "PERIOD_HOURS", "PERIOD_BEGINS", "HOLIDAY", "CHARACTERS",
            "PRELIMINARY", "FINAL", "LEVEL_3",
        ),
        "repairs.selectors.review_reach": ("REVIEW_REACH",),
        "repairs.selectors.stage_clock": ("STAGE_2_MONTHS",),
        "repairs.services.surveys": ("ANSWER_DAYS",),
    }  # fmt: skip
    keys = {getattr(import_module(room), name) for room, names in read.items()
            for name in names}  # fmt: skip
    assert keys <= set(RULES)
    assert not [words for words in RULES.values() if "_" in words]


def test_a_rule_of_the_operators_own_is_told_by_its_name():
    assert rule_words("hangar_slot_days") == "hangar slot days"
