"""The parts of the page on which a repair is released: sent and judged together."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from django.forms import Form

from repairs.forms.raised import RaisedForm
from repairs.forms.repair_answers import AnsweredForm, LiesForm
from repairs.forms.repairs import PlanForm
from repairs.services.photographs import Photo
from repairs.services.repair_entry import RepairEntry


@dataclass(frozen=True)
class RepairSheet:
    """The repair, the findings it answers, those it meets, and its new inspection."""

    form: PlanForm
    answered: list[AnsweredForm]
    lies: list[LiesForm]
    raised: RaisedForm | None = None

    @property
    def parts(self) -> list[Form]:
        raised: list[Form] = [self.raised] if self.raised else []
        return [*self.answered, *self.lies, *raised]

    @property
    def answering(self) -> list[AnsweredForm]:
        """Those of the findings that the repair is said to answer."""
        return [one for one in self.answered if one["answers"].value()]

    @property
    def further(self) -> list[AnsweredForm]:
        """The other findings of the aircraft that it could answer."""
        return [one for one in self.answered if not one["answers"].value()]

    def is_valid(self) -> bool:
        """Whether every part but the repair's own is in order; all are judged."""
        wrong = [part for part in self.parts if not part.is_valid()]
        return not wrong

    def entry(self) -> RepairEntry:
        """What was said on all parts."""
        said: dict[str, Any] = {"released_on": None} | self.form.said()
        gave_way = [one.repair for one in self.lies if one.supersedes]
        supersedes = {row.pk: row for row in [*said.pop("supersedes", []), *gave_way]}
        return RepairEntry(
            **said,
            findings=[a for a in (one.answered() for one in self.answered) if a],
            lies=[one.lies() for one in self.lies if not one.supersedes],
            supersedes=list(supersedes.values()),
            photographs=self._photographs(),
            new_requirement=self._requirement(said),
        )

    def _photographs(self) -> list[Photo]:
        data = self.form.cleaned_data
        return [
            Photo(upload, data["role"], data["caption"])
            for upload in data.get("photographs", ())
        ]

    def _requirement(self, said: dict[str, Any]) -> Any:
        if self.raised is None:
            return None
        aircraft = said["aircraft"]
        return self.raised.draft(
            operator=aircraft.operator,
            aircraft=aircraft,
            on=said["released_on"],
            base="release",
        )
