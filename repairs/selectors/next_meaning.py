"""As what a record is signed next: where the form that signs it starts."""

from __future__ import annotations

from collections.abc import Sequence

from repairs.models import Meaning, Substantiation
from repairs.selectors.signatures import Subject
from repairs.selectors.substantiations import folder_meaning_next


def meaning_next(subject: Subject, meanings: Sequence[Meaning]) -> Meaning | None:
    """The first that nobody has signed; of a folder the one its page asks for.

    A rejection is never proposed; None where nothing is left to sign. One query.
    """
    if isinstance(subject, Substantiation):
        return folder_meaning_next(subject)
    signed = set(subject.approvals.values_list("meaning", flat=True))
    left = (one for one in meanings if one not in signed)
    return next((one for one in left if one != Meaning.REJECTED), None)
