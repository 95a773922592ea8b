"""Occurrence reports: is it reportable, what was sent, and what followed.

The question is opened for each regime that applies, with its clock, and answered for
each. What was sent stays as it was sent, and more comes as a supplement. A report is
never held back because data are incomplete.
"""

from __future__ import annotations

import datetime as dt
from collections.abc import Sequence
from dataclasses import dataclass

from django.core.exceptions import ValidationError

from fleet.models import Operator, Person, Policy, User
from fleet.services.aircraft import stream_of
from fleet.services.history import Writing
from repairs.models import Event, Finding, OccurrenceReport
from repairs.selectors.report_rules import (
    Subject,
    asked_by,
    day_begins,
    regimes_on,
    regimes_recorded,
    seen_on,
)
from repairs.selectors.report_triggers import triggers

STEPS: dict[str, tuple[tuple[str, ...], str]] = {
    "decide": (("to_assess", "not_reportable", "reportable"), "decided on"),
    "send": (("reportable",), "sent"),
    "supplement": (("sent",), "supplemented"),
    "close": (("sent",), "closed"),
}
"""Each step: the states it starts from, and its word."""

OUT_OF_TURN = "This report is {state}; it can be {word} only while it is {wanted}."
REASON_NEEDED = "Say why."
DETECTED_BEFORE = (
    "Detected {detected}, before {subject} was found on {day}; give the moment at "
    "which it was seen to be reportable."
)
AHEAD = (
    "{moment:%Y-%m-%d %H:%M} UTC lies ahead of now, {now:%Y-%m-%d %H:%M} UTC; give a "
    "time that is past."
)
SENT_BEFORE = "Sent before it was detected on {detected}."
REFERENCE_NEEDED = "Give the reference under which it was sent."
RECIPIENTS_NEEDED = "Say to whom it was sent: authority, design approval holder, owner."
CONTENT_NEEDED = "Keep the text as it was sent."
SUPPLEMENTS_OWN = "A supplement belongs to a first report; open that one."
UNKNOWN_REGIME = "No report clock of “{regime}” is recorded; choose among: {known}."
ASKED_ALREADY = "{subject} has this question already under {regime}."


@dataclass(frozen=True, slots=True)
class Reportability:
    """The answer to "is this reportable?", and why."""

    reportable: bool
    reason: str


@dataclass(frozen=True, slots=True)
class Sending:
    """What went out: when, under which reference, to whom, and the very text."""

    sent_at: dt.datetime
    reference: str
    recipients: str
    content: str


def questions_open_write(
    w: Writing,
    subject: Subject,
    *,
    regimes: Sequence[str] | None = None,
    detected_at: dt.datetime | None = None,
) -> list[OccurrenceReport]:
    """Inside a writing: the question for each regime that applies and has none yet."""
    operator = subject.aircraft.operator
    day = seen_on(subject)
    if regimes is None:
        regimes = regimes_on(subject.aircraft, day)
    asked = set(subject.reports.values_list("regime", flat=True))
    at = detected_at or day_begins(operator, day)
    return [
        w.create(_question(subject, operator, regime, at))
        for regime in regimes
        if regime not in asked
    ]


def finding_questions_write(w: Writing, finding: Finding) -> list[OccurrenceReport]:
    """Inside a writing: the questions, if anything on record asks them."""
    return questions_open_write(w, finding) if triggers(finding) else []


def report_open(
    *, subject: Subject, regime: str, actor: User | None, at: dt.datetime
) -> OccurrenceReport:
    """Ask the question though nothing on record asks it, or under a further regime."""
    known = regimes_recorded(subject.aircraft.operator)
    if regime not in (*known, *regimes_on(subject.aircraft, seen_on(subject))):
        text = UNKNOWN_REGIME.format(regime=regime, known=", ".join(known))
        raise ValidationError({"regime": text})
    with _writing(subject, "report_open", actor, at) as w:
        made = questions_open_write(w, subject, regimes=(regime,))
        if not made:
            text = ASKED_ALREADY.format(subject=subject, regime=regime)
            raise ValidationError({"regime": text})
    return made[0]


