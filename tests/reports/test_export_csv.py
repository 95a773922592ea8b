"""Exported cells are data, never formulas."""

from __future__ import annotations

import csv
from io import StringIO

import pytest

from fleet.tables import csv_response, rows_to_csv


@pytest.mark.parametrize("text", ["=1+1", "+1", "-1", "@SUM(A1)", "\t=1", "\r=1"])
def test_text_that_looks_like_a_formula_is_guarded(text):
    assert rows_to_csv(["a"], [[text]]).split("\r\n", 1)[1].lstrip('"')[0] == "'"


def test_numbers_stay_numbers_and_nothing_is_empty():
    assert rows_to_csv(["a", "b", "c"], [[-31, None, 0]]) == "a,b,c\r\n-31,,0\r\n"


def test_commas_quotes_and_line_breaks_come_back():
    text = 'skin, "outer"\nS-14L'
    rows = list(csv.reader(StringIO(rows_to_csv(["a"], [[text]]), newline="")))
    assert rows == [["a"], [text]]


def test_the_download_says_what_it_is():
    response = csv_response("due.csv", ["a"], [["é"]])
    assert response["Content-Disposition"] == 'attachment; filename="due.csv"'
    assert response.content.decode("utf-8-sig") == "a\r\né\r\n"
