"""What is measured, on a loaded demo."""

from __future__ import annotations

import datetime as dt
from collections.abc import Callable

from django.db.models import Sum
from django.test import Client

from fleet.location import read
from fleet.models import AircraftType, UsageRecord, User
from fleet.selectors.structure import geometry_of
from fleet.selectors.verify import problems
from repairs.models import Evaluation, Finding
from repairs.services.evaluation_prepare import evaluation_prepare
from repairs.services.evaluations import choice_of
from reports.due_list import DueQuery, due_list

TODAY = dt.date(2025, 1, 1)
TEXTS = list(
    Finding.objects.order_by("pk").values_list("place_entered", flat=True)[:200]
)


def usage_summed() -> str:
    """The bare statement under every counter, for comparison."""
    total = UsageRecord.objects.aggregate(Sum("cycles"))["cycles__sum"]
    return f"{total:,} FC"


def fleet_due() -> str:
    listed = due_list(DueQuery(as_of=TODAY, within_days=90))
    return f"{len(listed.rows)} rows"


def page(address: str) -> Callable[[], str]:
    client = Client()
    client.force_login(User.objects.get(username="engineer"))

    def fetch() -> str:
        response = client.get(address, headers={"host": "127.0.0.1"})
        if response.status_code != 200:
            raise RuntimeError(f"{address} answered {response.status_code}")
        return f"{len(response.content) / 1024:.0f} KB"

    return fetch


def evaluation(method: str) -> Callable[[], str]:
    """Gather the inputs of one computed evaluation of the method and run it again."""
    made = Evaluation.objects.filter(method=method, outcome="computed").first()
    if made is None:
        raise RuntimeError(f"The demo holds no computed evaluation by {method}.")
    subject, choice = made.finding or made.repair, choice_of(made)

    def run() -> str:
        evaluation_prepare(subject=subject, choice=choice, as_of=TODAY)
        return made.number

    return run


def readings() -> str:
    for text in TEXTS:
        read(text)
    return f"{len(TEXTS)} texts"


def geometry() -> str:
    found = geometry_of(AircraftType.objects.get(code="ARD-52"))
    return found.code if found else "none"


def history_verified() -> str:
    wrong = list(problems())
    return wrong[0] if wrong else "agrees"


METHODS = (
    "pressurised-skin-longitudinal-crack",
    "corrosion-blend-out",
    "open-or-trimmed-hole",
    "loaded-fastener-hole",
    "stiffened-skin-crack",
)
JOBS: dict[str, Callable[[], str]] = {
    "usage summed (bare statement)": usage_summed,
    "fleet due list, 90 days": fleet_due,
    "due list page": page("/due/"),
    "density page": page("/density/"),
    "findings page": page("/findings/"),
    "location texts read": readings,
    "type geometry from the database": geometry,
    "history verified": history_verified,
    **{f"evaluation: {method}": evaluation(method) for method in METHODS},
}
