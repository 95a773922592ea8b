"""Evaluate a finding or repair and print the calculation note or its data."""

from __future__ import annotations

import json
from typing import Any

from django.core.exceptions import ValidationError
from django.core.management.base import BaseCommand, CommandError, CommandParser

from fleet.clock import now, today
from fleet.models import DetectableSize
from repairs.evaluation_text import evaluation_text
from repairs.models import Evaluation
from repairs.models.evaluations import Use
from repairs.selectors.evaluation_shown import evaluation_json
from repairs.selectors.evaluations import (
    detectable_sizes,
    evaluation_current,
    stale_reasons,
    subjects_numbered,
)
from repairs.services.evaluation_place import Subject
from repairs.services.evaluation_prepare import choice_from
from repairs.services.evaluations import evaluation_make, method_versions

NOT_FOUND = "There is no finding or repair “{number}”{where}; numbers read F-0001."
SEVERAL = "“{number}” is held by several operators ({held}); name one: --operator CODE."
NO_SIZE = "“{asked}” is not a detectable size of {type}; it has: {held}."


class Command(BaseCommand):
    help = (
        "Evaluate a finding or repair. The evaluation in force is printed if nothing "
        "has changed since it was made; otherwise a new one is made and kept."
    )

    def add_arguments(self, parser: CommandParser) -> None:
        parser.add_argument("number", help="Of a finding or repair, as F-0001.")
        parser.add_argument("--operator", default="", help="Code, if it is ambiguous.")
        parser.add_argument("--use", choices=Use.values, help="Else by its state.")
        parser.add_argument(
            "--detectable",
            default="",
            help="Inspection method and where, as “penetrant, open skin”.",
        )
        parser.add_argument("--again", action="store_true", help="Make a new one.")
        parser.add_argument("--format", choices=("note", "json"), default="note")

    def handle(self, *args: Any, **options: Any) -> None:
        subject = _subject(options["number"], options["operator"])
        row = _evaluation(subject, options)
        shown = evaluation_json(row)
        if options["format"] == "json":
            text = json.dumps(shown, ensure_ascii=False, indent=2)
            self.stdout.write(text)
        else:
            self.stdout.write(evaluation_text(shown))


def _subject(number: str, operator: str) -> Subject:
    found = subjects_numbered(number, operator)
    if not found:
        where = f" of operator {operator}" if operator else ""
        raise CommandError(NOT_FOUND.format(number=number, where=where))
    if len(found) > 1:
        held = ", ".join(row.operator.code for row in found)
        raise CommandError(SEVERAL.format(number=number, held=held))
    return found[0]


def _evaluation(subject: Subject, options: dict[str, Any]) -> Evaluation:
    """The one in force, or a new one when asked for or when that one is stale."""
    size = _size(subject, options["detectable"])
    choice = choice_from(subject, use=options["use"], detectable=size)
    current = evaluation_current(subject, choice.use.value)
    fresh = current is not None and not stale_reasons(current, method_versions())
    if current is not None and fresh and size is None and not options["again"]:
        return current
    try:
        return evaluation_make(
            subject=subject, choice=choice, as_of=today(), actor=None, at=now()
        )
    except ValidationError as error:
        raise CommandError("\n".join(error.messages)) from error


def _size(subject: Subject, asked: str) -> DetectableSize | None:
    if not asked:
        return None
    made = subject.aircraft.variant.aircraft_type
    held = {f"{s.method}, {s.detail}": s for s in detectable_sizes(made)}
    if asked not in held:
        raise CommandError(
            NO_SIZE.format(asked=asked, type=made, held="; ".join(held) or "none")
        )
    return held[asked]
