"""manage.py density_map: damage per area and exposure as a figure and as numbers."""

from __future__ import annotations

import datetime as dt
import json
from argparse import ArgumentParser
from collections.abc import Iterator
from typing import Any

from django.core.management.base import BaseCommand, CommandError
from django.http import QueryDict

from fleet.clock import today
from fleet.models import User
from reports.density import DENOMINATORS
from reports.figures.density_plot import density_plot
from reports.forms.density import DensityForm
from reports.hot_spots import REPLICAS
from reports.selectors.density_page import DensityPage, density_json, density_page

WRONG = "--{option}: {why}"
OPTIONS = {
    "type": "type", "section": "section", "skin": "skin", "variant": "variant",
    "cause": "cause", "from": "start", "to": "end", "per": "rate",
    "damage-type": "damage", "aircraft": "aircraft",
}  # fmt: skip


class Command(BaseCommand):
    help = "Map findings per square metre and exposure over one section of a fleet."

    def add_arguments(self, parser: ArgumentParser) -> None:
        parser.add_argument("--type", required=True, help="code of the aircraft type")
        parser.add_argument("--section", required=True, help="code of the section")
        parser.add_argument("--skin", choices=["upper", "lower"], default="")
        parser.add_argument("--variant", default="", help="code; all if left out")
        parser.add_argument(
            "--aircraft", action="append", default=[], help="registration; repeatable"
        )
        parser.add_argument(
            "--damage-type", action="append", default=[], help="repeatable"
        )
        parser.add_argument("--cause", default="")
        parser.add_argument("--from", default="", help="first day, as 2024-01-31")
        parser.add_argument("--to", default="", help="last day, as 2024-12-31")
        parser.add_argument("--per", choices=sorted(DENOMINATORS), default="cycles")
        parser.add_argument("--as-of", type=dt.date.fromisoformat, default=None)
        parser.add_argument("--plain", action="store_true", help="colour by plain rate")
        parser.add_argument("--replicas", type=int, default=REPLICAS)
        parser.add_argument("--output", help="figure to write, as map.png or map.pdf")
        parser.add_argument("--format", choices=["table", "json"], default="table")

    def handle(self, **options: Any) -> None:
        page = self._page(options)
        if options["output"]:
            figure = density_plot(page.figure, page.notes)
            try:
                figure.savefig(options["output"])
            except (OSError, ValueError) as error:
                raise CommandError(f"--output {options['output']}: {error}") from error
        if options["format"] == "json":
            self.stdout.write(json.dumps(density_json(page), indent=1))
        else:
            self._table(page)

    def _page(self, options: dict[str, Any]) -> DensityPage:
        """The page the options ask for; each wrong one is named with what would do."""
        reader = User(sees_all_operators=True)
        form = DensityForm(_query(options), user=reader)
        for option in ("type", "section"):
            if form.data[option] != options[option]:
                rows = form.fields[option].queryset  # type: ignore[attr-defined]
                known = ", ".join(rows.values_list("code", flat=True)) or "none"
                why = f"{options[option]!r} is not known; known are {known}."
                raise CommandError(WRONG.format(option=option, why=why))
        if not form.is_valid():
            raise CommandError(" ".join(_wrong(form)))
        page = density_page(
            form.asked(),
            user=reader,
            as_of=options["as_of"] or today(),
            replicas=options["replicas"],
            smoothed=not options["plain"],
        )
        if page is None:
            raise CommandError("The type has no geometry in force; publish one first.")
        return page

    def _table(self, page: DensityPage) -> None:
        self.stdout.write(page.title)
        for note in page.notes:
            self.stdout.write(note)
        for row in page.spots:
            spot = row.spot
            self.stdout.write(
                f"{row.letter}  {row.where} {row.about}: {spot.count} found, "
                f"{spot.expected:.1f} expected, p {spot.p:.3f}"
            )


def _query(options: dict[str, Any]) -> QueryDict:
    """The options as the page's address would carry them."""
    query = QueryDict(mutable=True)
    for option, field in OPTIONS.items():
        value = options[option.replace("-", "_")]
        query.setlist(field, value if isinstance(value, list) else [value])
    return query


def _wrong(form: DensityForm) -> Iterator[str]:
    """Each wrong option with what is wrong with it."""
    named = {field: option for option, field in OPTIONS.items()}
    for field, errors in form.errors.items():
        why = " ".join(map(str, errors))
        yield WRONG.format(option=named.get(field, field), why=why)
