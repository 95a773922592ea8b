"""What every page knows: the way around, who is signed in, whether it is a demo."""

from __future__ import annotations

from functools import partial
from typing import Any

from django.conf import settings
from django.http import HttpRequest
from django.urls import reverse

from fleet.access import may_somewhere
from fleet.clock import now, today
from fleet.models import User
from fleet.selectors.keeping import backup_warning

# Page name, its word, and the beginning of the addresses that belong to it.
NAVIGATION = (
    ("overview", "Overview", ""),
    ("aircraft_list", "Aircraft", "/aircraft/"),
    ("finding_list", "Findings", "/findings/"),
    ("repair_list", "Repairs", "/repairs/"),
    ("requirement_list", "Inspections", "/requirements/"),
    ("due_list", "Due", "/due/"),
    ("part_list", "Safe-life", "/safe-life/"),
    ("density", "Density", "/density/"),
)
# The same for pages about the records as a whole, with the act they are open to.
OFFICE = (
    ("policies", "Policies", "/policies/", ""),
    ("adopted_list", "Adopted", "/adopted/", ""),
    ("spectrum_list", "Spectra", "/spectra/", ""),
    ("checks", "Checks", "/checks/", "checks_read"),
    ("people", "People", "/people/", "people_change"),
    ("history", "History", "/history/", "history_read"),
)


def page(request: HttpRequest) -> dict[str, Any]:
    """Navigation with the current page marked; no query beyond the user's own, but for
    administrators one or two on the last backup."""
    known = {"demonstration": bool(settings.FRAMEBAY_TODAY), "today": today()}
    user = getattr(request, "user", None)
    if user is None or not user.is_authenticated:
        return known
    memberships = user.open_memberships
    roles = ", ".join(sorted({row.get_role_display() for row in memberships}))
    names = ", ".join(sorted({row.operator.name for row in memberships}))
    return known | {
        "standing": " · ".join(part for part in (roles, names) if part) or str(user),
        "navigation": [
            (reverse(name), word, _is_here(request.path, start))
            for name, word, start in NAVIGATION
        ],
        "office": [
            (reverse(name), word, _is_here(request.path, start))
            for name, word, start, action in OFFICE
            if not action or may_somewhere(user, action)
        ],
        "backup_warning": partial(_backup_warning, user),
    }


def _backup_warning(user: User) -> str:
    """For administrators, on every page: what is wrong with the last backup."""
    if not may_somewhere(user, "backup_watch"):
        return ""
    return backup_warning(user, at=now(), on=today())


def _is_here(path: str, start: str) -> bool:
    return path.startswith(start) if start else path == "/"
