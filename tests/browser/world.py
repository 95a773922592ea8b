"""Fills an empty database for the browser and prints the addresses to visit.

Run as a program of its own, on the database that FRAMEBAY_DATA names: the tables that
only grow cannot be emptied, so it is built once and thrown away as a whole.
"""

from __future__ import annotations

import json

import django

ROLES = ("engineer", "planner", "administrator", "auditor", "signatory")


def main() -> None:
    django.setup()
    from django.core.management import call_command
    from django.db import transaction
    from django.urls import reverse

    from tests.one_of_each import one_of_each_make
    from tests.site_pages import FORM, PAGES, READ

    call_command("migrate", verbosity=0)
    with transaction.atomic():
        each = one_of_each_make()
    visits = []
    for name, page in PAGES.items():
        if page.kind in (FORM, READ) and page.looks:
            role = next(role for role in ROLES if role in page.roles)
            address = reverse(name, kwargs=page.keys(each)) + page.query
            visits.append({"name": name, "role": role, "address": address})
    print(json.dumps(visits))


if __name__ == "__main__":
    main()
