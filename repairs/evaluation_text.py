"""An evaluation as plain text, line by line. Pure: from plain data to text."""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping
from typing import Any

UNKNOWN = "—"
SUPERSCRIPT = str.maketrans("-0123456789", "⁻⁰¹²³⁴⁵⁶⁷⁸⁹")


def number_text(value: float | int | None) -> str:
    """A number with four figures, thousands apart; unknown is a dash."""
    if value is None:
        return UNKNOWN
    if isinstance(value, int) or (float(value).is_integer() and abs(value) >= 1000):
        return f"{value:,.0f}"
    size = abs(value)
    if size and (size < 1e-3 or size >= 1e9):
        mantissa, power = f"{value:.3e}".split("e")
        return f"{mantissa}·10{str(int(power)).translate(SUPERSCRIPT)}"
    digits = 0 if size >= 1000 else 1 if size >= 100 else 2 if size >= 10 else 4
    text = f"{value:,.{digits}f}"
    return text.rstrip("0").rstrip(".") if "." in text else text


def value_text(line: Mapping[str, Any]) -> str:
    """The value of a note line; whole cycles are rounded down, as everywhere."""
    value = line["value"]
    if value is not None and line["unit"] == "cycles":
        value = math.floor(value)
    return "" if value is None else number_text(value)


def note_line_text(line: Mapping[str, Any]) -> str:
    """One step: number, symbol = formula = numbers = value unit [source, grade]."""
    parts = [line["symbol"], line["formula"], line["substitution"]]
    if line["value"] is not None:
        parts.append(f"{value_text(line)} {line['unit']}".strip(" -"))
    text = " = ".join(part for part in parts if part)
    source = line["source"]
    if source and line["grade"]:
        source = f"{source}; {line['grade']}"
    return f"{line['number']:>3}  {text}" + (f"  [{source}]" if source else "")


def evaluation_text(shown: Mapping[str, Any]) -> str:
    """The whole evaluation as text, from the data of its JSON form."""
    lines = [*_head(shown), "", *_results(shown), ""]
    lines += ["Methods asked", *map(_method, shown["asked"]), ""]
    if shown["margins"]:
        lines += ["Margins", *map(_margin, shown["margins"]), ""]
    lines += ["Applicability", *map(_test, shown["applicability"]), ""]
    if shown["missing"]:
        lines += ["Missing", *map(_missing, shown["missing"]), ""]
    lines += ["Warnings", *(f"  ! {text}" for text in shown["warnings"]), ""]
    if shown["assumptions"]:
        lines += ["Assumptions", *(f"  {text}" for text in shown["assumptions"]), ""]
    lines += ["Calculation note", *map(note_line_text, shown["note"])]
    return "\n".join(lines) + "\n"


def _head(shown: Mapping[str, Any]) -> Iterable[str]:
    yield f"{shown['number']}  {shown['subject']}  {shown['title'] or 'no method'}"
    yield (
        f"for {shown['use'].replace('_', ' ')}; method {shown['method'] or UNKNOWN}, "
        f"version {shown['version']}; {shown['state']}"
    )
    if shown["state"] != "approved":
        yield "UNAPPROVED CALCULATION"


def _results(shown: Mapping[str, Any]) -> Iterable[str]:
    if shown["outcome"] != "computed":
        yield f"No result: {shown['outcome'].replace('_', ' ')}."
        return
    rows = (
        ("residual strength, gross", shown["residual_strength_mpa"], "MPa"),
        ("required, residual", shown["required_residual_mpa"], "MPa"),
        ("margin, residual", shown["margin_residual"], shown["residual_case"]),
        ("static ultimate", shown["ultimate_mpa"], "MPa"),
        ("margin, ultimate", shown["margin_ultimate"], shown["ultimate_case"]),
        ("life before factor", shown["life_cycles"], f"FC {shown['life_base']}"),
        ("scatter factor", shown["scatter_factor"], ""),
        ("life after factor", shown["life_after_factor_cycles"], "FC"),
        ("threshold", shown["threshold_cycles"], "FC"),
        ("repeat interval", shown["repeat_cycles"], "FC"),
    )
    for title, value, unit in rows:
        yield f"  {title:<26}{number_text(value):>12}  {unit}".rstrip()
    kept = shown["ultimate_kept"].replace("_", " ")
    yield f"  {'ultimate strength kept':<26}{kept:>12}"


def _method(asked: Mapping[str, Any]) -> str:
    part = asked["part"].replace("_", " ")
    return f"  {part:<16}{asked['title']}, version {asked['version']}"


def _margin(row: Mapping[str, Any]) -> str:
    """One mechanism in one case; without recorded loads the case is not checked."""
    words = "not checked"
    if row["required"]:
        words = f"{row['strength'] / row['required'] - 1:+.2f}"
    strength = f"{number_text(row['strength'])} MPa"
    return f"  {words:<12}{row['mechanism']}, {row['case']}: {strength}"


def _test(test: Mapping[str, Any]) -> str:
    met = {True: "met", False: "NOT MET", None: "not known"}[test["met"]]
    return f"  {met:<9} {test['test']}: {test['value']} ({test['limit']})"


def _missing(item: Mapping[str, Any]) -> str:
    return f"  {item['title']}: enter it {item['where']}"
