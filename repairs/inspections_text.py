"""What a folder says of the inspections of stage 3, as one text in named lines. Pure.

14 CFR 26.41: inspections have their areas, methods and procedures with acceptance and
rejection criteria, a threshold and intervals; that none is necessary is an answer too.
"""

from __future__ import annotations

from collections.abc import Mapping

PARTS = ("method", "procedure", "criteria", "repeat")
NONE = "none necessary"


def inspections_text(said: Mapping[str, str]) -> str:
    """One line for each part that is said; what is left out is missing."""
    lines = [
        f"{part}: {' '.join(said[part].split())}"
        for part in (*PARTS, NONE)
        if said.get(part, "").strip()
    ]
    return "\n".join(lines)


def inspections_said(text: str) -> dict[str, str]:
    """The parts of the text by name."""
    said = {}
    for line in text.splitlines():
        name, _, words = line.partition(":")
        if name.strip() in (*PARTS, NONE) and words.strip():
            said[name.strip()] = words.strip()
    return said


def inspections_missing(text: str) -> list[str]:
    """Parts of which nothing is said."""
    said = inspections_said(text)
    return [part for part in PARTS if part not in said]


def none_necessary(text: str) -> bool:
    """Whether it is said, by a document, that no supplemental inspection is needed."""
    return NONE in inspections_said(text)