def report_decide(
    *,
    report: OccurrenceReport,
    answer: Reportability,
    decided_by: Person | None,
    actor: User | None,
    at: dt.datetime,
    detected_at: dt.datetime | None = None,
) -> OccurrenceReport:
    """Reportable or not, with the reason; the clock runs from the moment given."""
    with _writing(subject_of(report), "report_decide", actor, at, answer.reason) as w:
        row = _locked(w, report, "decide")
        report_decide_write(
            w, row, answer, decided_by=decided_by, detected_at=detected_at
        )
    return row


def report_decide_write(
    w: Writing,
    row: OccurrenceReport,
    answer: Reportability,
    *,
    decided_by: Person | None,
    detected_at: dt.datetime | None = None,
    field: str = "reason",
) -> None:
    """Inside a writing: the answer, and its clock anew if the moment was given."""
    if not answer.reason.strip():
        raise ValidationError({field: REASON_NEEDED})
    columns: dict[str, object] = {
        "state": "reportable" if answer.reportable else "not_reportable",
        "reason": answer.reason.strip(),
        "decided_by_id": decided_by.pk if decided_by else None,
    }
    if detected_at is not None:
        columns |= _clock(w, row, detected_at)
    w.change(row, **columns)


def finding_decide_write(
    w: Writing, finding: Finding, answer: Reportability, *, decided_by: Person | None
) -> None:
    """Inside a writing: one answer to every question of the finding still undecided."""
    questions_open_write(w, finding)
    rows = OccurrenceReport.objects.select_for_update(of=("self",))
    for row in rows.filter(finding=finding, state="to_assess"):
        report_decide_write(
            w, row, answer, decided_by=decided_by, field="report_reason"
        )


def report_send(
    *,
    report: OccurrenceReport,
    sending: Sending,
    actor: User | None,
    at: dt.datetime,
) -> OccurrenceReport:
    """What was sent, kept as it was sent; missing data hold nothing back."""
    with _writing(subject_of(report), "report_send", actor, at) as w:
        return report_send_write(w, report, sending)


def report_send_write(
    w: Writing, report: OccurrenceReport, sending: Sending
) -> OccurrenceReport:
    """Inside a writing: the text as it went out, and when."""
    _complete(report, sending, w.at)
    row = _locked(w, report, "send")
    w.change(row, state="sent", **_sent(sending))
    return row


def report_supplement(
    *,
    report: OccurrenceReport,
    sending: Sending,
    actor: User | None,
    at: dt.datetime,
    answers: Policy | None = None,
    decided_by: Person | None = None,
) -> OccurrenceReport:
    """More on a report that was sent: a row of its own that names the first.

    `answers` is the follow-up clock it meets, if it meets one.
    """
    _complete(report, sending, at)
    with _writing(subject_of(report), "report_supplement", actor, at) as w:
        first = _locked(w, report, "supplement")
        if first.supplements_id is not None:
            raise ValidationError(SUPPLEMENTS_OWN)
        number = first.supplemented.count() + 2
        return w.create(
            OccurrenceReport(
                operator=first.operator,
                finding=first.finding,
                event=first.event,
                regime=first.regime,
                rule=answers.source if answers else first.rule,
                policy=answers,
                decided_by=decided_by,
                state="sent",
                detected_at=first.detected_at,
                supplements=first,
                number=number,
                **_sent(sending),
            )
        )


def report_close(
    *, report: OccurrenceReport, reason: str, actor: User | None, at: dt.datetime
) -> OccurrenceReport:
    """The organisation is done with it; the reason says what came of it."""
    if not reason.strip():
        raise ValidationError({"reason": REASON_NEEDED})
    with _writing(subject_of(report), "report_close", actor, at, reason) as w:
        return report_close_write(w, report)


