"""Usage as read from a table and from flight legs."""

from __future__ import annotations

from datetime import date

import pytest

from fleet.usage_lines import (
    Leg,
    UsageFileError,
    UsageLine,
    lines_from_legs,
    lines_read,
)

DAY = date(2024, 12, 30)
NEXT = date(2024, 12, 31)


def test_a_table_with_hours_known_unknown_and_no_flight():
    lines = lines_read(
        "date,cycles,hours,landings\n2024-12-30,5,4:31,\n2024-12-31,2,,3\n"
        "2025-01-01,0,0:00,0\n"
    )
    assert lines == [
        UsageLine(DAY, 5, 271, where="Line 2: "),
        UsageLine(
            NEXT, 2, None, landings=3, cycles_without_minutes=2, where="Line 3: "
        ),
        UsageLine(date(2025, 1, 1), 0, 0, landings=0, where="Line 4: "),
    ]


def test_semicolons_and_a_byte_order_mark_are_read():
    (line,) = lines_read("\ufeffDate; Cycles; Hours\n2024-12-30; 1; 1234:30\n")
    assert (line.cycles, line.minutes) == (1, 74_070)


def test_every_bad_cell_is_named_with_the_way_to_mend_it():
    with pytest.raises(UsageFileError) as refused:
        lines_read("date,cycles,hours\n30.12.2024,five,4h31\n2024-12-31,,-1:00\n")
    assert refused.value.problems == [
        "Line 2: cycles “five” cannot be read; write a whole number.",
        "Line 2: hours “4h31” cannot be read; write hours and minutes as h:mm, not "
        "negative.",
        "Line 2: date “30.12.2024” cannot be read; write a date as 2024-12-31.",
        "Line 3: cycles “” cannot be read; write the number of flights, 0 when it did "
        "not fly.",
        "Line 3: hours “-1:00” cannot be read; write hours and minutes as h:mm, not "
        "negative.",
    ]


@pytest.mark.parametrize(
    ("text", "says"),
    [
        ("", "Read: nothing. Expected at least: date, cycles, hours"),
        ("2024-12-30,5,4:31", "The first line names the columns"),
        ("date,cycles,hours\n", "No line of usage was read"),
        ("date,cycles,hours,legs\n2024-12-30,5,4:31,5", "Column “legs” is not known"),
    ],
)
def test_a_table_without_its_columns_is_refused(text, says):
    with pytest.raises(UsageFileError, match=says.replace("(", "\\(")):
        lines_read(text)


def test_a_departed_leg_counts_also_when_its_hours_are_unknown():
    legs = [Leg(DAY, True, 61), Leg(DAY, True, None), Leg(DAY, False, None)]
    assert lines_from_legs(legs) == [UsageLine(DAY, 2, 61, cycles_without_minutes=1)]


def test_a_day_of_only_untimed_legs_has_unknown_hours():
    assert lines_from_legs([Leg(DAY, True, None)]) == [
        UsageLine(DAY, 1, None, cycles_without_minutes=1)
    ]


def test_days_between_are_unknown_unless_the_legs_are_said_to_be_complete():
    legs = [Leg(date(2024, 12, 28), True, 50), Leg(DAY, True, 50)]
    assert len(lines_from_legs(legs)) == 2
    lines = lines_from_legs(legs, complete_from=date(2024, 12, 28), complete_to=NEXT)
    assert [(x.cycles, x.minutes) for x in lines] == [(1, 50), (0, 0), (1, 50), (0, 0)]
