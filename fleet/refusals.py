"""A request that is refused, with every reason in the user's words. Pure."""

from __future__ import annotations

from collections.abc import Sequence


class Refused(ValueError):
    """What stands against it, one sentence each in `problems`."""

    def __init__(self, problems: Sequence[str]) -> None:
        super().__init__("\n".join(problems))
        self.problems = list(problems)