def report_close_write(w: Writing, report: OccurrenceReport) -> OccurrenceReport:
    """Inside a writing: closed; its reason is the writing's."""
    row = _locked(w, report, "close")
    if row.supplements_id is not None:
        raise ValidationError(SUPPLEMENTS_OWN)
    w.change(row, state="closed")
    return row


def subject_of(report: OccurrenceReport) -> Subject:
    subject = report.finding or report.event
    assert subject is not None  # a constraint of the table
    return subject


def _question(
    subject: Subject, operator: Operator, regime: str, at: dt.datetime
) -> OccurrenceReport:
    asked = asked_by(operator, regime, at)
    return OccurrenceReport(
        operator=operator,
        finding=subject if isinstance(subject, Finding) else None,
        event=subject if isinstance(subject, Event) else None,
        regime=regime,
        rule=asked.rule,
        policy=asked.policy,
        state="to_assess",
        detected_at=at,
        due_at=asked.due_at,
    )


def _clock(
    w: Writing, row: OccurrenceReport, detected_at: dt.datetime
) -> dict[str, object]:
    """The clock from the moment given: not before the find, not ahead of now."""
    subject = subject_of(row)
    begins = day_begins(row.operator, seen_on(subject))
    if detected_at < begins:
        text = DETECTED_BEFORE.format(
            detected=f"{detected_at:%Y-%m-%d %H:%M} UTC",
            subject=subject,
            day=seen_on(subject),
        )
        raise ValidationError({"detected_on": text})
    if detected_at > w.at:
        text = AHEAD.format(moment=detected_at.astimezone(dt.UTC), now=w.at)
        raise ValidationError({"detected_on": text})
    asked = asked_by(row.operator, row.regime, detected_at)
    return {
        "detected_at": detected_at,
        "due_at": asked.due_at,
        "rule": asked.rule,
        "policy_id": asked.policy.pk if asked.policy else None,
    }


def _complete(report: OccurrenceReport, sending: Sending, at: dt.datetime) -> None:
    wrong: dict[str, str] = {}
    if not sending.reference.strip():
        wrong["reference"] = REFERENCE_NEEDED
    if not sending.recipients.strip():
        wrong["recipients"] = RECIPIENTS_NEEDED
    if not sending.content.strip():
        wrong["content"] = CONTENT_NEEDED
    if sending.sent_at > at:
        wrong["sent_on"] = AHEAD.format(moment=sending.sent_at, now=at)
    if sending.sent_at < report.detected_at:
        detected = f"{report.detected_at:%Y-%m-%d %H:%M} UTC"
        wrong["sent_on"] = SENT_BEFORE.format(detected=detected)
    if wrong:
        raise ValidationError(wrong)


def _sent(sending: Sending) -> dict[str, object]:
    return {
        "sent_at": sending.sent_at,
        "sent_reference": sending.reference.strip(),
        "recipients": sending.recipients.strip(),
        "content": sending.content,
    }


def _locked(w: Writing, report: OccurrenceReport, step: str) -> OccurrenceReport:
    """The row held, if the step may start from its state."""
    rows = OccurrenceReport.objects.select_related(
        "operator", "finding__aircraft", "event__aircraft"
    )
    row = rows.select_for_update(of=("self",)).get(pk=report.pk)
    since, word = STEPS[step]
    if row.state not in since:
        text = OUT_OF_TURN.format(
            state=row.get_state_display(),
            word=word,
            wanted=" or ".join(state.replace("_", " ") for state in since),
        )
        raise ValidationError(text)
    return row


def _writing(
    subject: Subject, action: str, actor: User | None, at: dt.datetime, reason: str = ""
) -> Writing:
    return Writing(
        actor=actor,
        action=action,
        at=at,
        operator=subject.aircraft.operator,
        stream=stream_of(subject.aircraft),
        reason=reason.strip(),
    )
