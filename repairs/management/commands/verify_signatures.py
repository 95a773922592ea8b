"""`manage.py verify_signatures`: does every record still say what was signed?"""

from __future__ import annotations

from typing import Any

from django.core.management.base import BaseCommand, CommandError

from repairs.models import Approval
from repairs.selectors.signatures import signatures_broken, subject_of

AGREE = "{count:,} signatures agree with their records."
BROKEN = (
    "{kind} {record}, {meaning} by {name} on {at:%Y-%m-%d %H:%M} UTC: changed after "
    "signing: {changed}."
)
DISAGREE = "{broken:,} of {count:,} signatures no longer agree with their records."


class Command(BaseCommand):
    help = (
        "Makes the text of every signature again from its record and compares: the "
        "record, the statement, the name, the authorisation, the time. Exits with "
        "status 1 when one disagrees. verify_history says who changed a record."
    )

    def handle(self, *args: Any, **options: Any) -> None:
        broken = 0
        for found in signatures_broken():
            row, subject = found.row, subject_of(found.row)
            broken += 1
            self.stdout.write(
                BROKEN.format(
                    kind=subject._meta.verbose_name,
                    record=subject,
                    meaning=row.get_meaning_display(),
                    name=row.signer_name,
                    at=row.signed_at,
                    changed=found.changed_words,
                )
            )
        count = Approval.objects.count()
        if broken:
            raise CommandError(DISAGREE.format(broken=broken, count=count))
        self.stdout.write(AGREE.format(count=count))
