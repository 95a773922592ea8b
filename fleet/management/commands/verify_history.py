"""`manage.py verify_history`: does every record agree with its history?"""

from __future__ import annotations

from typing import Any

from django.core.management.base import BaseCommand, CommandError

from fleet.models import HistoryHead
from fleet.selectors.verify import problems


class Command(BaseCommand):
    help = (
        "Checks the chain of history entries and every record against it. Names the "
        "first entry or record that disagrees and exits with status 1."
    )

    def add_arguments(self, parser: Any) -> None:
        parser.add_argument(
            "--all", action="store_true", help="list every disagreement, not the first"
        )

    def handle(self, *args: Any, **options: Any) -> None:
        found = problems()
        first = next(found, None)
        if first is None:
            head = HistoryHead.objects.get(pk=1)
            self.stdout.write(
                f"History agrees: {head.sequence:,} entries, "
                "every record accounted for."
            )
            return
        listed = [first, *(found if options["all"] else ())]
        raise CommandError("\n".join(listed))
