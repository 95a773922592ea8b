"""Tables as CSV that a spreadsheet opens without running anything in it."""

from __future__ import annotations

import csv
from collections.abc import Iterable, Sequence
from io import StringIO
from typing import Any

from django.http import HttpResponse

FORMULA = ("=", "+", "-", "@", "\t", "\r", "\n")


def rows_to_csv(header: Sequence[str], rows: Iterable[Sequence[Any]]) -> str:
    """CSV text. Text that a spreadsheet would take for a formula gets an apostrophe in
    front; numbers stay numbers; None is an empty cell."""
    out = StringIO()
    writer = csv.writer(out, lineterminator="\r\n")
    writer.writerow(header)
    writer.writerows([[_cell(value) for value in row] for row in rows])
    return out.getvalue()


def csv_response(
    name: str, header: Sequence[str], rows: Iterable[Sequence[Any]]
) -> HttpResponse:
    """The table as a download; the mark at its start tells spreadsheets it is UTF-8."""
    text = "\ufeff" + rows_to_csv(header, rows)
    response = HttpResponse(text, content_type="text/csv; charset=utf-8")
    response["Content-Disposition"] = f'attachment; filename="{name}"'
    return response


def _cell(value: Any) -> Any:
    if value is None:
        return ""
    if isinstance(value, str) and value.startswith(FORMULA):
        return f"'{value}"
    return value
