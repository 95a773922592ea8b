"""A request that a service refuses, with every reason in the user's words."""

from __future__ import annotations

from collections.abc import Sequence

from django.core.exceptions import ValidationError


class Refused(ValidationError):
    """What stands against it, one sentence each in `problems`; forms show them."""

    def __init__(self, problems: Sequence[str]) -> None:
        super().__init__(list(problems))
        self.problems = list(problems)
