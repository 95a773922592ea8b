"""Sending a form: written once, and not over what somebody changed meanwhile.

Every form carries a key of its own and the number of the last history entry before its
page was read. The first writing of a request claims the key; a record that the form is
about must not have changed after that entry. Both are checked inside the writing, where
other writers wait.
"""

from __future__ import annotations

import datetime as dt
import time
import uuid
from collections.abc import Sequence
from contextvars import ContextVar
from dataclasses import dataclass
from typing import Any

from django.db import IntegrityError, models

from fleet.models import HistoryEntry, HistoryHead, SentForm, User
from fleet.refusals import Refused
from fleet.selectors.history import changes_since

CHANGED = (
    "Not saved: {row} changed after this page was opened. What you typed is kept; look "
    "at what changed, and send it once more if it still holds."
)
CHANGE = "{at:%Y-%m-%d %H:%M} UTC, {who}: {what}. {changes}"
SENT_BEFORE = (
    "This form was sent before, at {at:%H:%M:%S} UTC, with other content; what that "
    "sending recorded stands, and nothing was written now. If this is to be recorded "
    "as well, send it once more."
)
SENT_AT_ONCE = "This form is being sent at this moment; nothing was written twice."
KEY_FIELD, SHOWN_FIELD = "form_key", "form_shown"
"""Names of the hidden fields, which `fleet.templatetags.forms` writes."""
AWAIT_ANSWER = 20
"""Tenths of a second that a second sending waits for the page of the first."""


About = models.Model | models.QuerySet[Any]


@dataclass
class Sending:
    """One request of a signed-in user; `key` only when it sends a form."""

    user: User
    path: str
    head: int
    key: uuid.UUID | None = None
    content: str = ""
    shown: int | None = None
    first: SentForm | None = None
    about: Sequence[About] = ()
    blind: bool = False
    claimed: SentForm | None = None
    told_sent: bool = False
    told_changes_to: int = 0

    def key_next(self) -> uuid.UUID:
        """The key for the form shown next: the same one while nothing was written."""
        used = self.key is None or self.claimed is not None or self.told_sent
        return uuid.uuid4() if used else self.key  # type: ignore[return-value]

    def shown_next(self) -> int:
        """The entry for the form shown next: a later one once the user was told."""
        if self.shown is None or self.claimed is not None:
            return self.head
        return max(self.shown, self.told_changes_to)


current: ContextVar[Sending | None] = ContextVar("sending", default=None)


def sending_open(user: User, path: str) -> Sending:
    """At the start of a request, before anything is read that its page will show."""
    return Sending(user, path, HistoryHead.objects.get().sequence)


def sending_of_form(
    sending: Sending, *, key: uuid.UUID, content: str, shown: int | None
) -> bool:
    """Take in what the form brought; whether the very same was sent before."""
    sending.key, sending.content, sending.shown = key, content, shown
    sending.first = SentForm.objects.filter(key=key).first()
    return sending.first is not None and sending.first.content == content


def sending_answered(sending: Sending, address: str) -> None:
    """Where the first sending led; a later one is led there too."""
    if sending.claimed is not None:
        SentForm.objects.filter(pk=sending.claimed.pk).update(answer=address)


def sending_first(sending: Sending) -> SentForm | None:
    """The sending that came first, if it said the same, with where it led: if that is
    being made this moment it is waited for."""
    if sending.key is None:
        return None
    for _ in range(AWAIT_ANSWER):
        first = SentForm.objects.filter(key=sending.key).first()
        if first is None or first.answer:
            break
        time.sleep(0.1)
    same = first is not None and first.content == sending.content
    return first if same and first.user_id == sending.user.pk else None  # type: ignore[union-attr]


def form_about(rows: Sequence[About], *, blind: bool = False) -> None:
    """The records that the form edits or decides on; rows that others may add to them
    as a queryset, which is read when it is checked. Of a second, blind entry is told
    who changed the first and when, but no value."""
    if (sending := current.get()) is not None:
        sending.about, sending.blind = rows, blind


def form_claim(at: dt.datetime) -> Sending | None:
    """Inside a writing, first of all: take the form's key, or refuse. The same form
    sent at the same moment waits here until the other is written or refused."""
    sending = current.get()
    if sending is None or sending.key is None or sending.claimed is not None:
        return None
    if sending.first is not None:
        sending.told_sent = True
        raise Refused([SENT_BEFORE.format(at=sending.first.sent_at)])
    try:
        sending.claimed = SentForm.objects.create(
            key=sending.key,
            user=sending.user,
            sent_at=at,
            path=sending.path,
            content=sending.content,
        )
    except IntegrityError as error:
        sending.told_sent = True
        raise Refused([SENT_AT_ONCE]) from error
    return sending


def form_written(sending: Sending | None, entry: HistoryEntry) -> None:
    """Inside a writing, last of all: the form's key points to the entry it made."""
    if sending is not None and sending.claimed is not None:
        sending.claimed.entry = entry
        sending.claimed.save(update_fields=["entry"])
    if (now := current.get()) is not None and now.shown is not None:
        now.shown = entry.sequence


class Changed(Refused):
    """The record is not what the form's page showed."""


def changed_check() -> None:
    """Inside a writing, once the end of the chain is held: refuse when the records the
    form is about changed after its page was read."""
    if problems := changed_meanwhile():
        raise Changed(problems)


def changed_meanwhile() -> list[str]:
    """Who changed the records that the form is about, when, and from what to what."""
    sending = current.get()
    if sending is None or sending.shown is None:
        return []
    problems = []
    rows: list[models.Model] = []
    for one in sending.about:
        rows += one.all() if isinstance(one, models.QuerySet) else [one]
    for row, told in changes_since(rows, sending.shown):
        problems.append(CHANGED.format(row=row))
        problems += [
            CHANGE.format(
                at=one.at,
                who=one.actor_name,
                what=one.action_words,
                changes="" if sending.blind else "; ".join(one.changes),
            ).strip()
            for one in told
        ]
        sending.told_changes_to = max(sending.told_changes_to, told[-1].entry)
    return problems
